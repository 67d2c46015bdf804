"""The kinds of text in a knowledge file: how the loader types them, and how an editor's schema describes them.

An editor sees a document as YAML 1.2 reads it, so that the plain text 12 is a number there, true a truth value, and
an empty place nothing. Each kind therefore describes what its text may look like to an editor as well.
"""

import re
from typing import Annotated, Any

from pydantic import BeforeValidator, Field, StringConstraints, WithJsonSchema

from advisor.documents import Scalar, as_number, as_yes_no

NOTHING = {"", "~", "null", "Null", "NULL"}
"""What stands for nothing where it is not in quotes."""
ID = r"^[A-Za-z0-9_][A-Za-z0-9_.\-]{0,79}$"
NAME = r"^[a-z][a-z0-9_]{0,63}$"
_NUMBER = r"^[-+]?(0|[1-9][0-9]*)(\.[0-9]+)?([eE][-+]?[0-9]+)?$"
_LARGEST = 1.7976931348623157e308
_LEVEL = re.compile(r"[1-4]")


def _number(value: object) -> float:
    if not isinstance(value, str):
        raise ValueError("a number is expected here, not a list or a mapping")
    return as_number(value)


def _level(value: object) -> int:
    number = _number(value)
    if number != int(number):
        raise ValueError("a whole number is expected here")
    if 1 <= number <= 4 and not _LEVEL.fullmatch(str(value)):
        raise ValueError(f"a level is one digit; write {number:g}")
    return int(number)


def _yes_no(value: object) -> bool:
    if not isinstance(value, str):
        raise ValueError("yes or no is expected here")
    return as_yes_no(value)


def _text(value: object) -> str:
    if not isinstance(value, str):
        raise ValueError("text is expected here, not a list or a mapping")
    if not value.strip():
        raise ValueError("text is missing here")
    if _stands_for_nothing(value):
        raise ValueError(f"'{value}' stands for nothing, where text is expected; where it is meant, put it in quotes")
    return str(value)


def _unit(value: object) -> object:
    if isinstance(value, str) and _stands_for_nothing(value):
        raise ValueError("the unit is missing here; write it, or \"\" where there is none")
    return value


def _stands_for_nothing(value: str) -> bool:
    return isinstance(value, Scalar) and not value.quoted and value in NOTHING


def _seen_as(*types: str, **limits: Any) -> WithJsonSchema:
    return WithJsonSchema({"type": list(types), **limits})


Number = Annotated[
    float,
    BeforeValidator(_number),
    _seen_as("number", "string", minimum=-_LARGEST, maximum=_LARGEST, pattern=_NUMBER),
]
Level = Annotated[
    int,
    BeforeValidator(_level),
    Field(ge=1, le=4),
    WithJsonSchema({"enum": [1, 2, 3, 4, "1", "2", "3", "4"]}),
]
YesNo = Annotated[bool, BeforeValidator(_yes_no), WithJsonSchema({"enum": ["yes", "no", True, False, "true", "false"]})]
Text = Annotated[str, BeforeValidator(_text), _seen_as("string", "number", "boolean", pattern=r"\S")]
Id = Annotated[
    str,
    BeforeValidator(_text),
    StringConstraints(pattern=ID),
    _seen_as("string", "number", "boolean", pattern=ID, minimum=0),
]
Name = Annotated[
    str, BeforeValidator(_text), StringConstraints(pattern=NAME), _seen_as("string", "boolean", pattern=NAME)
]
Tree = Any
"""A part that is typed later by the kind of the name it stands under."""
Present = BeforeValidator(_unit)
"""Refuses an empty place where the empty text in quotes is a choice."""
