"""The cold start: how far the pour point is away, what a thick oil lets a machine do, what greases are tested for."""

from __future__ import annotations

from math import inf
from typing import NamedTuple

from advisor.formulas.formula import Choice, Formula, Input, Lookup, Named, OutOfRange, demand_positive, plain

POUR_POINT_MARGIN = 5.0  # K, least distance of the coldest start from the pour point; read for gear oils


class StartClass(NamedTuple):
    """Up to which viscosity in mm²/s an oil lets a machine start freely, and unloaded with what care."""

    free: float
    unloaded: float
    care: str


# Common practice, from memory. The 150 000 mPa·s of SAE J306 belongs to axle pinions, not to industrial gears.
START_CLASSES: dict[str, StartClass] = {
    "dip_or_splash": StartClass(15_000, 50_000, "start unloaded; pre-heating is advised"),
    "pump_fed": StartClass(1000, 2000, "start unloaded, with a relief valve and the word of the pump's maker"),
    "ring_oiled_sleeve": StartClass(2000, 2000, ""),
}
# From memory; the test temperature is the lowest of service.
GREASE_COLD_TESTS: dict[str, str] = {
    "astm_d1478": "torque at most 1 N·m at the start and 0.1 N·m after 60 min (ball bearing)",
    "ip_186": "torque at most 1000 mN·m at the start and 100 mN·m running",
    "din_51805": "flow pressure at most 1400 hPa",
}


def pour_point_margin(temperature_c: float, pour_point_c: float) -> float:
    """Margin of the coldest start above the pour point in K, both in °C.

    Equation: m = t − t_pour. Range: usual are 5 to 10 K at least; a margin alone does not prove that the oil flows.
    Source: common practice; 5 K for gear oils was read.

    >>> pour_point_margin(-10, -21)
    11
    """
    return temperature_c - pour_point_c


def start_judgement(duty: str, viscosity: float, margin_k: float) -> Named:
    """How a machine may start, from the viscosity at the coldest start in mm²/s and the margin to the pour point in K.

    Range: viscosities above 0. Source: common practice, from memory; automatic feeders: the maker.

    >>> start_judgement("dip_or_splash", 20_000, 12).names, start_judgement("dip_or_splash", 20_000, 3).names
    (('unloaded',), ('barred',))
    """
    if duty not in START_CLASSES:
        raise OutOfRange(f"'{duty}' is no way of feeding here; they are {', '.join(START_CLASSES)}.")
    demand_positive(viscosity, "viscosity at the coldest start", "mm²/s")
    row = START_CLASSES[duty]
    if not -inf < margin_k < inf:
        raise OutOfRange(f"The margin to the pour point must be a number of K, but it is {plain(margin_k)}.")
    if margin_k < POUR_POINT_MARGIN:
        return Named(("barred",), "barred without a heater: within 5 K of the pour point")
    if viscosity <= row.free:
        return Named(("free",), "starts freely")
    if viscosity <= row.unloaded:
        return Named(("unloaded",), row.care)
    return Named(("barred",), f"barred without a heater: above {plain(row.unloaded)} mm²/s")


def grease_cold_limit(test: str) -> Named:
    """What a grease has to show in a cold test. Range: the tests listed. Source: the limits in use, from memory.

    >>> grease_cold_limit("din_51805").text
    'flow pressure at most 1400 hPa'
    """
    if test not in GREASE_COLD_TESTS:
        raise OutOfRange(f"'{test}' is no cold test here; they are {', '.join(GREASE_COLD_TESTS)}.")
    return Named((test,), GREASE_COLD_TESTS[test])


_SUBJECT = "cold start"
_PRACTICE = "common practice, no source"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "pour_point_margin", _SUBJECT, "Margin above the pour point", pour_point_margin,
        (Input("temperature_c", "t", "°C", -100, 100, "up", "coldest start"),
         Input("pour_point_c", "t_pour", "°C", -100, 60, "down", "pour point")),
        "margin above the pour point", "m", "K", "m = t − t_pour", _PRACTICE, "common practice",
        "At least 5 K for gear oils, 5 to 10 K in practice. The pour point alone does not prove that an oil can be "
        "pumped: look at the viscosity at the start as well.",
    ),
)

LOOKUPS: tuple[Lookup, ...] = (
    Lookup(
        "start_judgement", _SUBJECT, "How a machine may start in the cold", start_judgement,
        (Choice("duty", "duty", tuple(START_CLASSES), "way the oil is fed"),
         Input("viscosity", "ν", "mm²/s", 1, 1e6, "up", "viscosity at the coldest start", (1000, 2000, 15_000, 50_000)),
         Input("margin_k", "m", "K", -50, 150, "down", "margin of the coldest start above the pour point",
               (POUR_POINT_MARGIN,))),
        "start", "start", "", "start = limits of the duty on ν, barred where m < 5", _PRACTICE, "from memory",
        "Gears and bearings fed by dipping or splash; a pump obeys its own limit; automatic feeders: ask their maker.",
    ),
    Lookup(
        "grease_cold_limit", _SUBJECT, "Limit of a grease in a cold test", grease_cold_limit,
        (Choice("test", "test", tuple(GREASE_COLD_TESTS), "cold test"),),
        "limit", "limit", "", "limit = row of the test in the table", "ASTM D1478, IP 186, DIN 51805; limits in use",
        "from memory", "At the lowest temperature of service.",
    ),
)
