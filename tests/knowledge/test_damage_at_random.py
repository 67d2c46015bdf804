"""Damage to single nodes of the shipped files, drawn at random: the error stands on the damaged line.

What the damaged line is for each kind of damage is settled in `node_damage`. A damaged file that still is valid
knowledge is no error: it is counted apart, makes a whole advice, and means something else than before; if it did not,
the damaged node would have been dropped silently. What cannot be told on its line: a condition that lost a part and its
example contradict each other, and either may be wrong; so may either of two spellings of a name that is used once.
"""

import dataclasses
import gc
import random
import re
from collections import Counter
from collections.abc import Iterator, Mapping
from functools import cache
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.answers import read_case
from advisor.documents import Mark, Node, Problem, Problems
from advisor.knowledge import Knowledge, examine
from advisor.knowledge.files import File
from advisor.knowledge.lost import Lost
from advisor.knowledge.reading import read_file
from tests.knowledge.damage import SHIPPED, copied, listing
from tests.knowledge.node_damage import KINDS, Damaged, draw, entries

SEED, DAMAGES, LEAST_SHARE, MOST_PROBLEMS = 2_026, 500, 0.99, 15
LEAST_OF_ALL = 0.97
"""The share of all problems; beside the first one of a file there may be consequences elsewhere."""
LONG = {"tables/boundary_dimensions.yaml": 60, "shelf/demo.yaml": 73}
"""The files of many like entries, which are cut to so many lines: the rest is of the same form."""
FILES = sorted(path.relative_to(SHIPPED).as_posix() for path in SHIPPED.rglob("*.yaml"))
DEMONSTRATION = SHIPPED.parent / "scenarios" / "rolling_bearing" / "hot_wet_roller_table.yaml"
REMARKS = {"note"}
"""Keys of which the value is for the specialist only; nothing that the program does comes of it."""


