"""Viscosity over temperature, ASTM D341; with index, grades and density this is the subject of viscosity.

A line is the pair (intercept A, slope B) in log10 log10 Z = A − B·log10 T, with T in kelvin.
"""

from __future__ import annotations

from math import exp, log10
from typing import NamedTuple

from advisor.formulas.density import density_at, dynamic_viscosity, kinematic_viscosity
from advisor.formulas.formula import Formula, Input, OutOfRange, plain
from advisor.formulas.grades import (
    GRADES,
    grade_limits,
    grade_lower_limit,
    grade_midpoint,
    grade_of,
    grade_upper_limit,
    viscosity_grade,
)
from advisor.formulas.viscosity_index import (
    reported_viscosity_index,
    viscosity_100_from_index,
    viscosity_index,
    viscosity_of_index_0,
    viscosity_of_index_100,
)

__all__ = [
    "FORMULAS", "GRADES", "Line", "density_at", "dynamic_viscosity", "fit", "grade_limits", "grade_lower_limit",
    "grade_midpoint", "grade_of", "grade_upper_limit", "kinematic_viscosity", "reported_viscosity_index",
    "temperature_for", "viscosity_100_from_index", "viscosity_at", "viscosity_from_z", "viscosity_grade",
    "viscosity_index", "viscosity_of_index_0", "viscosity_of_index_100", "viscosity_on_line", "walther_intercept",
    "walther_slope", "walther_z",
]

KELVIN = 273.15
LOWEST, HIGHEST = 0.21, 2e7  # mm²/s, the range of Z in ASTM D341
_LOWEST_COMPUTED = 0.999 * LOWEST  # the published inverse misses by up to 0.03 % there
CLOSEST = 20.0  # K between the two points of a fit: closer together the slope is unstable


class Line(NamedTuple):
    """A viscosity-temperature line: log10 log10 Z = intercept − slope·log10 T."""

    intercept: float
    slope: float


def walther_z(viscosity: float) -> float:
    """Z, without unit, of a kinematic viscosity in mm²/s.

    Equation: Z = ν + 0.7 + exp(−1.47 − 1.84·ν − 0.51·ν²).
    Range: 0.21 to 20 000 000 mm²/s. Source: ASTM D341-09, main text.

    >>> round(walther_z(0.5), 6)
    1.280661
    """
    if not LOWEST <= viscosity <= HIGHEST:
        raise OutOfRange(
            f"The viscosity-temperature equation speaks of 0.21 to 20 000 000 mm²/s, "
            f"but the viscosity is {plain(viscosity)} mm²/s."
        )
    return viscosity + 0.7 + exp(-1.47 - 1.84 * viscosity - 0.51 * viscosity * viscosity)


def viscosity_from_z(z: float) -> float:
    """Kinematic viscosity in mm²/s of a Z, by the published inverse.

    Equation: ν = x − exp(−0.7487 − 3.295·x + 0.6119·x² − 0.3193·x³), x = Z − 0.7.
    Range: 0.21 to 20 000 000 mm²/s; misses the exact inverse by up to 0.03 % below 0.3 mm²/s.
    Source: ASTM D341-09, main text.

    >>> round(viscosity_from_z(68.7), 6)
    68.0
    """
    x = z - 0.7
    if x > 0:
        viscosity = x - exp(-0.7487 + x * (-3.295 + x * (0.6119 - 0.3193 * x)))
        if _LOWEST_COMPUTED <= viscosity <= HIGHEST:
            return viscosity
    raise OutOfRange(
        f"Z = {plain(z)} has no viscosity between 0.21 and 20 000 000 mm²/s, where the equation ends."
    )


def fit(t1: float, nu1: float, t2: float, nu2: float) -> Line:
    """The line through two points, temperatures in °C and kinematic viscosities in mm²/s.

    Equation: B = (W₁ − W₂)/(log10 T₂ − log10 T₁), A = W₁ + B·log10 T₁, W = log10 log10 Z, T = t + 273.15.
    Range: points at least 20 K apart, viscosity falling with temperature. Source: ASTM D341-09, main text.

    >>> round(fit(40, 68, 100, 8.6).slope, 3)
    3.652
    """
    if t1 > t2:
        t1, nu1, t2, nu2 = t2, nu2, t1, nu1
    if not (t2 - t1 >= CLOSEST and t1 > -KELVIN):
        raise OutOfRange(
            f"The two temperatures must be at least 20 K apart, but they are {plain(t1)} and {plain(t2)} °C."
        )
    w1, w2 = log10(log10(walther_z(nu1))), log10(log10(walther_z(nu2)))
    if not (nu1 > nu2 and w1 > w2):
        raise OutOfRange(
            f"The viscosity must fall with temperature, but it is {plain(nu1)} mm²/s at {plain(t1)} °C "
            f"and {plain(nu2)} mm²/s at {plain(t2)} °C."
        )
    slope = (w1 - w2) / (log10(t2 + KELVIN) - log10(t1 + KELVIN))
    return Line(w1 + slope * log10(t1 + KELVIN), slope)


