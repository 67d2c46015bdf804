"""Read a document to a tree of text, refusing whatever YAML does behind the reader's back."""

import re
from collections.abc import Callable, Iterator
from itertools import islice
from pathlib import Path
from typing import NamedTuple

import yaml

from advisor.documents.building import Builder, TooBig
from advisor.documents.indentation import moved_line
from advisor.documents.problems import Mark, Problem, Problems, nearest
from advisor.documents.syntax import explained
from advisor.documents.tree import Node

LARGEST_FILE = 2_000_000  # bytes
_MOST_STRAY_SIGNS = 20    # reported in one file; more of them means that it is no text at all
# The parser written in C is about ten times faster, where it is built in.
_LOADER: type = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
_STRAY = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\u2028\u2029\ud800-\udfff\ufeff\ufffe\uffff]")
_SAVE_AS_UTF8 = "Save the file as UTF-8 without a byte order mark"


class Expected(NamedTuple):
    """What the reader of a document knows of it beforehand."""

    faults_in: Callable[[Node], int] | None = None
    """Counts what is wrong in a tree; it helps to find the line that is indented wrongly."""
    may_repeat: frozenset[str] | None = None
    """The keys of lists that may hold an entry twice, where others may not."""


ANYTHING = Expected()


def read_document(
    path: Path, problems: Problems, name: str | None = None, expected: Expected = ANYTHING
) -> Node | None:
    """The document in a file, or nothing where there is nothing to look at.

    Args:
        path: the file.
        problems: gathers every fault; a tree may come back nevertheless, so that its contents can be checked too.
        name: how problems call the file; its path unless given.
        expected: what is known of such documents.
    """
    name = name or str(path)
    try:
        _refuse_no_file(path)
        with path.open("rb") as file:
            raw = file.read(LARGEST_FILE + 1)
    except OSError as error:
        problems.add(Problem.at(Mark(name, 1, 1), *_why_unreadable(path, error)))
        return None
    if len(raw) > LARGEST_FILE:
        problems.add(_too_large(name))
        return None
    try:
        text = raw.decode("utf-8")
    except UnicodeDecodeError as error:
        problems.add(_not_utf8(raw, error.start, name))
        return None
    return read_text(text, name, problems, expected)


def read_text(text: str, name: str, problems: Problems, expected: Expected = ANYTHING) -> Node | None:
    """The document in a text, or nothing where there is nothing to look at; `name` stands for the file."""
    if len(text.encode("utf-8", "surrogatepass")) > LARGEST_FILE:
        problems.add(_too_large(name))
        return None
    strays = list(islice(_stray_signs(text, name), _MOST_STRAY_SIGNS + 1))
    problems.extend(strays[:_MOST_STRAY_SIGNS])
    if "\0" in text or len(strays) > _MOST_STRAY_SIGNS:
        return None
    return _read_clean(_STRAY.sub("\ufffd", text.removeprefix("\ufeff")), name, problems, expected)


def _read_clean(text: str, name: str, problems: Problems, expected: Expected) -> Node | None:
    """The document in a text that holds printable characters only."""
    builder = Builder(name, expected.may_repeat)
    try:
        for event in yaml.parse(text, Loader=_LOADER):
            builder.take(event)
    except TooBig as error:
        problems.add(Problem.at(error.mark, error.message, error.hint))
        return None
    except yaml.YAMLError as error:
        problems.extend(builder.problems())
        problem, indented = explained(error, text, name, builder.innermost)
        problems.add(moved_line(text, problem, _tried, expected.faults_in) if indented else problem)
        return None
    problems.extend(_perhaps_moved(builder, text, expected))
    if builder.root is None:
        problems.add(Problem.at(Mark(name, 1, 1), "The document is empty", "Write its contents or delete the file"))
    return builder.root


def _perhaps_moved(builder: Builder, text: str, expected: Expected) -> list[Problem]:
    """What was refused; a key is also written twice where a line was moved into or out of the mapping."""
    refused = builder.problems()
    first = next((each for each in refused if each.mark in builder.repeated), None)
    if first is None or expected.faults_in is None:
        return refused
    between = range(builder.repeated[first.mark], first.line)
    moved = moved_line(text, first, _tried, expected.faults_in, among=between)
    if moved is first:
        return refused
    return [moved, *(each for each in refused if each.mark not in builder.repeated)]


def _tried(text: str) -> Node | None:
    """The tree of a text that was changed on trial, if it reads without faults."""
    builder = Builder("")
    try:
        for _ in yaml.parse(text, Loader=_LOADER):
            pass  # most trials fail, and that shows sooner without a tree
        for event in yaml.parse(text, Loader=_LOADER):
            builder.take(event)
    except (TooBig, yaml.YAMLError):
        return None
    return None if builder.problems() else builder.root


def _refuse_no_file(path: Path) -> None:
    """Raise for what could not be read, or never to its end."""
    if path.is_dir():
        raise IsADirectoryError
    if path.exists() and not path.is_file():
        raise OSError("it is a device or a pipe")


def _why_unreadable(path: Path, error: OSError) -> tuple[str, str]:
    """What kept the file from being read, and the mend."""
    match error:
        case FileNotFoundError() | NotADirectoryError():
            return "There is no such file", f"Check the name and the folder.{_like_named(path)}"
        case IsADirectoryError():
            return "This is a folder, not a file", "Name a file in it"
        case PermissionError():
            return "The file may not be read", "Ask for the permission to read it"
    return f"The file cannot be read: {error.strerror or error}", "Name an ordinary file that can be opened"


def _like_named(path: Path) -> str:
    """The question whether a neighbour of the missing file is meant."""
    try:
        return nearest(path.name, [neighbour.name for neighbour in path.parent.iterdir()])
    except OSError:
        return ""


def _not_utf8(raw: bytes, at: int, name: str) -> Problem:
    """The refusal of bytes that are no UTF-8."""
    if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
        return Problem.at(Mark(name, 1, 1), "The file is written in UTF-16", _SAVE_AS_UTF8)
    before = raw[:at].decode("utf-8")
    return Problem.at(_mark(before, len(before), name), f"The byte {raw[at]:#04x} is not UTF-8", _SAVE_AS_UTF8)


def _too_large(name: str) -> Problem:
    """The refusal of a file that nobody wrote by hand."""
    message = f"The file is too big: more than {LARGEST_FILE // 1_000_000} MB"
    return Problem.at(Mark(name, 1, 1), message, "Divide it into several files")


def _stray_signs(text: str, name: str) -> Iterator[Problem]:
    """The characters that no editor shows, each with its place."""
    for found in _STRAY.finditer(text):
        sign, mark = found.group(), _mark(text, found.start(), name)
        if sign == "\ufeff" and found.start() == 0:
            yield Problem.at(mark, "The file begins with a byte order mark", _SAVE_AS_UTF8)
        elif sign == "\0":
            hint = "Check that it is the right file"
            yield Problem.at(mark, "The file holds a NUL character, so it is not text", hint)
            return
        else:
            hint = "Delete it; where it is meant, write it as an escape in double quotes"
            yield Problem.at(mark, f"The invisible character U+{ord(sign):04X} stands here", hint)


def _mark(text: str, at: int, name: str) -> Mark:
    """The place of the character `at`, counting lines as editors do."""
    return Mark(name, text.count("\n", 0, at) + 1, at - text.rfind("\n", 0, at))
