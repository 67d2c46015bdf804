"""How long an oil lasts in hot air: oxidation life, the rule of halving, and how many kelvin halve a life."""

from __future__ import annotations

from math import log10

from advisor.formulas.formula import Choice, Formula, Input, Lookup, OutOfRange, demand_positive, demand_within

SLOPE = 4750.0  # K, of log10 of the oil life; Khonsari and Booser
ZERO = 273.0  # K, as the published equations of life have it
COOL_SIDE_CAP = 1.5  # how much a life may gain below the reference temperature; common practice
HALF = log10(2.0)
# k₁ by kind of oil; from memory.
OIL_LIFE_K1: dict[str, float] = {
    "uninhibited": -10.64, "ep_gear": -10.31, "hydraulic": -8.76, "turbine": -8.45, "hydrocracked": -8.05,
}  # fmt: skip


def oil_oxidation_life(temperature_c: float, k1: float) -> float:
    """Oxidation life of an oil in h, from its temperature in °C and the constant k₁ of its kind.

    Equation: log10 L = k₁ + 4750/(t + 273). Range: about 40 to 150 °C, clean oil.
    Source: Khonsari and Booser for form and slope; k₁ from memory.

    >>> round(oil_oxidation_life(100, -8.45))
    19257
    """
    _demand_temperature(temperature_c)
    return float(10.0 ** (k1 + SLOPE / (temperature_c + ZERO)))


def oil_oxidation_life_of(oil: str, temperature_c: float) -> float:
    """Oxidation life in h of a kind of oil at a temperature in °C.

    Equation: log10 L = k₁ + 4750/(t + 273), k₁ of the kind. Range: about 40 to 150 °C, clean oil.
    Source: Khonsari and Booser for form and slope; k₁ from memory.

    >>> round(oil_oxidation_life_of("hydraulic", 80))
    49670
    """
    if oil not in OIL_LIFE_K1:
        raise OutOfRange(f"'{oil}' is no kind of oil here; they are {', '.join(OIL_LIFE_K1)}.")
    return oil_oxidation_life(temperature_c, OIL_LIFE_K1[oil])


def oil_life_factor(temperature_c: float, reference_c: float, step_k: float) -> float:
    """Factor on an oil life, without unit, of a temperature beside the reference, both in °C; step in K.

    Equation: f = min(1.5, 0.5^((t − t₀)/Δ)); usual is Δ = 10 K, t₀ at the hot end of normal running.
    Range: halving in 8 to 10 K fits 100 to 150 °C. Source: common practice; Khonsari and Booser for 100 to 150 °C.

    >>> oil_life_factor(80, 60, 10), oil_life_factor(40, 60, 10)
    (0.25, 1.5)
    """
    demand_positive(step_k, "step of the halving", "K")
    if temperature_c - reference_c <= -step_k:
        return COOL_SIDE_CAP
    return float(min(COOL_SIDE_CAP, 0.5 ** ((temperature_c - reference_c) / step_k)))


def kelvin_per_halving(temperature_c: float, slope_k: float) -> float:
    """How many kelvin halve a life at a temperature in °C, from the slope of its log10 over 1/T in K.

    Equation: Δ = log10 2·(t + 273)²/m, the slope at that temperature.
    Range: slopes above 0. Source: the equation of life, differentiated.

    >>> round(kelvin_per_halving(125, 4750), 1), round(kelvin_per_halving(100, 2450), 1)
    (10.0, 17.1)
    """
    _demand_temperature(temperature_c)
    demand_positive(slope_k, "slope of the life", "K")
    return HALF * (temperature_c + ZERO) ** 2 / slope_k


def _demand_temperature(temperature_c: float) -> None:
    demand_within(temperature_c, -100, 1000, "temperature in an equation of life", "°C")


_SUBJECT = "oil life"
_BOOSER = "Khonsari and Booser, form and slope, no clause"
_TEMPERATURE = Input("temperature_c", "t", "°C", 40, 150, "down", "oil temperature")
_NOTE = (
    "k₁: uninhibited −10.64, EP gear −10.31, hydraulic −8.76, turbine −8.45, hydrocracked −8.05, all from memory. "
    "Name the temperature beside every drain interval; water, metals and dirt shorten the life."
)

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "oil_oxidation_life", _SUBJECT, "Oxidation life of an oil", oil_oxidation_life,
        (_TEMPERATURE, Input("k1", "k₁", "", -11, -8, "up", "constant of the kind of oil")),
        "oxidation life", "L", "h", "log10 L = k₁ + 4750/(t + 273)", _BOOSER, "from memory", _NOTE,
    ),
    Formula(
        "oil_life_factor", _SUBJECT, "Factor of temperature on an oil life", oil_life_factor,
        (Input("temperature_c", "t", "°C", 0, 200, "down", "oil temperature"),
         Input("reference_c", "t₀", "°C", 30, 150, "up", "temperature at which the life holds"),
         # Hotter than the reference a wider step is milder, cooler it gains less.
         Input("step_k", "Δ", "K", 5, 20, "none", "rise that halves the life")),
        "factor of temperature", "f", "", "f = min(1.5, 0.5^((t − t₀)/Δ))",
        "common practice; Khonsari and Booser for 100 to 150 °C", "common practice",
        "t₀ belongs at the hot end of normal running. Below 125 °C a fixed step of 10 K understates the effect "
        "(7.0 K at 60 °C by the slope 4750), which is why the gain on the cool side ends at 1.5.",
    ),
    Formula(
        "kelvin_per_halving", _SUBJECT, "Kelvin that halve a life", kelvin_per_halving,
        (Input("temperature_c", "t", "°C", 0, 200, "up", "temperature"),
         Input("slope_k", "m", "K", 1000, 10_000, "down", "slope: 4750 for oil, 2450 for grease")),
        "rise that halves the life", "Δ", "K", "Δ = log10 2·(t + 273)²/m",
        "equation of life, differentiated; no clause", "yes",
        "The slope at the temperature itself: a whole halving from there takes 2 to 3 % more.",
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "oil_oxidation_life_of", _SUBJECT, "Oxidation life of a kind of oil", oil_oxidation_life_of,
        (Choice("oil", "kind", tuple(OIL_LIFE_K1), "kind of oil"), _TEMPERATURE),
        "oxidation life", "L", "h", "log10 L = k₁ + 4750/(t + 273), k₁ of the kind", _BOOSER, "from memory", _NOTE,
    ),
)
