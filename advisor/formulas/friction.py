"""Friction and heat of rolling bearings: the torque after Palmgren, and the heat that a housing takes away."""

from __future__ import annotations

from math import pi
from typing import NamedTuple

from advisor.formulas.bearings import mean_diameter
from advisor.formulas.formula import Choice, Formula, Input, Lookup, Named, OutOfRange, demand_positive, demand_within
from advisor.formulas.solving import crossing

SLOW = 2000.0  # mm²/s·1/min: viscosity times speed, below which the torque no longer falls
LARGE_AREA = 50_000.0  # mm²
REFERENCE_VISCOSITY, REFERENCE_LOAD = 12.0, 0.05  # mm²/s at 70 °C; share of the static rating: radial bearings
FASTEST = 1e7  # 1/min, the upper end of the search for the reference speed


class Friction(NamedTuple):
    """Friction factors of a bearing type: f₀ as ranges for oil mist, bath or grease, vertical or jet; f₁ as text."""

    mist: str
    bath_or_grease: str
    vertical_or_jet: str
    load: str = "not listed"


# Palmgren; Harris, Rolling Bearing Analysis. From memory.
FRICTION: dict[str, Friction] = {
    "deep_groove_ball": Friction("0.7 to 1", "1.5 to 2", "3 to 4", "0.0006 to 0.0009 · (P₀/C₀)^0.55"),
    "angular_contact_ball": Friction("1", "2", "4", "0.001 · (P₀/C₀)^0.33"),
    "self_aligning_ball": Friction("0.7 to 1", "1.5 to 2", "3 to 4", "0.0003 · (P₀/C₀)^0.4"),
    "cylindrical_roller": Friction("1 to 1.5", "2 to 3", "4 to 6", "0.0002 to 0.0004"),
    "cylindrical_roller_full_complement": Friction("not listed", "2.5 to 4", "not listed"),
    "tapered_roller": Friction("1.5 to 2", "3 to 4", "6 to 8", "0.0004"),
    "needle_roller": Friction("3 to 6", "6 to 12", "12 to 24"),
    "spherical_roller": Friction("2 to 3", "4 to 6", "8 to 12", "0.0002 to 0.0005"),
    "thrust_ball": Friction("0.7 to 1", "1.5 to 2", "3 to 4", "0.0008 · (P₀/C₀)^0.33"),
    "thrust_cylindrical_roller": Friction("not listed", "2 to 3", "not listed"),
    "thrust_spherical_roller": Friction("not listed", "2.5 to 5", "5 to 10"),
}


def viscous_torque(f0: float, viscosity: float, speed_rpm: float, mean_diameter_mm: float) -> float:
    """Torque M₀ of the oil in N·mm, from f₀, the viscosity in mm²/s, the speed in 1/min and the mean diameter in mm.

    Equation: M₀ = f₀·10⁻⁷·(ν·n)^(2/3)·d_m³ where ν·n ≥ 2000; else M₀ = f₀·160·10⁻⁷·d_m³.
    Range: moderate speeds; at ν·n = 2000 the first law lies 0.8 % below the second. Source: Palmgren, textbooks.

    >>> round(viscous_torque(2, 20, 3000, 46), 2)
    29.84
    """
    demand_positive(mean_diameter_mm, "mean diameter", "mm")
    stirring = viscosity * speed_rpm
    return f0 * 1e-7 * (stirring ** (2.0 / 3.0) if stirring >= SLOW else 160.0) * mean_diameter_mm**3


def load_torque_factor(coefficient: float, load_ratio: float, exponent: float) -> float:
    """Friction factor f₁, without unit, of a ball bearing from the share of its static rating in use.

    Equation: f₁ = z·(P₀/C₀)^y, z and y of the bearing type. Range: shares of 0 to 1. Source: Palmgren, textbooks.

    >>> round(load_torque_factor(0.001, 0.1, 0.33), 6)
    0.000468
    """
    demand_within(load_ratio, 0, 1, "share of the static rating in use")
    return float(coefficient * load_ratio**exponent)


def load_torque(f1: float, load_n: float, mean_diameter_mm: float) -> float:
    """Torque M₁ of the load in N·mm, from f₁, the load P₁ in N and the mean diameter in mm.

    Equation: M₁ = f₁·P₁·d_m. Range: moderate speeds. Source: Palmgren, textbooks.

    >>> round(load_torque(0.0002, 2000, 46), 2)
    18.4
    """
    return f1 * load_n * mean_diameter_mm


def power_loss(torque_nmm: float, speed_rpm: float) -> float:
    """Power loss of a bearing in W, from its torque in N·mm and its speed in 1/min.

    Equation: N = π·n·M/30000. Range: any. Source: mechanics.

    >>> round(power_loss(100, 3000), 2)
    31.42
    """
    return pi * speed_rpm * torque_nmm / 30_000.0


