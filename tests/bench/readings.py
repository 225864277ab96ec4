"""What a pass over readings costs, as ratios measured in one run. Usage: readings.py BUILD [ROWS] [REPEATS]

Builds capsigh_readings_bench and compares, on the same file:
  full       the pass as the command makes it, one thread and two
  constants  the same binary and pass with kernel, verdict and probability replaced by constants
             (statistics run in both)
  awk        mawk with a simplified formula: content and a comparison with limits, no doubt, no statistics
  numpy      the same formula with numpy's text reader and writer
The best of REPEATS counts: on a shared machine the shortest time is the least disturbed one."""
import pathlib
import random
import subprocess
import sys
import tempfile
import time

build = pathlib.Path(sys.argv[1])
rows = int(float(sys.argv[2])) if len(sys.argv) > 2 else 1_000_000
repeats = int(sys.argv[3]) if len(sys.argv) > 3 else 5

AWK = r"""BEGIN { FS = OFS = "," }
NR == 1 { print $0, "content", "verdict"; next }
{ t = $2 + 273.15; p = $3 + 0.972
  k = exp(-58.0931 + 90.5069 * 100 / t + 22.2940 * log(t / 100))
  v = k * p / 1.01325 * 22.263
  printf "%s,%.4f,%s\n", $0, v, (v >= 3.55 && v <= 3.85) ? "inside" : "outside" }"""

NUMPY = r"""
import sys
import numpy as np
id_, t, p, valve = np.loadtxt(sys.argv[1], delimiter=",", skiprows=1, unpack=True)
k = np.exp(-58.0931 + 90.5069 * 100 / (t + 273.15) + 22.2940 * np.log((t + 273.15) / 100))
v = k * (p + 0.972) / 1.01325 * 22.263
np.savetxt("/dev/null", np.column_stack((id_, t, p, valve, v, (v >= 3.55) & (v <= 3.85))), delimiter=",",
           fmt=("%d", "%.2f", "%.3f", "%d", "%.4f", "%d"))
"""


def seconds(command):
    start = time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
    return time.perf_counter() - start


def bench(source, what, threads):
    out = subprocess.run([bench_binary, source, what, str(threads)], check=True, capture_output=True, text=True)
    _, _, wall, cpu = out.stdout.split()
    return float(wall), float(cpu)


subprocess.run(["cmake", "--build", build, "--target", "capsigh_readings_bench"], check=True,
               stdout=subprocess.DEVNULL)
bench_binary = str(build / "tests/capsigh_readings_bench")
with tempfile.TemporaryDirectory() as scratch:
    source = f"{scratch}/readings.csv"
    made = random.Random(1)
    with open(source, "w") as file:
        file.write("id,temperature [degC],pressure [bar gauge],valve\n")
        file.writelines(f"{i},{made.gauss(4, 0.3):.2f},{made.gauss(1.6, 0.04):.3f},{i % 4 + 1}\n"
                        for i in range(rows))
    best = {}
    for _ in range(repeats):
        for what, threads in (("full", 1), ("constants", 1), ("full", 2)):
            wall, cpu = bench(source, what, threads)
            for name, value in ((f"{what} {threads} wall", wall), (f"{what} {threads} cpu", cpu)):
                best[name] = min(value, best.get(name, value))
    for name, command in (("awk", ["mawk", AWK, source]), ("numpy", ["/usr/bin/python3", "-c", NUMPY, source])):
        best[name] = min(seconds(command) for _ in range(min(repeats, 2)))
    peak = subprocess.run(["/usr/bin/python3", "-c", "import resource, subprocess, sys\n"
                           "subprocess.run(sys.argv[1:], check=True, stdout=subprocess.DEVNULL)\n"
                           "print(resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss // 1024)",
                           bench_binary, source, "full", "2"], check=True, capture_output=True, text=True)
for name, value in best.items():
    print(f"{name:20} {value:8.3f} s {value / rows * 1e9:8.0f} ns a row")
print(f"full/constants, one thread, processor time  {best['full 1 cpu'] / best['constants 1 cpu']:.2f}")
print(f"full/constants, one thread, wall            {best['full 1 wall'] / best['constants 1 wall']:.2f}")
print(f"one thread/two threads, wall                {best['full 1 wall'] / best['full 2 wall']:.2f}")
print(f"awk/full, wall                              {best['awk'] / best['full 1 wall']:.1f}")
print(f"numpy/full, wall                            {best['numpy'] / best['full 1 wall']:.1f}")
print(f"peak memory at {rows} rows, two threads      {peak.stdout.strip()} MB")
