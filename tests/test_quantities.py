"""Quantities are read as people write them, and whatever has two readings is refused.

Check values are definitions: the inch and the pound of the international yard and pound agreement of 1959, standard
gravity of the 3rd CGPM (1901), the Celsius scale of the SI brochure (9th edition), stokes and poise of the CGS system.
"""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.quantities import UNITS, Quantity, Unreadable, convert, parse, show, units_for

SPACES = st.sampled_from(["", " ", "  ", "\u00a0", "\u202f", "\u2009"])
PAIRS = [(unit, each) for unit in UNITS for each in units_for(unit)]


@pytest.mark.parametrize(("text", "unit", "value"), [
    ("180 °F", "°C", (180 - 32) * 5 / 9),          # Fahrenheit: freezing 32, boiling 212
    ("180F", "°C", (180 - 32) * 5 / 9),
    ("212 °F", "°C", 100.0),
    ("32 fahrenheit", "°C", 0.0),
    ("273.15 K", "°C", 0.0),                       # SI brochure: t/°C = T/K - 273.15
    ("-459.67 °F", "°C", -273.15),                 # absolute zero
    ("80 deg C", "°C", 80.0),
    ("80ºC", "°C", 80.0),
    ("\u221220 °C", "°C", -20.0),
    ("- 10", "°C", -10.0),
    ("1 450 rpm", "1/min", 1450.0),
    ("1\u202f450\u00a0rpm", "1/min", 1450.0),
    ("1\u2009450", "1/min", 1450.0),
    ("1'450 r/min", "1/min", 1450.0),
    ("1’450", "1/min", 1450.0),
    ("1450 1/min", "1/min", 1450.0),
    ("1450 min⁻¹", "1/min", 1450.0),
    ("1450 min^-1", "1/min", 1450.0),
    ("1 450 1/min", "1/min", 1450.0),
    ("1.450,5 rpm", "1/min", 1450.5),
    ("1,450.5 rpm", "1/min", 1450.5),
    ("1 450,125 rpm", "1/min", 1450.125),
    ("1.450.000", "mm/min", 1_450_000.0),
    ("25 Hz", "1/min", 1500.0),                    # 60 s in a minute
    ("25 rps", "1/min", 1500.0),
    ("1 rad/s", "1/min", 30 / math.pi),            # 2 pi rad in a turn
    ("1,5 kN", "N", 1500.0),
    ("2 MN", "N", 2e6),
    ("1 lbf", "N", 0.45359237 * 9.80665),          # pound (1959) times standard gravity (1901)
    ('2.5"', "mm", 63.5),                          # inch of 1959: 25.4 mm
    ("2 1/2 in", "mm", 63.5),
    ("2½ in.", "mm", 63.5),
    ("3/4 inch", "mm", 19.05),
    ("1 ft", "mm", 304.8),
    ("12 cm", "mm", 120.0),
    ("1.5 m", "mm", 1500.0),
    ("30 µm", "mm", 0.03),
    ("30 μm", "mm", 0.03),
    ("68 cSt", "mm²/s", 68.0),                     # stokes: 1 cm²/s
    ("68 mm2/s", "mm²/s", 68.0),
    ("0.68 St", "mm²/s", 68.0),
    ("0.000068 m²/s", "mm²/s", 68.0),
    ("50 cP", "mPa·s", 50.0),                      # poise: 0.1 Pa·s
    ("50 mPa s", "mPa·s", 50.0),
    ("50 mPas", "mPa·s", 50.0),
    ("0,05 Pa·s", "mPa·s", 50.0),
    ("0.5 P", "mPa·s", 50.0),
    ("0.9 g/cm3", "kg/m³", 900.0),
    ("0.9 kg/l", "kg/m³", 900.0),
    ("2 d", "h", 48.0),
    ("3 weeks", "h", 504.0),
    ("90 min", "h", 1.5),
    ("1 oz", "g", 28.349523125),                   # a sixteenth of the pound
    ("1.2 kg", "g", 1200.0),
    ("500 mg", "g", 0.5),
    ("1 lb", "kg", 0.45359237),
    ("2 t", "kg", 2000.0),
    ("1.5 l", "cm³", 1500.0),
    ("15 ml", "cm³", 15.0),
    ("1 in³", "cm³", 16.387064),                   # 2.54³
    ("5 %", "%", 5.0),
    ("5", "%", 5.0),
    ("2 years", "months", 24.0),
    ("52 weeks", "months", 52 * 7 / 30.4375),      # a month as a twelfth of the Julian year, 365.25 d
    ("ISO VG 68", "ISO VG", 68.0),
    ("vg68", "ISO VG", 68.0),
    ("9 °F", "K", 5.0),                            # a difference: no offset
    ("9 °C", "K", 9.0),
    ("9 K", "K", 9.0),
    ("0.125", "mm", 0.125),                        # a leading nought can only stand before decimals
    ("0,125", "mm", 0.125),
    ("1450.125", "mm", 1450.125),                  # four digits before the mark: no group of three
    ("1.450e3", "mm", 1450.0),                     # a power of ten settles it
    ("2.", "mm", 2.0),
    (".5", "mm", 0.5),
    ("+2", "", 2.0),
    ("1.9 GPa", "MPa", 1900.0),
    ("200 bar", "MPa", 20.0),                      # bar: 100 kPa
    ("1400 mbar", "MPa", 0.14),
    ("1000 psi", "MPa", 6.894757293),              # pound-force on a square inch
    ("207 000 N/mm²", "GPa", 207.0),
    ("2.2e-8", "1/Pa", 2.2e-8),
    ("22 1/GPa", "1/Pa", 2.2e-8),
    ("0.022 mm²/N", "1/Pa", 2.2e-8),
    ("600 ft/min", "m/s", 3.048),
    ("16 µin", "µm", 0.4064),
    ("250 nm", "µm", 0.25),
    ("12 cm²", "mm²", 1200.0),
    ("1.5 Nm", "N·mm", 1500.0),
    ("90 mN·m", "N·mm", 90.0),
    ("1 lbf·ft", "N·mm", 1355.8179483),            # pound-force times foot
    ("2 kW", "W", 2000.0),
    ("1 hp", "W", 745.69987158),                   # 550 ft·lbf/s
    ("16 kW/m²", "W/mm²", 0.016),
    ("150 SUS", "s", 150.0),
    ("1.5 min", "s", 90.0),
    ("5 E", "°E", 5.0),
    ("15 deg", "°", 15.0),
    ("1 rad", "°", 180 / math.pi),
])
def test_reads_what_people_type(text: str, unit: str, value: float) -> None:
    assert parse(text, unit).value == pytest.approx(value, rel=1e-8, abs=1e-12)