def walther_intercept(viscosity_40: float, viscosity_100: float) -> float:
    """Intercept A of the line through the kinematic viscosities at 40 and 100 °C in mm²/s.

    Equation: A = W₄₀ + B·log10 313.15, W = log10 log10 Z, B the slope.
    Range: 0.21 to 20 000 000 mm²/s, falling. Source: ASTM D341-09, main text.

    >>> round(walther_intercept(68, 8.6), 2)
    9.38
    """
    return fit(40.0, viscosity_40, 100.0, viscosity_100).intercept


def walther_slope(viscosity_40: float, viscosity_100: float) -> float:
    """Slope B of the line through the kinematic viscosities at 40 and 100 °C in mm²/s.

    Equation: B = (W₄₀ − W₁₀₀)/(log10 373.15 − log10 313.15), W = log10 log10 Z.
    Range: 0.21 to 20 000 000 mm²/s, falling. Source: ASTM D341-09, main text.

    >>> round(walther_slope(68, 8.6), 3)
    3.652
    """
    return fit(40.0, viscosity_40, 100.0, viscosity_100).slope


def viscosity_on_line(intercept: float, slope: float, temperature_c: float) -> float:
    """Kinematic viscosity in mm²/s at a temperature in °C, on a line known by its intercept and slope.

    Equation: log10 log10 Z = A − B·log10(t + 273.15), then the published inverse of Z.
    Range: results of 0.21 to 20 000 000 mm²/s; an estimate below −20 °C and near the pour point.
    Source: ASTM D341-09, main text.

    >>> round(viscosity_on_line(*fit(40, 68, 100, 8.6), temperature_c=60), 2)
    28.49
    """
    # Called for every oil of every case: no objects and no further calls on the way.
    try:
        x: float = 10.0 ** 10.0 ** (intercept - slope * log10(temperature_c + 273.15)) - 0.7
        viscosity = x - exp(-0.7487 + x * (-3.295 + x * (0.6119 - 0.3193 * x)))
    except (OverflowError, ValueError):
        viscosity = float("nan")
    if _LOWEST_COMPUTED <= viscosity <= HIGHEST:
        return viscosity
    raise OutOfRange(
        f"At {plain(temperature_c)} °C the oil leaves 0.21 to 20 000 000 mm²/s, "
        "the range of the viscosity-temperature equation."
    )


def viscosity_at(viscosity_40: float, viscosity_100: float, temperature_c: float) -> float:
    """Kinematic viscosity in mm²/s at a temperature in °C, from those at 40 and 100 °C.

    Equation: the line through both points, log10 log10 Z = A − B·log10(t + 273.15).
    Range: results of 0.21 to 20 000 000 mm²/s; an estimate below −20 °C and near the pour point.
    Source: ASTM D341-09, main text.

    >>> round(viscosity_at(100, 11.2, 20), 2)
    339.24
    """
    intercept, slope = fit(40.0, viscosity_40, 100.0, viscosity_100)
    return viscosity_on_line(intercept, slope, temperature_c)


def temperature_for(viscosity_40: float, viscosity_100: float, viscosity: float) -> float:
    """Temperature in °C at which an oil has a kinematic viscosity in mm²/s.

    Equation: T = 10^((A − W)/B), t = T − 273.15, W = log10 log10 Z of the wanted viscosity.
    Range: 0.21 to 20 000 000 mm²/s. Source: ASTM D341-09, main text, inverted.

    >>> round(temperature_for(46, 6.8, 13), 2)
    74.42
    """
    intercept, slope = fit(40.0, viscosity_40, 100.0, viscosity_100)
    try:
        return float(10.0 ** ((intercept - log10(log10(walther_z(viscosity)))) / slope) - KELVIN)
    except OverflowError as fault:
        raise OutOfRange(
            f"The two viscosities are too close together to say where the oil has {plain(viscosity)} mm²/s."
        ) from fault


