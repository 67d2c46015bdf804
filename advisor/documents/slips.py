"""Signs that look right and are others: invisible spaces, curly quotes, a decimal comma in braces."""

import re

from advisor.documents.problems import Mark, Problem
from advisor.documents.tree import Node, Scalar

CURLY = "\u201c\u201d\u201e\u201a\u2018\u2019"
STRAIGHT = 'Use straight quotes, as in "text"'
_SPACE = "[\u00a0\u2000-\u200b\u202f\u205f\u2060\u3000]"
_INVISIBLE = re.compile(rf"^[ -]*({_SPACE})|\w:[ ]*({_SPACE})")
_BEGINS_CURLY = re.compile(rf"^[^\"'#]*?(?:: |- |[\[{{,] *)([{CURLY}])")
_ORDER = re.compile(r"([<>]=?):? *[-+]?[0-9]")
_MOST_ABOVE = 2
"""YAML breaks at most so many lines below the sign that was misread."""
_WHOLE, _DIGITS = re.compile(r"[-+]?[0-9]+"), re.compile(r"[0-9]+")
_LIMITS = "For a limit write above (>), at_least (>=), below (<) or at_most (<=), as in {at_least: 0.15}; quote a text"


def misread_sign(lines: list[str], start: Mark, end: Mark) -> Problem | None:
    """The sign for which YAML broke, where one near the place looks like another."""
    near = range(max(end.line - _MOST_ABOVE, 1), min(end.line, len(lines)) + 1)
    for line in near:
        if found := _INVISIBLE.search(lines[line - 1]):
            mark = Mark(end.file, line, found.start(found.lastindex or 0) + 1)
            return Problem.at(mark, *invisible(found[found.lastindex or 0]))
    for line in near:
        if line in (start.line, end.line) and (found := _BEGINS_CURLY.search(lines[line - 1])):
            return Problem.at(Mark(end.file, line, found.start(1) + 1), *curly(found[1]))
    for mark in (start, end):
        if 0 < mark.line <= len(lines) and (found := _ORDER.match(lines[mark.line - 1], mark.column - 1)):
            return Problem.at(mark, f"Neither a limit nor a text can begin with '{found[1]}'", _LIMITS)
    return None


def invisible(sign: str) -> tuple[str, str]:
    """What is said of a space that only looks like one."""
    return f"An invisible space (U+{ord(sign):04X}) stands here, not an ordinary one", "Replace it by a plain space"


def curly(sign: str) -> tuple[str, str]:
    """What is said of a quote that YAML takes for a letter."""
    return f"A text begins with the curly quote '{sign}' here", STRAIGHT


def space_before(key: Scalar) -> str:
    """The invisible space with which a key begins, if one does."""
    return key[0] if key and not key.quoted and re.match(_SPACE, key) else ""


def space_after_colon(key: Scalar, value: Node) -> str:
    """The invisible space that keeps a key in braces from its value, if one does."""
    found = _INVISIBLE.search(key)
    return found[2] or "" if found and _bare(key, value) else ""


def rest_of_text(key: Scalar, value: Node) -> str:
    """What is said of a key in braces that is the rest of a text in curly quotes, if it is."""
    rest = _bare(key, value) and key[-1:] in set(CURLY)
    return f"A comma has parted the text in curly quotes that ends with '{key}'" if rest else ""


def comma_in_braces(before: Node | None, key: Scalar, value: Node) -> str:
    """The number that a comma has parted in two entries, written with a dot, if one has."""
    whole = isinstance(before, Scalar) and not before.quoted and _WHOLE.fullmatch(before)
    return f"{before}.{key}" if whole and _bare(key, value) and _DIGITS.fullmatch(key) else ""


def _bare(key: Scalar, value: Node) -> bool:
    """Whether a key in braces has no colon or value after it."""
    return isinstance(value, Scalar) and not value and not value.quoted and not key.quoted
