"""The rooms: imports go downwards only, each heavy library has one user, and the command line starts light."""

import ast
import os
import subprocess
import sys
from pathlib import Path

import pytest

PACKAGE = Path(__file__).resolve().parent.parent / "advisor"

# From the bottom up; a room may import rooms of lower levels, and its own.
LEVELS = [
    {"documents", "quantities", "formulas", "conditions", "mishaps", "places"},
    {"boxes", "case", "specification", "computing"},
    {"knowledge"},
    {"computations", "inference", "designations", "answers", "listing", "settings"},
    {"shelf"},
    {"advice"},
    {"explanation", "anomalies", "bending"},
    {"interview"},
    {"replay"},
    {"rule_sheet", "approval", "mutation"},
    {"comparison"},
    {"screens"},
    {"desk"},
    {"reviewing"},
    {"commands"},
    {"cli"},
    {"__main__"},
]
USERS = {
    "yaml": {"documents"},
    "pydantic": {"knowledge"},
    "pydantic_core": {"knowledge", "explanation"},  # shapes; writing JSON
    "durable_rules_engine": {"inference"},
    "durable": {"inference"},
    "jinja2": {"explanation"},
    "textual": {"screens"},
    "rich": {"screens"},
    "click": {"cli"},
}


def room_of(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imports_of(path: Path) -> set[str]:
    found: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            assert node.level == 0, f"{path}: relative imports hide the room"
            names = {f"advisor.{alias.name}" for alias in node.names} if node.module == "advisor" else {node.module}
            found |= names
    return found


FILES = sorted(PACKAGE.rglob("*.py"))


@pytest.mark.parametrize("path", FILES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_a_room_imports_only_lower_rooms(path: Path) -> None:
    room = room_of(path)
    if room == "__init__":
        return
    level = {name: place for place, names in enumerate(LEVELS) for name in names}
    assert room in level, f"{room} is a new room: give it a level and a sentence in DEVELOPERS.md"
    for name in imports_of(path):
        other = name.split(".")[1] if name.startswith("advisor.") else None
        if other in {None, room, "__version__"}:
            continue
        assert level[other] < level[room], f"{room} imports {other}, which is not below it"


@pytest.mark.parametrize("path", FILES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_each_library_has_its_users(path: Path) -> None:
    for name in imports_of(path):
        owners = USERS.get(name.split(".")[0])
        assert owners is None or room_of(path) in owners, f"{room_of(path)} uses {name}, which belongs to {owners}"


def loaded_by(statement: str) -> set[str]:
    code = f"import sys; {statement}; print('\\n'.join(sys.modules))"
    done = subprocess.run(
        [sys.executable, "-c", code],
        capture_output=True,
        text=True,
        check=True,
        env={**os.environ, "PYTHONPATH": str(PACKAGE.parent)},
    )
    return set(done.stdout.split())


def test_the_command_line_starts_light() -> None:
    assert not {"textual", "pydantic", "jinja2", "yaml", "durable_rules_engine"} & loaded_by("import advisor.cli")


def test_the_core_does_not_know_the_sheet() -> None:
    assert not {"textual", "click"} & loaded_by(
        "import advisor.advice, advisor.explanation, advisor.replay, advisor.interview"
    )
