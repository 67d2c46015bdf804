"""The table of units: one table drives reading, the cycling of units and printing."""

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Unit:
    """One unit: canonical = (value - zero) * factor; `also` lists other spellings, apart by spaces."""

    spelling: str
    factor: float = 1.0
    also: str = ""
    zero: float = 0.0


@dataclass(frozen=True, slots=True)
class Kind:
    """What is measured, and the units for it, the canonical one first."""

    name: str
    units: tuple[Unit, ...]


_INCH = 25.4                   # mm, exact by definition
_POUND = 0.45359237            # kg, exact by definition
_POUND_FORCE = 4.4482216152605  # N, exact: the pound times standard gravity 9.80665 m/s²
_PSI = _POUND_FORCE / _INCH**2  # MPa
_MONTH = 365.25 / 12           # days: a twelfth of the Julian year

_MASSES = {
    "g": Unit("g", 1.0, "gram grams gr"),
    "kg": Unit("kg", 1000.0, "kilogram kilograms kilo kilos"),
    "mg": Unit("mg", 0.001),
    "lb": Unit("lb", 1000.0 * _POUND, "lbs lbm pound pounds"),
    "oz": Unit("oz", 1000.0 * _POUND / 16, "ounce ounces"),
    "t": Unit("t", 1e6, "tonne tonnes"),
}


def _masses(canonical: str, *others: str) -> tuple[Unit, ...]:
    """The named units of mass, related to the first."""
    base = _MASSES[canonical].factor
    return tuple(
        Unit(unit.spelling, unit.factor / base, unit.also) for unit in (_MASSES[name] for name in (canonical, *others))
    )


