"""Runs every command of the README's ```console blocks and compares what it prints.
A ```toml block whose first line is "# FILE.toml" is written as that file first. In an expected output
a line "..." stands for any lines. Usage: readme.py CAPSIGH TOP"""
import pathlib
import re
import subprocess
import sys
import tempfile

capsigh, top = pathlib.Path(sys.argv[1]).resolve(), pathlib.Path(sys.argv[2]).resolve()
text = (top / "README.md").read_text()
failures = []
commands = 0


def matches(expected, got):
    expected, got = expected.strip("\n").split("\n"), got.strip("\n").split("\n")
    pattern = "\n".join("(?:.*\n?)*?" if line == "..." else re.escape(line) for line in expected)
    pattern = pattern.replace("(?:.*\n?)*?\n", "(?:.*\n)*?")
    return re.fullmatch(pattern, "\n".join(got)) is not None


with tempfile.TemporaryDirectory() as scratch:
    scratch = pathlib.Path(scratch)
    (scratch / "scenarios").symlink_to(top / "scenarios")
    (scratch / "constants").symlink_to(top / "constants")
    (scratch / "bin").mkdir()
    (scratch / "bin/capsigh").symlink_to(capsigh)
    for kind, body in re.findall(r"```(\w+)\n(.*?)```", text, re.S):
        named = re.match(r"# (\S+\.toml)\n", body)
        if kind == "toml" and named:
            (scratch / named[1]).write_text(body)
        if kind != "console":
            continue
        for part in re.split(r"^\$ ", body, flags=re.M)[1:]:
            command, _, expected = part.partition("\n")
            done = subprocess.run(["sh", "-c", f"PATH={scratch}/bin:$PATH; {command}"], cwd=scratch, text=True,
                                  stdout=subprocess.PIPE, stderr=subprocess.STDOUT, timeout=60)
            commands += 1
            got = re.sub(r"sha1:[0-9a-f]{40}", "sha1:...", done.stdout)
            if expected.strip() and not matches(expected, got):
                failures.append(f"$ {command}\n--- README\n{expected}--- now\n{done.stdout}")
            if not expected.strip() and done.returncode not in (0, 1):
                failures.append(f"$ {command}\nexit {done.returncode}\n{done.stdout}")
print("\n".join(failures) or f"{commands} commands")
sys.exit(1 if failures or not commands else 0)
