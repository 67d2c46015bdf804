"""Viscosities in seconds and degrees of flow cups: Saybolt, Engler, Redwood. Each is bound to its temperature."""

from __future__ import annotations

from advisor.formulas.formula import Formula, Input, demand_within
from advisor.formulas.solving import crossing

THICKEST = 1e6  # mm²/s, up to which a time of flow is turned back into a viscosity
THINNEST_UNIVERSAL, THINNEST_FUROL = 1.8, 48.0  # mm²/s, where the scales begin
SHORTEST_REDWOOD, LONGEST_REDWOOD = 34.0, 1e6  # s
REDWOOD_JOINT = 100.0  # s
LARGEST_ENGLER = 1e5  # °E


def saybolt_universal(viscosity: float, temperature_c: float) -> float:
    """Saybolt Universal viscosity in s, from the kinematic viscosity in mm²/s at the same temperature in °C.

    Equation: S = (4.6324·ν + (1 + 0.03264·ν)/((3930.2 + 262.7·ν + 23.97·ν² + 1.646·ν³)·10⁻⁵))·
    (1 + 0.000061·(t_F − 100)), t_F = 1.8·t + 32. From 75 mm²/s on it is linear within 0.13 %.
    Range: 1.8 mm²/s and above. Source: ASTM D2161, equation for any temperature in °F.

    >>> round(saybolt_universal(32, 37.7777778), 1)
    150.5
    """
    demand_within(viscosity, THINNEST_UNIVERSAL, THICKEST, "viscosity on the Saybolt Universal scale", "mm²/s")
    tube = 3930.2 + viscosity * (262.7 + viscosity * (23.97 + 1.646 * viscosity))
    at_100_f = 4.6324 * viscosity + (1.0 + 0.03264 * viscosity) / (tube * 1e-5)
    return at_100_f * (1.0 + 0.000061 * (1.8 * temperature_c + 32.0 - 100.0))


def viscosity_from_saybolt(saybolt_s: float, temperature_c: float) -> float:
    """Kinematic viscosity in mm²/s, from the Saybolt Universal viscosity in s at the same temperature in °C.

    Equation: the ν whose Saybolt Universal viscosity is S, by bisection.
    Range: times that belong to 1.8 mm²/s and above, about 32 s. Source: ASTM D2161, inverted.

    >>> round(viscosity_from_saybolt(150.49, 37.7777778), 2)
    32.0
    """
    def seconds(viscosity: float) -> float:
        return saybolt_universal(viscosity, temperature_c)

    shortest, longest = seconds(THINNEST_UNIVERSAL), seconds(THICKEST)
    demand_within(saybolt_s, shortest, longest, "Saybolt Universal viscosity", "s")
    return crossing(seconds, saybolt_s, THINNEST_UNIVERSAL, THICKEST)


def saybolt_furol_122(viscosity: float) -> float:
    """Saybolt Furol viscosity in s at 122 °F (50 °C), from the kinematic viscosity in mm²/s at that temperature.

    Equation: S = 0.4717·ν + 13924/(ν² − 72.59·ν + 6816). Range: 48 mm²/s and above. Source: ASTM D2161, from memory.

    >>> round(saybolt_furol_122(1300), 1)
    613.2
    """
    demand_within(viscosity, THINNEST_FUROL, THICKEST, "viscosity on the Saybolt Furol scale", "mm²/s")
    return 0.4717 * viscosity + 13924.0 / (viscosity * viscosity - 72.59 * viscosity + 6816.0)


def saybolt_furol_210(viscosity: float) -> float:
    """Saybolt Furol viscosity in s at 210 °F (98.9 °C), from the kinematic viscosity in mm²/s at that temperature.

    Equation: S = 0.4792·ν + 5610/(ν² + 2130). Range: 48 mm²/s and above. Source: ASTM D2161, from memory.

    >>> round(saybolt_furol_210(100), 1)
    48.4
    """
    demand_within(viscosity, THINNEST_FUROL, THICKEST, "viscosity on the Saybolt Furol scale", "mm²/s")
    return 0.4792 * viscosity + 5610.0 / (viscosity * viscosity + 2130.0)


def viscosity_from_furol_122(furol_s: float) -> float:
    """Kinematic viscosity in mm²/s, from the Saybolt Furol viscosity in s, both at 122 °F (50 °C).

    Equation: the ν whose Saybolt Furol viscosity is S, by bisection.
    Range: times that belong to 48 mm²/s and above, about 25 s. Source: ASTM D2161, from memory, inverted.

    >>> round(viscosity_from_furol_122(613.22))
    1300
    """
    shortest, longest = saybolt_furol_122(THINNEST_FUROL), saybolt_furol_122(THICKEST)
    demand_within(furol_s, shortest, longest, "Saybolt Furol viscosity at 122 °F", "s")
    return crossing(saybolt_furol_122, furol_s, THINNEST_FUROL, THICKEST)