def damages(seed: int, number: int) -> Iterator[tuple[str, Damaged]]:
    """So many damaged files: each file in turn, each kind in turn, the node at random."""
    chance = random.Random(seed)  # noqa: S311 - drawn again the same, nothing is kept secret
    kinds = list(KINDS)
    known = {file: entries(sound(file)) for file in FILES}
    for place in range(number):
        file, kind = FILES[place % len(FILES)], kinds[place // len(FILES) % len(kinds)]
        yield file, draw(sound(file), known[file], kind, chance)


@cache
def sound(file: str) -> str:
    """What a file holds while it is not damaged."""
    text = (SHIPPED / file).read_text(encoding="utf-8")
    return "".join(text.splitlines(keepends=True)[: LONG.get(file)])


@pytest.fixture
def _sound_files_are_read_once(monkeypatch: pytest.MonkeyPatch) -> Iterator[None]:
    known: dict[tuple[Path, bytes], tuple[tuple[File, Node] | None, list[Node]]] = {}

    def read(
        path: Path, shape: type[File], problems: Problems, lost: Lost, trees: list[Node]
    ) -> tuple[File, Node] | None:
        content = (path, path.read_bytes() if path.is_file() else b"")
        if content not in known:
            before, own = len(problems), list[Node]()
            found = read_file(path, shape, problems, lost, own)
            if len(problems) > before:
                trees += own
                return found
            known[content] = found, own
        found, own = known[content]
        trees += own
        return found

    monkeypatch.setattr("advisor.knowledge.folder.read_file", read)
    yield
    gc.unfreeze()


def stands_right(problem: Problem, damaged: Damaged, file: Path) -> bool:
    """Whether a problem stands on the damaged line, or names a lost declaration on a line that uses it."""
    return (problem.file == str(file) and problem.line in damaged.lines) or _stands_at_use(problem, damaged, file)


def _stands_at_use(problem: Problem, damaged: Damaged, file: Path) -> bool:
    """What uses a step is a file of its name; there the problem stands in the first line."""
    path = Path(problem.file)
    if problem.message == "nothing reads this file":
        return path.stem in damaged.lost
    missed = [name for name in damaged.lost if _names(problem.message, name)]
    lines = (damaged.text if path == file else path.read_text(encoding="utf-8")).splitlines()
    return problem.line <= len(lines) and any(_names(lines[problem.line - 1], name) for name in missed)


def _names(text: str, name: str) -> bool:
    return re.search(rf"(?<!\w){re.escape(name)}(?!\w)", text) is not None


@dataclasses.dataclass
class Tally:
    """What was told of the damaged files."""

    told: Counter[str] = dataclasses.field(default_factory=Counter)
    missed: Counter[str] = dataclasses.field(default_factory=Counter)
    harmless: Counter[str] = dataclasses.field(default_factory=Counter)
    problems: int = 0
    right: int = 0
    at_use: int = 0
    astray: list[str] = dataclasses.field(default_factory=list)

    def add(self, file: Path, damaged: Damaged, problems: list[Problem]) -> None:
        """Count one damaged file."""
        if not problems:
            self.harmless[damaged.kind] += 1
            return
        right = [stands_right(problem, damaged, file) for problem in problems]
        self.told[damaged.kind] += 1
        self.problems, self.right = self.problems + len(right), self.right + sum(right)
        self.at_use += right[0] and (problems[0].file != str(file) or problems[0].line not in damaged.lines)
        if not right[0]:
            self.missed[damaged.kind] += 1
            self.astray.append(f"{file}: {damaged.what}, line {sorted(damaged.lines)}\n    {problems[0]}")

    @property
    def share(self) -> float:
        """In how many of the files the first problem stands on the damaged line."""
        return 1 - self.missed.total() / self.told.total()

    def __str__(self) -> str:
        return (
            f"{self.share:.1%} of {self.told.total()} first problems on the damaged line, {self.at_use} of them where "
            f"a lost name is used; {self.right / self.problems:.1%} of all {self.problems}; "
            f"missed {dict(self.missed)}; no error {dict(self.harmless)}\n" + "\n".join(self.astray)
        )


@pytest.mark.usefixtures("_sound_files_are_read_once")
def test_the_error_stands_on_the_damaged_line(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    for file in LONG:
        (folder / file).write_text(sound(file), encoding="utf-8")
    shipped, tally = meaning(examine(folder, "rolling_bearing", None, Problems())), Tally()
    gc.freeze()
    for file, damaged in damages(SEED, DAMAGES):
        problems = told_of(folder, file, damaged, shipped)
        tally.add(folder / file, damaged, problems)
        assert len(problems) <= MOST_PROBLEMS, f"{file}: {damaged.what}: a flood\n{listing(problems)}"
    assert set(tally.told) == set(KINDS)
    assert tally.told.total() >= 0.8 * DAMAGES, f"too many damages do no harm: {tally}"
    assert tally.share >= LEAST_SHARE, tally
    assert tally.right >= LEAST_OF_ALL * tally.problems, tally


def told_of(folder: Path, file: str, damaged: Damaged, shipped: object) -> list[Problem]:
    """What the loader says of the damaged file; where it says nothing, the damaged node means something else."""
    problems = Problems()
    (folder / file).write_text(damaged.text, encoding="utf-8")
    knowledge = examine(folder, "rolling_bearing", None, problems)
    (folder / file).write_text(sound(file), encoding="utf-8")
    assert (knowledge is None) == bool(len(problems)), f"{file}: {damaged.what}"
    if knowledge is not None:
        assert_advises(knowledge, f"{file}: {damaged.what}")
        nothing_left = damaged.kind == "deleted" or REMARKS & set(map(str, damaged.loc))
        assert nothing_left or meaning(knowledge) != shipped, f"{file}: {damaged.what}: dropped silently"
    return list(problems)


def assert_advises(knowledge: Knowledge, what: str) -> None:
    """What the loader took makes a whole advice, or tells that a saved case now needs another answer."""
    problems = Problems()
    saved = read_case(DEMONSTRATION, knowledge, problems)
    if saved is None:
        assert problems, what
        return
    Advisor(knowledge).advise(saved.case)


def meaning(part: object) -> object:
    """A part of the knowledge without the places where it stands in files."""
    match part:
        case Mark():
            return None
        case Mapping():
            return tuple((key, meaning(each)) for key, each in part.items())
        case list() | tuple():
            return tuple(map(meaning, part))
    if dataclasses.is_dataclass(part) and not isinstance(part, type):
        fields = (field.name for field in dataclasses.fields(part) if field.name != "fingerprint")
        return tuple(meaning(getattr(part, name)) for name in fields)
    return part
