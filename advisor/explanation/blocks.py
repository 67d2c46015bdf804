"""A report as blocks of plain text: built once, written as text, Markdown or HTML."""

from dataclasses import dataclass

GLYPHS = {
    "settled": "●",
    "open": "○",
    "conflict": "×",
    "referred": "→",
    "fits": "●",
    "second best": "◐",
    "still in": "○",
    "unproven": "?",
    "falls short": "×",
    "must": "■",
    "wish": "□",
}


@dataclass(frozen=True, slots=True)
class Para:
    """A paragraph; a strong one stands out."""

    text: str
    strong: bool = False


@dataclass(frozen=True, slots=True)
class Node:
    """A line with what stands under it."""

    text: str
    under: tuple["Node", ...] = ()


@dataclass(frozen=True, slots=True)
class Tree:
    """Nested lines; numbered where their order is one of doing."""

    nodes: tuple[Node, ...]
    numbered: bool = False


@dataclass(frozen=True, slots=True)
class Grid:
    """A table."""

    heads: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]


Block = Para | Tree | Grid


@dataclass(frozen=True, slots=True)
class Section:
    """A part of the report under one heading."""

    id: str
    title: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True, slots=True)
class Report:
    """The whole: title, a line about the case, and the sections, the first screen first."""

    title: str
    about: str
    state: str
    sections: tuple[Section, ...]


def leaf(*texts: str) -> tuple[Node, ...]:
    """Lines without anything under them."""
    return tuple(Node(text) for text in texts)
