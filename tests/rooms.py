"""No room includes a higher one; only document/ knows the TOML library. Usage: rooms.py TOP"""
import pathlib
import re
import sys

SEES = {
    "quantity": set(),
    "document": {"quantity"},
    "constants": {"quantity", "document"},
    "models": {"quantity", "constants"},
    "balance": {"quantity", "constants", "models"},
    "recipe": {"quantity", "document"},
    "quality": {"quantity"},
    "answer": {"quantity", "document", "constants", "models", "balance", "recipe", "quality"},
    "readings": {"quantity", "document", "constants", "models", "balance", "recipe", "quality", "answer"},
    "render": {"quantity", "document", "constants", "models", "balance", "recipe", "quality", "answer"},
    "cli": {"quantity", "document", "constants", "models", "balance", "recipe", "quality", "answer", "readings",
            "render"},
}
# Headers are stricter: constants reads documents, but none of its headers may.
HEADER_FORBIDS = {"constants": {"document"}, "models": {"document"}, "balance": {"document"}}

top = pathlib.Path(sys.argv[1])
problems = []
checked = 0
for room, sees in SEES.items():
    files = list((top / "src" / room).rglob("*.?pp")) + list((top / "include" / room).rglob("*.hpp"))
    if not files:
        problems.append(f"room {room} has no files")
    for path in files:
        text = path.read_text()
        checked += 1
        for other in re.findall(r'#include "capsigh/(\w+)/', text):
            header = "include" in path.relative_to(top).parts[0]
            if other != room and (other not in sees or
                                  (header and other in HEADER_FORBIDS.get(room, ()))):
                problems.append(f"{path}: {room} includes {other}")
        if re.search(r"#include <toml", text) and room != "document":
            problems.append(f"{path}: only document knows the TOML library")
rooms = {p.name for p in (top / "src").iterdir() if p.is_dir()} - {"cmake"}
for extra in sorted(rooms - set(SEES)):
    problems.append(f"room {extra} is not listed in {__file__}")
print("\n".join(problems) or f"{checked} files keep the order of the house")
sys.exit(1 if problems or checked < 20 else 0)
