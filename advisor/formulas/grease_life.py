"""Life of grease in sealed ball bearings after Booser, and the renewal interval that follows from a life."""

from __future__ import annotations

from advisor.formulas.formula import Formula, Input, Lookup, Named, demand_positive, demand_within
from advisor.formulas.grease import scaled_interval
from advisor.formulas.oil_life import ZERO

POUND_FORCE = 4.4482216152605  # N, exact
SLOPE = 2450.0  # K, of log10 of the grease life; Booser 1974, from memory
WEIBULL_SLOPE = 2.37
# L₁ : L₁₀ : L₅₀ as 1 : 2.7 : 6.0; the 2.7 from memory, the 6.0 by the same Weibull slope.
L50_PER_L1, L10_PER_L1 = 6.0, 2.7


def booser_speed_half_lives(speed_factor: float, speed_limit: float) -> float:
    """Half-lives S_N that speed takes, without unit, from speed factor and grease speed limit in mm/min (bore · speed).

    Equation: S_N = 0.86·DN/DN_limit. Range: speeds up to the limit. Source: Booser 1974, from memory.

    >>> round(booser_speed_half_lives(150_000, 300_000), 2)
    0.43
    """
    demand_positive(speed_limit, "speed limit of the grease", "mm/min")
    return 0.86 * speed_factor / speed_limit


def booser_load_half_lives(speed_factor: float, load_n: float, dynamic_rating_n: float) -> float:
    """Half-lives S_W that load takes, without unit: bore · speed in mm/min, load and dynamic rating in N.

    Equation: S_W = 0.61·DN·W/C², W and C in pounds. Range: ball bearings. Source: Booser 1974, from memory.

    >>> round(booser_load_half_lives(100_000, 1000, 20_000), 2)
    0.68
    """
    demand_positive(dynamic_rating_n, "dynamic rating", "N")
    return 0.61 * speed_factor * POUND_FORCE * load_n / dynamic_rating_n / dynamic_rating_n


def grease_life_50(temperature_c: float, half_lives: float) -> float:
    """Life L₅₀ in h that half of the greased-for-life ball bearings reach, from °C and the half-lives S taken off.

    Equation: log10 L₅₀ = −2.60 + 2450/(t + 273) − 0.301·S, S = S_G + S_N + S_W.
    Range: ball bearings of electric motors, 40 to 150 °C. Source: Booser, Lubrication Engineering 30 (1974) 536-541.

    >>> round(grease_life_50(100, 0))
    9297
    """
    demand_within(temperature_c, -100, 1000, "temperature in an equation of life", "°C")
    return float(10.0 ** (-2.60 + SLOPE / (temperature_c + ZERO) - 0.301 * half_lives))


def grease_life_10(life_50_h: float) -> float:
    """Life L₁₀ in h that nine of ten bearings reach, from the life L₅₀ that half of them reach.

    Equation: L₁₀ = 2.7/6.0·L₅₀, a Weibull slope of 2.37. Range: any life. Source: common practice, from memory.

    >>> round(grease_life_10(6000))
    2700
    """
    return life_50_h * L10_PER_L1 / L50_PER_L1


def interval_by_life(temperature_c: float, half_lives: float) -> float:
    """Renewal interval in h by the life of the grease: temperature in °C, half-lives S taken off.

    Equation: t_r = L₅₀/6.0, the life L₁ that 99 of 100 bearings reach.
    Range: ball bearings of electric motors, 40 to 150 °C. Source: Booser 1974; the ratio from memory.

    >>> round(interval_by_life(100, 0))
    1550
    """
    return grease_life_50(temperature_c, half_lives) / L50_PER_L1


def interval_routes(base_h: float, factor: float, temperature_c: float, half_lives: float) -> Named:
    """Both routes to a renewal interval side by side: the base in h with all its factors, and a sixth of the life L₅₀.

    Range: as the interval formula and the life of grease. Source: handbook form in no standard; Booser 1974.

    >>> interval_routes(11_199, 0.25, 100, 1).text
    'by interval formula 2800 h; by life of the grease 775 h; the longer is 3.6 times the shorter'
    """
    by_formula, by_life = scaled_interval(base_h, factor), interval_by_life(temperature_c, half_lives)
    demand_positive(by_formula, "interval by the interval formula", "h")
    demand_positive(by_life, "interval by the life of the grease", "h")
    apart = max(by_formula / by_life, by_life / by_formula)
    return Named(
        (f"{by_formula:.0f}", f"{by_life:.0f}"),
        f"by interval formula {by_formula:.0f} h; by life of the grease {by_life:.0f} h; "
        f"the longer is {apart:.1f} times the shorter",
    )


