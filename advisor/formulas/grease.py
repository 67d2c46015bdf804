"""Grease in rolling bearings: how much, and how often."""

from __future__ import annotations

from math import inf, pi, sqrt

from advisor.formulas.formula import Formula, Input, OutOfRange, demand_positive, plain

STEEL = 0.0078  # density of bearing steel, kg/cm³; from memory
LOWEST_SPEED_FACTOR = 10_000.0  # mm/min; below it the interval grows without meaning
HIGHEST_SPEED_RATIO = 0.75  # of the grease speed ceiling of the bearing type


def bearing_free_volume(bore_mm: float, outside_mm: float, width_mm: float, mass_kg: float) -> float:
    """Free volume of a bearing in cm³, from its bore, outside diameter and width in mm and its mass in kg.

    Equation: V = π/4·B·(D² − d²)/1000 − m/0.0078.
    Range: results above 0. Source: common practice, from memory.

    >>> round(bearing_free_volume(30, 62, 16, 0.2), 2)
    11.35
    """
    for value, text in ((bore_mm, "bore"), (outside_mm, "outside diameter"), (width_mm, "width")):
        demand_positive(value, text, "mm")
    demand_positive(mass_kg, "mass", "kg")
    ring = pi / 4.0 * width_mm * (outside_mm**2 - bore_mm**2) / 1000.0
    free = ring - mass_kg / STEEL
    if not 0 < free < inf:
        raise OutOfRange(
            f"A bearing of {plain(bore_mm)} × {plain(outside_mm)} × {plain(width_mm)} mm has no free volume left at "
            f"{plain(mass_kg)} kg; its mass must be more than 0 and below {plain(round(max(ring, 0) * STEEL, 4))} kg."
        )
    return free


def first_fill(free_volume_cm3: float, percent: float) -> float:
    """First grease fill in cm³, a percentage of the free volume in cm³.

    Equation: V_fill = V·p/100. Range: 0 to 100 %. Source: common practice.

    >>> first_fill(40, 30)
    12.0
    """
    return free_volume_cm3 * percent / 100.0


def renewal_quantity(outside_mm: float, width_mm: float, share: float) -> float:
    """Grease in g for one relubrication, from the outside diameter and the width in mm.

    Equation: G = q·D·B; q = 0.005 g/mm² from the side, 0.002 g/mm² through a groove in the outer ring.
    Range: any bearing of usual width. Source: common practice; 0.002 from memory.

    >>> renewal_quantity(90, 20, 0.005)
    9.0
    """
    return share * outside_mm * width_mm


def interval_base(
    speed_rpm: float, bore_mm: float, interval_k: float, speed_factor: float, speed_ratio: float
) -> float:
    """Relubrication interval in h before any factor: speed in 1/min, bore in mm, speed factor n·d_m in mm/min.

    Equation: t_f = K·(14·10⁶/(n·√d) − 4·d); K = 10 radial ball, 5 cylindrical or needle, 1 spherical, tapered, thrust.
    Range: n·d_m of 10 000 mm/min or more, at most 0.75 of the grease speed ceiling of the type, result above 0;
    lithium soap in mineral oil, to 70 °C, horizontal, clean, lightly loaded.
    Source: public handbook form, in no standard.

    >>> round(interval_base(1500, 50, 10, 105_000, 0.3))
    11199
    """
    demand_positive(speed_rpm, "speed", "1/min")
    demand_positive(bore_mm, "bore", "mm")
    demand_positive(interval_k, "constant K of the bearing type")
    if not LOWEST_SPEED_FACTOR <= speed_factor < inf:
        raise OutOfRange(
            "The relubrication interval formula holds from a speed factor of 10 000 mm/min upwards, "
            f"but the speed factor is {plain(speed_factor)} mm/min."
        )
    if not 0 <= speed_ratio <= HIGHEST_SPEED_RATIO:
        raise OutOfRange(
            "The relubrication interval formula holds up to 0.75 of the grease speed ceiling, "
            f"but the bearing runs at {plain(round(speed_ratio, 3))} of it."
        )
    interval = interval_k * (14e6 / (speed_rpm * sqrt(bore_mm)) - 4.0 * bore_mm)
    if not 0 < interval < inf:
        raise OutOfRange(
            "The relubrication interval formula holds while its result is above 0 h, "
            f"but at {plain(speed_rpm)} 1/min and a bore of {plain(bore_mm)} mm it gives {plain(interval)} h."
        )
    return interval


def temperature_factor(temperature_c: float, from_c: float, step_k: float) -> float:
    """Factor of temperature on a grease interval, without unit; temperatures in °C, step in K.

    Equation: f_T = 1 up to the start t₀, above it f_T = 0.5^((t − t₀)/Δ); usual are t₀ = 70 °C and Δ = 15 K.
    Range: within the continuous range of the grease. Source: common practice.

    >>> temperature_factor(85, 70, 15), temperature_factor(60, 70, 15)
    (0.5, 1.0)
    """
    demand_positive(step_k, "step of the halving", "K")
    return float(0.5 ** (max(0.0, temperature_c - from_c) / step_k))


def interval_factor(
    temperature: float, load: float, dust: float, water: float, shock_vibration: float, position: float, air: float
) -> float:
    """All that shortens a grease interval, as one factor without unit.

    Equation: f = f_T·f_load·min(f_dust, f_water)·f_shock·f_position·f_air.
    Range: each factor above 0 and at most 1. Source: common practice.

    >>> interval_factor(0.5, 1, 0.7, 0.5, 1, 0.5, 1)
    0.125
    """
    factors = {"temperature": temperature, "load": load, "dust": dust, "water": water,
               "shock and vibration": shock_vibration, "position": position, "air": air}  # fmt: skip
    for text, value in factors.items():
        if not 0 < value <= 1:
            raise OutOfRange(f"The factor of {text} must be above 0 and at most 1, but it is {plain(value)}.")
    return temperature * load * min(dust, water) * shock_vibration * position * air


