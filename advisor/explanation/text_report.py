"""The report as plain text for a terminal: at most 100 columns, no colour, a glyph and a word for each state."""

import textwrap
from collections.abc import Iterator

from advisor.advice import Advice
from advisor.explanation.blocks import Block, Grid, Node, Para, Tree
from advisor.explanation.report import report
from advisor.explanation.words import harmless

WIDTH = 100
_GAP = 2
_LEAST = 10


def text(advice: Advice, *, full: bool = True) -> str:
    """The report as plain text, whole or short."""
    made = report(advice, full=full)
    lines = [*_wrapped(made.title), "=" * min(WIDTH, max(_LEAST, len(harmless(made.title)))), *_wrapped(made.about)]
    for section in made.sections:
        lines += ["", *_wrapped(section.title), "-" * min(WIDTH, len(harmless(section.title)))]
        for block in section.blocks:
            lines += _block(block)
    return "\n".join(line.rstrip() for line in lines) + "\n"


def _block(block: Block) -> Iterator[str]:
    if isinstance(block, Para):
        yield from _wrapped(block.text)
    elif isinstance(block, Tree):
        for number, node in enumerate(block.nodes, start=1):
            yield from _node(node, f"{number}. " if block.numbered else "- ", 0)
    else:
        yield from _grid(block)


def _node(node: Node, bullet: str, depth: int) -> Iterator[str]:
    indent = "  " * depth
    yield from _wrapped(node.text, indent + bullet, indent + " " * len(bullet))
    for each in node.under:
        yield from _node(each, "- ", depth + 1)


def _wrapped(words: str, first: str = "", rest: str = "") -> list[str]:
    return textwrap.wrap(
        harmless(words), WIDTH, initial_indent=first, subsequent_indent=rest or " " * len(first), break_on_hyphens=False
    ) or [first]


def _grid(grid: Grid) -> Iterator[str]:
    """A table; the columns share the width by need, and cells wrap."""
    rows = [tuple(map(harmless, row)) for row in (grid.heads, *grid.rows)]
    widths = _widths(rows)
    for row in rows:
        cells = [
            textwrap.wrap(cell, width, break_on_hyphens=False) or [""] for cell, width in zip(row, widths, strict=True)
        ]
        for place in range(max(map(len, cells))):
            line = [cell[place] if place < len(cell) else "" for cell in cells]
            yield (" " * _GAP).join(part.ljust(width) for part, width in zip(line, widths, strict=True)).rstrip()


def _widths(rows: list[tuple[str, ...]]) -> list[int]:
    """Column widths that fill at most the line: wide columns give way first."""
    widths = [max(1, *(len(row[place]) for row in rows)) for place in range(len(rows[0]))]
    room = WIDTH - _GAP * (len(widths) - 1)
    while sum(widths) > room:
        widest = widths.index(max(widths))
        widths[widest] -= 1
    return widths
