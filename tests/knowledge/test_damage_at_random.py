"""Random single damages to every shipped file: never a traceback, and the first problem stands where the damage is."""

import random
import re
from collections.abc import Callable
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.answers import read_case
from advisor.documents import Node, Problems, read_document
from advisor.knowledge import Knowledge, examine
from tests.knowledge.damage import SHIPPED, copied, listing

SEED, IN_EACH_FILE, LEAST_SHARE = 2_024, 5, 0.9
FILES = sorted(path.relative_to(SHIPPED).as_posix() for path in SHIPPED.rglob("*.yaml"))
DEMONSTRATION = SHIPPED.parent / "scenarios" / "rolling_bearing" / "hot_wet_roller_table.yaml"

Damaged = tuple[list[str], int]


def delete(lines: list[str], at: int, _: random.Random) -> Damaged:
    return lines[:at] + lines[at + 1 :], at


def double(lines: list[str], at: int, _: random.Random) -> Damaged:
    return [*lines[: at + 1], *lines[at:]], at


def misspell(lines: list[str], at: int, chance: random.Random) -> Damaged:
    """Exchange two letters of the key of the next line that begins with one."""
    for place in (*range(at, len(lines)), *range(at)):
        if found := re.match(r"(?P<before>[ -]*\{?)(?P<key>[a-z_]{4,})(?P<after>:.*)", lines[place]):
            key = found["key"]
            cut = chance.randrange(len(key) - 1)
            wrong = key[:cut] + key[cut + 1] + key[cut] + key[cut + 2 :]
            wrong = wrong if wrong != key else key + "x"
            return [*lines[:place], found["before"] + wrong + found["after"], *lines[place + 1 :]], place
    raise LookupError("no line to damage")


def indent(lines: list[str], at: int, chance: random.Random) -> Damaged:
    line = lines[at]
    moved = line[2:] if line.startswith("  ") and chance.random() < 0.5 else "  " + line
    return [*lines[:at], moved, *lines[at + 1 :]], at


def retype(lines: list[str], at: int, chance: random.Random) -> Damaged:
    """Make a list or a mapping of the value of the next line that begins with a plain one."""
    for place in (*range(at, len(lines)), *range(at)):
        if found := re.match(
            r"(?P<before>[ -]*\{?[a-z_]+: )(?P<value>[A-Za-z0-9_.]+)(?P<after>[,}].*|)$", lines[place]
        ):
            other = f"[{found['value']}]" if chance.random() < 0.5 else f"{{a: {found['value']}}}"
            return [*lines[:place], found["before"] + other + found["after"], *lines[place + 1 :]], place
    raise LookupError("no line to damage")


KINDS: tuple[Callable[[list[str], int, random.Random], Damaged], ...] = (delete, double, misspell, indent, retype)


def damages(file: str) -> list[tuple[str, str, int]]:
    """What was done, the damaged text, and the line of the damage, counted from one."""
    chance = random.Random(f"{SEED} {file}")  # noqa: S311 - damages are drawn again the same, nothing is kept secret
    lines = (SHIPPED / file).read_text(encoding="utf-8").splitlines()
    telling = [place for place, line in enumerate(lines) if line.strip() and not line.lstrip().startswith("#")]
    found = []
    for kind in KINDS * (IN_EACH_FILE // len(KINDS)):
        damaged, at = kind(lines, chance.choice(telling), chance)
        found.append((f"{kind.__name__} line {at + 1}", "\n".join(damaged) + "\n", at + 1))
    return found


@pytest.fixture
def _unchanged_files_are_parsed_once(monkeypatch: pytest.MonkeyPatch) -> None:
    known: dict[tuple[Path, bytes], Node] = {}

    def read(path: Path, problems: Problems) -> Node | None:
        content = (path, path.read_bytes() if path.is_file() else b"")
        if content in known:
            return known[content]
        before = len(problems)
        tree = read_document(path, problems)
        if tree is not None and len(problems) == before:
            known[content] = tree
        return tree

    monkeypatch.setattr("advisor.knowledge.reading.read_document", read)


@pytest.mark.usefixtures("_unchanged_files_are_parsed_once")
def test_random_damage(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    told = near = on = 0
    far = []
    for file in FILES:
        whole = (folder / file).read_text(encoding="utf-8")
        for what, text, line in damages(file):
            (folder / file).write_text(text, encoding="utf-8")
            problems = Problems()
            knowledge = examine(folder, "rolling_bearing", None, problems)
            if knowledge is not None:
                assert_harmless(knowledge, f"{file}: {what}")
                continue
            first = next(iter(problems))
            told += 1
            away = abs(first.line - line) if first.file == str(folder / file) else 999
            on += away == 0
            near += away <= 1
            if away > 1:
                far.append(f"{file}: {what}\n    {first}\n    ({len(problems)} problems)")
            assert len(problems) <= 30, f"{file}: {what}: a flood\n{listing(list(problems))}"
        (folder / file).write_text(whole, encoding="utf-8")
    report = f"{told} told, {near / told:.1%} within a line of the damage, {on / told:.1%} on it\n" + "\n".join(far)
    assert near / told >= LEAST_SHARE, report


def assert_harmless(knowledge: Knowledge, what: str) -> None:
    """What the loader took makes a whole advice, or tells that a saved case now needs another answer."""
    problems = Problems()
    saved = read_case(DEMONSTRATION, knowledge, problems)
    if saved is None:
        assert problems, what
        return
    Advisor(knowledge).advise(saved.case)
