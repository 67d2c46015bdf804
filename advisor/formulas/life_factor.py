"""What film and dirt make of the rating life of a rolling bearing: the life modification factor of ISO 281:2007."""

from __future__ import annotations

from math import inf
from typing import NamedTuple

from advisor.formulas.contamination import THICKEST_FILM, THINNEST_FILM, counted_ratio
from advisor.formulas.formula import Formula, Input, demand_positive, demand_within

HIGHEST_LIFE_FACTOR = 50.0
EP_CONTAMINATION, EP_LIFE_FACTOR = 0.2, 3.0


class Branch(NamedTuple):
    """c and exponent in q = q₀ − c/κ^exponent, for viscosity ratios below `below`."""

    below: float
    ball: float
    roller: float
    exponent: float


# ISO 281:2007, 9.3.3.3. Some public files print 0.019087 in the middle row. The curves must meet at κ = 0.4, and
# 1.9987/0.4^0.19087 = 2.3807 meets 2.2649/0.4^0.054381 = 2.3806, while 1.9987/0.4^0.019087 = 2.0340 does not.
BRANCHES: tuple[Branch, ...] = (
    Branch(0.4, 2.2649, 1.3993, 0.054381),
    Branch(1.0, 1.9987, 1.2348, 0.19087),
    Branch(inf, 1.9987, 1.2348, 0.071739),
)


def life_factor_radial_ball(kappa: float, contamination_factor: float, fatigue_limit_n: float, load_n: float) -> float:
    """Life modification factor a_ISO of a radial ball bearing, without unit: κ, e_C, C_u in N and P in N.

    Equation: a_ISO = 0.1·(1 − q^0.83·x^(1/3))^−9.3, x = e_C·C_u/P, q = 2.5671 − c/κ^p, at most 50.
    Range: κ of 0.1 and above, above 4 counts as 4. Source: ISO 281:2007, 9.3.3.3, equations (31) to (33).

    >>> round(life_factor_radial_ball(0.2, 0.5, 200, 1000), 4)
    0.1884
    """
    return _ball(kappa, _load_ratio(contamination_factor, fatigue_limit_n, load_n))


def life_factor_thrust_ball(kappa: float, contamination_factor: float, fatigue_limit_n: float, load_n: float) -> float:
    """Life modification factor a_ISO of a thrust ball bearing, without unit: κ, e_C, C_u in N and P in N.

    Equation: a_ISO = 0.1·(1 − q^0.83·(x/3)^(1/3))^−9.3, x = e_C·C_u/P, q = 2.5671 − c/κ^p, at most 50.
    Range: κ of 0.1 and above, above 4 counts as 4. Source: ISO 281:2007, 9.3.3.3, equations (37) to (39).

    >>> round(life_factor_thrust_ball(4, 0.5, 200, 1000), 3)
    1.557
    """
    return _ball(kappa, _load_ratio(contamination_factor, fatigue_limit_n, load_n) / 3.0)


def life_factor_radial_roller(
    kappa: float, contamination_factor: float, fatigue_limit_n: float, load_n: float
) -> float:
    """Life modification factor a_ISO of a radial roller bearing, without unit: κ, e_C, C_u in N and P in N.

    Equation: a_ISO = 0.1·(1 − q·x^0.4)^−9.185, x = e_C·C_u/P, q = 1.5859 − c/κ^p, at most 50.
    Range: κ of 0.1 and above, above 4 counts as 4. Source: ISO 281:2007, 9.3.3.3, equations (34) to (36).

    >>> round(life_factor_radial_roller(1, 0.5, 200, 1000), 4)
    0.3986
    """
    return _roller(kappa, _load_ratio(contamination_factor, fatigue_limit_n, load_n))


def life_factor_thrust_roller(
    kappa: float, contamination_factor: float, fatigue_limit_n: float, load_n: float
) -> float:
    """Life modification factor a_ISO of a thrust roller bearing, without unit: κ, e_C, C_u in N and P in N.

    Equation: a_ISO = 0.1·(1 − q·(x/2.5)^0.4)^−9.185, x = e_C·C_u/P, q = 1.5859 − c/κ^p, at most 50.
    Range: κ of 0.1 and above, above 4 counts as 4. Source: ISO 281:2007, 9.3.3.3, equations (40) to (42).

    >>> round(life_factor_thrust_roller(1, 0.5, 200, 1000), 4)
    0.255
    """
    return _roller(kappa, _load_ratio(contamination_factor, fatigue_limit_n, load_n) / 2.5)