def viscosity_from_furol_210(furol_s: float) -> float:
    """Kinematic viscosity in mm²/s, from the Saybolt Furol viscosity in s, both at 210 °F (98.9 °C).

    Equation: the ν whose Saybolt Furol viscosity is S, by bisection.
    Range: times that belong to 48 mm²/s and above, about 25 s. Source: ASTM D2161, from memory, inverted.

    >>> round(viscosity_from_furol_210(48.4))
    100
    """
    shortest, longest = saybolt_furol_210(THINNEST_FUROL), saybolt_furol_210(THICKEST)
    demand_within(furol_s, shortest, longest, "Saybolt Furol viscosity at 210 °F", "s")
    return crossing(saybolt_furol_210, furol_s, THINNEST_FUROL, THICKEST)


def viscosity_from_engler(engler: float) -> float:
    """Kinematic viscosity in mm²/s, from the Engler viscosity in °E at the same temperature.

    Equation: ν = E·7.6^(1 − 1/E³). Range: 1 °E and above. Source: Vogel's equation, old DIN 51560, from memory.

    >>> round(viscosity_from_engler(5), 1)
    37.4
    """
    demand_within(engler, 1.0, LARGEST_ENGLER, "Engler viscosity", "°E")
    return float(engler * 7.6 ** (1.0 - engler**-3.0))


def engler_degrees(viscosity: float) -> float:
    """Engler viscosity in °E, from the kinematic viscosity in mm²/s at the same temperature.

    Equation: the E with ν = E·7.6^(1 − 1/E³), by bisection.
    Range: 1 mm²/s and above. Source: Vogel's equation, old DIN 51560, from memory, inverted.

    >>> round(engler_degrees(37.4), 2)
    5.0
    """
    demand_within(viscosity, 1.0, viscosity_from_engler(LARGEST_ENGLER), "viscosity on the Engler scale", "mm²/s")
    return crossing(viscosity_from_engler, viscosity, 1.0, LARGEST_ENGLER)


def viscosity_from_redwood(redwood_s: float) -> float:
    """Kinematic viscosity in mm²/s, from the viscosity in s of the Redwood No. 1 cup at the same temperature.

    Equation: ν = 0.260·s − 179/s up to 100 s; ν = 0.247·s − 50/s above.
    Range: 34 s and above. Source: formula in common use, from memory.

    >>> round(viscosity_from_redwood(200), 2)
    49.15
    """
    demand_within(redwood_s, SHORTEST_REDWOOD, LONGEST_REDWOOD, "Redwood No. 1 viscosity", "s")
    if redwood_s <= REDWOOD_JOINT:
        return 0.260 * redwood_s - 179.0 / redwood_s
    return 0.247 * redwood_s - 50.0 / redwood_s


def redwood_seconds(viscosity: float) -> float:
    """Viscosity in s of the Redwood No. 1 cup, from the kinematic viscosity in mm²/s at the same temperature.

    Equation: the s whose kinematic viscosity is ν, by bisection.
    Range: viscosities that belong to 34 s and above, about 3.6 mm²/s. Source: formula in common use, inverted.

    >>> round(redwood_seconds(49.15))
    200
    """
    thinnest, thickest = viscosity_from_redwood(SHORTEST_REDWOOD), viscosity_from_redwood(LONGEST_REDWOOD)
    demand_within(viscosity, thinnest, thickest, "viscosity on the Redwood No. 1 scale", "mm²/s")
    return crossing(viscosity_from_redwood, viscosity, SHORTEST_REDWOOD, LONGEST_REDWOOD)


