"""Rating life of rolling bearings and the fatigue load limit, ISO 281:2007."""

from __future__ import annotations

from itertools import pairwise

from advisor.formulas.formula import Formula, Input, demand_positive, demand_within

LIFE_EXPONENT: dict[str, float] = {"ball": 3.0, "roller": 10.0 / 3.0}
# ISO 281:2007, table 12, from memory. The edition of 1990 had 0.62, 0.53, 0.44, 0.33 and 0.21.
RELIABILITY: dict[float, float] = {90: 1.0, 95: 0.64, 96: 0.55, 97: 0.47, 98: 0.37, 99: 0.25}


def fatigue_limit_ball(static_rating_n: float, mean_diameter_mm: float) -> float:
    """Fatigue load limit C_u of a ball bearing in N, from its static rating in N and its mean diameter in mm.

    Equation: C_u = C₀/22·(100/max(d_m, 100))^0.5. Range: any size.
    Source: ISO 281:2007, B.3.3, simplified, from memory.

    >>> round(fatigue_limit_ball(11200, 46), 1)
    509.1
    """
    demand_positive(mean_diameter_mm, "mean diameter", "mm")
    return float(static_rating_n / 22.0 * (100.0 / max(mean_diameter_mm, 100.0)) ** 0.5)


def fatigue_limit_roller(static_rating_n: float, mean_diameter_mm: float) -> float:
    """Fatigue load limit C_u of a roller bearing in N, from its static rating in N and its mean diameter in mm.

    Equation: C_u = C₀/8.2·(100/max(d_m, 100))^0.3. Range: any size.
    Source: ISO 281:2007, B.3.3, simplified, from memory.

    >>> round(fatigue_limit_roller(37500, 46), 1)
    4573.2
    """
    demand_positive(mean_diameter_mm, "mean diameter", "mm")
    return float(static_rating_n / 8.2 * (100.0 / max(mean_diameter_mm, 100.0)) ** 0.3)


def rating_life(dynamic_rating_n: float, load_n: float, exponent: float) -> float:
    """Basic rating life L₁₀ in million revolutions, from the dynamic rating and the equivalent load in N.

    Equation: L₁₀ = (C/P)^p, p = 3 for ball and 10/3 for roller bearings. Range: P up to about C/2.
    Source: ISO 281:2007.

    >>> rating_life(20_000, 2000, 3)
    1000.0
    """
    demand_positive(dynamic_rating_n, "dynamic rating", "N")
    demand_positive(load_n, "equivalent load", "N")
    return float((dynamic_rating_n / load_n) ** exponent)


def rating_life_hours(dynamic_rating_n: float, load_n: float, exponent: float, speed_rpm: float) -> float:
    """Basic rating life L₁₀ₕ in h, from the dynamic rating and the equivalent load in N and the speed in 1/min.

    Equation: L₁₀ₕ = 10⁶/(60·n)·(C/P)^p, p = 3 for ball and 10/3 for roller bearings.
    Range: P up to about C/2, turning bearings. Source: ISO 281:2007.

    >>> round(rating_life_hours(19_500, 2000, 3, 1500))
    10298
    """
    demand_positive(speed_rpm, "speed", "1/min")
    return 1e6 / (60.0 * speed_rpm) * rating_life(dynamic_rating_n, load_n, exponent)


def reliability_factor(reliability_percent: float) -> float:
    """Life adjustment factor a₁ for a reliability in %.

    Equation: table; straight between its rows. Range: 90 to 99 %. Source: ISO 281:2007, table 12, from memory.

    >>> reliability_factor(95), reliability_factor(99)
    (0.64, 0.25)
    """
    demand_within(reliability_percent, 90, 99, "reliability", "%")
    (low, at_low), (high, at_high) = next(
        pair for pair in pairwise(RELIABILITY.items()) if reliability_percent <= pair[1][0]
    )
    return at_low + (at_high - at_low) * (reliability_percent - low) / (high - low)