KINDS = {
    "°C": Kind("a temperature", (
        Unit("°C", 1.0, "C degC celsius"),
        Unit("°F", 5 / 9, "F degF fahrenheit", zero=32.0),
        Unit("K", 1.0, "kelvin", zero=273.15),
    )),
    "K": Kind("a temperature difference", (
        Unit("K", 1.0, "kelvin °C C degC celsius"),
        Unit("°F", 5 / 9, "F degF fahrenheit"),
    )),
    "mm": Kind("a length", (
        Unit("mm", 1.0, "millimetre millimetres millimeter millimeters"),
        Unit("cm", 10.0, "centimetre centimetres centimeter centimeters"),
        Unit("m", 1000.0, "metre metres meter meters"),
        Unit("in", _INCH, '" inch inches'),
        Unit("ft", 12 * _INCH, "' foot feet"),
        Unit("µm", 0.001, "um micron microns micrometre micrometer"),
    )),
    "1/min": Kind("a speed of rotation", (
        Unit("1/min", 1.0, "rpm r/min rev/min min-1 /min"),
        Unit("1/s", 60.0, "rps r/s rev/s s-1 /s Hz"),
        Unit("rad/s", 30 / math.pi),
    )),
    "mm/min": Kind("a speed factor", (
        Unit("mm/min", 1.0, "mm·rpm mm·1/min mm·min-1 mm·r/min"),
        Unit("m/min", 1000.0),
        Unit("m/s", 60_000.0),
    )),
    "mm²/s": Kind("a kinematic viscosity", (
        Unit("mm²/s", 1.0, "cSt centistoke centistokes mm2s-1"),
        Unit("m²/s", 1e6),
        Unit("St", 100.0, "stoke stokes"),
    )),
    "mPa·s": Kind("a dynamic viscosity", (
        Unit("mPa·s", 1.0, "cP cPs centipoise"),
        Unit("Pa·s", 1000.0),
        Unit("P", 100.0, "poise"),
    )),
    "kg/m³": Kind("a density", (Unit("kg/m³"), Unit("g/cm³", 1000.0, "g/ml g/cc kg/l kg/dm³"))),
    "N": Kind("a force", (
        Unit("N", 1.0, "newton newtons"),
        Unit("kN", 1000.0),
        Unit("MN", 1e6),
        Unit("lbf", _POUND_FORCE),
    )),
    "h": Kind("a time", (
        Unit("h", 1.0, "hour hours hr hrs"),
        Unit("min", 1 / 60, "minute minutes mins"),
        Unit("d", 24.0, "day days"),
        Unit("weeks", 168.0, "week wk"),
    )),
    "g": Kind("a mass", _masses("g", "kg", "oz", "mg", "lb")),
    "kg": Kind("a mass", _masses("kg", "g", "lb", "t")),
    "cm³": Kind("a volume", (
        Unit("cm³", 1.0, "ml cc ccm"),
        Unit("l", 1000.0, "litre litres liter liters dm³"),
        Unit("mm³", 0.001),
        Unit("in³", _INCH**3 / 1000, "cuin"),
    )),
    "MPa": Kind("a pressure", (
        Unit("MPa", 1.0, "megapascal N/mm²"),
        Unit("GPa", 1000.0, "gigapascal"),
        Unit("bar", 0.1),
        Unit("kPa", 0.001, "kilopascal"),
        Unit("hPa", 1e-4, "hectopascal"),
        Unit("mbar", 1e-4, "millibar"),
        Unit("Pa", 1e-6, "pascal"),
        Unit("psi", _PSI, "lbf/in²"),
    )),
    "GPa": Kind("an elastic modulus", (
        Unit("GPa", 1.0, "gigapascal kN/mm²"),
        Unit("MPa", 0.001, "megapascal N/mm²"),
        Unit("Pa", 1e-9, "pascal"),
        Unit("psi", _PSI / 1000, "lbf/in²"),
    )),
    "1/Pa": Kind("a pressure-viscosity coefficient", (
        Unit("1/Pa", 1.0, "Pa-1 /Pa m²/N"),
        Unit("1/GPa", 1e-9, "GPa-1 /GPa"),
        Unit("mm²/N", 1e-6, "1/MPa MPa-1 /MPa"),
    )),
    "m/s": Kind("a surface speed", (
        Unit("m/s", 1.0, "mps m·s-1"),
        Unit("mm/s", 0.001),
        Unit("m/min", 1 / 60),
        Unit("ft/min", 12 * _INCH / 60_000, "fpm"),
        Unit("ft/s", 12 * _INCH / 1000, "fps"),
    )),
    "µm": Kind("a film thickness or roughness", (
        Unit("µm", 1.0, "um micron microns micrometre micrometer"),
        Unit("nm", 0.001, "nanometre nanometer"),
        Unit("mm", 1000.0),
        Unit("µin", _INCH / 1000, "uin microinch"),
    )),
    "mm²": Kind("an area", (
        Unit("mm²", 1.0, "sqmm"),
        Unit("cm²", 100.0, "sqcm"),
        Unit("m²", 1e6, "sqm"),
        Unit("in²", _INCH**2, "sqin"),
    )),
    "N·mm": Kind("a torque", (
        Unit("N·mm", 1.0),
        Unit("N·m", 1000.0),
        Unit("mN·m", 1.0),
        Unit("lbf·in", _POUND_FORCE * _INCH, "in·lbf"),
        Unit("lbf·ft", 12 * _POUND_FORCE * _INCH, "ft·lbf"),
    )),
    "W": Kind("a power", (
        Unit("W", 1.0, "watt watts"),
        Unit("kW", 1000.0, "kilowatt kilowatts"),
        Unit("hp", 550 * 12 * _POUND_FORCE * _INCH / 1000, "horsepower"),
    )),
    "W/mm²": Kind("a heat flow density", (
        Unit("W/mm²"),
        Unit("W/cm²", 0.01),
        Unit("kW/m²", 0.001),
        Unit("W/m²", 1e-6),
    )),
    "s": Kind("a time of flow", (
        Unit("s", 1.0, "sec second seconds SUS SSU SFS"),
        Unit("min", 60.0, "minute minutes mins"),
    )),
    "°E": Kind("an Engler viscosity", (Unit("°E", 1.0, "E degE engler"),)),
    "°": Kind("an angle", (Unit("°", 1.0, "deg degree degrees"), Unit("rad", 180 / math.pi, "radian radians"))),
    "%": Kind("a share", (Unit("%", 1.0, "percent pct"),)),
    "": Kind("a plain number", (Unit(""),)),
    "ISO VG": Kind("a viscosity grade", (Unit("ISO VG", 1.0, "VG"),)),
    "months": Kind("a number of months", (
        Unit("months", 1.0, "month"),
        Unit("years", 12.0, "year yr yrs"),
        Unit("weeks", 7 / _MONTH, "week wk"),
        Unit("days", 1 / _MONTH, "day d"),
    )),
}
UNITS = tuple(KINDS)
"""The canonical units."""