_SUBJECT = "conventional units"
_KINEMATIC = "kinematic viscosity"
_SAME = "Both viscosities belong to one temperature."
_UNIVERSAL = (
    "S = (4.6324·ν + (1 + 0.03264·ν)/((3930.2 + 262.7·ν + 23.97·ν² + 1.646·ν³)·10⁻⁵))·(1 + 0.000061·(1.8·t − 68))"
)
_UNIVERSAL_NOTE = (
    f"No uncertainty is stated; an open library agrees to four decimals. {_SAME} Usual are 100 °F "
    "(37.8 °C) and 210 °F (98.9 °C), never 40 °C: bring the viscosity to that temperature first. From 75 mm²/s on "
    "S = 4.632·ν at 100 °F and 4.664·ν at 210 °F."
)
_FUROL_NOTE = f"{_SAME} An open table differs by up to 4 %."
_ENGLER_NOTE = (
    f"Uncertain by 3 %, against one open table by up to 4 %, below 1.8 °E by up to 7 %. {_SAME} "
    "Usual are 20, 50 and 100 °C."
)
_REDWOOD_NOTE = (
    f"Uncertain by 5 %, against one open table by up to 6 %. {_SAME} Usual are 70, 140 and 200 °F. "
    "At 100 s the two branches differ by 0.04 %."
)
_TEMPERATURE = Input("temperature_c", "t", "°C", -20, 180, "up", "temperature of both viscosities")
_COOLING = Input("temperature_c", "t", "°C", -20, 180, "down", "temperature of both viscosities")
_THICK = Input("viscosity", "ν", "mm²/s", THINNEST_FUROL, 100_000, "up", _KINEMATIC)
_FUROL = Input("furol_s", "S", "s", 26, 40_000, "up", "Saybolt Furol viscosity")
_DIN = "Vogel's equation, old DIN 51560, no clause"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "saybolt_universal", _SUBJECT, "Saybolt Universal viscosity", saybolt_universal,
        (Input("viscosity", "ν", "mm²/s", THINNEST_UNIVERSAL, 100_000, "up", _KINEMATIC), _TEMPERATURE),
        "Saybolt Universal viscosity", "S", "s", _UNIVERSAL, "ASTM D2161, equation for any temperature", "yes",
        _UNIVERSAL_NOTE,
    ),
    Formula(
        "viscosity_from_saybolt", _SUBJECT, "Viscosity from Saybolt Universal", viscosity_from_saybolt,
        (Input("saybolt_s", "S", "s", 32.3, 400_000, "up", "Saybolt Universal viscosity"), _COOLING),
        _KINEMATIC, "ν", "mm²/s", f"ν such that {_UNIVERSAL}", "ASTM D2161, inverted by bisection", "yes",
        _UNIVERSAL_NOTE,
    ),
    Formula(
        "saybolt_furol_122", _SUBJECT, "Saybolt Furol viscosity at 122 °F", saybolt_furol_122, (_THICK,),
        "Saybolt Furol viscosity", "S", "s", "S = 0.4717·ν + 13924/(ν² − 72.59·ν + 6816)", "ASTM D2161, no clause",
        "from memory", f"At 122 °F (50 °C) only. {_FUROL_NOTE}",
    ),
    Formula(
        "viscosity_from_furol_122", _SUBJECT, "Viscosity from Saybolt Furol at 122 °F", viscosity_from_furol_122,
        (_FUROL,), _KINEMATIC, "ν", "mm²/s", "ν such that S = 0.4717·ν + 13924/(ν² − 72.59·ν + 6816)",
        "ASTM D2161, inverted by bisection", "from memory", f"At 122 °F (50 °C) only. {_FUROL_NOTE}",
    ),
    Formula(
        "saybolt_furol_210", _SUBJECT, "Saybolt Furol viscosity at 210 °F", saybolt_furol_210, (_THICK,),
        "Saybolt Furol viscosity", "S", "s", "S = 0.4792·ν + 5610/(ν² + 2130)", "ASTM D2161, no clause",
        "from memory", f"At 210 °F (98.9 °C) only. {_FUROL_NOTE}",
    ),
    Formula(
        "viscosity_from_furol_210", _SUBJECT, "Viscosity from Saybolt Furol at 210 °F", viscosity_from_furol_210,
        (_FUROL,), _KINEMATIC, "ν", "mm²/s", "ν such that S = 0.4792·ν + 5610/(ν² + 2130)",
        "ASTM D2161, inverted by bisection", "from memory", f"At 210 °F (98.9 °C) only. {_FUROL_NOTE}",
    ),
    Formula(
        "viscosity_from_engler", _SUBJECT, "Viscosity from Engler degrees", viscosity_from_engler,
        (Input("engler", "E", "°E", 1, 10_000, "up", "Engler viscosity"),),
        _KINEMATIC, "ν", "mm²/s", "ν = E·7.6^(1 − 1/E³)", _DIN, "from memory", _ENGLER_NOTE,
    ),
    Formula(
        "engler_degrees", _SUBJECT, "Engler degrees", engler_degrees,
        (Input("viscosity", "ν", "mm²/s", 1, 70_000, "up", _KINEMATIC),),
        "Engler viscosity", "E", "°E", "E such that ν = E·7.6^(1 − 1/E³)", f"{_DIN}, inverted by bisection",
        "from memory", _ENGLER_NOTE,
    ),
    Formula(
        "viscosity_from_redwood", _SUBJECT, "Viscosity from Redwood No. 1", viscosity_from_redwood,
        (Input("redwood_s", "s", "s", SHORTEST_REDWOOD, 100_000, "up", "Redwood No. 1 viscosity", (REDWOOD_JOINT,)),),
        _KINEMATIC, "ν", "mm²/s", "ν = 0.260·s − 179/s where s ≤ 100; else ν = 0.247·s − 50/s",
        "formula in common use, no clause", "from memory", _REDWOOD_NOTE,
    ),
    Formula(
        "redwood_seconds", _SUBJECT, "Redwood No. 1 seconds", redwood_seconds,
        (Input("viscosity", "ν", "mm²/s", 3.6, 24_000, "up", _KINEMATIC, (24.2,)),),
        "Redwood No. 1 viscosity", "s", "s", "s such that ν = 0.260·s − 179/s where s ≤ 100; else ν = 0.247·s − 50/s",
        "formula in common use, inverted by bisection", "from memory", _REDWOOD_NOTE,
    ),
)
