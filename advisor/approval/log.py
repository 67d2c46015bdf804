"""The log of approvals: plain text, appended to only, every entry sealing the one before it."""

import hashlib
import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from advisor.documents import Mark, Problem, Problems

NAME = "APPROVALS.log"
HEAD = "Approvals of the scenarios below this folder, format 1. Only 'gudgeon approve' writes here; do not edit."
BEGIN = "begin"
NOTHING = "none"
"""Stands for the fingerprint of what was not there, or is no more."""
_FIRST = re.compile(r"entry (\d+), (\d{4}-\d{2}-\d{2}), signed by (.+)")
_SCENARIO = re.compile(r"  scenario: (.+), before ([0-9a-f]+|none), after ([0-9a-f]+|none)")
_KNOWLEDGE = re.compile(r"  knowledge: before ([0-9a-f]+|none), after ([0-9a-f]+)")
_SCENARIO_LINE = "  scenario: "
_FOLLOWS, _SEAL = "  follows: ", "  seal: "
_MEND = "Put the log back as it was from your version control; then sign again what is missing"


@dataclass(frozen=True, slots=True)
class Signed:
    """What an approval says of one scenario: its fingerprints, and the expectations that were accepted."""

    path: str
    before: str
    after: str
    accepted: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Entry:
    """One approval."""

    number: int
    day: str
    by: str
    group: str
    because: str
    knowledge_before: str
    knowledge: str
    scenarios: tuple[Signed, ...]
    follows: str

    def lines(self) -> Iterator[str]:
        """The entry as it is written, without its seal."""
        yield f"entry {self.number}, {self.day}, signed by {self.by}"
        yield f"  accepts: {self.group}"
        yield f"  because: {self.because}"
        yield f"  knowledge: before {self.knowledge_before}, after {self.knowledge}"
        for each in self.scenarios:
            yield f"  scenario: {each.path}, before {each.before}, after {each.after}"
            yield from (f"    {words}" for words in each.accepted)
        yield _FOLLOWS + self.follows

    @property
    def seal(self) -> str:
        """The digest of everything written, the seal of the entry before it included."""
        return hashlib.sha256("\n".join(self.lines()).encode()).hexdigest()

    def sealed(self) -> str:
        """The entry as it is written."""
        return "\n".join([*self.lines(), _SEAL + self.seal])

    def text(self) -> str:
        """What the signer reads of it: of the first entry, which names every scenario, only how many there are."""
        if self.group != BEGIN:
            return self.sealed()
        lines = [each for each in self.lines() if not each.startswith(_SCENARIO_LINE)]
        many = len(self.scenarios)
        return "\n".join(
            [*lines[:-1], f"  {many} scenario{'' if many == 1 else 's'} signed as they are", _SEAL + self.seal]
        )


@dataclass(frozen=True, slots=True)
class Log:
    """A log that was read; nothing in it counts where there are problems."""

    path: Path
    entries: tuple[Entry, ...] = ()

    @property
    def head(self) -> str:
        """The seal that the next entry follows."""
        return self.entries[-1].seal if self.entries else NOTHING

    @property
    def knowledge(self) -> str:
        """The fingerprint of the knowledge at the last approval."""
        return self.entries[-1].knowledge if self.entries else NOTHING

    def latest(self) -> dict[str, tuple[Entry, Signed]]:
        """The last word on every scenario."""
        return {signed.path: (entry, signed) for entry in self.entries for signed in entry.scenarios}

    def with_entry(self, entry: Entry) -> str:
        """The text of the log with one entry appended."""
        return "\n\n".join([HEAD, *(each.sealed() for each in (*self.entries, entry))]) + "\n"


def read_log(path: Path, problems: Problems) -> Log | None:
    """The log of this path, verified; None where there is none, or where something is wrong with it."""
    if path.is_symlink() or (path.exists() and not path.is_file()):
        _tell(problems, path, 1, "the log is a link or no file; it must be a file of its own")
        return None
    if not path.exists():
        return None
    try:
        text = path.read_bytes().decode("utf-8")
    except (OSError, UnicodeDecodeError):
        _tell(problems, path, 1, "the log cannot be read as text")
        return None
    if "\r" in text:
        message = "the log has other line ends than it was written with: \\r\\n (Windows) or \\r in place of \\n"
        hint = f"Put it back with its own; the line '{NAME} -text' in .gitattributes keeps git from changing line ends"
        problems.add(Problem.at(Mark(str(path), 1, 1), message, hint))
        return None
    return _read(text, path, problems)


def _read(text: str, path: Path, problems: Problems) -> Log | None:
    head, *blocks = text.removesuffix("\n").split("\n\n")
    if head != HEAD or not text.endswith("\n"):
        _tell(problems, path, 1, "the log does not begin, or does not end, as it was written")
        return None
    if not blocks:
        _tell(problems, path, 1, "the log has lost its entries")
        return None
    entries: list[Entry] = []
    line, follows = 3, NOTHING
    for number, block in enumerate(blocks, start=1):
        entry = parsed(block)
        fault = _fault(entry, block, number, follows)
        if entry is None or fault:
            _tell(problems, path, line, fault)
            return None
        entries.append(entry)
        follows = entry.seal
        line += block.count("\n") + 2
    return Log(path, tuple(entries))


def _fault(entry: Entry | None, block: str, number: int, follows: str) -> str:
    """What is wrong with an entry at its place; empty where nothing is."""
    if entry is None or entry.sealed() != block:
        return f"entry {number} is not as it was sealed: it was changed later"
    if entry.number != number:
        return f"entry {entry.number} stands in the place of entry {number}: entries were deleted, added or moved"
    return "" if entry.follows == follows else f"entry {number} does not follow the entry above it"


def parsed(block: str) -> Entry | None:
    """The entry that a block of lines holds; None where it is none."""
    lines = block.split("\n")
    first = _FIRST.fullmatch(lines[0])
    if first is None or len(lines) < 6 or not _labelled(lines):
        return None
    knowledge = _KNOWLEDGE.fullmatch(lines[3])
    signed = _signed(lines[4:-2])
    if knowledge is None or signed is None:
        return None
    return Entry(
        int(first[1]),
        first[2],
        first[3],
        lines[1].removeprefix("  accepts: "),
        lines[2].removeprefix("  because: "),
        knowledge[1],
        knowledge[2],
        signed,
        lines[-2].removeprefix(_FOLLOWS),
    )


def _labelled(lines: Sequence[str]) -> bool:
    labels = ((1, "  accepts: "), (2, "  because: "), (-2, _FOLLOWS), (-1, _SEAL))
    return all(lines[place].startswith(label) for place, label in labels)


def _signed(lines: Sequence[str]) -> tuple[Signed, ...] | None:
    found: list[Signed] = []
    for line in lines:
        scenario = _SCENARIO.fullmatch(line)
        if scenario is not None:
            found.append(Signed(scenario[1], scenario[2], scenario[3]))
        elif found and line.startswith("    "):
            last = found[-1]
            found[-1] = Signed(last.path, last.before, last.after, (*last.accepted, line[4:]))
        else:
            return None
    return tuple(found)


def _tell(problems: Problems, path: Path, line: int, message: str) -> None:
    problems.add(Problem.at(Mark(str(path), line, 1), message, _MEND))
