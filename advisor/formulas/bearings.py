"""Rolling bearings: size, speed, the viscosity they ask for, and the film an oil gives them."""

from __future__ import annotations

from math import inf

from advisor.formulas.formula import Formula, Input, OutOfRange, demand_positive, plain
from advisor.formulas.grades import grade_midpoint
from advisor.formulas.viscosity import viscosity_at, viscosity_on_line
from advisor.formulas.viscosity_index import viscosity_100_from_index


def mean_diameter(bore_mm: float, outside_mm: float) -> float:
    """Mean diameter of a bearing in mm, from bore and outside diameter in mm.

    Equation: d_m = (d + D)/2, used for the pitch diameter where that is not known.
    Range: bore below outside diameter. Source: definition in common use.

    >>> mean_diameter(50, 90)
    70.0
    """
    demand_positive(bore_mm, "bore", "mm")
    if not bore_mm < outside_mm < inf:
        raise OutOfRange(
            f"The outside diameter must be larger than the bore, but it is {plain(outside_mm)} mm "
            f"and the bore is {plain(bore_mm)} mm."
        )
    return (bore_mm + outside_mm) / 2.0


def speed_factor(speed_rpm: float, mean_diameter_mm: float) -> float:
    """Speed factor of a bearing in mm/min, from the speed in 1/min and the mean diameter in mm.

    Equation: A = n·d_m. Range: any speed. Source: definition in common use.

    >>> speed_factor(1500, 70)
    105000
    """
    return speed_rpm * mean_diameter_mm


def reference_viscosity(speed_rpm: float, mean_diameter_mm: float) -> float:
    """Reference viscosity in mm²/s that a bearing asks for, speed in 1/min and mean diameter in mm.

    Equation: ν₁ = 45000·n^−0.83·d_m^−0.5 where n < 1000; ν₁ = 4500·n^−0.5·d_m^−0.5 where n ≥ 1000.
    At n = 1000 the first branch lies 2.3 % above the second.
    Range: turning bearings, n > 0. Source: ISO 281:2007, 9.3.3.4, equations (28) and (29).

    >>> round(reference_viscosity(1500, 70), 2)
    13.89
    """
    demand_positive(speed_rpm, "speed of a bearing with a reference viscosity", "1/min")
    demand_positive(mean_diameter_mm, "mean diameter", "mm")
    if speed_rpm < 1000:
        return float(45000.0 * speed_rpm**-0.83 * mean_diameter_mm**-0.5)
    return float(4500.0 * speed_rpm**-0.5 * mean_diameter_mm**-0.5)


def viscosity_ratio(viscosity: float, reference_viscosity: float) -> float:
    """Viscosity ratio κ, without unit, of the oil viscosity at running temperature and the reference, both in mm²/s.

    Equation: κ = ν/ν₁; for grease ν belongs to the base oil.
    Range: 0.1 to 4 is covered by the standard; more than 4 counts as 4 in a life calculation.
    Source: ISO 281:2007, 9.3.3.4, equation (27).

    >>> viscosity_ratio(30, 15)
    2.0
    """
    if not 0 < reference_viscosity < inf:
        demand_positive(reference_viscosity, "reference viscosity", "mm²/s")
    return viscosity / reference_viscosity


def kappa_on_line(intercept: float, slope: float, temperature_c: float, reference_viscosity: float) -> float:
    """Viscosity ratio κ, without unit, of an oil known by its viscosity-temperature line, at a temperature in °C.

    Equation: κ = ν(t)/ν₁ with log10 log10 Z = A − B·log10(t + 273.15); ν₁ in mm²/s.
    Range: viscosities of 0.21 to 20 000 000 mm²/s. Source: ASTM D341-09, main text; ISO 281:2007, 9.3.3.4.

    >>> round(kappa_on_line(9.377814, 3.651690, 60, 14.245), 2)
    2.0
    """
    return viscosity_ratio(viscosity_on_line(intercept, slope, temperature_c), reference_viscosity)


def film_floor(
    vg: float, viscosity_index: float, temperature_c: float, reference_viscosity: float, share: float, cap: float
) -> float:
    """Lowest viscosity ratio, without unit, to be accepted where an oil of a given ISO viscosity grade is usual.

    Equation: floor = min(cap, share·ν(t)/ν₁), ν(t) of an oil with the midpoint viscosity of the grade and the index;
    t in °C, ν₁ in mm²/s.
    Range: grades with an index, VG 10 and thicker. Source: common practice; ISO 3448, ASTM D2270, ASTM D341, ISO 281.

    >>> film_floor(220, 95, 70, 25, 0.6, 1)
    1
    """
    middle = grade_midpoint(vg)
    viscosity = viscosity_at(middle, viscosity_100_from_index(middle, viscosity_index), temperature_c)
    return min(cap, share * viscosity_ratio(viscosity, reference_viscosity))


def effective_temperature(steady_c: float, peak_c: float, share_percent: float, limit_percent: float) -> float:
    """Temperature in °C that counts for film and grease life, of a point with a steady and a peak temperature.

    Equation: t_eff = t_peak where the share of time at the peak, in %, is above the limit; else t_eff = t_steady.
    Range: shares of 0 to 100 %. Source: common practice.

    >>> effective_temperature(80, 110, 10, 5), effective_temperature(80, 110, 5, 5)
    (110, 80)
    """
    return peak_c if share_percent > limit_percent else steady_c


