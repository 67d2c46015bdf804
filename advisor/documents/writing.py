"""Write plain data as YAML that every reader takes for the same texts."""

import math
import re
from collections.abc import Iterator, Mapping
from typing import TypeAlias

Plain: TypeAlias = "str | int | float | bool | Mapping[str, Plain] | list[Plain] | tuple[Plain, ...]"

_WIDTH = 100  # columns; longer texts are folded
_LONGEST_KEY = 200
_PLAIN = re.compile(r"[^\W\d_](?:[\w .,;()/%+°²³·'-]*[\w.)%°²³])?")
_WORDS = {"y", "n", "yes", "no", "on", "off", "true", "false", "null", "none", "nan", "inf", "infinity"}
"""What some reader of YAML takes for something other than a text."""
_UNSEEN = re.compile("[\x00-\x1f\x7f-\x9f\u2028\u2029\ud800-\udfff\ufeff\ufffe\uffff]")
_ESCAPES = {"\n": "\\n", "\t": "\\t", "\r": "\\r", '"': '\\"', "\\": "\\\\"}


def to_yaml(data: Plain) -> str:
    """The data as one YAML document in block style, in the order given.

    It reads back as the same tree of texts; yes and no stand for the two truth values.

    Raises:
        TypeError: the data holds something other than mappings with text keys, lists, texts, numbers, yes and no.
        ValueError: a number is not finite, or a text cannot be written as UTF-8.
    """
    lines = _lines(data)
    # A block at the outermost level would take a line '---' of its own for the end of the document.
    rest = _indented(lines) if isinstance(data, str) else lines
    return "\n".join((next(lines), *rest)) + "\n"


def _lines(data: Plain) -> Iterator[str]:
    """The lines of a value; those of a block of text are still to be indented."""
    if isinstance(data, Mapping) and data:
        for key, value in data.items():
            yield from _entry(f"{_key(key)}:", value)
    elif isinstance(data, (list, tuple)) and data:
        for value in data:
            lines = _lines(value)
            yield f"- {next(lines)}"
            yield from _indented(lines)
    else:
        yield from _scalar(data)


def _entry(key: str, value: Plain) -> Iterator[str]:
    """The lines of a key and its value."""
    lines = _lines(value)
    if isinstance(value, (Mapping, list, tuple)) and value:
        yield key
    else:
        yield f"{key} {next(lines)}"
    yield from _indented(lines)


def _indented(lines: Iterator[str]) -> Iterator[str]:
    """The lines two columns further in; empty ones stay empty."""
    for line in lines:
        yield f"  {line}" if line else ""


def _scalar(data: Plain) -> Iterator[str]:
    """The lines of a text, number, yes or no, or of an empty mapping or list."""
    match data:
        case bool():
            yield "yes" if data else "no"
        case str():
            yield from _text(data)
        case int():
            yield str(data)
        case float():
            yield _number(data)
        case Mapping():
            yield "{}"
        case list() | tuple():
            yield "[]"
        case _:
            raise TypeError(f"{type(data).__name__} has no form in a document")


def _number(number: float) -> str:
    """A finite number in full, whole ones without a decimal."""
    if not math.isfinite(number):
        raise ValueError(f"{number} has no form in a document")
    return repr(number).removesuffix(".0")


def _key(key: str) -> str:
    """A key on one line."""
    if not isinstance(key, str):
        raise TypeError(f"{type(key).__name__} cannot be a key of a document")
    written = _quoted(key)
    if len(written) > _LONGEST_KEY:
        raise ValueError(f"the key {written[:20]}... is longer than {_LONGEST_KEY} characters")
    return written


def _text(text: str) -> Iterator[str]:
    """The lines of a text: as a block, folded, or on one line; a block's own lines are still to be indented."""
    if _is_block(text):
        yield "|" if text.endswith("\n") else "|-"
        yield from text.removesuffix("\n").split("\n")
    elif len(text) > _WIDTH and _is_foldable(text):
        yield ">-"
        yield from _folded(text)
    else:
        yield _quoted(text)


def _is_block(text: str) -> bool:
    """Whether the text has several lines, each of which shows all that it holds."""
    lines = text.removesuffix("\n").split("\n")
    return (
        "\n" in text
        and bool(lines[0] and lines[-1])
        and not lines[0].startswith(" ")
        and not any(_UNSEEN.search(line) or line.endswith(" ") for line in lines)
    )


def _is_foldable(text: str) -> bool:
    """Whether the text is words with one space between them."""
    return not _UNSEEN.search(text) and all(text.split(" "))


def _folded(text: str) -> Iterator[str]:
    """The text broken between words."""
    line = ""
    for word in text.split(" "):
        if line and len(line) + len(word) >= _WIDTH:
            yield line
            line = word
        else:
            line = f"{line} {word}" if line else word
    yield line


def _quoted(text: str) -> str:
    """The text on one line, in quotes unless every reader takes it for the same text without."""
    if _PLAIN.fullmatch(text) and text.casefold() not in _WORDS:
        return text
    if _UNSEEN.search(text):
        return f'"{"".join(_escaped(sign) for sign in text)}"'
    if "'" in text and '"' not in text and "\\" not in text:
        return f'"{text}"'
    return "'" + text.replace("'", "''") + "'"


def _escaped(sign: str) -> str:
    """One character as it stands in double quotes."""
    if sign in _ESCAPES:
        return _ESCAPES[sign]
    if not _UNSEEN.match(sign):
        return sign
    if "\ud800" <= sign <= "\udfff":
        raise ValueError(f"the half character U+{ord(sign):04X} cannot be written as UTF-8")
    return f"\\u{ord(sign):04X}"
