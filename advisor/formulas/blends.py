"""Blends of two or more oils that dissolve in each other: viscosity from shares, and shares for a viscosity."""

from __future__ import annotations

from collections.abc import Sequence
from math import exp, log

from advisor.formulas.formula import Formula, Input, OutOfRange, demand_within, plain
from advisor.formulas.viscosity import HIGHEST, LOWEST, viscosity_from_z, walther_z

WHOLE = 1e-6  # how far the shares of a blend may add up to other than 1


def blend(viscosities: Sequence[float], shares: Sequence[float]) -> float:
    """Viscosity in mm²/s of a blend of any number of oils, from their viscosities in mm²/s and shares by volume.

    Equation: W = Σ xᵢ·Wᵢ, W = ln ln Z. Range: shares that add up to 1. Source: basis of ASTM D7152.

    >>> round(blend([32, 68, 150], [0.5, 0.3, 0.2]), 1)
    52.5
    """
    if len(viscosities) != len(shares) or not viscosities:
        raise OutOfRange(
            f"A blend needs one share for each oil, but has {len(viscosities)} oils and {len(shares)} shares."
        )
    for share in shares:
        demand_within(share, 0, 1, "share of an oil in a blend")
    if abs(sum(shares) - 1) > WHOLE:
        raise OutOfRange(f"The shares of a blend must add up to 1, but they add up to {plain(sum(shares))}.")
    return _viscosity(sum(share * _w(each) for each, share in zip(viscosities, shares, strict=True)))


def blend_viscosity(viscosity_a: float, viscosity_b: float, share_a: float) -> float:
    """Viscosity in mm²/s of a blend of two oils, from their viscosities in mm²/s and the share of A by volume.

    Equation: W = x·W_A + (1 − x)·W_B, W = ln ln Z, Z of the viscosity-temperature equation; one temperature for all.
    Range: 0.21 to 20 000 000 mm²/s, shares of 0 to 1. Source: basis of ASTM D7152.

    >>> round(blend_viscosity(32, 150, 0.5), 1)
    64.8
    """
    return blend((viscosity_a, viscosity_b), (share_a, 1.0 - share_a))


def share_for_viscosity(viscosity_a: float, viscosity_b: float, viscosity: float) -> float:
    """Share by volume, 0 to 1, of oil A that gives a blend with oil B a viscosity; all viscosities in mm²/s.

    Equation: x = (W − W_B)/(W_A − W_B), W = ln ln Z, one temperature for all.
    Range: viscosities between those of the two oils. Source: basis of ASTM D7152, inverted.

    >>> round(share_for_viscosity(460, 68, 150), 3)
    0.459
    """
    low, high = sorted((viscosity_a, viscosity_b))
    if not (low <= viscosity <= high and low < high):
        raise OutOfRange(
            f"A blend of {plain(viscosity_a)} and {plain(viscosity_b)} mm²/s cannot have {plain(viscosity)} mm²/s; "
            "the viscosity wanted must lie between those of two different oils."
        )
    w_a, w_b = _w(viscosity_a), _w(viscosity_b)
    return (_w(viscosity) - w_b) / (w_a - w_b)


def blending_index(viscosity: float) -> float:
    """Viscosity blending number, without unit, of a kinematic viscosity in mm²/s.

    Equation: VBN = 14.534·ln ln(ν + 0.8) + 10.975, natural logarithms.
    Range: above 0.21 mm²/s. Source: Refutas equation, public worked example.

    >>> round(blending_index(2.234), 2)
    12.49
    """
    demand_within(viscosity, LOWEST, HIGHEST, "viscosity of an oil to be blended", "mm²/s")
    return 14.534 * log(log(viscosity + 0.8)) + 10.975