def modified_life(reliability_factor: float, life_factor: float, rating_life_h: float) -> float:
    """Modified rating life L_nm in h, from a₁, a_ISO and the basic rating life in h.

    Equation: L_nmh = a₁·a_ISO·L₁₀ₕ. Range: a₁ of 0.25 to 1, a_ISO of 0.1 to 50. Source: ISO 281:2007, 9.3.

    >>> modified_life(0.64, 2, 10_000)
    12800.0
    """
    return reliability_factor * life_factor * rating_life_h


_SUBJECT = "rating life"
_STATIC = Input("static_rating_n", "C₀", "N", 100, 1e9, "up", "static load rating")
_DIAMETER = Input("mean_diameter_mm", "d_m", "mm", 5, 5500, "down", "mean diameter", (100,))
_DYNAMIC = Input("dynamic_rating_n", "C", "N", 100, 1e9, "up", "dynamic load rating")
_LOAD = Input("load_n", "P", "N", 1, 5e8, "down", "equivalent dynamic load")
_EXPONENT = Input("exponent", "p", "", 3, 10 / 3, "none", "life exponent, 3 for ball and 10/3 for roller bearings")
_SIMPLE = "ISO 281:2007, B.3.3, simplified"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "fatigue_limit_ball", _SUBJECT, "Fatigue load limit of a ball bearing", fatigue_limit_ball,
        (_STATIC, _DIAMETER), "fatigue load limit", "C_u", "N", "C_u = C₀/22·(100/max(d_m, 100))^0.5", _SIMPLE,
        "from memory",
    ),
    Formula(
        "fatigue_limit_roller", _SUBJECT, "Fatigue load limit of a roller bearing", fatigue_limit_roller,
        (_STATIC, _DIAMETER), "fatigue load limit", "C_u", "N", "C_u = C₀/8.2·(100/max(d_m, 100))^0.3", _SIMPLE,
        "from memory",
    ),
    Formula(
        "rating_life", _SUBJECT, "Basic rating life", rating_life, (_DYNAMIC, _LOAD, _EXPONENT),
        "life of 90 % of the bearings in million revolutions", "L₁₀", "", "L₁₀ = (C/P)^p", "ISO 281:2007",
        "from memory", "p is 3 for ball and 10/3 for roller bearings. The equation ends at about P = C/2.",
    ),
    Formula(
        "rating_life_hours", _SUBJECT, "Basic rating life in hours", rating_life_hours,
        (_DYNAMIC, _LOAD, _EXPONENT, Input("speed_rpm", "n", "1/min", 0.1, 100_000, "down", "speed")),
        "life of 90 % of the bearings", "L₁₀ₕ", "h", "L₁₀ₕ = 10⁶/(60·n)·(C/P)^p", "ISO 281:2007", "from memory",
        "p is 3 for ball and 10/3 for roller bearings. The equation ends at about P = C/2.",
    ),
    Formula(
        "reliability_factor", _SUBJECT, "Life adjustment factor for reliability", reliability_factor,
        (Input("reliability_percent", "S", "%", 90, 99, "down", "reliability"),),
        "life adjustment factor", "a₁", "", "a₁ = row of S in the table, straight between the rows",
        "ISO 281:2007, table 12", "from memory",
        "1, 0.64, 0.55, 0.47, 0.37 and 0.25 at 90, 95, 96, 97, 98 and 99 %. The edition of 1990 had 0.62 at 95 % and "
        "0.21 at 99 %. The straight lines between the rows are no part of the standard.",
    ),
    Formula(
        "modified_life", _SUBJECT, "Modified rating life", modified_life,
        (Input("reliability_factor", "a₁", "", 0.25, 1, "up", "life adjustment factor for reliability"),
         Input("life_factor", "a_ISO", "", 0.1, 50, "up", "life modification factor"),
         Input("rating_life_h", "L₁₀ₕ", "h", 0, 1e9, "up", "basic rating life")),
        "modified rating life", "L_nmh", "h", "L_nmh = a₁·a_ISO·L₁₀ₕ", "ISO 281:2007, 9.3", "from memory",
    ),
)
