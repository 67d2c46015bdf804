"""Viscosity grades of vehicle and gear oils beside ISO VG: SAE J300, SAE J306 and the lubricant numbers of AGMA."""

from __future__ import annotations

from math import inf
from typing import NamedTuple

from advisor.formulas.formula import Choice, Input, Lookup, Named, OutOfRange, demand_positive, plain


class SaeGrade(NamedTuple):
    """A grade by its kinematic viscosity at 100 °C in mm²/s: from `low` to below `below`."""

    number: str
    low: float
    below: float
    high_shear: str = ""
    """Least viscosity at 150 °C and high shear, in mPa·s."""


class WinterGrade(NamedTuple):
    """A winter grade: least viscosity at 100 °C in mm²/s, and what is allowed in the cold."""

    number: str
    low: float
    cold: str


# SAE J300:2015. Grade 12 is from memory. The table of 1999 begins grade 20 at 5.6 mm²/s and is still in circulation.
ENGINE_GRADES: tuple[SaeGrade, ...] = (
    SaeGrade("8", 4.0, 6.1, "1.7"),
    SaeGrade("12", 5.0, 7.1, "2.0"),
    SaeGrade("16", 6.1, 8.2, "2.3"),
    SaeGrade("20", 6.9, 9.3, "2.6"),
    SaeGrade("30", 9.3, 12.5, "2.9"),
    SaeGrade("40", 12.5, 16.3, "3.5 for 0W, 5W and 10W oils, else 3.7"),
    SaeGrade("50", 16.3, 21.9, "3.7"),
    SaeGrade("60", 21.9, 26.1, "3.7"),
)
_PUMPING = "pumping at most 60 000 mPa·s at"
ENGINE_WINTER_GRADES: tuple[WinterGrade, ...] = (
    WinterGrade("0W", 3.8, f"cranking at most 6200 mPa·s at −35 °C, {_PUMPING} −40 °C"),
    WinterGrade("5W", 3.8, f"cranking at most 6600 mPa·s at −30 °C, {_PUMPING} −35 °C"),
    WinterGrade("10W", 4.1, f"cranking at most 7000 mPa·s at −25 °C, {_PUMPING} −30 °C"),
    WinterGrade("15W", 5.6, f"cranking at most 7000 mPa·s at −20 °C, {_PUMPING} −25 °C"),
    WinterGrade("20W", 5.6, f"cranking at most 9500 mPa·s at −15 °C, {_PUMPING} −20 °C"),
    WinterGrade("25W", 9.3, f"cranking at most 13 000 mPa·s at −10 °C, {_PUMPING} −15 °C"),
)
# SAE J306:2019. The edition of 2005 has no 65 and 75, and 80 from 7.0 mm²/s.
GEAR_GRADES: tuple[SaeGrade, ...] = (
    SaeGrade("65", 3.8, 5.0),
    SaeGrade("70", 5.0, 6.5),
    SaeGrade("75", 6.5, 8.5),
    SaeGrade("80", 8.5, 11.0),
    SaeGrade("85", 11.0, 13.5),
    SaeGrade("90", 13.5, 18.5),
    SaeGrade("110", 18.5, 24.0),
    SaeGrade("140", 24.0, 32.5),
    SaeGrade("190", 32.5, 41.0),
    SaeGrade("250", 41.0, inf),
)
GEAR_WINTER_GRADES: tuple[WinterGrade, ...] = (
    WinterGrade("70W", 3.8, "at most 150 000 mPa·s at −55 °C"),
    WinterGrade("75W", 3.8, "at most 150 000 mPa·s at −40 °C"),
    WinterGrade("80W", 8.5, "at most 150 000 mPa·s at −26 °C"),
    WinterGrade("85W", 11.0, "at most 150 000 mPa·s at −12 °C"),
)
# AGMA 9005-D94: numbers that are ISO viscosity grades, and the thicker ones by their limits.
AGMA_GRADES: dict[str, int] = {
    "0": 32, "1": 46, "2": 68, "3": 100, "4": 150, "5": 220, "6": 320, "7": 460, "8": 680, "8A": 1000, "9": 1500,
}  # fmt: skip
AGMA_THICK: dict[str, str] = {
    "10": "2880 to 3520 mm²/s at 40 °C",
    "11": "4140 to 5060 mm²/s at 40 °C",
    "12": "6120 to 7480 mm²/s at 40 °C",
    "13": "190 to 220 mm²/s at 100 °C",
    "14R": "428.5 to 857 mm²/s at 100 °C",
    "15R": "857 to 1714 mm²/s at 100 °C",
}