def kappa_with_ep_credit(kappa: float, contamination_factor: float) -> float:
    """Viscosity ratio to be put into a life calculation, for a lubricant whose EP additives are proven effective.

    Equation: 1 where κ < 1 and e_C ≥ 0.2; else κ itself.
    Range: κ of 0.1 and above; the life factor found with it is then held to 3. Source: ISO 281:2007, 9.3.3.4.

    >>> kappa_with_ep_credit(0.5, 0.4), kappa_with_ep_credit(0.5, 0.1)
    (1.0, 0.5)
    """
    counted_ratio(kappa)
    return 1.0 if kappa < 1 and contamination_factor >= EP_CONTAMINATION else kappa


def life_factor_with_ep_credit(life_factor: float, credited_life_factor: float) -> float:
    """Life modification factor that may be used with proven EP additives, from those with the real and credited κ.

    Equation: a = max(a_real, min(a_credited, 3)). Range: factors of 0.1 to 50. Source: ISO 281:2007, 9.3.3.4.

    >>> life_factor_with_ep_credit(0.5, 8), life_factor_with_ep_credit(4, 8)
    (3.0, 4)
    """
    return max(life_factor, min(credited_life_factor, EP_LIFE_FACTOR))


def kappa_from_lambda(film_ratio: float) -> float:
    """Viscosity ratio κ that belongs to a film ratio Λ; both without unit.

    Equation: κ = Λ^1.3. Range: film ratios above 0. Source: ISO/TR 1281-2.

    >>> round(kappa_from_lambda(2), 2)
    2.46
    """
    demand_positive(film_ratio, "film ratio")
    return float(film_ratio**1.3)


def lambda_from_kappa(kappa: float) -> float:
    """Film ratio Λ that belongs to a viscosity ratio κ; both without unit.

    Equation: Λ = κ^(1/1.3). Range: viscosity ratios above 0. Source: ISO/TR 1281-2, inverted.

    >>> round(lambda_from_kappa(4), 2)
    2.9
    """
    demand_positive(kappa, "viscosity ratio")
    return float(kappa ** (1.0 / 1.3))


def _load_ratio(contamination_factor: float, fatigue_limit_n: float, load_n: float) -> float:
    demand_within(contamination_factor, 0, 1, "contamination factor")
    demand_positive(fatigue_limit_n, "fatigue load limit", "N")
    demand_positive(load_n, "equivalent load", "N")
    return contamination_factor * fatigue_limit_n / load_n


def _ball(kappa: float, ratio: float) -> float:
    counted = counted_ratio(kappa)
    branch = _branch(counted)
    film = max(0.0, 2.5671 - branch.ball / counted**branch.exponent)
    return _factor(1.0 - film**0.83 * ratio ** (1.0 / 3.0), 9.3)


def _roller(kappa: float, ratio: float) -> float:
    counted = counted_ratio(kappa)
    branch = _branch(counted)
    # At κ = 0.1 the printed digits leave q at −0.00005 instead of 0, which a large ratio would make felt.
    film = max(0.0, 1.5859 - branch.roller / counted**branch.exponent)
    return _factor(1.0 - film * ratio**0.4, 9.185)


def _branch(counted: float) -> Branch:
    return next(branch for branch in BRANCHES if counted < branch.below)


def _factor(bracket: float, exponent: float) -> float:
    """0.1·bracket^−exponent, but 50 where the bracket has shrunk so far that the factor would pass it."""
    if bracket <= (0.1 / HIGHEST_LIFE_FACTOR) ** (1.0 / exponent):
        return HIGHEST_LIFE_FACTOR
    return float(0.1 * bracket**-exponent)


