"""Every source is formatted by .clang-format. Usage: format.py CLANG-FORMAT TOP"""
import pathlib
import subprocess
import sys

tool, top = sys.argv[1], pathlib.Path(sys.argv[2])
files = [str(p) for d in ("src", "include", "tests") for p in sorted((top / d).rglob("*.?pp"))]
run = subprocess.run([tool, "--dry-run", "--Werror", *files])
print(len(files), "files")
sys.exit(run.returncode)
