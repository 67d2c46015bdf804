"""What people type, before any question is looked at: whole numbers, half characters, a part of a name."""

import re
from collections.abc import Mapping

from advisor.answers import Unsuitable

_WHOLE = re.compile(r"[0-9]{1,9}")


def whole_number(text: str) -> int | None:
    """A whole number of up to nine ASCII digits, None for anything else.

    >>> whole_number("12"), whole_number("²"), whole_number("٣"), whole_number("-1"), whole_number("9" * 5000)
    (12, None, None, None, None)
    """
    return int(text) if _WHOLE.fullmatch(text) else None


def list_number(text: str, entries: int) -> int | None:
    """The number of a list entry, counted from one; None where the text is none of them.

    >>> list_number("2", 3), list_number("0", 3), list_number("4", 3), list_number("²", 3)
    (2, None, None, None)
    """
    number = whole_number(text)
    return number if number is not None and 0 < number <= entries else None


def writable(text: str) -> str:
    r"""The text with a question mark in place of every half character, which UTF-8 cannot hold.

    >>> writable("6208 \udcff")
    '6208 ?'
    """
    return text.encode("utf-8", "replace").decode("utf-8")


def unbroken(text: str) -> str:
    """The text of an answer, which must read back from its file as it was typed.

    Raises:
        Unsuitable: it holds half a character.
    """
    if (kept := writable(text)) != text:
        raise Unsuitable(f"'{kept.strip():.60}' holds half a character. Type the answer again without it.")
    return text


def own_choices(choices: Mapping[str, str]) -> dict[str, str]:
    """The choices that stand for no product and no entry of a table.

    >>> own_choices({"GR-101": "GR-101 lithium grease", "none": "nothing yet"})
    {'none': 'nothing yet'}
    """
    return {name: label for name, label in choices.items() if not label.startswith(name)}


def holding(choices: Mapping[str, str], typed: str) -> list[str]:
    """The choices whose label or name holds every word typed.

    >>> holding({"GR-101": "GR-101 lithium grease", "unlabelled": "something without a label"}, "unlab")
    ['unlabelled']
    """
    words = typed.casefold().split()
    return [
        name
        for name, label in choices.items()
        if all(word in label.casefold() or word in name.casefold() for word in words)
    ]