def test_keeps_what_was_typed() -> None:
    assert parse(" 1,5 kN", "N") == Quantity(1500.0, "N", " 1,5 kN")


def test_converted_values_carry_nine_digits() -> None:
    assert parse("1 lbf", "N").value == 4.44822162


@pytest.mark.parametrize(("text", "unit", "part"), [
    ("1,450", "mm", "Is it 1450 or 1.450? Write 1450 or 1.45."),
    ("1.450", "mm", "Is it 1450 or 1.450? Write 1450 or 1.45."),
    ("12.345 mm", "mm", "Is it 12345 or 12.345? Write 12345 or 12.3450."),
    ("-1,500 °C", "°C", "Is it -1500 or -1.500? Write -1500 or -1.5."),
    ("1.450.5", "mm", "more than one number"),
    ("1,45,000", "mm", "more than one number"),
    ("20 30", "mm", "more than one number"),
    ("5' 3\"", "mm", "more than one number"),
    ("20 x 30 mm", "mm", "more than one number"),
    ("0.05 of 1", "%", "more than one number"),
    ("70..90 °C", "°C", "looks like a range"),
    ("70-90 °C", "°C", "looks like a range"),
    ("70 – 90 °C", "°C", "looks like a range"),
    ("70 °C to 90 °C", "°C", "looks like a range"),
    ("5 furlong", "mm", "The unit 'furlong' is not known here. Known here: mm, cm, m, in, ft, µm."),
    ("5 mm", "°C", "'mm' measures a length, but a temperature is asked for. Known here: °C, °F, K."),
    ("68 cSt", "mPa·s", "'cSt' measures a kinematic viscosity, but a dynamic viscosity is asked for."),
    ("5 mm", "", "Write the number alone."),
    ("5 mN", "N", "The unit 'mN' is not known here."),
    ("5 Mg", "g", "The unit 'Mg' is not known here."),
    ("5 mPa", "MPa", "The unit 'mPa' is not known here."),
    ("5 Mbar", "MPa", "The unit 'Mbar' is not known here."),
    ("5 MN·m", "N·mm", "The unit 'MN·m' is not known here."),
    ("nan", "mm", "not a number to work with"),
    ("-inf", "mm", "not a number to work with"),
    ("∞", "mm", "not a number to work with"),
    ("1e400", "mm", "too large"),
    ("1e308 MN", "N", "too large"),
    ("", "mm", "Nothing is written here."),
    (" \u00a0", "mm", "Nothing is written here."),
    ("warm", "°C", "does not begin with a number"),
    ("٣", "mm", "does not begin with a number"),
    ("--5", "mm", "does not begin with a number"),
    ("rpm", "1/min", "a unit without a number"),
    ("-300", "°C", "below absolute zero"),
    ("-1 K", "°C", "below absolute zero"),
    ("-460 °F", "°C", "below absolute zero"),
])
def test_refuses_with_the_mend(text: str, unit: str, part: str) -> None:
    with pytest.raises(Unreadable) as refusal:
        parse(text, unit)
    assert part in str(refusal.value)