def heat_emitting_area(bore_mm: float, outside_mm: float, width_mm: float) -> float:
    """Heat emitting reference area of a radial bearing in mm², from bore, outside diameter and width in mm.

    Equation: A_r = π·B·(D + d). Range: radial bearings. Source: ISO 15312, from memory.

    >>> round(heat_emitting_area(30, 62, 16))
    4624
    """
    demand_positive(width_mm, "width", "mm")
    return pi * width_mm * 2.0 * mean_diameter(bore_mm, outside_mm)


def reference_heat_flow(area_mm2: float) -> float:
    """Reference heat flow density of a radial bearing in W/mm², from its heat emitting area in mm².

    Equation: q_r = 0.016 up to 50 000 mm²; q_r = 0.016·(A_r/50000)^−0.34 above.
    Range: radial bearings. Source: ISO 15312, from memory.

    >>> round(reference_heat_flow(100_000), 5)
    0.01264
    """
    demand_positive(area_mm2, "heat emitting area", "mm²")
    return float(0.016 * max(1.0, area_mm2 / LARGE_AREA) ** -0.34)


def reference_heat_flow_thrust(area_mm2: float) -> float:
    """Reference heat flow density of a thrust bearing in W/mm², from its heat emitting area in mm².

    Equation: q_r = 0.020 up to 50 000 mm²; q_r = 0.020·(A_r/50000)^−0.16 above.
    Range: thrust bearings. Source: ISO 15312, from memory.

    >>> round(reference_heat_flow_thrust(100_000), 4)
    0.0179
    """
    demand_positive(area_mm2, "heat emitting area", "mm²")
    return float(0.020 * max(1.0, area_mm2 / LARGE_AREA) ** -0.16)


def thermal_reference_speed(
    bore_mm: float, outside_mm: float, width_mm: float, static_rating_n: float, f0: float, f1: float
) -> float:
    """Thermal reference speed of a radial bearing in 1/min: dimensions in mm, static rating in N, reference f₀ and f₁.

    Equation: the n with π·n/30000·(M₀ + M₁) = q_r·A_r, at 12 mm²/s and P₁ = 0.05·C₀, by bisection.
    Range: radial bearings, 70 °C with an ambient of 20 °C. Source: ISO 15312; its figures from memory.

    >>> round(thermal_reference_speed(30, 62, 16, 11_200, 2, 0.0002))
    12031
    """
    demand_positive(f0, "friction factor f₀")
    area, diameter = heat_emitting_area(bore_mm, outside_mm, width_mm), mean_diameter(bore_mm, outside_mm)
    of_load = load_torque(f1, REFERENCE_LOAD * static_rating_n, diameter)

    def heat(speed_rpm: float) -> float:
        return power_loss(viscous_torque(f0, REFERENCE_VISCOSITY, speed_rpm, diameter) + of_load, speed_rpm)

    emitted = reference_heat_flow(area) * area
    if not heat(FASTEST) >= emitted:
        raise OutOfRange("With so little friction no speed below 10 000 000 1/min brings the bearing to 70 °C.")
    return crossing(heat, emitted, 0.0, FASTEST)


def palmgren_factors(bearing: str) -> Named:
    """The friction factors f₀ and f₁ of a bearing type. Range: the types listed. Source: Palmgren; Harris, from memory.

    >>> palmgren_factors("tapered_roller").text
    'f₀: oil mist 1.5 to 2, bath or grease 3 to 4, vertical shaft or jet 6 to 8; f₁: 0.0004'
    """
    if bearing not in FRICTION:
        raise OutOfRange(f"'{bearing}' is no bearing type here; they are {', '.join(FRICTION)}.")
    row = FRICTION[bearing]
    return Named(
        tuple(row),
        f"f₀: oil mist {row.mist}, bath or grease {row.bath_or_grease}, "
        f"vertical shaft or jet {row.vertical_or_jet}; f₁: {row.load}",
    )