# Here a capital or small letter changes the meaning a millionfold or more: these are read only as written.
_CASE_MATTERS = frozenset({"MN", "mg", "mPas", "Pas", "MPa", "mbar", "mNm", "1/MPa", "/MPa", "MPa-1"})
ALIKE = str.maketrans({
    **dict.fromkeys("\u00a0\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f\u3000\t", " "),
    **dict.fromkeys("\u2010\u2011\u2012\u2013\u2014\u2212\ufe63\uff0d⁻", "-"),
    **dict.fromkeys("\u2018\u2019\u02bc\u2032", "'"),
    **dict.fromkeys("\u201c\u201d\u2033", '"'),
    **dict.fromkeys("\u00ba\u02da", "°"),
    **dict.fromkeys("⋅∙•*^", "·"),
    "\u2103": "°C", "\u2109": "°F", "\u03bc": "µ", "…": "..", "¹": "1", "²": "2", "³": "3",
    "½": " 1/2", "¼": " 1/4", "¾": " 3/4",
})
_JOINTS = re.compile(r"[ ·]|(?<=[A-Za-z])\.")


def _compact(spelling: str) -> str:
    """A spelling without the signs that people set differently: spaces, points, dots of multiplication."""
    return _JOINTS.sub("", spelling.translate(ALIKE))


def _spellings(kind: Kind) -> Iterator[tuple[str, Unit]]:
    """Every accepted spelling, weakest first: letter case ignored, compacted, as written."""
    every = [(name, unit) for unit in kind.units for name in (unit.spelling, *unit.also.split())]
    yield from ((_compact(name).casefold(), unit) for name, unit in every if _compact(name) not in _CASE_MATTERS)
    yield from ((_compact(name), unit) for name, unit in every)
    yield from ((name, unit) for name, unit in every)
    yield from ((bare, kind.units[0]) for bare in ("", ".", ","))


SPELLINGS = {canonical: dict(_spellings(kind)) for canonical, kind in KINDS.items()}


def unit_meant(rest: str, unit: str) -> Unit | None:
    """The unit that the text after the number names in some other setting, if it is one of this kind."""
    known = SPELLINGS[unit]
    compact = _compact(rest)
    folded = compact.casefold()
    if not compact:
        return None
    return known.get(compact) or (None if folded in _CASE_MATTERS else known.get(folded))


def units_for(unit: str) -> tuple[str, ...]:
    """The units in which a quantity may be typed and shown, the canonical one first."""
    return tuple(each.spelling for each in KINDS[unit].units)


def convert(value: float, from_unit: str, to_unit: str, *, of: str | None = None) -> float:
    """The value in another unit, to nine significant digits.

    Args:
        value: the number in `from_unit`.
        from_unit: the unit to leave.
        to_unit: the unit to reach.
        of: the canonical unit of what is converted. Without it a canonical `from_unit` decides, else a canonical
            `to_unit`: °C to K is then a temperature, K to °C a difference.

    Raises:
        ValueError: the two units do not measure the same thing.
    """
    for canonical in (of,) if of is not None else (from_unit, to_unit, *UNITS):
        spellings = SPELLINGS.get(canonical, {})
        if (start := spellings.get(from_unit)) and (end := spellings.get(to_unit)):
            if start is end:
                return value
            return nine_digits((value - start.zero) * start.factor / end.factor + end.zero)
    raise ValueError(f"'{from_unit}' and '{to_unit}' do not measure the same thing.")


def nine_digits(value: float) -> float:
    """The value to nine significant digits, which is finer than any gauge and hides the dust of converting."""
    return float(f"{value:.9g}")
