"""Viscosity index from the viscosities at 40 and 100 °C, and back: ASTM D2270."""

from __future__ import annotations

from bisect import bisect_left
from math import log10
from typing import NamedTuple

from advisor.formulas.formula import Formula, Input, OutOfRange, plain


class Branch(NamedTuple):
    """Coefficients of L = a·Y² + b·Y + c and H = d·Y² + e·Y + f, for a viscosity Y at 100 °C up to `top`."""

    top: float
    a: float
    b: float
    c: float
    d: float
    e: float
    f: float


# ASTM D2270-10, table 2; confirmed to 0.11 % against the 311 rows of table 1 as carried by the library `chemicals`.
BRANCHES: tuple[Branch, ...] = (
    Branch(3.8, 1.14673, 1.7576, -0.109, 0.84155, 1.5521, -0.077),
    Branch(4.4, 3.38095, -15.4952, 33.196, 0.78571, 1.7929, -0.183),
    Branch(5.0, 2.50000, -7.2143, 13.812, 0.82143, 1.5679, 0.119),
    Branch(6.4, 0.10100, 16.6350, -45.469, 0.04985, 9.1613, -18.557),
    Branch(7.0, 3.35714, -23.5643, 78.466, 0.22619, 7.7369, -16.656),
    Branch(7.7, 0.01191, 21.4750, -72.870, 0.79762, -0.7321, 14.610),
    Branch(9.0, 0.41858, 16.1558, -56.040, 0.05794, 10.5156, -28.240),
    Branch(12.0, 0.88779, 7.5527, -16.600, 0.26665, 6.7015, -10.810),
    Branch(15.0, 0.76720, 10.7972, -38.180, 0.20073, 8.4658, -22.490),
    Branch(18.0, 0.97305, 5.3135, -2.200, 0.28889, 5.9741, -4.930),
    Branch(22.0, 0.97256, 5.2500, -0.980, 0.24504, 7.4160, -16.730),
    Branch(28.0, 0.91413, 7.4759, -21.820, 0.20323, 9.1267, -34.230),
    Branch(40.0, 0.87031, 9.7157, -50.770, 0.18411, 10.1015, -46.750),
    Branch(55.0, 0.84703, 12.6752, -133.310, 0.17029, 11.4866, -80.620),
    Branch(70.0, 0.85921, 11.1009, -83.190, 0.17130, 11.3680, -76.940),
    Branch(float("inf"), 0.83531, 14.6731, -216.246, 0.16841, 11.8493, -96.947),
)
JOINTS: tuple[float, ...] = tuple(branch.top for branch in BRANCHES[:-1])


def viscosity_of_index_0(viscosity_100: float) -> float:
    """L: viscosity at 40 °C, in mm²/s, of an oil of viscosity index 0 with the given viscosity at 100 °C.

    Equation: L = a·Y² + b·Y + c, with Y the viscosity at 100 °C in mm²/s and a, b, c from table 2.
    Range: 2 mm²/s and above. Source: ASTM D2270, equations for L and H with table 2.

    >>> round(viscosity_of_index_0(8.86), 2)
    119.96
    """
    branch = _branch(viscosity_100)
    return (branch.a * viscosity_100 + branch.b) * viscosity_100 + branch.c


def viscosity_of_index_100(viscosity_100: float) -> float:
    """H: viscosity at 40 °C, in mm²/s, of an oil of viscosity index 100 with the given viscosity at 100 °C.

    Equation: H = d·Y² + e·Y + f, with Y the viscosity at 100 °C in mm²/s and d, e, f from table 2.
    Range: 2 mm²/s and above. Source: ASTM D2270, equations for L and H with table 2.

    >>> round(viscosity_of_index_100(8.86), 2)
    69.48
    """
    branch = _branch(viscosity_100)
    return (branch.d * viscosity_100 + branch.e) * viscosity_100 + branch.f


def viscosity_index(viscosity_40: float, viscosity_100: float) -> float:
    """Viscosity index, not rounded, from the kinematic viscosities at 40 and 100 °C in mm²/s.

    Equation: VI = 100·(L − U)/(L − H) where U ≥ H (procedure A);
    VI = (10^N − 1)/0.00715 + 100 with N = (log10 H − log10 U)/log10 Y where U < H (procedure B);
    U is the viscosity at 40 °C, Y that at 100 °C.
    Range: Y of 2 mm²/s and above, U above Y. Source: ASTM D2270, procedures A and B.

    >>> round(viscosity_index(73.30, 8.86), 1)
    92.4
    """
    high = viscosity_of_index_100(viscosity_100)
    if not viscosity_100 < viscosity_40 < float("inf"):
        raise OutOfRange(
            f"The viscosity must fall with temperature: {plain(viscosity_40)} mm²/s at 40 °C is not above "
            f"{plain(viscosity_100)} mm²/s at 100 °C."
        )
    if viscosity_40 >= high:
        low = viscosity_of_index_0(viscosity_100)
        return 100.0 * (low - viscosity_40) / (low - high)
    exponent = (log10(high) - log10(viscosity_40)) / log10(viscosity_100)
    return float((10.0**exponent - 1.0) / 0.00715 + 100.0)