_SUBJECT = "friction and heat"
_PALMGREN = "Palmgren; Harris, Rolling Bearing Analysis, no clause"
_FRESH = "Fresh grease behaves like two to four times f₀ until it has made its channels."
_ISO = "ISO 15312"
_MEAN = Input("mean_diameter_mm", "d_m", "mm", 5, 5500, "up", "mean diameter")
_SPEED = Input("speed_rpm", "n", "1/min", 0.1, 100_000, "up", "speed")
_AREA = Input("area_mm2", "A_r", "mm²", 50, 1e8, "down", "heat emitting area", (LARGE_AREA,))

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "viscous_torque", _SUBJECT, "Torque of the oil in a bearing", viscous_torque,
        (Input("f0", "f₀", "", 0.5, 25, "up", "friction factor f₀"),
         Input("viscosity", "ν", "mm²/s", 1, 100_000, "up", "viscosity at running temperature"), _SPEED, _MEAN),
        "torque of the oil", "M₀", "N·mm", "M₀ = f₀·10⁻⁷·(ν·n)^(2/3)·d_m³ where ν·n ≥ 2000; else f₀·160·10⁻⁷·d_m³",
        _PALMGREN, "from memory", f"At ν·n = 2000 the torque drops by 0.8 %. {_FRESH}",
    ),
    Formula(
        "load_torque_factor", _SUBJECT, "Friction factor of the load", load_torque_factor,
        (Input("coefficient", "z", "", 0.0001, 0.001, "up", "coefficient of the bearing type"),
         Input("load_ratio", "r", "", 0.001, 1, "up", "share P₀/C₀ of the static rating in use"),
         Input("exponent", "y", "", 0, 0.6, "down", "exponent of the bearing type")),
        "friction factor f₁", "f₁", "", "f₁ = z·r^y", _PALMGREN, "from memory",
    ),
    Formula(
        "load_torque", _SUBJECT, "Torque of the load in a bearing", load_torque,
        (Input("f1", "f₁", "", 0.00005, 0.005, "up", "friction factor f₁"),
         Input("load_n", "P₁", "N", 0, 1e8, "up", "load that brakes the bearing"), _MEAN),
        "torque of the load", "M₁", "N·mm", "M₁ = f₁·P₁·d_m", _PALMGREN, "from memory",
    ),
    Formula(
        "power_loss", _SUBJECT, "Power loss of a bearing", power_loss,
        (Input("torque_nmm", "M", "N·mm", 0, 1e9, "up", "torque, M₀ + M₁"), _SPEED),
        "power loss", "N", "W", "N = π·n·M/30000", "mechanics, no clause", "common practice",
    ),
    Formula(
        "heat_emitting_area", _SUBJECT, "Heat emitting area of a radial bearing", heat_emitting_area,
        (Input("bore_mm", "d", "mm", 1, 5000, "up", "bore"),
         Input("outside_mm", "D", "mm", 2, 6000, "up", "outside diameter"),
         Input("width_mm", "B", "mm", 1, 2000, "up", "width")),
        "heat emitting area", "A_r", "mm²", "A_r = π·B·(D + d)", _ISO, "from memory",
    ),
    Formula(
        "reference_heat_flow", _SUBJECT, "Reference heat flow density, radial bearing", reference_heat_flow, (_AREA,),
        "reference heat flow density", "q_r", "W/mm²", "q_r = 0.016·max(1, A_r/50000)^−0.34", _ISO, "from memory",
    ),
    Formula(
        "reference_heat_flow_thrust", _SUBJECT, "Reference heat flow density, thrust bearing",
        reference_heat_flow_thrust, (_AREA,), "reference heat flow density", "q_r", "W/mm²",
        "q_r = 0.020·max(1, A_r/50000)^−0.16", _ISO, "from memory",
    ),
    Formula(
        "thermal_reference_speed", _SUBJECT, "Thermal reference speed of a radial bearing", thermal_reference_speed,
        # A larger bore means more friction and more area; a larger outside diameter too.
        (Input("bore_mm", "d", "mm", 5, 2000, "none", "bore"),
         Input("outside_mm", "D", "mm", 10, 3000, "none", "outside diameter"),
         Input("width_mm", "B", "mm", 3, 1000, "up", "width"),
         Input("static_rating_n", "C₀", "N", 100, 1e8, "down", "static load rating"),
         Input("f0", "f₀", "", 0.5, 12, "down", "reference friction factor f₀"),
         Input("f1", "f₁", "", 0.00005, 0.001, "down", "reference friction factor f₁")),
        "thermal reference speed", "n", "1/min",
        "n such that π·n/30000·(f₀·10⁻⁷·(12·n)^(2/3)·d_m³ + f₁·0.05·C₀·d_m) = q_r·π·B·(D + d), d_m = (d + D)/2", _ISO,
        "from memory", "70 °C in an ambient of 20 °C, 12 mm²/s, a twentieth of the static rating: these were read in "
        "part. Examples: tapered 02 series f₀ 3.0 and f₁ 0.0004, cylindrical 2 series 1.7 and 0.00025.",
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "palmgren_factors", _SUBJECT, "Friction factors of a bearing type", palmgren_factors,
        (Choice("bearing", "type", tuple(FRICTION), "bearing type"),),
        "friction factors", "f", "", "f = row of type in the table", _PALMGREN, "from memory", _FRESH,
    ),
)