_SUBJECT = "grease"
_BOOSER = "Booser, Lubrication Engineering 30 (1974) 536-541"
_SCOPE = "Ball bearings of electric motors, greased for life. The constants are from memory."
_HALF_LIVES = Input("half_lives", "S", "", 0, 10, "down", "half-lives taken off, S_G + S_N + S_W")
_TEMPERATURE = Input("temperature_c", "t", "°C", 40, 150, "down", "bearing temperature")
_SPEED = Input("speed_factor", "DN", "mm/min", 0, 1e6, "up", "bore times speed")
_LIFE = "log10 L₅₀ = −2.60 + 2450/(t + 273) − 0.301·S"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "booser_speed_half_lives", _SUBJECT, "Half-lives of grease taken by speed", booser_speed_half_lives,
        (_SPEED, Input("speed_limit", "DN_limit", "mm/min", 10_000, 2e6, "down", "speed limit of the bearing type")),
        "half-lives", "S_N", "", "S_N = 0.86·DN/DN_limit", _BOOSER, "from memory", _SCOPE,
    ),
    Formula(
        "booser_load_half_lives", _SUBJECT, "Half-lives of grease taken by load", booser_load_half_lives,
        (_SPEED, Input("load_n", "W", "N", 0, 1e6, "up", "load"),
         Input("dynamic_rating_n", "C", "N", 100, 1e7, "down", "dynamic load rating")),
        "half-lives", "S_W", "", "S_W = 0.61·DN·4.448·W/C²", _BOOSER, "from memory", _SCOPE,
    ),
    Formula(
        "grease_life_50", _SUBJECT, "Life of grease that half of the bearings reach", grease_life_50,
        (_TEMPERATURE, _HALF_LIVES), "life of grease, 50 %", "L₅₀", "h", _LIFE, _BOOSER, "from memory",
        f"{_SCOPE} S_G is 0 for the best long-life types, which is not confirmed. One halving takes 14.5 K at 70 °C "
        "and 17.1 K at 100 °C.",
    ),
    Formula(
        "grease_life_10", _SUBJECT, "Life of grease that nine of ten bearings reach", grease_life_10,
        (Input("life_50_h", "L₅₀", "h", 0, 1e7, "up", "life of grease, 50 %"),),
        "life of grease, 10 % failed", "L₁₀", "h", "L₁₀ = 2.7/6.0·L₅₀", "common practice, no source", "from memory",
        "One Weibull slope of 2.37 gives L₁ : L₁₀ : L₅₀ as 1 : 2.7 : 6.0.",
    ),
    Formula(
        "interval_by_life", _SUBJECT, "Renewal interval by the life of the grease", interval_by_life,
        (_TEMPERATURE, _HALF_LIVES), "renewal interval", "t_r", "h", f"t_r = L₅₀/6.0, {_LIFE}",
        f"{_BOOSER}; ratio by common practice", "from memory",
        f"{_SCOPE} A published interval is the life L₁ that 99 of 100 bearings reach. The other route is the interval "
        "formula with its factors; set both side by side.",
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "interval_routes", _SUBJECT, "Both routes to a renewal interval side by side", interval_routes,
        (Input("base_h", "t_f", "h", 1, 1e6, "up", "interval before factors"),
         Input("factor", "f", "", 0.1, 1, "up", "total factor, that of temperature included"), _TEMPERATURE,
         _HALF_LIVES),
        "renewal intervals in h", "t_r", "", f"t_r = t_f·f beside t_r = L₅₀/6.0, {_LIFE}",
        f"handbook form in no standard; {_BOOSER}", "from memory",
        f"{_SCOPE} The interval formula is in no standard either: neither route proves the other.",
    ),
)
