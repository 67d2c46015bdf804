"""Where the parts of a document stand in its text, so that one part can be changed and all the rest kept."""

from collections.abc import Iterator
from typing import NamedTuple

import yaml

Loc = tuple[str | int, ...]


class Span(NamedTuple):
    """A value in the text: where its entry (the key, or the dash) and the value itself begin, and where it ends."""

    entry: int
    start: int
    end: int
    flow: bool
    """Whether what holds it is written in brackets or braces."""


class Uneditable(Exception):
    """A part that cannot be changed without touching others."""


def spans(text: str) -> dict[Loc, Span]:
    """Every value of a document that reads without faults."""
    root = yaml.compose(text, Loader=yaml.SafeLoader)
    return dict(_below(root, ())) if root is not None else {}


def _below(node: yaml.Node, loc: Loc) -> Iterator[tuple[Loc, Span]]:
    if isinstance(node, yaml.MappingNode):
        for key, value in node.value:
            here = (*loc, str(key.value))
            yield here, Span(key.start_mark.index, value.start_mark.index, _end(value), bool(node.flow_style))
            yield from _below(value, here)
    elif isinstance(node, yaml.SequenceNode):
        for place, value in enumerate(node.value):
            start = value.start_mark.index
            yield (*loc, place), Span(start, start, _end(value), bool(node.flow_style))
            yield from _below(value, (*loc, place))


def _end(node: yaml.Node) -> int:
    """The end of what is written; a block ends with its last part, not where the next one begins."""
    if not isinstance(node, yaml.CollectionNode) or node.flow_style or not node.value:
        return int(node.end_mark.index)
    last = node.value[-1]
    return _end(last[1] if isinstance(last, tuple) else last)


def replaced(text: str, loc: Loc, new: str) -> str:
    """The text with one value written otherwise."""
    span = spans(text)[loc]
    return text[: span.start] + new + text[span.end :]


def removed(text: str, loc: Loc) -> str:
    """The text without one entry; what it leaves empty goes too.

    Raises:
        Uneditable: where it shares its line with something else.
    """
    known = spans(text)
    beside = [other for other in known if len(other) == len(loc) and other[:-1] == loc[:-1]]
    if len(beside) == 1 and len(loc) > 1:
        return removed(text, loc[:-1])
    span = known[loc]
    if span.flow:
        return _out_of_flow(text, loc, beside, known)
    start = text.rfind("\n", 0, span.entry) + 1
    end = text.find("\n", span.end) + 1 or len(text)
    before = text[start : span.entry].strip()
    if before and (before != "-" or isinstance(loc[-1], str)):
        raise Uneditable("it shares its line with something else")
    return text[:start] + text[end:]


def _out_of_flow(text: str, loc: Loc, beside: list[Loc], known: dict[Loc, Span]) -> str:
    place = beside.index(loc)
    if place:
        return text[: known[beside[place - 1]].end] + text[known[loc].end :]
    return text[: known[loc].entry] + text[known[beside[1]].entry :]