def blend_viscosity_by_mass(viscosity_a: float, viscosity_b: float, share_a: float) -> float:
    """Viscosity in mm²/s of a blend of two oils, from their viscosities in mm²/s and the share of A by mass.

    Equation: VBN = w·VBN_A + (1 − w)·VBN_B, ν = exp(exp((VBN − 10.975)/14.534)) − 0.8; one temperature for all.
    Range: above 0.21 mm²/s, shares of 0 to 1. Source: Refutas equation, public worked example.

    >>> round(blend_viscosity_by_mass(5, 20, 0.6), 2)
    8.11
    """
    demand_within(share_a, 0, 1, "share of an oil in a blend")
    index = share_a * blending_index(viscosity_a) + (1.0 - share_a) * blending_index(viscosity_b)
    return exp(exp((index - 10.975) / 14.534)) - 0.8


def _w(viscosity: float) -> float:
    return log(log(walther_z(viscosity)))


def _viscosity(w: float) -> float:
    return viscosity_from_z(exp(exp(w)))


_SUBJECT = "blends"
_A = Input("viscosity_a", "ν_A", "mm²/s", LOWEST, HIGHEST, "up", "viscosity of oil A")
_B = Input("viscosity_b", "ν_B", "mm²/s", LOWEST, HIGHEST, "up", "viscosity of oil B")
_W = "W(y) = ln ln(y + 0.7 + exp(−1.47 − 1.84·y − 0.51·y²))"
_VBN = "VBN(y) = 14.534·ln ln(y + 0.8) + 10.975"
_NOTE = "All viscosities at one temperature. Not for polymer-thickened oils, nor for oils that do not dissolve."

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "blend_viscosity", _SUBJECT, "Viscosity of a blend of two oils, by volume", blend_viscosity,
        (_A, _B, Input("share_a", "x", "", 0, 1, "none", "share of oil A by volume")),
        "viscosity of the blend", "ν", "mm²/s", f"W(ν) = x·W(ν_A) + (1 − x)·W(ν_B), {_W}",
        "basis of ASTM D7152, no clause", "from memory", _NOTE + " Volume fractions.",
    ),
    Formula(
        "share_for_viscosity", _SUBJECT, "Share of an oil that gives a blend a viscosity", share_for_viscosity,
        # Which way the share moves hangs on which of the two oils is the thicker.
        (Input("viscosity_a", "ν_A", "mm²/s", LOWEST, HIGHEST, "none", "viscosity of oil A"),
         Input("viscosity_b", "ν_B", "mm²/s", LOWEST, HIGHEST, "none", "viscosity of oil B"),
         Input("viscosity", "ν", "mm²/s", LOWEST, HIGHEST, "none", "viscosity wanted, between the two")),
        "share of oil A by volume", "x", "", f"x = (W(ν) − W(ν_B))/(W(ν_A) − W(ν_B)), {_W}",
        "basis of ASTM D7152, inverted", "from memory", _NOTE + " Volume fractions.",
    ),
    Formula(
        "blending_index", _SUBJECT, "Viscosity blending number", blending_index,
        (Input("viscosity", "ν", "mm²/s", LOWEST, HIGHEST, "up", "viscosity"),),
        "viscosity blending number", "VBN", "", "VBN = 14.534·ln ln(ν + 0.8) + 10.975",
        "Refutas equation, public worked example, no clause", "yes",
        "Natural logarithms; a form with decimal ones is in circulation and does not give the published example.",
    ),
    Formula(
        "blend_viscosity_by_mass", _SUBJECT, "Viscosity of a blend of two oils, by mass", blend_viscosity_by_mass,
        (_A, _B, Input("share_a", "w", "", 0, 1, "none", "share of oil A by mass")),
        "viscosity of the blend", "ν", "mm²/s", f"VBN(ν) = w·VBN(ν_A) + (1 − w)·VBN(ν_B), {_VBN}",
        "Refutas equation, public worked example, no clause", "yes",
        _NOTE + " Mass fractions; other texts use the same equation with volume fractions.",
    ),
)
