"""The commands card and merge: exit statuses, files, messages. Usage: card_test.py CAPSIGH TOP"""
import pathlib
import subprocess
import sys
import tempfile

capsigh, top = sys.argv[1], pathlib.Path(sys.argv[2])
failures = []
RECIPE = "scenarios/lemon-soda-card.toml"


def run(*arguments, cwd=top):
    return subprocess.run([capsigh, *arguments], cwd=cwd, capture_output=True, text=True, timeout=60)


def check(what, holds, done):
    if not holds:
        failures.append(f"{what}: exit {done.returncode}\n{done.stdout}{done.stderr}")


done = run("card", RECIPE)
check("a card", done.returncode == 0 and "lowest" in done.stdout and not done.stderr, done)
check("80 columns", all(len(line) <= 80 for line in done.stdout.splitlines()), done)

# A mark of the card in another unit is still inside: the window in bar lies in the one in psi.
psi = [line.split(",") for line in run("card", RECIPE, "--as", "csv").stdout.splitlines()[1:]]
bar = run("card", RECIPE, "--as", "csv", "--units", "bar,degF")
rows = [line.split(",") for line in bar.stdout.splitlines()[1:]]
check("as many rows", len(rows) == len(psi) == 14, bar)
PSI = 0.0689475729  # bar (exact pound-force and inch)
for one, other in zip(psi, rows):
    # Rounded inward to 0.5 psi and to 0.01 bar from the same limits: apart by less than a mark.
    check("lower limits", -0.01 <= float(one[1]) * PSI - float(other[1]) < 0.5 * PSI, bar)
    check("upper limits", -0.01 <= float(other[3]) - float(one[3]) * PSI < 0.5 * PSI, bar)

done = run("card", RECIPE, "--set", "gauge.pressure=± 3 psi")
check("too coarse", done.returncode == 1 and "too coarse" in done.stdout and
      "good to" in done.stdout, done)
done = run("card", RECIPE, "--set", "gauge.graduation=5 psi")
check("between marks", done.returncode == 1 and "between two marks" in done.stdout, done)
done = run("card", "scenarios/lemon-soda-can.toml")
check("no card", done.returncode == 2 and "[card-missing]" in done.stderr and not done.stdout, done)
done = run("card", RECIPE, "--units", "psi,furlong")
check("a unit that is none", done.returncode == 2 and "unit-unknown" in done.stderr, done)
done = run("card")
check("no recipe", done.returncode == 2 and "no-recipe" in done.stderr, done)
done = run("card", "no-such-file.toml")
check("no file", done.returncode == 3, done)
done = run("card", RECIPE, "--set", "card.from=-30 degC", "--set", "card.to=-20 degC")
check("outside the laws", done.returncode == 2 and not done.stdout, done)
done = run("card", RECIPE, "--set", "card.from=-5 degC", "--set", "card.to=0 degC", "--strict")
check("strict", done.returncode == 2 and "out-of-range" in done.stderr, done)

with tempfile.TemporaryDirectory() as scratch:
    scratch = pathlib.Path(scratch)
    done = run("card", str(top / RECIPE), "--out", "card.txt", cwd=scratch)
    check("--out", done.returncode == 0 and not done.stdout and
          "lowest" in (scratch / "card.txt").read_text(), done)
    done = run("merge", str(top / RECIPE))
    check("not a summary", done.returncode == 2 and "not-a-summary" in done.stderr, done)
    done = run("merge", "no-such-file.json")
    check("no summary", done.returncode == 3, done)
    done = run("merge")
    check("nothing to merge", done.returncode == 2, done)

print("\n".join(failures) or "card and merge behave")
sys.exit(1 if failures else 0)
