"""Golden outputs. Usage: golden.py bad|scenarios CAPSIGH TOP [--update]

bad:        tests/recipes/bad/NAME.toml against NAME.expected (exit status, then standard error)
scenarios:  scenarios/*.toml against tests/recipes/golden/NAME.txt and NAME.json; those with a
            [card] against NAME.card.txt and NAME.card.csv too
The digest of the constants changes with every table and is masked."""
import difflib
import pathlib
import re
import subprocess
import sys

what, capsigh, top = sys.argv[1], sys.argv[2], pathlib.Path(sys.argv[3])
update = "--update" in sys.argv
failures = 0
seen = 0


def masked(text):
    text = re.sub(r"(constants +sha1:)[0-9a-f]{40}", r"\1...", text)
    return re.sub(r'("constants_digest": "sha1:)[0-9a-f]{40}', r"\1...", text)


def compare(path, text):
    global failures, seen
    seen += 1
    if update:
        path.write_text(text)
        return
    expected = path.read_text() if path.exists() else ""
    if expected != text:
        failures += 1
        sys.stdout.writelines(difflib.unified_diff(
            expected.splitlines(True), text.splitlines(True), str(path), "now"))


def run(*arguments):
    return subprocess.run([capsigh, *arguments], cwd=top, capture_output=True, text=True, errors="replace",
                          timeout=60)


if what == "bad":
    for recipe in sorted((top / "tests/recipes/bad").glob("*.toml")):
        done = run("report", str(recipe.relative_to(top)))
        if done.stdout:
            print(recipe, "printed an answer")
            failures += 1
        compare(recipe.with_suffix(".expected"), f"exit {done.returncode}\n{done.stderr}")
else:
    for recipe in sorted((top / "scenarios").glob("*.toml")):
        for form in ("text", "json"):
            done = run("report", str(recipe.relative_to(top)), "--as", form)
            if done.returncode not in (0, 1):
                print(done.stderr)
                failures += 1
            ending = ".txt" if form == "text" else ".json"
            compare(top / "tests/recipes/golden" / (recipe.stem + ending), masked(done.stdout))
            wide = [line for line in done.stdout.splitlines() if form == "text" and len(line) > 80]
            for line in wide:
                print("wider than 80 columns:", line)
                failures += 1
        if "[card]" in recipe.read_text():
            for form in ("text", "csv"):
                done = run("card", str(recipe.relative_to(top)), "--as", form)
                if done.returncode not in (0, 1):
                    print(done.stderr)
                    failures += 1
                ending = ".card.txt" if form == "text" else ".card.csv"
                compare(top / "tests/recipes/golden" / (recipe.stem + ending), masked(done.stdout))
print(seen, "compared")
sys.exit(1 if failures or not seen else 0)