def sae_j300_grades(viscosity_100: float) -> Named:
    """The SAE engine oil grades of a viscosity at 100 °C in mm²/s; the ranges of 8 to 20 overlap.

    Equation: lowest ≤ viscosity < limit. Range: 4.0 to below 26.1 mm²/s. Source: SAE J300:2015, table 1.

    >>> sae_j300_grades(6.5).names
    ('12', '16')
    """
    return _grades(viscosity_100, ENGINE_GRADES, "SAE J300:2015")


def sae_j306_grades(viscosity_100: float) -> Named:
    """The SAE gear oil grade of a viscosity at 100 °C in mm²/s.

    Equation: lowest ≤ viscosity < limit. Range: 3.8 mm²/s and above. Source: SAE J306:2019, table 1.

    >>> sae_j306_grades(19.5).names
    ('110',)
    """
    return _grades(viscosity_100, GEAR_GRADES, "SAE J306:2019")


def sae_j300_winter(grade: str) -> Named:
    """What a winter grade of engine oils promises. Range: 0W to 25W. Source: SAE J300:2015, table 1.

    >>> sae_j300_winter("10W").text
    '10W: at least 4.1 mm²/s at 100 °C, cranking at most 7000 mPa·s at −25 °C, pumping at most 60 000 mPa·s at −30 °C'
    """
    return _winter(grade, ENGINE_WINTER_GRADES)


def sae_j306_winter(grade: str) -> Named:
    """What a winter grade of gear oils promises. Range: 70W to 85W. Source: SAE J306:2019, table 1.

    >>> sae_j306_winter("75W").text
    '75W: at least 3.8 mm²/s at 100 °C, at most 150 000 mPa·s at −40 °C'
    """
    return _winter(grade, GEAR_WINTER_GRADES)


def vg_of_agma(number: str) -> Named:
    """The ISO viscosity grade of an AGMA lubricant number, or its limits where it is thicker than VG 1500.

    Range: 0 to 15R; endings for EP, synthetic and compounded oils are left off. Source: AGMA 9005-D94.

    >>> vg_of_agma("8A").text, vg_of_agma("11").text
    ('ISO VG 1000', '4140 to 5060 mm²/s at 40 °C')
    """
    grade = AGMA_GRADES.get(number)
    if grade is not None:
        return Named((str(grade),), f"ISO VG {grade}")
    if number in AGMA_THICK:
        return Named((), AGMA_THICK[number])
    raise OutOfRange(f"'{number}' is no AGMA lubricant number; they are {', '.join([*AGMA_GRADES, *AGMA_THICK])}.")


def agma_of_vg(vg: float) -> Named:
    """The AGMA lubricant number of an ISO viscosity grade. Range: VG 32 to 1500. Source: AGMA 9005-D94.

    >>> agma_of_vg(220).names
    ('5',)
    """
    numbers = tuple(number for number, grade in AGMA_GRADES.items() if grade == vg)
    return Named(numbers, numbers[0] if numbers else f"no AGMA lubricant number for ISO VG {plain(vg)}")


def _grades(viscosity_100: float, grades: tuple[SaeGrade, ...], edition: str) -> Named:
    demand_positive(viscosity_100, "kinematic viscosity at 100 °C", "mm²/s")
    found = [grade for grade in grades if grade.low <= viscosity_100 < grade.below]
    told = [f"{each.number}{f' (high shear at least {each.high_shear})' if each.high_shear else ''}" for each in found]
    return Named(tuple(each.number for each in found), " or ".join(told) or f"no grade of {edition}")


