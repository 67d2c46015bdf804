"""How dirt takes from the life of a rolling bearing: the contamination factor of ISO 281:2007, annex A."""

from __future__ import annotations

from typing import NamedTuple

from advisor.formulas.formula import Choice, Formula, Input, Lookup, OutOfRange, demand_positive, plain

THINNEST_FILM, THICKEST_FILM = 0.1, 4.0  # viscosity ratio: below it the standard is silent, above it nothing is gained
LARGE = 500.0  # mm, from which the slight to typical class of grease has its own constant


class Cleanliness(NamedTuple):
    """The two coefficients of a cleanliness class, and its own size constant for large bearings, if it has one."""

    factor: float
    size_constant: float
    size_constant_large: float | None = None


# ISO 281:2007, annex A. 0.0177 with 1.677 was read in a public text; the other pairs are from memory.
# The digits of the oil classes are the ISO 4406 code without its first number, -/13/10 and so on.
CLEANLINESS: dict[str, Cleanliness] = {
    "online_13_10": Cleanliness(0.0864, 0.5663),
    "online_15_12": Cleanliness(0.0432, 0.9987),
    "online_17_14": Cleanliness(0.0288, 1.6329),
    "online_19_16": Cleanliness(0.0216, 2.3362),
    "bath_13_10": Cleanliness(0.0864, 0.5796),
    "bath_15_12": Cleanliness(0.0288, 1.141),
    "bath_17_14": Cleanliness(0.0133, 1.670),
    "bath_19_16": Cleanliness(0.00864, 2.5164),
    "bath_21_18": Cleanliness(0.00411, 3.8974),
    "grease_high": Cleanliness(0.0864, 0.6796),
    "grease_normal": Cleanliness(0.0432, 1.141),
    "grease_slight_typical": Cleanliness(0.0177, 1.887, 1.677),
    "grease_severe": Cleanliness(0.0115, 2.662),
    "grease_very_severe": Cleanliness(0.00617, 4.06),
}


def contamination_factor(kappa: float, mean_diameter_mm: float, factor: float, size_constant: float) -> float:
    """Contamination factor e_C, 0 to 1, from the viscosity ratio κ, the mean diameter in mm and two coefficients.

    Equation: e_C = a·(1 − c/d_m^(1/3)), a = min(1, f·κ^0.68·d_m^0.55), held to 0 to 1; κ above 4 counts as 4.
    Range: κ of 0.1 and above. Source: ISO 281:2007, annex A.

    >>> round(contamination_factor(1, 70, 0.0864, 0.6796), 4)
    0.7465
    """
    ratio = counted_ratio(kappa)
    demand_positive(mean_diameter_mm, "mean diameter", "mm")
    share = min(1.0, float(factor * ratio**0.68 * mean_diameter_mm**0.55))
    clean = 1.0 - size_constant / float(mean_diameter_mm ** (1.0 / 3.0))
    return max(0.0, min(1.0, share * clean))


def contamination_factor_of(cleanliness: str, kappa: float, mean_diameter_mm: float) -> float:
    """Contamination factor e_C, 0 to 1, of a cleanliness class, from the viscosity ratio κ and the mean diameter in mm.

    Equation: as the contamination factor, with the coefficients of the class; slight to typical contamination of
    grease changes its constant at 500 mm. Range: κ of 0.1 and above. Source: ISO 281:2007, annex A.

    >>> round(contamination_factor_of("grease_severe", 1, 70), 4)
    0.0421
    """
    if cleanliness not in CLEANLINESS:
        raise OutOfRange(f"'{cleanliness}' is no cleanliness class; they are {', '.join(CLEANLINESS)}.")
    row = CLEANLINESS[cleanliness]
    constant = row.size_constant
    if row.size_constant_large is not None and mean_diameter_mm >= LARGE:
        constant = row.size_constant_large
    return contamination_factor(kappa, mean_diameter_mm, row.factor, constant)


def counted_ratio(kappa: float) -> float:
    """The viscosity ratio as it counts in a life calculation, by ISO 281:2007: at most 4, refused below 0.1."""
    if not kappa >= THINNEST_FILM:
        raise OutOfRange(
            f"ISO 281 speaks of viscosity ratios of 0.1 and above, but the ratio is {plain(kappa)}; "
            "below it no life can be calculated."
        )
    return min(kappa, THICKEST_FILM)


_SUBJECT = "rating life"
_KAPPA = Input("kappa", "κ", "", THINNEST_FILM, THICKEST_FILM, "up", "viscosity ratio")
_SOURCE = "ISO 281:2007, annex A"
_NOTE = (
    "The form, its exponents and the pair 0.0177 and 1.677 were read; the other coefficients are from memory and wait "
    "for somebody who holds the standard. κ above 4 counts as 4. Small bearings in dirty classes come to 0."
)

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "contamination_factor", _SUBJECT, "Contamination factor", contamination_factor,
        (_KAPPA, Input("mean_diameter_mm", "d_m", "mm", 5, 5500, "up", "mean diameter"),
         Input("factor", "f", "", 0.004, 0.09, "up", "factor of the cleanliness class"),
         Input("size_constant", "c", "", 0.5, 4.1, "down", "size constant of the cleanliness class")),
        "contamination factor", "e_C", "", "e_C = a·(1 − c/d_m^(1/3)), a = min(1, f·κ^0.68·d_m^0.55), held to 0 to 1",
        _SOURCE, "from memory", _NOTE,
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "contamination_factor_of", _SUBJECT, "Contamination factor of a cleanliness class", contamination_factor_of,
        (Choice("cleanliness", "class", tuple(CLEANLINESS), "cleanliness class"), _KAPPA,
         Input("mean_diameter_mm", "d_m", "mm", 5, 5500, "up", "mean diameter", (LARGE,))),
        "contamination factor", "e_C", "",
        "e_C = a·(1 − c/d_m^(1/3)), a = min(1, f·κ^0.68·d_m^0.55), f and c of the class", _SOURCE, "from memory",
        f"{_NOTE} In slight to typical contamination of grease the factor steps up at 500 mm.",
    ),
)
