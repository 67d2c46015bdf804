"""The running temperature of a bearing where none was measured: an estimate, and how far it may be trusted."""

from __future__ import annotations

from collections.abc import Mapping
from math import inf
from typing import NamedTuple

from advisor.formulas.bearings import mean_diameter
from advisor.formulas.formula import Formula, Input, Lookup, Named, OutOfRange, demand_within, plain
from advisor.formulas.friction import heat_emitting_area, load_torque, power_loss, reference_heat_flow, viscous_torque
from advisor.formulas.solving import crossing
from advisor.formulas.viscosity import HIGHEST, KELVIN, LOWEST, fit, viscosity_on_line

HOTTEST = 400.0  # °C, the upper end of the search
REFERENCE_RISE = 50.0  # K, from 20 to 70 °C, at which the reference heat flow of ISO 15312 is emitted
UNCERTAINTY = 15.0  # K, at best; common practice
# How far each of the figures that go in may be off, as factors; common practice.
DOUBTS: Mapping[str, tuple[float, float]] = {"f₀": (0.7, 1.3), "load": (0.8, 1.2), "cooling": (0.7, 1.3)}


class Bearing(NamedTuple):
    """All that makes and takes the heat of a bearing; dimensions in mm, temperatures in °C, loads in N, heat in W."""

    speed_rpm: float
    bore_mm: float
    outside_mm: float
    width_mm: float
    viscosity_40: float
    viscosity_100: float
    load_n: float
    f0: float
    f1: float
    ambient_c: float
    external_heat_w: float
    cooling: float = 1.0


class Doubt(NamedTuple):
    """What the estimate becomes when one figure is lower or higher than put in, in °C; infinite without a balance."""

    figure: str
    lower: float
    higher: float


def running_temperature_estimate(
    speed_rpm: float, bore_mm: float, outside_mm: float, width_mm: float, viscosity_40: float, viscosity_100: float,
    load_n: float, f0: float, f1: float, ambient_c: float, external_heat_w: float,
) -> float:  # fmt: skip
    """Estimated running temperature in °C, ±15 K at best: speed in 1/min, dimensions in mm, oil in mm²/s, load in N.

    Equation: the t with π·n/30000·(M₀(t) + M₁) + H = q_r·A_r·(t − t_a)/50, by bisection between t_a and 400 °C.
    Range: radial bearings with a balance below 400 °C. Source: Palmgren; ISO 15312 for the cooling, from memory.

    >>> round(running_temperature_estimate(10_000, 30, 62, 16, 68, 8.7, 1000, 2, 0.0002, 20, 0))
    72
    """
    return _balance(Bearing(
        speed_rpm, bore_mm, outside_mm, width_mm, viscosity_40, viscosity_100, load_n, f0, f1, ambient_c,
        external_heat_w,
    ))  # fmt: skip


def running_temperature_spread(
    speed_rpm: float, bore_mm: float, outside_mm: float, width_mm: float, viscosity_40: float, viscosity_100: float,
    load_n: float, f0: float, f1: float, ambient_c: float, external_heat_w: float,
) -> float:  # fmt: skip
    """How far the estimated running temperature moves in K when one figure is off; never less than 15 K.

    Equation: max(15, |t′ − t|), t′ with f₀ ±30 %, load ±20 % or cooling ±30 %, each alone.
    Range: radial bearings with a balance below 400 °C in every case. Source: common practice.

    >>> round(running_temperature_spread(10_000, 30, 62, 16, 68, 8.7, 1000, 2, 0.0002, 20, 0))
    15
    """
    bearing = Bearing(
        speed_rpm, bore_mm, outside_mm, width_mm, viscosity_40, viscosity_100, load_n, f0, f1, ambient_c,
        external_heat_w,
    )  # fmt: skip
    middle = _balance(bearing)
    return max(UNCERTAINTY, *(abs(each - middle) for doubt in doubts(bearing) for each in (doubt.lower, doubt.higher)))


def running_temperature_doubts(
    speed_rpm: float, bore_mm: float, outside_mm: float, width_mm: float, viscosity_40: float, viscosity_100: float,
    load_n: float, f0: float, f1: float, ambient_c: float, external_heat_w: float,
) -> Named:  # fmt: skip
    """The estimated running temperature together with what it becomes when one figure is off.

    Range: radial bearings with a balance below 400 °C. Source: Palmgren; ISO 15312 for the cooling, from memory.

    >>> print(running_temperature_doubts(10_000, 30, 62, 16, 68, 8.7, 1000, 2, 0.0002, 20, 0).text)
    estimate 72 °C ± 15 K; f₀ −30 % 64 °C, +30 % 78 °C; load −20 % 71 °C, +20 % 73 °C; cooling −30 % 82 °C, +30 % 65 °C
    """
    bearing = Bearing(
        speed_rpm, bore_mm, outside_mm, width_mm, viscosity_40, viscosity_100, load_n, f0, f1, ambient_c,
        external_heat_w,
    )  # fmt: skip
    middle = _balance(bearing)
    told = [f"estimate {middle:.0f} °C ± {UNCERTAINTY:.0f} K"]
    for doubt in doubts(bearing):
        share = round(100 * (DOUBTS[doubt.figure][1] - 1))
        told.append(f"{doubt.figure} −{share} % {_degrees(doubt.lower)}, +{share} % {_degrees(doubt.higher)}")
    return Named((f"{middle:.0f}",), "; ".join(told))