def _winter(grade: str, grades: tuple[WinterGrade, ...]) -> Named:
    for each in grades:
        if each.number == grade:
            return Named((grade,), f"{grade}: at least {plain(each.low)} mm²/s at 100 °C, {each.cold}")
    raise OutOfRange(f"'{grade}' is no such winter grade; they are {', '.join(each.number for each in grades)}.")


_SUBJECT = "grade systems"
_RULE = "grade with lowest ≤ ν₁₀₀ < limit in the table"
_J300, _J306 = "SAE J300:2015, table 1", "SAE J306:2019, table 1"
_J300_NOTE = (
    "The ranges of the grades 8 to 20 overlap: high shear viscosity, in mPa·s at 150 °C, then decides. Grade 12 is "
    "from memory. The table of 1999, with grade 20 from 5.6 mm²/s, is another one."
)
_J306_NOTE = "The edition of 2005 differs: no 65 and 75, grade 80 from 7.0 mm²/s."
_AGMA = "AGMA 9005-D94, table of lubricant numbers"
_AGMA_NOTE = (
    "Since AGMA 9005-E02 the ISO viscosity grade is used itself. Endings tell EP, S (synthetic) and Comp (3 to 10 % "
    "fatty oil); R is a residual compound."
)


def _limits(grades: tuple[SaeGrade, ...]) -> tuple[float, ...]:
    return tuple(sorted({limit for grade in grades for limit in (grade.low, grade.below) if limit < inf}))


LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "sae_j300_grades", _SUBJECT, "SAE engine oil grades of a viscosity", sae_j300_grades,
        (Input("viscosity_100", "ν₁₀₀", "mm²/s", 4.0, 26.1, "up", "kinematic viscosity at 100 °C",
               _limits(ENGINE_GRADES)),),
        "SAE grade", "SAE", "", f"SAE = {_RULE}", _J300, "yes", _J300_NOTE,
    ),
    Lookup(
        "sae_j300_winter", _SUBJECT, "Limits of an SAE winter grade of engine oils", sae_j300_winter,
        (Choice("grade", "W", tuple(each.number for each in ENGINE_WINTER_GRADES), "winter grade"),),
        "limits of the grade", "limits", "", "limits = row of W in the table", _J300, "yes",
    ),
    Lookup(
        "sae_j306_grades", _SUBJECT, "SAE gear oil grade of a viscosity", sae_j306_grades,
        (Input("viscosity_100", "ν₁₀₀", "mm²/s", 3.8, 500, "up", "kinematic viscosity at 100 °C",
               _limits(GEAR_GRADES)),),
        "SAE grade", "SAE", "", f"SAE = {_RULE}", _J306, "yes", _J306_NOTE,
    ),
    Lookup(
        "sae_j306_winter", _SUBJECT, "Limits of an SAE winter grade of gear oils", sae_j306_winter,
        (Choice("grade", "W", tuple(each.number for each in GEAR_WINTER_GRADES), "winter grade"),),
        "limits of the grade", "limits", "", "limits = row of W in the table", _J306, "yes", _J306_NOTE,
    ),
    Lookup(
        "vg_of_agma", _SUBJECT, "ISO viscosity grade of an AGMA number", vg_of_agma,
        (Choice("number", "AGMA", (*AGMA_GRADES, *AGMA_THICK), "AGMA lubricant number"),),
        "viscosity grade", "VG", "", "VG = row of AGMA in the table", _AGMA, "yes", _AGMA_NOTE,
    ),
    Lookup(
        "agma_of_vg", _SUBJECT, "AGMA number of an ISO viscosity grade", agma_of_vg,
        (Input("vg", "VG", "ISO VG", 32, 1500, "up", "viscosity grade"),),
        "AGMA lubricant number", "AGMA", "", "AGMA = row of VG in the table", _AGMA, "yes", _AGMA_NOTE,
    ),
)
