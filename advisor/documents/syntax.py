"""Say in plain words why YAML cannot read a text."""

import re
from typing import NamedTuple

from yaml import MarkedYAMLError, YAMLError

from advisor.documents.problems import Mark, Problem
from advisor.documents.slips import misread_sign


class _Fault(NamedTuple):
    """How one fault of the parser is told; `begins` places it where the unfinished thing begins.

    The pattern is sought in the parser's context and problem, followed by what `_scene` noticed. `{sign}` is the
    character at the place, `{line}` the line at which the parser gave up. `indented` faults are of indentation, so that
    the line to be mended may be another one.
    """

    pattern: str
    message: str
    hint: str
    begins: bool = False
    indented: bool = False


_FAULTS = (
    _Fault("<tab>", "A tab stands where only spaces may", "Indent with spaces"),
    _Fault("(?:scanning|parsing) a tag|tag handle", "The tag here is not accepted",
           "Delete it, or put the text in quotes", begins=True),
    _Fault("document start.*<after dots>", "Something follows after the end of the document", "Delete the line '...'"),
    _Fault("document start", "This line stands further out than where the document begins",
           "Give all keys of the outermost mapping the same indentation", indented=True),
    _Fault("quoted scalar.*(?:end of stream|document)", "A text in quotes begins here and is never closed",
           "Close it with the same quote sign", begins=True),
    _Fault("(?:node content|expected ',' or ).*<past the end>", "The bracket '{sign}' that opens here is not closed",
           "Close it", begins=True),
    _Fault("expected ',' or .*<same line>", "A comma or a closing bracket is missing before this place",
           "Put a comma between the members and close the bracket"),
    _Fault("expected ',' or ",
           "The bracket '{sign}' that opens here is not closed, or a comma is missing before line {line}",
           "Put a comma between the members and close the bracket", begins=True),
    _Fault("scanning an (?:alias|anchor)|cannot start any token", "A text cannot begin with '{sign}'",
           "Put the text in quotes", begins=True),
    _Fault("mapping values are not allowed.*<after a colon>", "A second colon stands in this line",
           "Put a text that holds ': ' in quotes"),
    _Fault("mapping values are not allowed", "This key is indented deeper than the line above allows",
           "Align it with the keys of the same mapping, or check the quotes above", indented=True),
    _Fault("sequence entries are not allowed", "A list begins in the line of its key",
           "Begin it on the next line, or write it in brackets as [a, b]"),
    _Fault("<closing>", "The bracket '{sign}' closes nothing", "Delete it, or put the text in quotes"),
    _Fault("unexpected ':'", "A colon stands in a text within brackets", "Put the text in quotes"),
    _Fault("mapping keys are not allowed", "A text cannot begin with '? '", "Put the text in quotes"),
    _Fault("block mapping.*<colon first>", "A key is missing before the colon",
           "Write the key, or put the text in quotes"),
    _Fault("node content", "A value is missing before '{sign}'", "Write it, or put the text in quotes"),
    _Fault("block mapping.*<midline>", "Something is left over after the value",
           "Put the whole text in one pair of quotes, and check the quotes above"),
    _Fault("block mapping.*<dash>", "A list item stands where a key should",
           "Indent it below the key that it belongs to", indented=True),
    _Fault("block mapping", "The indentation of this line fits none of the lines above",
           "Give all keys of one mapping the same indentation", indented=True),
    _Fault("block collection", "This line stands among list items but does not fit them",
           "Begin it with '- ' in the column of the others, or indent it below its item", indented=True),
    _Fault("could not find expected ':'", "This line has no colon after its key",
           "Write 'key: value', or indent the line if it continues the text above", begins=True),
    _Fault("unknown escape", "A backslash in this text in double quotes begins no known escape",
           "Use single quotes, or write the backslash twice", begins=True),
    _Fault("block scalar", "A text follows the sign '{sign}' in the same line",
           "Put a text that begins with this sign in quotes", begins=True),
    _Fault("YAML document|directive", "The line that begins with '%' is not accepted", "Delete it"),
)


def explained(error: YAMLError, text: str, name: str, innermost: Mark) -> tuple[Problem, bool]:
    """The problem that a parser's error stands for, and whether it is one of indentation.

    `innermost` is where the innermost unfinished value begins.
    """
    if not isinstance(error, MarkedYAMLError) or error.problem_mark is None:
        return Problem.at(Mark(name, 1, 1), "YAML cannot read this text", "Check that it is the right file"), False
    lines = text.split("\n")
    end = Mark(name, error.problem_mark.line + 1, error.problem_mark.column + 1)
    context = error.context_mark or error.problem_mark
    start = Mark(name, context.line + 1, context.column + 1)
    if "node content" in str(error.problem):
        start = innermost
    if misread := misread_sign(lines, start, end):
        return misread, False
    scene = f"{error.context}: {error.problem} {_scene(lines, start, end)}"
    for fault in _FAULTS:
        if re.search(fault.pattern, scene):
            place = start if fault.begins else end
            message = fault.message.format(sign=_sign(lines, place), line=end.line)
            return Problem.at(place, message, fault.hint), fault.indented
    return Problem.at(end, f"YAML cannot read this: {error.problem}", "Check the quotes and the indentation"), False


def _scene(lines: list[str], start: Mark, end: Mark) -> str:
    """What an eye notices at the place where the parser gave up."""
    before, sign = _line(lines, end)[: end.column - 1], _sign(lines, end)
    noticed = {
        "<tab>": sign == "\t" or (not before.strip() and "\t" in before),
        "<closing>": sign in {"]", "}"},
        "<dash>": sign == "-",
        "<colon first>": sign == ":" and not before.strip(),
        "<midline>": bool(before.strip()),
        "<after a colon>": ": " in before,
        "<past the end>": end.line >= len(lines) and not sign,
        "<same line>": start.line == end.line,
        "<after dots>": any(line.startswith("...") for line in lines[: end.line]),
    }
    return " ".join(name for name, seen in noticed.items() if seen)


def _line(lines: list[str], place: Mark) -> str:
    """The line of a place; empty past the end."""
    return lines[place.line - 1] if place.line <= len(lines) else ""


def _sign(lines: list[str], place: Mark) -> str:
    """The character at a place."""
    return _line(lines, place)[place.column - 1 : place.column]