def scaled_interval(base_h: float, factor: float) -> float:
    """Relubrication interval in h: the base in h, shortened by the factor of the point.

    Equation: t_r = t_f·f. Range: a factor of 0.1 or more, else no figure should be given. Source: common practice.

    >>> scaled_interval(10_000, 0.25)
    2500.0
    """
    return base_h * factor


_SUBJECT = "grease"
_PRACTICE = "common practice, no source"
_OUTSIDE = Input("outside_mm", "D", "mm", 2, 6000, "up", "outside diameter")
_WIDTH = Input("width_mm", "B", "mm", 1, 2000, "up", "width")


def _factor(name: str, symbol: str, text: str) -> Input:
    return Input(name, symbol, "", 0.01, 1, "up", f"factor of {text}")


FORMULAS: tuple[Formula, ...] = (
    Formula(
        "bearing_free_volume", _SUBJECT, "Free volume of a bearing", bearing_free_volume,
        (Input("bore_mm", "d", "mm", 1, 5000, "down", "bore"), _OUTSIDE, _WIDTH,
         Input("mass_kg", "m", "kg", 0.0001, 100_000, "down", "mass of the bearing")),
        "free volume", "V", "cm³", "V = π/4·B·(D² − d²)/1000 − m/0.0078", _PRACTICE, "from memory",
        "The ring space less the volume of the steel.",
    ),
    Formula(
        "first_fill", _SUBJECT, "First grease fill", first_fill,
        (Input("free_volume_cm3", "V", "cm³", 0, 1_000_000, "up", "free volume"),
         Input("percent", "p", "%", 0, 100, "up", "share of the free volume to be filled")),
        "grease fill", "V_fill", "cm³", "V_fill = V·p/100", _PRACTICE, "common practice",
        "By volume, because heavy greases weigh twice as much as ordinary ones.",
    ),
    Formula(
        "renewal_quantity", _SUBJECT, "Grease for one relubrication", renewal_quantity,
        (_OUTSIDE, _WIDTH, Input("share", "q", "", 0.001, 0.01, "up", "grease in g per mm² of D·B")),
        "grease quantity", "G", "g", "G = q·D·B", _PRACTICE, "common practice",
        "q is 0.005 g/mm² from the side; 0.002 g/mm² through a groove in the outer ring is from memory.",
    ),
    Formula(
        "interval_base", _SUBJECT, "Relubrication interval before factors", interval_base,
        (Input("speed_rpm", "n", "1/min", 1, 100_000, "down", "speed"),
         Input("bore_mm", "d", "mm", 1, 5000, "down", "bore"),
         Input("interval_k", "K", "", 1, 10, "up", "constant of the bearing type: 10, 5 or 1"),
         Input("speed_factor", "A", "mm/min", LOWEST_SPEED_FACTOR, 2_000_000, "none", "speed factor n·d_m"),
         Input("speed_ratio", "r", "", 0, HIGHEST_SPEED_RATIO, "none", "share of the grease speed ceiling in use")),
        "interval before factors", "t_f", "h", "t_f = K·(14·10⁶/(n·√d) − 4·d), guarded by A ≥ 10000 and r ≤ 0.75",
        "public handbook form, in no standard", "common practice",
        "For lithium soap in mineral oil to 70 °C, horizontal shaft, clean, load up to a tenth of the dynamic rating. "
        "Speed factor and speed ratio only guard the formula. No K for full complement and slewing bearings.",
    ),
    Formula(
        "temperature_factor", _SUBJECT, "Factor of temperature on the interval", temperature_factor,
        (Input("temperature_c", "t", "°C", -60, 200, "down", "bearing temperature", (70,)),
         Input("from_c", "t₀", "°C", 40, 120, "up", "temperature where the halving starts"),
         Input("step_k", "Δ", "K", 5, 30, "up", "rise that halves the interval")),
        "factor of temperature", "f_T", "", "f_T = 0.5^(max(0, t − t₀)/Δ)", _PRACTICE, "common practice",
        "Usual are t₀ = 70 °C and Δ = 15 K; only within the continuous range of the grease. The joint moves with t₀.",
    ),
    Formula(
        "interval_factor", _SUBJECT, "Total factor on the interval", interval_factor,
        (_factor("temperature", "f_T", "temperature"), _factor("load", "f_load", "load"),
         _factor("dust", "f_dust", "dust"), _factor("water", "f_water", "water"),
         _factor("shock_vibration", "f_shock", "shock and vibration"), _factor("position", "f_position", "position"),
         _factor("air", "f_air", "air flow")),
        "total factor", "f", "", "f = f_T·f_load·min(f_dust, f_water)·f_shock·f_position·f_air", _PRACTICE,
        "common practice", "Dust and water are one influence: the stronger counts, once.",
    ),
    Formula(
        "scaled_interval", _SUBJECT, "Relubrication interval", scaled_interval,
        (Input("base_h", "t_f", "h", 0, 1_000_000, "up", "interval before factors"),
         Input("factor", "f", "", 0.1, 1, "up", "total factor")),
        "relubrication interval", "t_r", "h", "t_r = t_f·f", _PRACTICE, "common practice",
        "Below a factor of 0.1 or a result of 100 h no figure should be used.",
    ),
)
