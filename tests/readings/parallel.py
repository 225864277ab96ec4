"""Many processes: chunks of a file by GNU parallel, their summaries merged, against one run over the whole;
and the command as a plain filter. Usage: parallel.py CAPSIGH TOP"""
import json
import pathlib
import random
import shutil
import subprocess
import sys
import tempfile

capsigh, top = str(pathlib.Path(sys.argv[1]).resolve()), pathlib.Path(sys.argv[2]).resolve()
recipe = top / "scenarios/readings/shift.toml"
failures = []


def check(what, holds, shown=""):
    if not holds:
        failures.append(f"{what}: {shown}")


def counts(node):
    """Whole numbers of a summary, with their paths: counts and rows of violations."""
    found = {}

    def walk(at, path):
        if isinstance(at, dict):
            for key, value in at.items():
                if key != "state":
                    walk(value, f"{path}.{key}")
        elif isinstance(at, list):
            for i, value in enumerate(at):
                walk(value, f"{path}[{i}]")
        else:
            found[path] = at
    walk(node, "")
    return found


if shutil.which("parallel") is None:
    sys.exit("GNU parallel is missing: sh tests/setup.sh test")
with tempfile.TemporaryDirectory() as scratch:
    scratch = pathlib.Path(scratch)
    made = random.Random(5)
    lines = [f"{i},{made.uniform(19.5, 21.5):.1f},{made.gauss(3.92, 0.03) + i * 1e-5:.2f},{i % 4 + 1}"
             for i in range(4000)]
    (scratch / "log.csv").write_text("id,Temp,P,valve\n" + "\n".join(lines) + "\n")

    def sh(command):
        return subprocess.run(["sh", "-c", command], cwd=scratch, capture_output=True, text=True, timeout=300)

    whole = sh(f"{capsigh} readings log.csv --for {recipe} --out whole.csv --summary whole.json")
    check("the whole", whole.returncode in (0, 1), whole.stderr)
    parts = sh(f"parallel --will-cite -j2 --pipepart -a log.csv --header : --block 20k "
               f"'{capsigh} readings - --for {recipe} --out part{{0#}}.csv --summary part{{0#}}.json || [ $? = 1 ]'")
    check("parallel", parts.returncode == 0, parts.stderr)
    chunks = sorted(scratch.glob("part*.csv"))
    check("several chunks", len(chunks) > 3, len(chunks))
    body = "".join(chunk.read_text().split("\n", 1)[1] for chunk in chunks)
    check("chunks one after the other are the whole", body == (scratch / "whole.csv").read_text().split("\n", 1)[1])
    merged = sh(f"{capsigh} merge part*.json --as json")
    check("merge", merged.returncode in (0, 1), merged.stderr)
    if merged.returncode in (0, 1):
        one, many = counts(json.loads((scratch / "whole.json").read_text())), counts(json.loads(merged.stdout))
        check("same figures", one.keys() == many.keys(), sorted(one.keys() ^ many.keys())[:5])
        for path in one.keys() & many.keys():
            a, b = one[path], many[path]
            # Counts, rows and words exactly; sums carry 106 bits, so that figures agree to rounding.
            same = abs(a - b) <= 1e-12 * abs(a) if isinstance(a, float) and isinstance(b, float) else a == b
            check(f"merged {path}", same, (a, b))

    # Any engine that pipes records through a command: rows in, rows out, nothing else on standard output.
    piped = sh(f"(head -1 log.csv; tail -5 log.csv) | {capsigh} readings - --for {recipe} 2>/dev/null | tail -5")
    check("a plain filter", piped.stdout == "".join(
        line + "\n" for line in (scratch / "whole.csv").read_text().splitlines()[-5:]), piped.stdout)
print("\n".join(failures) or f"{len(chunks)} chunks add up to the whole")
sys.exit(1 if failures else 0)
