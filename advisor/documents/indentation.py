"""Which line of a text that YAML cannot read is indented wrongly.

YAML breaks where lines stop fitting one another, and that may be below the line that was moved. So the lines above are
tried as well: moved back, alone or together with what is below them, does the text read?
"""

import re
from collections import Counter
from collections.abc import Callable, Iterator
from typing import NamedTuple

from advisor.documents.problems import Mark, Problem
from advisor.documents.tree import Node

FARTHEST = 400
"""How many lines above the break are looked at."""
_BESIDE = 3
"""Lines so near to the break say nothing of what is usual."""
_ENTRY = re.compile(r" *(?:-(?: |$)|[^\s#\"'\[{-][^#]*?:(?: |$)|[\"'][^\"']*[\"']:(?: |$))")


class _Way(NamedTuple):
    """The first and the last line to be moved, counted from nought, and by how many columns."""

    line: int
    last: int
    shift: int


def moved_line(
    text: str,
    told: Problem,
    read: Callable[[str], Node | None],
    faults_in: Callable[[Node], int] | None,
    *,
    among: range | None = None,
) -> Problem:
    """The problem, at the line that was moved, where that is another one than the one at which YAML broke.

    Args:
        text: what YAML cannot read.
        told: the fault of indentation as YAML sees it.
        read: reads a text; nothing where YAML cannot.
        faults_in: how many faults of other kinds a tree has, if anybody knows.
        among: the only lines that may have been moved; a move must then leave no fault of any kind.
    """
    lines, broken = text.split("\n"), told.line - 1
    usual = _usual_step(lines, broken)
    found: list[tuple[int, int, int, int, _Way]] = []
    for way in _ways(lines, broken):
        if among is not None and way.line + 1 not in among:
            continue
        moved = _moved(lines, way)
        tree = read("\n".join(moved))
        if tree is not None:
            faults = faults_in(tree) if faults_in else 0
            if among is None or not faults:
                found.append((faults, _unusual(moved, way, usual), way.last - way.line, broken - way.line, way))
    best = min(found)[-1] if found else None
    if best is None or best.line == broken:
        return told
    column = _indent(lines[best.line]) + 1
    return Problem.at(
        Mark(told.file, best.line + 1, column),
        f"The indentation of this line does not suit that of line {told.line}",
        f"Begin it in column {column + best.shift}, or mend line {told.line}",
    )


def _ways(lines: list[str], broken: int) -> Iterator[_Way]:
    """The moves that may mend the break: of the line itself, and of lines above of which each is further out."""
    tried = list(_outwards(lines, broken))
    columns = {_indent(lines[at]) for at in tried}
    for at in tried:
        for column in sorted(columns | {each + 2 for each in columns}):
            for last in sorted({at, below := _last_below(lines, at), max(at, min(below, broken - 1))}):
                if column != _indent(lines[at]):
                    yield _Way(at, last, column - _indent(lines[at]))


def _outwards(lines: list[str], broken: int) -> Iterator[int]:
    """The line of the break, the one above it, and then each that is further out than all between."""
    if broken < len(lines) and _ENTRY.match(lines[broken]):
        yield broken
    column = FARTHEST
    for at in range(min(broken, len(lines)) - 1, max(-1, broken - FARTHEST), -1):
        if _ENTRY.match(lines[at]) and _indent(lines[at]) < column:
            column = _indent(lines[at])
            yield at


def _last_below(lines: list[str], at: int) -> int:
    """The last of the lines from here on that are indented deeper than this one."""
    last = at
    for below in range(at + 1, len(lines)):
        if lines[below].strip():
            if _indent(lines[below]) <= _indent(lines[at]):
                break
            last = below
    return last


def _moved(lines: list[str], way: _Way) -> list[str]:
    here = [" " * max(0, _indent(line) + way.shift) + line.lstrip(" ") for line in lines[way.line : way.last + 1]]
    return [*lines[: way.line], *here, *lines[way.last + 1 :]]


def _indent(line: str) -> int:
    return len(line) - len(line.lstrip(" "))


def _steps(lines: list[str]) -> dict[int, int]:
    """By how many columns each entry is further in than the one above that it belongs to.

    Entries of the outermost mapping count only where they do not begin in the first column.
    """
    found: dict[int, int] = {}
    around: list[tuple[int, bool]] = []
    for at, line in enumerate(lines):
        if _ENTRY.match(line):
            column, listed = _indent(line), line.lstrip().startswith("-")
            while around and (around[-1][0] > column or (around[-1][0] == column and around[-1][1] >= listed)):
                around.pop()
            if around:
                found[at] = column - around[-1][0]
            elif column:
                found[at] = -1
            around.append((column, listed))
    return found


def _usual_step(lines: list[str], broken: int) -> int:
    """The step of most entries, those near the break left out; -1 where there are no others."""
    steps = Counter(step for at, step in _steps(lines).items() if abs(at - broken) > _BESIDE)
    return max(steps, key=lambda step: (steps[step], -step), default=-1)


def _unusual(lines: list[str], way: _Way, usual: int) -> int:
    """How many entries in and beside what was moved have another step than is usual."""
    near = range(way.line - _BESIDE, way.last + _BESIDE + 1)
    return sum(step < 0 or usual not in (step, -1) for at, step in _steps(lines).items() if at in near)
