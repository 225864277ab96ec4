"""The readings scenario against its golden rows and summary, and what the summary must show: the drift is
signalled before a can breaks a limit, and one valve stands out. Usage: golden.py CAPSIGH TOP [--update]"""
import csv
import difflib
import json
import pathlib
import re
import subprocess
import sys
import tempfile

capsigh, top = sys.argv[1], pathlib.Path(sys.argv[2])
update = "--update" in sys.argv
failures = []


def compare(name, text):
    path = top / "tests/recipes/golden" / name
    if update:
        path.write_text(text)
    expected = path.read_text() if path.exists() else ""
    if expected != text:
        failures.extend(difflib.unified_diff(expected.splitlines(), text.splitlines(), name, "now", lineterm=""))


def run(*arguments):
    return subprocess.run([capsigh, "readings", "scenarios/readings/shift.csv", "--for", "scenarios/readings/shift.toml",
                           *arguments], cwd=top, capture_output=True, text=True, timeout=120)


with tempfile.TemporaryDirectory() as scratch:
    done = run("--out", f"{scratch}/judged.csv", "--summary", f"{scratch}/summary.txt")
    if done.returncode not in (0, 1):
        sys.exit(done.stderr)
    judged = pathlib.Path(scratch, "judged.csv").read_text()
    compare("shift.judged.csv", judged)
    summary = pathlib.Path(scratch, "summary.txt").read_text()
    compare("shift.summary.txt", re.sub(r"sha1:[0-9a-f]{40}", "sha1:...", summary))
    failures += [f"wider than 80 columns: {line}" for line in summary.splitlines() if len(line) > 80]
    run("--out", "/dev/null", "--summary", f"{scratch}/summary.json")
    json.loads(pathlib.Path(scratch, "summary.json").read_text())

rows = list(csv.DictReader(judged.splitlines()))
if len(rows) != 80:
    failures.append(f"{len(rows)} rows")
by_valve = {}
for row in rows:
    by_valve.setdefault(row["valve"], []).append(float(row["content [vol]"]))
mean = {valve: sum(all_) / len(all_) for valve, all_ in by_valve.items()}
spread = {v: (sum((x - mean[v]) ** 2 for x in all_) / (len(all_) - 1)) ** 0.5 for v, all_ in by_valve.items()}
if min(mean, key=mean.get) != "3":
    failures.append(f"valve 3 is the bad one: {mean} {spread}")
print("\n".join(failures) or f"{len(rows)} rows")
sys.exit(1 if failures else 0)
