"""How facts are written for the engine: one short attribute per fact or tick, numbers and texts spelled exactly."""

import json
import math
from collections.abc import Callable, Mapping, Sequence
from typing import Final

from advisor.conditions import VOID, Domain
from advisor.inference.faults import Unsendable

LONGEST_TEXT: Final = 30_000
"""Bytes; the engine keeps lengths in 16 bits, and beyond them all texts are equal to it."""

LARGEST_WHOLE: Final = 2**53
"""Beyond it a whole number and its float are no longer the same."""

PLAIN_ABOVE: Final = 1e-3
PLAIN_BELOW: Final = 1e15
"""Between these, Python spells a float without an exponent, so it may be written as it stands."""

RESERVED: Final = ("id", "sid", "probe", "$s", "$forward")
_quoted: Final = json.JSONEncoder(ensure_ascii=False).encode


def number(value: object) -> str:
    """A number as the engine reads it.

    >>> number(85.0), number(1e-05), number(3)
    ('85.0', '1.0e-05', '3')
    """
    if type(value) is float and math.isfinite(value):
        spelled = repr(value)
        # The engine refuses an exponent without a decimal point before it.
        return spelled.replace("e", ".0e") if "e" in spelled and "." not in spelled else spelled
    if type(value) is int and abs(value) <= LARGEST_WHOLE:
        return str(value)
    raise Unsendable(f"{value!r:.60} cannot be matched: give a finite number; whole numbers reach to 2^53.")


def text(value: object) -> str:
    r"""A text as the engine reads it.

    >>> print(text('a "b"'))
    "a \"b\""
    """
    if not isinstance(value, str):
        raise Unsendable(f"{value!r:.60} cannot be matched: a text or a choice was expected.")
    try:
        size = len(value.encode())
    except UnicodeEncodeError:
        raise Unsendable(f"{value!r:.60} cannot be matched: it holds half a character; type it anew.") from None
    if size > LONGEST_TEXT:
        raise Unsendable(f"A text of {size} bytes cannot be matched; shorten it to {LONGEST_TEXT} bytes at most.")
    return _quoted(value)


def name_hash(name: str) -> int:
    """The 32-bit hash (FNV-1a) by which alone the engine tells attributes apart.

    >>> name_hash("p_copfdimzn") == name_hash("p_sqytkesfn")
    True
    """
    state = 2166136261
    for byte in name.encode():
        state = ((state ^ byte) * 16777619) & 0xFFFFFFFF
    return state


class Spelling(dict[object, str]):
    """What is written of one attribute for each value: `,"attribute":value`, or nothing where it is unknown or void.

    Values known beforehand are looked up; all others are spelled, and refused with the fact's name if they cannot be.
    """

    def __init__(self, fact: str, head: str, spell: Callable[[object], str], beforehand: Sequence[object] = ()) -> None:
        super().__init__({each: head + spell(each) for each in beforehand})
        self[None] = self[VOID] = ""
        self.fact = fact
        self.head = head
        # Below it a float needs no look-up; nothing known beforehand means a number, not a place.
        self.plain_below = PLAIN_BELOW if spell is number and not beforehand else 0.0
        self._spell = spell

    def __missing__(self, value: object) -> str:
        try:
            return self.head + self._spell(value)
        except Unsendable as unsendable:
            raise Unsendable(f"{self.fact}: {unsendable}") from None


class Attributes:
    """The attributes that a set of conditions looks at, numbered as they are asked for.

    Facts get names of our own (`a0`, `a1`, ...), so that no fact can take a name that the engine reserves.
    """

    def __init__(self, domains: Mapping[str, Domain]) -> None:
        self._domains = domains
        self._numbers: dict[tuple[str, ...], int] = {}
        self.spellings: list[Spelling] = []

    def value(self, fact: str) -> int:
        """The attribute that holds a number, a place, a choice or a text."""
        domain = self._domains[fact]
        if domain.ordered:
            return self._number((fact,), number, [float(place) for place in range(len(domain.choices))])
        return self._number((fact,), text, tuple(domain.choices))

    def tick(self, fact: str, choice: str) -> int:
        """The attribute that says whether a choice of a tick list is ticked."""

        def ticked(value: object) -> str:
            if not isinstance(value, frozenset):
                raise Unsendable(f"{value!r:.60} cannot be matched: a list of ticks was expected.")
            return "true" if choice in value else "false"

        return self._number((fact, "ticked", choice), ticked)

    def answered(self, fact: str) -> int:
        """The attribute that is there when a tick list has been answered at all."""
        return self._number((fact, "answered"), lambda _value: "true")

    def void(self, fact: str) -> int:
        """The attribute that says whether a fact is void; absent while the fact is unanswered."""
        number = self._number((fact, "void"), lambda _value: "false")
        self.spellings[number][VOID] = self.spellings[number].head + "true"
        return number

    def _number(self, key: tuple[str, ...], spell: Callable[[object], str], known: Sequence[object] = ()) -> int:
        found = self._numbers.get(key)
        if found is None:
            found = self._numbers[key] = len(self.spellings)
            self.spellings.append(Spelling(key[0], f',"a{found}":', spell, known))
        return found

    def clash(self) -> bool:
        """Whether the engine would take two of the attributes for one."""
        names = [*RESERVED, *(f"a{number}" for number in range(len(self.spellings)))]
        return len({name_hash(name) for name in names}) < len(names)