def reported_viscosity_index(viscosity_40: float, viscosity_100: float) -> float:
    """Viscosity index as it is reported: to the nearest whole number, exact halves to the even one.

    Equation and range as for the viscosity index. Source: ASTM D2270, reporting.

    >>> reported_viscosity_index(73.30, 8.86)
    92
    """
    return round(viscosity_index(viscosity_40, viscosity_100))


def viscosity_100_from_index(viscosity_40: float, viscosity_index: float) -> float:
    """Viscosity at 100 °C, in mm²/s, of an oil known by its viscosity at 40 °C and its viscosity index.

    Equation: the Y between 2 mm²/s and the viscosity at 40 °C whose viscosity index is the given one, by bisection
    (the index is not strictly monotone at the joints of the coefficient table).
    Range: results of 2 mm²/s and above. Source: ASTM D2270, inverted.

    >>> round(viscosity_100_from_index(100, 95), 2)
    11.07
    """
    low, high = 2.0, viscosity_40
    if not (high > low and _index(high * (1 - 1e-12), viscosity_40) >= viscosity_index >= _index(low, viscosity_40)):
        raise OutOfRange(
            f"No viscosity at 100 °C of 2 mm²/s or more gives {plain(viscosity_40)} mm²/s at 40 °C a viscosity index "
            f"of {plain(viscosity_index)}; give a measured viscosity at 100 °C instead."
        )
    while low < (middle := (low + high) / 2) < high:
        if _index(middle, viscosity_40) < viscosity_index:
            low = middle
        else:
            high = middle
    return high


def _index(viscosity_100: float, viscosity_40: float) -> float:
    return viscosity_index(viscosity_40, viscosity_100)


def _branch(viscosity_100: float) -> Branch:
    if not 2.0 <= viscosity_100 < float("inf"):
        raise OutOfRange(
            "The viscosity index is defined from 2 mm²/s at 100 °C upwards, "
            f"but the value is {plain(viscosity_100)} mm²/s."
        )
    return BRANCHES[bisect_left(JOINTS, viscosity_100)]


_TEXT_100 = "kinematic viscosity at 100 °C"
_Y = Input("viscosity_100", "Y", "mm²/s", 2, 500, "up", _TEXT_100, JOINTS)
_U = Input("viscosity_40", "U", "mm²/s", 2, 50_000, "down", "kinematic viscosity at 40 °C")
_CONFIRMED = "The coefficients agree with the published table of L and H within 0.11 %."
_INDEX = "VI = 100·(L − U)/(L − H) where U ≥ H; else VI = (10^N − 1)/0.00715 + 100, N = (log10 H − log10 U)/log10 Y"
_DIPS = (
    "At the joints of the coefficient table the index may dip: by up to 1 unit between -50 and 400, "
    "by up to 1 unit and 2 % of what lies beyond these elsewhere."
)

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "viscosity_of_index_0", "viscosity", "Viscosity at 40 °C of an oil of viscosity index 0", viscosity_of_index_0,
        (_Y,), "viscosity at 40 °C for index 0", "L", "mm²/s", "L = a·Y² + b·Y + c, coefficients by range of Y",
        "ASTM D2270-10, table 2", "yes", _CONFIRMED,
    ),
    Formula(
        "viscosity_of_index_100", "viscosity", "Viscosity at 40 °C of an oil of viscosity index 100",
        viscosity_of_index_100, (_Y,), "viscosity at 40 °C for index 100", "H", "mm²/s",
        "H = d·Y² + e·Y + f, coefficients by range of Y", "ASTM D2270-10, table 2", "yes", _CONFIRMED,
    ),
    Formula(
        "viscosity_index", "viscosity", "Viscosity index", viscosity_index, (_U, _Y), "viscosity index, not rounded",
        "VI", "", _INDEX, "ASTM D2270-10, procedures A and B", "yes", _DIPS,
    ),
    Formula(
        "reported_viscosity_index", "viscosity", "Viscosity index as reported", reported_viscosity_index, (_U, _Y),
        "viscosity index, whole number", "VI", "", _INDEX + "; to the nearest whole number, halves to even",
        "ASTM D2270-10, procedures A and B, reporting", "yes", _DIPS,
    ),
    Formula(
        "viscosity_100_from_index", "viscosity", "Viscosity at 100 °C from viscosity index", viscosity_100_from_index,
        (Input("viscosity_40", "ν₄₀", "mm²/s", 6.8, 50_000, "up", "kinematic viscosity at 40 °C"),
         Input("viscosity_index", "VI", "", 0, 400, "up", "viscosity index")),
        _TEXT_100, "ν₁₀₀", "mm²/s", "ν₁₀₀ such that the viscosity index of ν₄₀ and ν₁₀₀ is VI",
        "ASTM D2270-10, inverted by bisection", "yes",
        "Thin oils (VG 2, 3 and 5) fall below 2 mm²/s at 100 °C, where the index is not defined.",
    ),
)
