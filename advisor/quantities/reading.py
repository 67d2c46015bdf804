"""Read what people type as a quantity; what can be read in two ways is refused with a question, never guessed."""

import math
import re
from dataclasses import dataclass, field

from advisor.quantities.showing import show
from advisor.quantities.units import ALIKE, KINDS, SPELLINGS, nine_digits, unit_meant, units_for


class Unreadable(ValueError):
    """A text that is no quantity of the unit asked for; the message says what was seen and how to mend it."""


@dataclass(frozen=True, slots=True)
class Quantity:
    """A number in its canonical unit, with the text that it was read from and the unit in it, if it has one."""

    value: float
    unit: str
    typed: str
    typed_unit: str = field(default="", compare=False)


_NUMBER = re.compile(r"""
    (?P<sign>[-+]?)\ *
    (?: (?:(?P<whole>[0-9]+)\ +)?(?P<over>[1-9][0-9]?)/(?P<under>[1-9][0-9]?)(?![0-9.,])
    |   (?P<grouped>[1-9][0-9]{0,2}(?:(?:\ [0-9]{3})+|(?:'[0-9]{3})+|(?:\.[0-9]{3})+|(?:,[0-9]{3})+)(?![0-9]))
        (?:(?P<mark>[.,])(?P<part>[0-9]+)(?![0-9]))?
    |   (?P<plain>[0-9]+(?:[.,][0-9]+)?|[.,][0-9]+)
    )
    (?:[eE](?P<power>[-+]?[0-9]+))?
    """, re.VERBOSE)
_ANOTHER_NUMBER = re.compile(r"(?<![A-Za-z0-9°])[0-9]+(?!/[A-Za-z])")
_RANGE = re.compile(r"(?:\.\.+|\bto(?=[\s\d+-])|^\s*-|\s-|-(?=[0-9]{2}))\s*[-+]?[0-9]")
_GRADE = re.compile(r"(?:ISO[ -]*)?VG[ -]*(?=[0-9])", re.IGNORECASE)


def parse(text: str, unit: str, *, strict: bool = True) -> Quantity:
    """The quantity that `text` states, in the canonical `unit`; a bare number is in that unit already.

    Args:
        text: what was typed, such as `180 °F`, `1 450 rpm` or `1,5 kN`.
        unit: one of `quantities.UNITS`.
        strict: refuse `1.450`, which a person may mean as 1450; files write the dot for decimals only.

    Raises:
        Unreadable: the text is no such quantity, or could be read in two ways.
    """
    kind = KINDS[unit]
    plain = text.translate(ALIKE).strip()
    if unit == "ISO VG":
        plain = _GRADE.sub("", plain, count=1)
    found = _NUMBER.match(plain)
    if found is None:
        raise _no_number(text, plain, unit)
    rest = plain[found.end():].strip()
    used = SPELLINGS[unit].get(rest) or unit_meant(rest, unit)
    if used is None:
        raise _odd_rest(text, rest, unit)
    value = _value(found, text, strict=strict)
    if used is not kind.units[0]:
        value = nine_digits((value - used.zero) * used.factor)
    if not math.isfinite(value):
        raise Unreadable(f"{_quoted(text)} is too large a number. Write a smaller one.")
    if unit == "°C" and value < -273.15:
        raise Unreadable(f"{_quoted(text)} lies below absolute zero, -273.15 °C. Check the sign and the unit.")
    return Quantity(value, unit, text, rest)


def _value(found: re.Match[str], text: str, *, strict: bool) -> float:
    """The number of a match of `_NUMBER`, unless it can be read in two ways."""
    sign, whole, over, under, grouped, mark, part, plain, power = found.groups()
    exponent = f"e{power}" if power else ""
    if over:
        if whole and int(over) >= int(under):
            raise _two_numbers(text)
        number = float(whole or 0) + int(over) / int(under)
    elif plain:
        number = float(plain.replace(",", ".") + exponent)
    else:
        separator = grouped.lstrip("0123456789")[0]
        if separator == mark:
            raise _two_numbers(text)
        lone = separator in ".," and not mark and grouped.count(separator) == 1
        if lone and not power and (strict or separator == ","):
            raise _ambiguous(text, sign + grouped, separator)
        number = float(f"{grouped.replace(separator, '.' if lone else '')}.{part or 0}".removesuffix(".0") + exponent)
    return -number if sign == "-" else number


def _quoted(text: str) -> str:
    """The text as seen, printable and not too long."""
    seen = "".join(sign if sign.isprintable() else " " for sign in text).strip()
    return f"'{seen}'" if len(seen) <= 40 else f"'{seen[:37]}...'"


def _example(unit: str) -> str:
    """An answer of the right form."""
    return f"'{show(32, unit)}'"


def _known(unit: str) -> str:
    """The units that may be written, as the end of a message."""
    names = [name for name in units_for(unit) if name]
    return f"Known here: {', '.join(names)}." if names else "Write the number alone."


def _ambiguous(text: str, number: str, separator: str) -> Unreadable:
    """The refusal of a number whose mark may part thousands or decimals."""
    thousands, decimal = number.replace(separator, ""), number.replace(separator, ".")
    shortest = decimal.rstrip("0").rstrip(".")
    advice = shortest if shortest != decimal else f"{decimal}0"
    return Unreadable(
        f"{_quoted(text)} can be read in two ways. Is it {thousands} or {decimal}? Write {thousands} or {advice}."
    )


def _two_numbers(text: str) -> Unreadable:
    """The refusal of more than one number."""
    return Unreadable(f"{_quoted(text)} holds more than one number. Write one number and its unit.")


def _no_number(text: str, plain: str, unit: str) -> Unreadable:
    """The refusal of a text that does not begin with a number."""
    if not plain:
        return Unreadable(f"Nothing is written here. Write a number, such as {_example(unit)}.")
    if re.match(r"[-+]?\s*(?:nan|inf|infinity|∞)\b|[-+]?∞", plain, re.IGNORECASE):
        return Unreadable(f"{_quoted(text)} is not a number to work with. Write a number, such as {_example(unit)}.")
    if unit_meant(plain, unit):
        return Unreadable(f"{_quoted(text)} is a unit without a number. Write both, such as {_example(unit)}.")
    return Unreadable(f"{_quoted(text)} does not begin with a number. Write a number, such as {_example(unit)}.")


def _odd_rest(text: str, rest: str, unit: str) -> Unreadable:
    """The refusal of what follows the number."""
    if _RANGE.search(rest):
        return Unreadable(f"{_quoted(text)} looks like a range. Write one number, or as an answer two dots: 70..90.")
    if _ANOTHER_NUMBER.search(rest):
        return _two_numbers(text)
    for canonical, kind in KINDS.items():
        if SPELLINGS[canonical].get(rest) or unit_meant(rest, canonical):
            wanted = KINDS[unit].name
            return Unreadable(f"{_quoted(rest)} measures {kind.name}, but {wanted} is asked for. {_known(unit)}")
    return Unreadable(f"The unit {_quoted(rest)} is not known here. {_known(unit)}")
