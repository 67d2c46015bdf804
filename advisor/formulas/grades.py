"""ISO viscosity grades of industrial oils, ISO 3448:1992."""

from __future__ import annotations

from typing import NamedTuple

from advisor.formulas.formula import Formula, Input, OutOfRange, plain


class Grade(NamedTuple):
    """A viscosity grade with its midpoint and limits at 40 °C, all in mm²/s."""

    number: int
    midpoint: float
    lowest: float
    highest: float


# ISO 3448:1992, table 1. The grades 2200 and 3200 are from memory; the others stand on several public pages.
GRADES: tuple[Grade, ...] = (
    Grade(2, 2.2, 1.98, 2.42),
    Grade(3, 3.2, 2.88, 3.52),
    Grade(5, 4.6, 4.14, 5.06),
    Grade(7, 6.8, 6.12, 7.48),
    Grade(10, 10, 9.00, 11.0),
    Grade(15, 15, 13.5, 16.5),
    Grade(22, 22, 19.8, 24.2),
    Grade(32, 32, 28.8, 35.2),
    Grade(46, 46, 41.4, 50.6),
    Grade(68, 68, 61.2, 74.8),
    Grade(100, 100, 90.0, 110),
    Grade(150, 150, 135, 165),
    Grade(220, 220, 198, 242),
    Grade(320, 320, 288, 352),
    Grade(460, 460, 414, 506),
    Grade(680, 680, 612, 748),
    Grade(1000, 1000, 900, 1100),
    Grade(1500, 1500, 1350, 1650),
    Grade(2200, 2200, 1980, 2420),
    Grade(3200, 3200, 2880, 3520),
)
_BY_NUMBER: dict[float, Grade] = {grade.number: grade for grade in GRADES}


def grade_midpoint(vg: float) -> float:
    """Midpoint viscosity at 40 °C, in mm²/s, of an ISO viscosity grade.

    Equation: table ISO 3448; for VG 10 and above the midpoint is the number of the grade.
    Range: the 20 grades VG 2 to VG 3200. Source: ISO 3448:1992, table 1.

    >>> grade_midpoint(46), grade_midpoint(7)
    (46, 6.8)
    """
    return _grade(vg).midpoint


def grade_limits(vg: float) -> tuple[float, float]:
    """Lowest and highest viscosity at 40 °C, in mm²/s, inside an ISO viscosity grade: midpoint ± 10 %.

    Range: the 20 grades VG 2 to VG 3200. Source: ISO 3448:1992, table 1.

    >>> grade_limits(46)
    (41.4, 50.6)
    """
    grade = _grade(vg)
    return grade.lowest, grade.highest


def grade_lower_limit(vg: float) -> float:
    """Lowest viscosity at 40 °C, in mm²/s, inside an ISO viscosity grade: 0.9 · midpoint.

    Range: the 20 grades VG 2 to VG 3200. Source: ISO 3448:1992, table 1.

    >>> grade_lower_limit(100)
    90.0
    """
    return _grade(vg).lowest


def grade_upper_limit(vg: float) -> float:
    """Highest viscosity at 40 °C, in mm²/s, inside an ISO viscosity grade: 1.1 · midpoint.

    Range: the 20 grades VG 2 to VG 3200. Source: ISO 3448:1992, table 1.

    >>> grade_upper_limit(100)
    110
    """
    return _grade(vg).highest


def grade_of(viscosity_40: float) -> int | None:
    """The ISO viscosity grade that holds a viscosity at 40 °C in mm²/s; None in the gaps between grades.

    Equation: lowest ≤ viscosity ≤ highest. Range: 1.98 to 3520 mm²/s. Source: ISO 3448:1992, table 1.

    >>> grade_of(45), grade_of(80)
    (46, None)
    """
    return next((each.number for each in GRADES if each.lowest <= viscosity_40 <= each.highest), None)


def viscosity_grade(viscosity_40: float) -> float:
    """The ISO viscosity grade of a viscosity at 40 °C in mm²/s; OutOfRange in the gaps, naming the neighbours.

    Equation: lowest ≤ viscosity ≤ highest. Range: 1.98 to 3520 mm²/s. Source: ISO 3448:1992, table 1.

    >>> viscosity_grade(66)
    68
    """
    number = grade_of(viscosity_40)
    if number is not None:
        return number
    below = [f"VG {each.number} ends at {plain(each.highest)}" for each in GRADES if each.highest < viscosity_40]
    above = [f"VG {each.number} begins at {plain(each.lowest)}" for each in GRADES if each.lowest > viscosity_40]
    neighbours = " and ".join(below[-1:] + above[:1]) or "the grades cover 1.98 to 3520"
    raise OutOfRange(f"{plain(viscosity_40)} mm²/s at 40 °C is in no ISO viscosity grade: {neighbours} mm²/s.")


def _grade(vg: float) -> Grade:
    if vg not in _BY_NUMBER:
        numbers = ", ".join(str(grade.number) for grade in GRADES)
        raise OutOfRange(f"{plain(vg)} is no ISO viscosity grade; the grades are {numbers}.")
    return _BY_NUMBER[vg]


_VG = Input("vg", "VG", "ISO VG", 2, 3200, "up", "viscosity grade, one of the 20 grades")
_NOTE = "The grades 2200 and 3200 are from memory; the others were read on several public pages."
_TABLE = "ISO 3448:1992, table 1"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "grade_midpoint", "viscosity", "Midpoint of an ISO viscosity grade", grade_midpoint, (_VG,),
        "midpoint viscosity at 40 °C", "ν₄₀", "mm²/s", "ν₄₀ = midpoint of the grade VG in the table", _TABLE, "yes",
        _NOTE + " The midpoints of VG 2, 3, 5 and 7 are 2.2, 3.2, 4.6 and 6.8.",
    ),
    Formula(
        "grade_lower_limit", "viscosity", "Lowest viscosity inside an ISO viscosity grade", grade_lower_limit, (_VG,),
        "lowest viscosity at 40 °C", "ν₄₀", "mm²/s", "ν₄₀ = 0.9 · midpoint of the grade VG", _TABLE, "yes", _NOTE,
    ),
    Formula(
        "grade_upper_limit", "viscosity", "Highest viscosity inside an ISO viscosity grade", grade_upper_limit, (_VG,),
        "highest viscosity at 40 °C", "ν₄₀", "mm²/s", "ν₄₀ = 1.1 · midpoint of the grade VG", _TABLE, "yes", _NOTE,
    ),
    Formula(
        "viscosity_grade", "viscosity", "ISO viscosity grade of an oil", viscosity_grade,
        (Input("viscosity_40", "ν₄₀", "mm²/s", 1.98, 3520, "up", "kinematic viscosity at 40 °C",
               tuple(limit for grade in GRADES for limit in (grade.lowest, grade.highest))),),
        "viscosity grade", "VG", "ISO VG", "VG with 0.9 · midpoint ≤ ν₄₀ ≤ 1.1 · midpoint", _TABLE, "yes",
        _NOTE + " There are gaps between the grades.",
    ),
)