def test_what_a_refusal_advises_is_accepted() -> None:
    assert parse("12.3450", "mm").value == 12.345
    assert parse("12345", "mm").value == 12345.0


def test_files_write_the_dot_for_decimals_only() -> None:
    assert parse("12.345 mm", "mm", strict=False).value == 12.345
    with pytest.raises(Unreadable, match="two ways"):
        parse("12,345 mm", "mm", strict=False)


@settings(deadline=None)
@given(st.text(max_size=30), st.sampled_from(UNITS))
def test_any_text_is_read_or_refused_in_one_line(text: str, unit: str) -> None:
    try:
        outcome = repr(parse(text, unit).value)
    except Unreadable as refusal:
        outcome = str(refusal)
    assert "\n" not in outcome
    assert outcome not in {"", "nan", "inf", "-inf"}


@settings(deadline=None)
@given(st.sampled_from(PAIRS), st.integers(0, 10**7), SPACES, SPACES, st.sampled_from(".,"))
def test_every_unit_is_read_with_any_spacing_and_both_marks(
    pair: tuple[str, str], hundredths: int, before: str, between: str, mark: str
) -> None:
    unit, typed_unit = pair
    apart = between or " " * typed_unit.startswith("1/")  # else the 1 of 1/min would be one more digit
    typed = f"{before}{hundredths / 100:.2f}".replace(".", mark) + apart + typed_unit + before
    expected = convert(hundredths / 100, typed_unit, unit, of=unit)
    assert parse(typed, unit).value == pytest.approx(expected, rel=1e-8, abs=1e-9)


@settings(deadline=None)
@given(st.sampled_from(PAIRS), st.floats(-100, 1e9))
def test_a_conversion_there_and_back_changes_nothing(pair: tuple[str, str], value: float) -> None:
    unit, other = pair
    there = convert(value, unit, other, of=unit)
    assert convert(there, other, unit, of=unit) == pytest.approx(value, rel=1e-7, abs=1e-5)


@settings(deadline=None)
@given(st.sampled_from(PAIRS), st.floats(0, 1e14))
def test_what_is_shown_can_be_typed_back(pair: tuple[str, str], value: float) -> None:
    unit, shown_unit = pair
    expected = convert(value, shown_unit, unit, of=unit)
    # Three digits are kept below ten, one decimal above: within half of the last.
    assert parse(show(value, shown_unit), unit).value == pytest.approx(expected, rel=6e-3, abs=1e-12)


@pytest.mark.parametrize(("value", "unit", "text"), [
    (12_600.0, "mm/min", "12 600 mm/min"),
    (1450.0, "1/min", "1450 1/min"),
    (90.8123, "mm²/s", "90.8 mm²/s"),
    (-10.0, "°C", "-10 °C"),
    (1.5, "", "1.5"),
    (1.2345, "", "1.23"),
    (0.125, "mm", "0.125 mm"),
    (0.0012345, "mm", "0.00123 mm"),
    (0.99999, "N", "1 N"),
    (9999.7, "N", "10 000 N"),
    (1e15, "N", "1e15 N"),
    (-1e-9, "N", "-1e-9 N"),
    (-0.0, "N", "0 N"),
    (1.0, "months", "1 month"),
    (68.0, "ISO VG", "ISO VG 68"),
])
def test_shows_a_value_at_a_glance(value: float, unit: str, text: str) -> None:
    assert show(value, unit) == text


@pytest.mark.parametrize("unit", UNITS)
def test_the_canonical_unit_comes_first(unit: str) -> None:
    assert units_for(unit)[0] == unit


def test_a_temperature_and_a_difference_convert_apart() -> None:
    assert convert(20.0, "°C", "K") == 293.15
    assert convert(20.0, "K", "°C") == 20.0
    assert convert(293.15, "K", "°C", of="°C") == 20.0
    assert convert(9.0, "°F", "K", of="K") == 5.0


def test_units_of_two_kinds_do_not_convert() -> None:
    with pytest.raises(ValueError, match="do not measure the same thing"):
        convert(1.0, "mm", "°F")