_SOURCE = "ASTM D341-09, main text"
_LINE = "log10 log10 Z = A − B·log10(t + 273.15)"
_THROUGH = "A and B of the line through ν₄₀ at 40 °C and ν₁₀₀ at 100 °C"
_INVERSE = "ν = x − exp(−0.7487 − 3.295·x + 0.6119·x² − 0.3193·x³), x = Z − 0.7"
_SLOPE = "B = (W(ν₄₀) − W(ν₁₀₀))/(log10 373.15 − log10 313.15)"
_FIT = "W(y) = log10 log10(y + 0.7 + exp(−1.47 − 1.84·y − 0.51·y²))"
_COLD = "Newtonian oils only. Below −20 °C, and near the pour point at any temperature, the figure is an estimate."
_TEMPERATURE = Input("temperature_c", "t", "°C", -20, 200, "down", "oil temperature")

_AT_40 = "kinematic viscosity at 40 °C"
_AT_100 = "kinematic viscosity at 100 °C"
_UP_40 = Input("viscosity_40", "ν₄₀", "mm²/s", LOWEST, HIGHEST, "up", _AT_40)
_DOWN_100 = Input("viscosity_100", "ν₁₀₀", "mm²/s", LOWEST, HIGHEST, "down", _AT_100)
# The line turns about the other point: beyond it, a rise here lowers the result.
_FREE_40 = Input("viscosity_40", "ν₄₀", "mm²/s", LOWEST, HIGHEST, "none", _AT_40)
_FREE_100 = Input("viscosity_100", "ν₁₀₀", "mm²/s", LOWEST, HIGHEST, "none", _AT_100)

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "walther_z", "viscosity", "Z of the viscosity-temperature equation", walther_z,
        (Input("viscosity", "ν", "mm²/s", LOWEST, HIGHEST, "up", "kinematic viscosity"),),
        "Z", "Z", "", "Z = ν + 0.7 + exp(−1.47 − 1.84·ν − 0.51·ν²)", _SOURCE, "yes",
    ),
    Formula(
        "viscosity_from_z", "viscosity", "Viscosity from Z", viscosity_from_z,
        (Input("z", "Z", "", 1.0629, HIGHEST, "up", "Z of the viscosity-temperature equation"),),
        "kinematic viscosity", "ν", "mm²/s", _INVERSE, _SOURCE, "yes",
        "A published fit of the inverse; it misses by up to 0.03 % below 0.3 mm²/s.",
    ),
    Formula(
        "walther_intercept", "viscosity", "Intercept of the viscosity-temperature line", walther_intercept,
        (_UP_40, _DOWN_100), "intercept", "A", "", f"A = W(ν₄₀) + B·log10 313.15, {_SLOPE}, {_FIT}",
        _SOURCE, "yes",
    ),
    Formula(
        "walther_slope", "viscosity", "Slope of the viscosity-temperature line", walther_slope,
        (_UP_40, _DOWN_100), "slope", "B", "", f"{_SLOPE}, {_FIT}", _SOURCE, "yes",
    ),
    Formula(
        "viscosity_on_line", "viscosity", "Viscosity at a temperature, from the line of the oil", viscosity_on_line,
        (Input("intercept", "A", "", 5, 14, "up", "intercept of the viscosity-temperature line"),
         Input("slope", "B", "", 1.5, 5, "down", "slope of the viscosity-temperature line"), _TEMPERATURE),
        "kinematic viscosity", "ν", "mm²/s", f"{_LINE}, {_INVERSE}", _SOURCE, "yes", _COLD,
    ),
    Formula(
        "viscosity_at", "viscosity", "Viscosity at a temperature", viscosity_at,
        (_FREE_40, _FREE_100, _TEMPERATURE), "kinematic viscosity", "ν", "mm²/s",
        f"{_LINE}, {_THROUGH}; {_INVERSE}", _SOURCE, "yes", _COLD,
    ),
    Formula(
        "temperature_for", "viscosity", "Temperature at which an oil has a viscosity", temperature_for,
        (_FREE_40, _FREE_100, Input("viscosity", "ν", "mm²/s", LOWEST, HIGHEST, "down", "viscosity wanted")),
        "temperature", "t", "°C", f"t = 10^((A − W(ν))/B) − 273.15, {_FIT}, {_THROUGH}", _SOURCE, "yes", _COLD,
    ),
)
