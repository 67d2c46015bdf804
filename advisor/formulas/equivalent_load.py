"""Equivalent dynamic load of rolling bearings that carry radial and axial load together, ISO 281:2007."""

from __future__ import annotations

from bisect import bisect_left
from math import radians, tan
from typing import NamedTuple

from advisor.formulas.formula import Formula, Input, demand_positive, demand_within


class AxialRow(NamedTuple):
    """Limit ratio e and axial factor Y of a deep groove ball bearing for a relative axial load f₀·F_a/C₀r."""

    relative_load: float
    limit: float
    axial_factor: float


# ISO 281:2007, table 3, normal clearance; from memory.
DEEP_GROOVE: tuple[AxialRow, ...] = (
    AxialRow(0.172, 0.19, 2.30),
    AxialRow(0.345, 0.22, 1.99),
    AxialRow(0.689, 0.26, 1.71),
    AxialRow(1.03, 0.28, 1.55),
    AxialRow(1.38, 0.30, 1.45),
    AxialRow(2.07, 0.34, 1.31),
    AxialRow(3.45, 0.38, 1.15),
    AxialRow(5.17, 0.42, 1.04),
    AxialRow(6.89, 0.44, 1.00),
)


def equivalent_load_deep_groove(radial_n: float, axial_n: float, static_rating_n: float, load_f0: float) -> float:
    """Equivalent dynamic load P in N of a deep groove ball bearing, from radial, axial load and static rating in N.

    Equation: P = F_r where F_a/F_r ≤ e; else P = 0.56·F_r + Y·F_a, never below F_r; e and Y by f₀·F_a/C₀r.
    Range: f₀·F_a/C₀r up to 6.89, normal clearance. Source: ISO 281:2007, table 3, from memory.

    >>> round(equivalent_load_deep_groove(2000, 2000, 20_000, 13.8))
    4020
    """
    demand_positive(static_rating_n, "static load rating", "N")
    row = _row(load_f0 * axial_n / static_rating_n)
    if axial_n <= row.limit * radial_n:
        return radial_n
    return max(radial_n, 0.56 * radial_n + row.axial_factor * axial_n)


def equivalent_load_spherical_roller(radial_n: float, axial_n: float, contact_angle_deg: float) -> float:
    """Equivalent dynamic load P in N of a spherical roller bearing, from radial and axial load in N and angle in °.

    Equation: P = F_r + 0.45·cot α·F_a where F_a/F_r ≤ e; else P = 0.67·F_r + 0.67·cot α·F_a; e = 1.5·tan α.
    Range: contact angles above 0 to below 45°. Source: ISO 281:2007, radial roller bearings, from memory.

    >>> round(equivalent_load_spherical_roller(10_000, 1000, 10))
    12552
    """
    slope = _tangent(contact_angle_deg)
    if axial_n <= 1.5 * slope * radial_n:
        return radial_n + 0.45 * axial_n / slope
    return 0.67 * (radial_n + axial_n / slope)


def equivalent_load_tapered_roller(radial_n: float, axial_n: float, contact_angle_deg: float) -> float:
    """Equivalent dynamic load P in N of a single-row tapered roller bearing: radial and axial load in N, angle in °.

    Equation: P = F_r where F_a/F_r ≤ e; else P = 0.4·F_r + 0.4·cot α·F_a; e = 1.5·tan α.
    Range: contact angles above 0 to below 45°. Source: ISO 281:2007, radial roller bearings, from memory.

    >>> round(equivalent_load_tapered_roller(10_000, 5000, 15))
    11464
    """
    slope = _tangent(contact_angle_deg)
    if axial_n <= 1.5 * slope * radial_n:
        return radial_n
    return 0.4 * (radial_n + axial_n / slope)


def _row(relative_load: float) -> AxialRow:
    """The row of a relative axial load, straight between the printed ones; lighter loads take the first."""
    demand_within(relative_load, 0, DEEP_GROOVE[-1].relative_load, "relative axial load f₀·F_a/C₀r")
    place = bisect_left(DEEP_GROOVE, relative_load, key=lambda row: row.relative_load)
    if place == 0:
        return DEEP_GROOVE[0]
    low, high = DEEP_GROOVE[place - 1], DEEP_GROOVE[place]
    share = (relative_load - low.relative_load) / (high.relative_load - low.relative_load)
    return AxialRow(*(a + share * (b - a) for a, b in zip(low, high, strict=True)))


def _tangent(contact_angle_deg: float) -> float:
    if not contact_angle_deg > 0:
        demand_positive(contact_angle_deg, "contact angle", "°")
    demand_within(contact_angle_deg, 0, 45, "contact angle", "°")
    return tan(radians(contact_angle_deg))


_SUBJECT = "rating life"
_RADIAL = Input("radial_n", "F_r", "N", 1, 1e7, "up", "radial load")
_AXIAL = Input("axial_n", "F_a", "N", 0, 2e6, "up", "axial load")
_ANGLE = Input("contact_angle_deg", "α", "°", 2, 45, "down", "contact angle")
_RESULT = "equivalent dynamic load"
_BEARING_DATA = "X and Y from the data of the bearing come first, where they are given."

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "equivalent_load_deep_groove", _SUBJECT, "Equivalent load, deep groove ball bearing",
        equivalent_load_deep_groove,
        (_RADIAL, _AXIAL, Input("static_rating_n", "C₀r", "N", 1000, 1e8, "up", "static load rating"),
         Input("load_f0", "f₀", "", 12, 16, "down", "factor f₀ of the bearing, 14 where it is not known")),
        _RESULT, "P", "N",
        "P = F_r where F_a/F_r ≤ e; else P = max(F_r, 0.56·F_r + Y·F_a), e and Y of f₀·F_a/C₀r by the table",
        "ISO 281:2007, table 3", "from memory",
        f"Normal clearance, straight between the rows, the first row for lighter axial loads. {_BEARING_DATA} "
        "Where the branches meet, P may step by 0.6 %.",
    ),
    Formula(
        "equivalent_load_spherical_roller", _SUBJECT, "Equivalent load, spherical roller bearing",
        equivalent_load_spherical_roller, (_RADIAL, _AXIAL, _ANGLE), _RESULT, "P", "N",
        "P = F_r + 0.45·cot α·F_a where F_a/F_r ≤ 1.5·tan α; else P = 0.67·F_r + 0.67·cot α·F_a",
        "ISO 281:2007, radial roller bearings", "from memory", _BEARING_DATA,
    ),
    Formula(
        "equivalent_load_tapered_roller", _SUBJECT, "Equivalent load, single-row tapered roller bearing",
        equivalent_load_tapered_roller, (_RADIAL, _AXIAL, _ANGLE), _RESULT, "P", "N",
        "P = F_r where F_a/F_r ≤ 1.5·tan α; else P = 0.4·F_r + 0.4·cot α·F_a", "ISO 281:2007, radial roller bearings",
        "from memory", f"{_BEARING_DATA} The factor 0.4 belongs to tapered roller bearings only.",
    ),
)
