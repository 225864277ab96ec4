"""capsigh constants, and --constants DIR. Usage: constants_test.py CAPSIGH TOP"""
import json
import pathlib
import shutil
import subprocess
import sys
import tempfile

capsigh, top = sys.argv[1], pathlib.Path(sys.argv[2])
recipe = str(top / "scenarios/sparkling-water-can.toml")
failures = []


def run(*arguments):
    return subprocess.run([capsigh, *arguments], capture_output=True, text=True, timeout=60)


def check(name, condition):
    if not condition:
        failures.append(name)


every = json.loads(run("constants", "--as", "json").stdout)["records"]
check("all records are listed", len(every) > 30)
check("a gas selects its records", {r["key"] for r in json.loads(run("constants", "O2", "--as", "json").stdout)["records"]}
      == {r["key"] for r in every if "O2" in r["key"].split(".")})
text = run("constants", "henry.CO2.weiss1974").stdout
check("the text keeps the printed digits", "-60.2409" in text and "Mar. Chem. 2 (1974)" in text and "0.7 %" in text)
check("an unknown record exits 2", run("constants", "nothing").returncode == 2)

built_in = json.loads(run("report", recipe, "--as", "json").stdout)
same = json.loads(run("--constants", str(top / "constants"), "report", recipe, "--as", "json").stdout)
check("the shipped directory gives the built-in answer", same == built_in)
with tempfile.TemporaryDirectory() as scratch:
    copy = pathlib.Path(scratch) / "constants"
    shutil.copytree(top / "constants", copy)
    gases = copy / "gases.toml"
    gases.write_text(gases.read_text().replace('"-60.2409"', '"-60.2509"'))
    changed = json.loads(run("--constants", str(copy), "report", recipe, "--as", "json").stdout)
    ratio = changed["dissolved"]["CO2"]["volumes"]["value"] / built_in["dissolved"]["CO2"]["volumes"]["value"]
    check("a changed coefficient changes the answer by exp(-0.01)", abs(ratio - 0.99005) < 1e-5)
    check("and the digest", changed["audit"]["constants_digest"] != built_in["audit"]["constants_digest"])
    gases.write_text(gases.read_text().replace('source = "weiss1974"', 'sauce = "weiss1974"'))
    broken = run("--constants", str(copy), "report", recipe)
    check("a record without source is refused with its place", broken.returncode == 2 and
          "gases.toml:" in broken.stderr and "did you mean 'source'" in broken.stderr)
    (copy / "gases.toml").unlink()
    check("an incomplete set is refused", run("--constants", str(copy), "report", recipe).returncode == 2)
    check("no directory exits 3", run("--constants", scratch + "/none", "report", recipe).returncode == 3)
print("\n".join(failures) or "ok")
sys.exit(1 if failures else 0)
