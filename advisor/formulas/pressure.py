"""Viscosity under pressure, and what the pressure-viscosity coefficient of an oil may be."""

from __future__ import annotations

from math import exp, log, log10
from typing import NamedTuple

from advisor.formulas.formula import (
    Choice,
    Formula,
    Input,
    Lookup,
    Named,
    OutOfRange,
    demand_positive,
    demand_within,
    plain,
)

_ROELANDS = 9.67  # ln of the viscosity in Pa·s to which all oils converge, with the sign turned; Roelands 1966
_PER_PASCAL = 5.1e-9  # 1/Pa; Roelands 1966
_THINNEST = 1000.0 * exp(-_ROELANDS)  # mPa·s


class Power(NamedTuple):
    """Factor and exponent of α = factor·viscosity^exponent for an oil family."""

    factor: float
    exponent: float


# Gold and others 2001: secant to 0.2 GPa, kinematic viscosity in mm²/s, factor in 1e-9 1/Pa. From memory.
GOLD: dict[str, Power] = {
    "mineral": Power(9.904, 0.1390),
    "pao": Power(7.382, 0.1335),
    "ester": Power(6.605, 0.1360),
    "pag": Power(5.489, 0.1485),
}
# AGMA 925-A03: dynamic viscosity in mPa·s, factor in mm²/N. From memory.
AGMA_925: dict[str, Power] = {
    "mineral": Power(0.010471, 0.1348),
    "pao": Power(0.010326, 0.0507),
    "pag": Power(0.0047, 0.1572),
}
# Working values at 40 to 80 °C in 1/Pa; common practice.
USUAL_ALPHA: dict[str, float] = {"mineral": 2.0e-8, "naphthenic": 2.5e-8, "pao": 1.5e-8, "ester": 1.3e-8, "pag": 1.1e-8}


def viscosity_barus(dynamic_viscosity: float, alpha: float, pressure_mpa: float) -> float:
    """Dynamic viscosity in mPa·s under pressure, from that at ambient pressure in mPa·s, α in 1/Pa, pressure in MPa.

    Equation: η = η₀·exp(α·p). Range: to 500 MPa; above it the figure is far too high. Source: Barus 1893, textbooks.

    >>> round(viscosity_barus(100, 2e-8, 500))
    2202647
    """
    demand_positive(dynamic_viscosity, "dynamic viscosity", "mPa·s")
    return dynamic_viscosity * exp(alpha * pressure_mpa * 1e6)


def viscosity_roelands(dynamic_viscosity: float, roelands_z: float, pressure_mpa: float) -> float:
    """Dynamic viscosity in mPa·s under pressure, from that at ambient pressure in mPa·s, Z and the pressure in MPa.

    Equation: η = η₀·exp((ln η₀ + 9.67)·((1 + 5.1·10⁻⁹·p)^Z − 1)), η₀ in Pa·s and p in Pa inside the exponent.
    Range: to about 1000 MPa. Source: Roelands 1966.

    >>> round(viscosity_roelands(100, 0.6, 500) / 1000, 1)
    439.8
    """
    _demand_liquid(dynamic_viscosity)
    demand_within(pressure_mpa, 0, 1e5, "pressure", "MPa")
    swell = (1.0 + _PER_PASCAL * pressure_mpa * 1e6) ** roelands_z - 1.0
    return float(dynamic_viscosity * exp((log(dynamic_viscosity / 1000.0) + _ROELANDS) * swell))


def roelands_z(dynamic_viscosity: float, alpha: float) -> float:
    """Exponent Z of the Roelands equation, without unit, from the dynamic viscosity in mPa·s and α in 1/Pa.

    Equation: Z = α/(5.1·10⁻⁹·(ln η₀ + 9.67)), η₀ in Pa·s: both equations rise alike at ambient pressure.
    Range: thicker than 0.0631 mPa·s. Source: Roelands 1966.

    >>> round(roelands_z(100, 2e-8), 4)
    0.5323
    """
    _demand_liquid(dynamic_viscosity)
    return alpha / (_PER_PASCAL * (log(dynamic_viscosity / 1000.0) + _ROELANDS))


def alpha_wooster(dynamic_viscosity: float) -> float:
    """Estimate of the pressure-viscosity coefficient in 1/Pa, from the dynamic viscosity in mPa·s.

    Equation: α = (0.6 + 0.965·log10 η)·10⁻⁸. Range: mineral oils of 1 mPa·s and above. Source: Wooster, from memory.

    >>> f"{alpha_wooster(153):.3g}"
    '2.71e-08'
    """
    demand_positive(dynamic_viscosity, "dynamic viscosity", "mPa·s")
    return _plausible((0.6 + 0.965 * log10(dynamic_viscosity)) * 1e-8)