_SUBJECT = "rating life"
_MODIFYING = (
    Input("kappa", "κ", "", THINNEST_FILM, THICKEST_FILM, "up", "viscosity ratio", (0.4, 1)),
    Input("contamination_factor", "e_C", "", 0, 1, "up", "contamination factor"),
    Input("fatigue_limit_n", "C_u", "N", 1, 1e8, "up", "fatigue load limit"),
    Input("load_n", "P", "N", 1, 5e8, "down", "equivalent dynamic load"),
)
_FACTOR, _EP = "life modification factor", "ISO 281:2007, 9.3.3.4, EP additives"
_BALL_C = "q = 2.5671 − c/κ^p; c = 2.2649, p = 0.054381 where κ < 0.4; 1.9987, 0.19087 where κ < 1; 1.9987, 0.071739"
_ROLLER_C = "q = 1.5859 − c/κ^p; c = 1.3993, p = 0.054381 where κ < 0.4; 1.2348, 0.19087 where κ < 1; 1.2348, 0.071739"
_MISPRINT = (
    "Some public files print 0.019087 for 0.19087; only the latter makes the curves meet at κ = 0.4. "
    "κ above 4 counts as 4, below 0.1 the standard is silent; a_ISO is at most 50. x must hold e_C."
)
_DIVISOR = " The divisor of the thrust bearing is from memory."
_PROVEN = "Only where the EP additives are proven effective; for e_C below 0.2 a test must show it. From memory."
_TR = "ISO/TR 1281-2, κ = Λ^1.3, no clause"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "life_factor_radial_ball", _SUBJECT, "Life modification factor, radial ball bearing", life_factor_radial_ball,
        _MODIFYING, _FACTOR, "a_ISO", "", f"a_ISO = 0.1·(1 − q^0.83·(e_C·C_u/P)^(1/3))^−9.3, {_BALL_C}",
        "ISO 281:2007, 9.3.3.3, equations (31) to (33)", "yes", _MISPRINT,
    ),
    Formula(
        "life_factor_radial_roller", _SUBJECT, "Life modification factor, radial roller bearing",
        life_factor_radial_roller, _MODIFYING, _FACTOR, "a_ISO", "",
        f"a_ISO = 0.1·(1 − q·(e_C·C_u/P)^0.4)^−9.185, {_ROLLER_C}", "ISO 281:2007, 9.3.3.3, equations (34) to (36)",
        "yes", _MISPRINT,
    ),
    Formula(
        "life_factor_thrust_ball", _SUBJECT, "Life modification factor, thrust ball bearing", life_factor_thrust_ball,
        _MODIFYING, _FACTOR, "a_ISO", "", f"a_ISO = 0.1·(1 − q^0.83·(e_C·C_u/(3·P))^(1/3))^−9.3, {_BALL_C}",
        "ISO 281:2007, 9.3.3.3, equations (37) to (39)", "from memory", _MISPRINT + _DIVISOR,
    ),
    Formula(
        "life_factor_thrust_roller", _SUBJECT, "Life modification factor, thrust roller bearing",
        life_factor_thrust_roller, _MODIFYING, _FACTOR, "a_ISO", "",
        f"a_ISO = 0.1·(1 − q·(e_C·C_u/(2.5·P))^0.4)^−9.185, {_ROLLER_C}",
        "ISO 281:2007, 9.3.3.3, equations (40) to (42)", "from memory", _MISPRINT + _DIVISOR,
    ),
    Formula(
        "kappa_with_ep_credit", _SUBJECT, "Viscosity ratio with credit for EP additives", kappa_with_ep_credit,
        (Input("kappa", "κ", "", THINNEST_FILM, THICKEST_FILM, "up", "viscosity ratio", (1,)),
         Input("contamination_factor", "e_C", "", 0, 1, "up", "contamination factor", (EP_CONTAMINATION,))),
        "viscosity ratio in the life calculation", "κ_EP", "", "κ_EP = 1 where κ < 1 and e_C ≥ 0.2; else κ_EP = κ", _EP,
        "from memory", _PROVEN,
    ),
    Formula(
        "life_factor_with_ep_credit", _SUBJECT, "Life modification factor with credit for EP additives",
        life_factor_with_ep_credit,
        (Input("life_factor", "a_real", "", 0.1, 50, "up", "life modification factor with the real κ"),
         Input("credited_life_factor", "a_credited", "", 0.1, 50, "up", "life modification factor with κ = 1")),
        _FACTOR, "a_EP", "", "a_EP = max(a_real, min(a_credited, 3))", _EP, "from memory", _PROVEN,
    ),
    Formula(
        "kappa_from_lambda", _SUBJECT, "Viscosity ratio from the film ratio", kappa_from_lambda,
        (Input("film_ratio", "Λ", "", 0.05, 10, "up", "film ratio"),),
        "viscosity ratio", "κ", "", "κ = Λ^1.3", _TR, "yes",
    ),
    Formula(
        "lambda_from_kappa", _SUBJECT, "Film ratio from the viscosity ratio", lambda_from_kappa,
        (Input("kappa", "κ", "", 0.02, 20, "up", "viscosity ratio"),),
        "film ratio", "Λ", "", "Λ = κ^(1/1.3)", _TR, "yes",
    ),
)
