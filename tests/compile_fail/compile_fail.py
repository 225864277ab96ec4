"""CASE 0 of a file compiles, every other CASE does not. Usage: compile_fail.py COMPILER FILE TOP"""
import pathlib
import re
import subprocess
import sys

compiler, source, top = sys.argv[1], sys.argv[2], pathlib.Path(sys.argv[3])
includes = [f"-I{d}" for d in sorted((top / "include").iterdir())]


def compiles(case):
    return subprocess.run([compiler, "-std=c++20", "-fsyntax-only", f"-DCASE={case}", *includes, source],
                          capture_output=True).returncode == 0


cases = [int(n) for n in re.findall(r"CASE == (\d+)", pathlib.Path(source).read_text())]
bad = [] if compiles(0) else ["CASE 0 does not compile"]
bad += [f"CASE {n} compiles" for n in cases if compiles(n)]
print("\n".join(bad) or f"{len(cases)} wrong uses refused")
sys.exit(1 if bad or not cases else 0)
