"""Consistency of greases: NLGI grades by worked penetration, with the gaps between them."""

from __future__ import annotations

from itertools import pairwise
from typing import NamedTuple

from advisor.formulas.formula import Choice, Input, Lookup, Named, OutOfRange, demand_positive


class NlgiGrade(NamedTuple):
    """A consistency grade with its limits of worked penetration in tenths of a millimetre."""

    number: str
    lowest: float
    highest: float


# NLGI, ISO 2137, ASTM D217, DIN 51818: worked 60 strokes, 25 °C. Fifteen units between neighbours belong to no grade.
NLGI_GRADES: tuple[NlgiGrade, ...] = (
    NlgiGrade("000", 445, 475),
    NlgiGrade("00", 400, 430),
    NlgiGrade("0", 355, 385),
    NlgiGrade("1", 310, 340),
    NlgiGrade("2", 265, 295),
    NlgiGrade("3", 220, 250),
    NlgiGrade("4", 175, 205),
    NlgiGrade("5", 130, 160),
    NlgiGrade("6", 85, 115),
)


def nlgi_grade(penetration: float) -> Named:
    """The NLGI grade of a worked penetration in tenths of a millimetre; no grade in the gaps, naming the neighbours.

    Equation: lowest ≤ penetration ≤ highest. Range: 85 to 475. Source: ISO 2137 and ASTM D217 with the NLGI table.

    >>> nlgi_grade(280).names, nlgi_grade(300).text
    (('2',), 'between 1 and 2')
    """
    demand_positive(penetration, "worked penetration")
    for each in NLGI_GRADES:
        if each.lowest <= penetration <= each.highest:
            return Named((each.number,), f"NLGI {each.number}")
    for softer, stiffer in pairwise(NLGI_GRADES):
        if stiffer.highest < penetration < softer.lowest:
            return Named((), f"between {softer.number} and {stiffer.number}")
    return Named((), "softer than NLGI 000" if penetration > NLGI_GRADES[0].highest else "stiffer than NLGI 6")


def nlgi_penetration(grade: str) -> Named:
    """The limits of worked penetration, in tenths of a millimetre, of an NLGI grade.

    Range: 000 to 6. Source: ISO 2137 and ASTM D217 with the NLGI table.

    >>> nlgi_penetration("2").text
    '265 to 295'
    """
    lowest, highest = penetration_limits(grade)
    return Named((f"{lowest:g}", f"{highest:g}"), f"{lowest:g} to {highest:g}")


def penetration_limits(grade: str) -> tuple[float, float]:
    """Lowest and highest worked penetration, in tenths of a millimetre, of an NLGI grade.

    >>> penetration_limits("00")
    (400, 430)
    """
    for each in NLGI_GRADES:
        if each.number == grade:
            return each.lowest, each.highest
    raise OutOfRange(f"'{grade}' is no NLGI grade; they are {', '.join(each.number for each in NLGI_GRADES)}.")


_SUBJECT = "grade systems"
_SOURCE = "NLGI table, ISO 2137, ASTM D217, DIN 51818"
_NOTE = "Worked 60 strokes, 25 °C, in tenths of a millimetre. Fifteen units between two grades belong to neither."

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "nlgi_grade", _SUBJECT, "NLGI grade of a worked penetration", nlgi_grade,
        (Input("penetration", "p", "", 85, 475, "down", "worked penetration in tenths of a millimetre",
               tuple(limit for grade in NLGI_GRADES for limit in (grade.lowest, grade.highest))),),
        "consistency grade", "NLGI", "", "NLGI = grade with lowest ≤ p ≤ highest in the table", _SOURCE, "yes", _NOTE,
    ),
    Lookup(
        "nlgi_penetration", _SUBJECT, "Worked penetration of an NLGI grade", nlgi_penetration,
        (Choice("grade", "NLGI", tuple(grade.number for grade in NLGI_GRADES), "consistency grade"),),
        "worked penetration in tenths of a millimetre", "p", "", "p = row of NLGI in the table", _SOURCE, "yes", _NOTE,
    ),
)