def doubts(bearing: Bearing) -> tuple[Doubt, ...]:
    """What the estimate becomes when f₀, load or cooling is off, each alone."""
    found = []
    for figure, (low, high) in DOUBTS.items():
        name = {"f₀": "f0", "load": "load_n", "cooling": "cooling"}[figure]
        ends = []
        for factor in (low, high):
            try:
                ends.append(_balance(bearing._replace(**{name: getattr(bearing, name) * factor})))
            except OutOfRange:
                ends.append(inf)
        found.append(Doubt(figure, *ends))
    return tuple(found)


def _balance(bearing: Bearing) -> float:
    """The temperature at which as much heat leaves as is made; the surplus of cooling rises with it throughout."""
    demand_within(bearing.ambient_c, -KELVIN + 1, HOTTEST, "ambient temperature", "°C")
    demand_within(bearing.speed_rpm, 0, 1e7, "speed", "1/min")
    line = fit(40.0, bearing.viscosity_40, 100.0, bearing.viscosity_100)
    diameter = mean_diameter(bearing.bore_mm, bearing.outside_mm)
    area = heat_emitting_area(bearing.bore_mm, bearing.outside_mm, bearing.width_mm)
    cooling = bearing.cooling * reference_heat_flow(area) * area / REFERENCE_RISE
    of_load = load_torque(bearing.f1, bearing.load_n, diameter)

    def surplus(temperature_c: float) -> float:
        viscosity = _viscosity(line.intercept, line.slope, temperature_c)
        torque = viscous_torque(bearing.f0, viscosity, bearing.speed_rpm, diameter) + of_load
        return cooling * (temperature_c - bearing.ambient_c) - power_loss(torque, bearing.speed_rpm)

    if not surplus(HOTTEST) >= bearing.external_heat_w >= surplus(bearing.ambient_c):
        raise OutOfRange(
            f"No temperature between {plain(bearing.ambient_c)} and 400 °C lets this bearing give off the heat it "
            "makes: it needs cooling by circulating oil, and a measured temperature."
        )
    return crossing(surplus, bearing.external_heat_w, bearing.ambient_c, HOTTEST)


def _viscosity(intercept: float, slope: float, temperature_c: float) -> float:
    """The viscosity on the line, held at the ends of its equation, so that a search may pass over them."""
    try:
        return viscosity_on_line(intercept, slope, temperature_c)
    except OutOfRange:
        return HIGHEST if temperature_c < 40 else LOWEST


def _degrees(temperature_c: float) -> str:
    return f"{temperature_c:.0f} °C" if temperature_c < inf else "no balance below 400 °C"


_SUBJECT = "friction and heat"
_INPUTS = (
    Input("speed_rpm", "n", "1/min", 1, 30_000, "up", "speed"),
    # Larger bearings stir more and cool more.
    Input("bore_mm", "d", "mm", 5, 1000, "none", "bore"),
    Input("outside_mm", "D", "mm", 10, 1500, "none", "outside diameter"),
    Input("width_mm", "B", "mm", 3, 500, "down", "width"),
    # The line turns about the other point: beyond it, a rise here lowers the viscosity.
    Input("viscosity_40", "ν₄₀", "mm²/s", 5, 1000, "none", "kinematic viscosity at 40 °C"),
    Input("viscosity_100", "ν₁₀₀", "mm²/s", 1.5, 100, "none", "kinematic viscosity at 100 °C"),
    Input("load_n", "P₁", "N", 0, 1e6, "up", "load that brakes the bearing"),
    Input("f0", "f₀", "", 0.5, 12, "up", "friction factor f₀"),
    Input("f1", "f₁", "", 0.00005, 0.001, "up", "friction factor f₁"),
    Input("ambient_c", "t_a", "°C", -40, 80, "up", "ambient temperature"),
    Input("external_heat_w", "H", "W", 0, 10_000, "up", "heat that comes from elsewhere"),
)
_EQUATION = (
    "t such that π·n/30000·(f₀·10⁻⁷·(ν·n)^(2/3)·d_m³ + f₁·P₁·d_m) + H = q_r·π·B·(D + d)·(t − t_a)/50, d_m = (d + D)/2, "
    "ν at t of the line through ν₄₀ and ν₁₀₀"
)
_SOURCE = "Palmgren for the friction; ISO 15312 for the cooling"
_NOTE = (
    "An estimate, ±15 K at best: measure the temperature first. Radial bearings in still air, cooled as in the "
    "reference case of ISO 15312. Fresh grease behaves like two to four times f₀."
)

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "running_temperature_estimate", _SUBJECT, "Estimate of the running temperature, ±15 K",
        running_temperature_estimate, _INPUTS, "estimated running temperature, ±15 K at best", "t", "°C", _EQUATION,
        _SOURCE, "from memory", _NOTE,
    ),
    Formula(
        "running_temperature_spread", _SUBJECT, "Spread of the estimated running temperature",
        running_temperature_spread,
        tuple(Input(each.name, each.symbol, each.unit, each.low, each.high, "none", each.text) for each in _INPUTS),
        "how far the estimate may be off", "Δt", "K",
        f"Δt = max(15, |t′ − t|), t′ with f₀ ±30 %, P₁ ±20 % or cooling ±30 %, {_EQUATION}",
        f"{_SOURCE}; shares of doubt by common practice", "from memory", _NOTE,
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "running_temperature_doubts", _SUBJECT, "Estimate of the running temperature and its doubts",
        running_temperature_doubts, _INPUTS, "estimated running temperature and its doubts", "t", "", _EQUATION,
        _SOURCE, "from memory", _NOTE,
    ),
)