_ISO_281 = "ISO 281:2007, 9.3.3.4, equations (27) to (29)"
_REFERENCE = Input("reference_viscosity", "ν₁", "mm²/s", 1, 5000, "down", "reference viscosity")
_TEMPERATURE = Input("temperature_c", "t", "°C", -20, 200, "down", "running temperature")
_SUBJECT = "rolling bearings"
_MEAN = "mean diameter"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "mean_diameter", _SUBJECT, "Mean diameter of a bearing", mean_diameter,
        (Input("bore_mm", "d", "mm", 1, 5000, "up", "bore"),
         Input("outside_mm", "D", "mm", 2, 6000, "up", "outside diameter")),
        _MEAN, "d_m", "mm", "d_m = (d + D)/2", "definition in common use, no clause", "common practice",
        "Stands for the pitch diameter where that is not known.",
    ),
    Formula(
        "speed_factor", _SUBJECT, "Speed factor", speed_factor,
        (Input("speed_rpm", "n", "1/min", 0, 100_000, "up", "speed"),
         Input("mean_diameter_mm", "d_m", "mm", 1, 5500, "up", _MEAN)),
        "speed factor", "A", "mm/min", "A = n·d_m", "definition in common use, no clause", "common practice",
    ),
    Formula(
        "reference_viscosity", _SUBJECT, "Reference viscosity", reference_viscosity,
        (Input("speed_rpm", "n", "1/min", 1, 100_000, "down", "speed", (1000,)),
         Input("mean_diameter_mm", "d_m", "mm", 5, 5500, "down", _MEAN)),
        "reference viscosity", "ν₁", "mm²/s",
        "ν₁ = 45000·n^−0.83·d_m^−0.5 where n < 1000; else ν₁ = 4500·n^−0.5·d_m^−0.5",
        "ISO 281:2007, 9.3.3.4, equations (28) and (29)", "yes",
        "At n = 1000 1/min the value drops by 2.3 %. Made for mineral oils; a swinging bearing has no such value. "
        "The range of speed and diameter is from memory.",
    ),
    Formula(
        "viscosity_ratio", _SUBJECT, "Viscosity ratio", viscosity_ratio,
        (Input("viscosity", "ν", "mm²/s", 0.21, 20_000_000, "up", "viscosity at running temperature"), _REFERENCE),
        "viscosity ratio", "κ", "", "κ = ν/ν₁", "ISO 281:2007, 9.3.3.4, equation (27)", "yes",
        "The standard covers 0.1 to 4; more counts as 4 in a life calculation. For grease, ν belongs to the base oil.",
    ),
    Formula(
        "kappa_on_line", _SUBJECT, "Viscosity ratio of an oil at a temperature", kappa_on_line,
        (Input("intercept", "A", "", 5, 14, "up", "intercept of the viscosity-temperature line"),
         Input("slope", "B", "", 1.5, 5, "down", "slope of the viscosity-temperature line"),
         _TEMPERATURE, _REFERENCE),
        "viscosity ratio", "κ", "", "κ = ν(t)/ν₁, log10 log10 Z = A − B·log10(t + 273.15)",
        f"ASTM D341-09, main text; {_ISO_281}", "yes",
        "Below −20 °C, and near the pour point at any temperature, the figure is an estimate.",
    ),
    Formula(
        "film_floor", _SUBJECT, "Lowest viscosity ratio to be accepted", film_floor,
        (Input("vg", "VG", "ISO VG", 10, 3200, "up", "thickest usual viscosity grade"),
         # A flatter line is thicker above 40 °C and thinner below it.
         Input("viscosity_index", "VI", "", 0, 400, "none", "viscosity index of the usual oil"),
         _TEMPERATURE, _REFERENCE,
         Input("share", "s", "", 0, 1, "up", "share of the viscosity ratio of the usual oil"),
         Input("cap", "c", "", 0, 4, "up", "highest floor")),
        "lowest viscosity ratio", "κ_min", "",
        "κ_min = min(c, s·ν(t)/ν₁), ν(t) of an oil of midpoint VG and index VI",
        "common practice, no source; viscosities by ISO 3448, ASTM D2270 and ASTM D341", "common practice",
        "About one viscosity grade below the thickest usual oil when s = 0.6.",
    ),
    Formula(
        "effective_temperature", _SUBJECT, "Effective temperature", effective_temperature,
        (Input("steady_c", "t_steady", "°C", -100, 400, "up", "steady temperature"),
         Input("peak_c", "t_peak", "°C", -100, 400, "up", "peak temperature, not below the steady one"),
         Input("share_percent", "s", "%", 0, 100, "up", "share of the time at the peak", (5,)),
         Input("limit_percent", "s_limit", "%", 0, 100, "down", "share up to which the peak does not count")),
        "effective temperature", "t_eff", "°C", "t_eff = t_peak where s > s_limit; else t_eff = t_steady",
        "common practice, no source", "common practice",
        "The joint moves with the limit; 5 % of the time, 1.2 h a day, is usual.",
    ),
)