def alpha_so_klaus(viscosity: float, slope: float, density: float) -> float:
    """Estimate of the pressure-viscosity coefficient in 1/Pa: viscosity in mm²/s, slope B, density in kg/m³.

    Equation: α = (1.216 + 4.143·g^3.0627 + 2.848·10⁻⁴·B^5.1903·g^1.5976 − 3.999·g^3.0975·(ρ/1000)^0.1162)·10⁻⁸,
    g = log10 ν, B the slope of the viscosity-temperature line.
    Range: 1 mm²/s and above, results above 0. Source: So and Klaus 1980, from memory.

    >>> f"{alpha_so_klaus(68, 3.6, 870):.3g}"
    '2.59e-08'
    """
    demand_within(viscosity, 1, 1e6, "viscosity", "mm²/s")
    demand_positive(slope, "slope of the viscosity-temperature line")
    demand_positive(density, "density", "kg/m³")
    g = log10(viscosity)
    tenths = (
        1.216 + 4.143 * g**3.0627 + 2.848e-4 * slope**5.1903 * g**1.5976
        - 3.999 * g**3.0975 * (density / 1000.0) ** 0.1162
    )  # fmt: skip
    return _plausible(float(tenths) * 1e-8)


def alpha_gold(viscosity: float, factor: float, exponent: float) -> float:
    """Estimate of the pressure-viscosity coefficient in 1/Pa, from the viscosity in mm²/s and the oil family.

    Equation: α = s·ν^t·10⁻⁹, s and t of the family. Range: secant to 0.2 GPa.
    Source: Gold and others 2001, from memory.

    >>> f"{alpha_gold(68, *GOLD['mineral']):.3g}"
    '1.78e-08'
    """
    demand_positive(viscosity, "viscosity", "mm²/s")
    return float(factor * viscosity**exponent * 1e-9)


def alpha_agma_925(dynamic_viscosity: float, factor: float, exponent: float) -> float:
    """Estimate of the pressure-viscosity coefficient in 1/Pa, from the dynamic viscosity in mPa·s and the oil family.

    Equation: α = k·η^s·10⁻⁶, k and s of the family. Range: gear oils. Source: AGMA 925-A03, from memory.

    >>> f"{alpha_agma_925(13.62, *AGMA_925['pao']):.3g}"
    '1.18e-08'
    """
    demand_positive(dynamic_viscosity, "dynamic viscosity", "mPa·s")
    return float(factor * dynamic_viscosity**exponent * 1e-6)


def alpha_by_family(family: str, viscosity: float, density: float) -> Named:
    """The estimates of α for an oil family side by side, from the viscosity in mm²/s and the density in kg/m³.

    Range: the families mineral, naphthenic, pao, ester and pag. Source: the estimates named in the answer.

    >>> alpha_by_family("mineral", 68, 870).text
    'Gold 1.78e-08, AGMA 925 1.81e-08, Wooster 2.31e-08, usual 2e-08 1/Pa'
    """
    demand_positive(density, "density", "kg/m³")
    if family not in USUAL_ALPHA:
        raise OutOfRange(f"'{family}' is no oil family here; they are {', '.join(USUAL_ALPHA)}.")
    dynamic = viscosity * density / 1000.0
    found: list[tuple[str, float]] = []
    if family in GOLD:
        found.append(("Gold", alpha_gold(viscosity, *GOLD[family])))
    if family in AGMA_925:
        found.append(("AGMA 925", alpha_agma_925(dynamic, *AGMA_925[family])))
    if family == "mineral":
        found.append(("Wooster", alpha_wooster(dynamic)))
    found.append(("usual", USUAL_ALPHA[family]))
    return Named(
        tuple(f"{value:.3g}" for _, value in found), ", ".join(f"{who} {value:.3g}" for who, value in found) + " 1/Pa"
    )


def _demand_liquid(dynamic_viscosity: float) -> None:
    demand_positive(dynamic_viscosity, "dynamic viscosity", "mPa·s")
    if dynamic_viscosity <= _THINNEST:
        raise OutOfRange(
            "The Roelands equation speaks of liquids thicker than 0.0631 mPa·s, but the dynamic viscosity is "
            f"{plain(dynamic_viscosity)} mPa·s."
        )


def _plausible(alpha: float) -> float:
    if not alpha > 0:
        raise OutOfRange(
            f"The estimate of the pressure-viscosity coefficient must be above 0, but here it gives {alpha:.3g} 1/Pa."
        )
    return alpha


