"""The plain operations that knowledge needs between two figures of the same kind."""

from __future__ import annotations

from advisor.formulas.formula import Direction, Formula, Input, OutOfRange


def total(a: float, b: float) -> float:
    """Sum of two figures: a + b, in their own unit. Range: any finite figures. Source: arithmetic.

    >>> total(80, 10)
    90
    """
    return a + b


def difference(a: float, b: float) -> float:
    """Difference of two figures: a − b, in their own unit. Range: any finite figures. Source: arithmetic.

    >>> difference(80, 10)
    70
    """
    return a - b


def product(a: float, b: float) -> float:
    """Product of two figures: a·b, in the product of their units. Range: any finite figures. Source: arithmetic.

    >>> product(8, 5)
    40
    """
    return a * b


def quotient(a: float, b: float) -> float:
    """Quotient of two figures: a/b, in the quotient of their units. Range: b other than 0. Source: arithmetic.

    >>> quotient(80, 10)
    8.0
    """
    if b == 0:
        raise OutOfRange("A quotient needs a divisor other than 0, but the divisor is 0.")
    return a / b


def lowest(a: float, b: float) -> float:
    """The lower of two figures: min(a, b), in their own unit. Range: any finite figures. Source: arithmetic.

    >>> lowest(80, 10)
    10
    """
    return min(a, b)


def highest(a: float, b: float) -> float:
    """The higher of two figures: max(a, b), in their own unit. Range: any finite figures. Source: arithmetic.

    >>> highest(80, 10)
    80
    """
    return max(a, b)


def _pair(first: Direction, second: Direction) -> tuple[Input, Input]:
    return (Input("a", "a", "", -1e9, 1e9, first, "first figure"),
            Input("b", "b", "", -1e9, 1e9, second, "second figure"))  # fmt: skip


_SUBJECT = "arithmetic"
_NOTE = "Both figures and the result are taken as plain numbers; their units are not looked at."

FORMULAS: tuple[Formula, ...] = (
    Formula("total", _SUBJECT, "Sum", total, _pair("up", "up"), "sum", "c", "", "c = a + b", _SUBJECT, "yes", _NOTE,
            unit_follows="a"),
    Formula(
        "difference", _SUBJECT, "Difference", difference, _pair("up", "down"), "difference", "c", "", "c = a − b",
        _SUBJECT, "yes", _NOTE, unit_follows="a",
    ),
    Formula(
        "product", _SUBJECT, "Product", product, _pair("none", "none"), "product", "c", "", "c = a·b", _SUBJECT, "yes",
        _NOTE + " The direction hangs on the sign of the other figure.",
    ),
    Formula(
        "quotient", _SUBJECT, "Quotient", quotient, _pair("none", "none"), "quotient", "c", "", "c = a/b", _SUBJECT,
        "yes", _NOTE + " The direction hangs on the signs of the figures.",
    ),
    Formula(
        "lowest", _SUBJECT, "The lower of two figures", lowest, _pair("up", "up"), "lower figure", "c", "",
        "c = min(a, b)", _SUBJECT, "yes", _NOTE, unit_follows="a",
    ),
    Formula(
        "highest", _SUBJECT, "The higher of two figures", highest, _pair("up", "up"), "higher figure", "c", "",
        "c = max(a, b)", _SUBJECT, "yes", _NOTE, unit_follows="a",
    ),
)
