"""With the include roots a room really has, a header of a higher room is not found.
Usage: wrong_include.py COMPILER TOP (reads the roots from src/CMakeLists.txt)"""
import pathlib
import re
import subprocess
import sys

compiler, top = sys.argv[1], pathlib.Path(sys.argv[2])
order = ["quantity", "document", "constants", "models", "balance", "answer", "readings", "render"]
lists = (top / "src/CMakeLists.txt").read_text()
sees = {m[1]: (m[2] or "").split() for m in
        re.finditer(r"capsigh_room\((\w+)\s+SOURCES[^)]*?(?:SEES ([\w ]+))?\s*(?:LIBRARIES[^)]*|USES[^)]*)?\)",
                    lists)}


def roots(room):
    found = [room]
    for lower in sees.get(room, []):
        found += [r for r in roots(lower) if r not in found]
    return found


def compiles(room, included):
    header = sorted((top / "include" / included).rglob("*.hpp"))[0].relative_to(top / "include" / included)
    program = f'#include "{header}"\nint main() {{}}\n'
    flags = [f"-I{top}/include/{r}" for r in roots(room)]
    return subprocess.run([compiler, "-std=c++20", "-fsyntax-only", "-x", "c++", *flags, "-"],
                          input=program.encode(), capture_output=True).returncode == 0


bad = []
for i, room in enumerate(order):
    if not compiles(room, room):
        bad.append(f"{room} does not find its own headers")
    bad += [f"{room} may include {higher}" for higher in order[i + 1:] if compiles(room, higher)]
print("\n".join(bad) or "no room finds a higher one's headers")
sys.exit(1 if bad else 0)