_SUBJECT = "viscosity under pressure"
_DISAGREE = (
    "Estimates of α differ by up to 45 % for one oil (VG 68 at 40 °C: 1.78 Gold, 1.81 AGMA 925, 2.3 Wooster, "
    "2.59 So and Klaus, in 1e-8 1/Pa). A film goes with the root of α, so that 10 to 20 % remain there."
)
_ETA = Input("dynamic_viscosity", "η₀", "mPa·s", 0.5, 100_000, "up", "dynamic viscosity at ambient pressure")
_ALPHA = Input("alpha", "α", "1/Pa", 5e-9, 5e-8, "up", "pressure-viscosity coefficient")

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "viscosity_barus", _SUBJECT, "Viscosity under pressure, exponential", viscosity_barus,
        (_ETA, _ALPHA, Input("pressure_mpa", "p", "MPa", 0, 500, "up", "pressure")),
        "dynamic viscosity under pressure", "η", "mPa·s", "η = η₀·exp(α·p·10⁶)",
        "Barus 1893, textbooks, no clause", "from memory", "Too high above 300 to 500 MPa: the Roelands equation then.",
    ),
    Formula(
        "viscosity_roelands", _SUBJECT, "Viscosity under pressure, Roelands", viscosity_roelands,
        (_ETA, Input("roelands_z", "Z", "", 0.2, 1, "up", "exponent of the oil"),
         Input("pressure_mpa", "p", "MPa", 0, 1000, "up", "pressure")),
        "dynamic viscosity under pressure", "η", "mPa·s",
        "η = η₀·exp((ln(η₀/1000) + 9.67)·((1 + 0.0051·p)^Z − 1))",
        "Roelands 1966, constants in textbooks, no clause", "yes", "The range of Z and pressure is from memory.",
    ),
    Formula(
        "roelands_z", _SUBJECT, "Exponent of the Roelands equation", roelands_z,
        (Input("dynamic_viscosity", "η₀", "mPa·s", 0.5, 100_000, "down", "dynamic viscosity at ambient pressure"),
         _ALPHA),
        "exponent", "Z", "", "Z = α/(5.1·10⁻⁹·(ln(η₀/1000) + 9.67))",
        "Roelands 1966, constants in textbooks, no clause", "yes",
    ),
    Formula(
        "alpha_wooster", _SUBJECT, "Pressure-viscosity coefficient after Wooster", alpha_wooster,
        (Input("dynamic_viscosity", "η", "mPa·s", 1, 10_000, "up", "dynamic viscosity"),),
        "pressure-viscosity coefficient", "α", "1/Pa", "α = (0.6 + 0.965·log10 η)·10⁻⁸", "Wooster, no clause",
        "from memory", f"Mineral oils. {_DISAGREE}",
    ),
    Formula(
        "alpha_so_klaus", _SUBJECT, "Pressure-viscosity coefficient after So and Klaus", alpha_so_klaus,
        # Two large terms of opposite sign nearly cancel: the figure need not rise with the viscosity.
        (Input("viscosity", "ν", "mm²/s", 2, 1000, "none", "kinematic viscosity"),
         Input("slope", "B", "", 2.5, 4.5, "up", "slope of the viscosity-temperature line"),
         Input("density", "ρ", "kg/m³", 750, 1000, "down", "density at the temperature")),
        "pressure-viscosity coefficient", "α", "1/Pa",
        "α = (1.216 + 4.143·g^3.0627 + 2.848·10⁻⁴·B^5.1903·g^1.5976 − 3.999·g^3.0975·(ρ/1000)^0.1162)·10⁻⁸, "
        "g = log10 ν",
        "So and Klaus 1980, no clause", "from memory", _DISAGREE,
    ),
    Formula(
        "alpha_gold", _SUBJECT, "Pressure-viscosity coefficient after Gold", alpha_gold,
        (Input("viscosity", "ν", "mm²/s", 1, 10_000, "up", "kinematic viscosity"),
         Input("factor", "s", "", 4, 11, "up", "factor of the oil family"),
         Input("exponent", "t", "", 0.1, 0.2, "up", "exponent of the oil family")),
        "pressure-viscosity coefficient", "α", "1/Pa", "α = s·ν^t·10⁻⁹", "Gold and others 2001, no clause",
        "from memory", f"Secant to 0.2 GPa. Mineral 9.904 and 0.1390, PAO 7.382 and 0.1335, ester 6.605 and 0.1360, "
        f"PAG 5.489 and 0.1485. {_DISAGREE}",
    ),
    Formula(
        "alpha_agma_925", _SUBJECT, "Pressure-viscosity coefficient after AGMA 925", alpha_agma_925,
        (Input("dynamic_viscosity", "η", "mPa·s", 1, 10_000, "up", "dynamic viscosity"),
         Input("factor", "k", "", 0.004, 0.012, "up", "factor of the oil family"),
         Input("exponent", "s", "", 0.04, 0.2, "up", "exponent of the oil family")),
        "pressure-viscosity coefficient", "α", "1/Pa", "α = k·η^s·10⁻⁶", "AGMA 925-A03, no clause", "from memory",
        f"Mineral 0.010471 and 0.1348, PAO 0.010326 and 0.0507, PAG 0.0047 and 0.1572. {_DISAGREE}",
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "alpha_by_family", _SUBJECT, "Pressure-viscosity coefficients of an oil family, side by side", alpha_by_family,
        (Choice("family", "F", tuple(USUAL_ALPHA), "oil family"),
         Input("viscosity", "ν", "mm²/s", 2, 10_000, "up", "kinematic viscosity"),
         Input("density", "ρ", "kg/m³", 750, 1100, "up", "density at the temperature")),
        "pressure-viscosity coefficients", "α", "", "α = the estimates of F at ν and ν·ρ",
        "Gold and others 2001; AGMA 925-A03; Wooster; working values of common practice", "from memory",
        f"Use one of them throughout a comparison. {_DISAGREE}",
    ),
)
