"""What every lubrication engineer knows, as the advice has to show it; common practice where no source is named."""

from collections.abc import Callable

import pytest

from advisor.advice import Advice
from advisor.conditions import Bound, holds, leaves
from advisor.formulas import FORMULAS, OutOfRange
from advisor.specification import Demand

Advise = Callable[..., Advice]

# A slow and heavy point in which no usual oil reaches kappa 1.
SLOW = {"bore_mm": "280 mm", "outside_mm": "460 mm", "speed_rpm": "2 rpm", "running_temperature_c": "60 °C"}
HOT_SPELLS = {"excursions": "yes", "peak_temperature_c": "120 °C", "running_temperature_c": "80 °C"}


def demands(advice: Advice, name: str) -> list[Demand]:
    return [each for each in advice.specification.demands if each.property == name]


def limits(advice: Advice, name: str, sign: str, *, must: bool = False) -> list[float]:
    """The limits that musts, or wishes, put on a property on one side."""
    terms = [term for each in demands(advice, name) if each.must is must for term in leaves(each.test)]
    return [
        term.limit
        for term in terms
        if isinstance(term, Bound) and term.sign == sign and isinstance(term.limit, float)
    ]


def formula(name: str, *values: float) -> float:
    return float(FORMULAS[name].function(*values))


# ---- film ------------------------------------------------------------------------------------------------------------


def test_kappa_between_1_and_4_is_the_aim(advise: Advise) -> None:
    for changed in ({}, {"speed_rpm": "300 rpm"}, {"bearing_type": "tapered_roller", "running_temperature_c": "85 °C"}):
        advice = advise(**changed)
        assert limits(advice, "kappa", ">="), "no film is wished for"
        assert all(1 <= limit <= 4 for limit in limits(advice, "kappa", ">="))
        assert max(limits(advice, "kappa", "<=")) == 4
        assert advice.kappa is not None
        assert 1 <= advice.kappa <= 4


@pytest.mark.parametrize("family", ["radial_ball", "radial_roller", "thrust_ball", "thrust_roller"])
def test_above_kappa_4_a_bearing_lives_no_longer(family: str) -> None:
    """ISO 281: a viscosity ratio above 4 counts as 4."""
    at = [formula(f"life_factor_{family}", kappa, 0.6, 2000.0, 10_000.0) for kappa in (3.0, 4.0, 5.0, 12.0)]
    assert at[0] < at[1] == at[2] == at[3]


def test_above_kappa_4_the_oil_only_heats() -> None:
    """The torque of the oil grows with the two-thirds power of viscosity times speed (Palmgren)."""
    torques = [formula("viscous_torque", 2.0, viscosity, 1480.0, 102.5) for viscosity in (40.0, 80.0, 160.0)]
    assert torques == sorted(torques)
    assert torques[2] / torques[1] == pytest.approx(2 ** (2 / 3), rel=1e-6)


@pytest.mark.parametrize("motion", ["turning", "swinging", "vibration_at_standstill"])
def test_where_no_oil_reaches_kappa_1_additives_and_formulation_decide(motion: str, advise: Advise) -> None:
    advice = advise(**SLOW, motion=motion)
    assert advice.oils is not None
    kappas = advice.oils.columns["kappa"].values
    passing = [kappa for place, kappa in enumerate(kappas) if advice.oils.passing >> place & 1 and kappa is not None]
    assert passing
    assert max(passing) < 1, "the point is meant to be too slow for a film"
    assert not [limit for limit in limits(advice, "kappa", ">=", must=True) if limit > max(passing)]
    additives = set(advice.line("additive").values)
    assert additives
    assert additives <= {"anti_wear", "ep"}
    if motion == "turning":
        assert additives == {"ep"}
    if motion == "swinging":
        assert additives == {"ep"}
        assert set(advice.line("solids").values) == {"mos2", "graphite"}
    if motion == "vibration_at_standstill":
        assert max(limits(advice, "bleed_percent", ">=")) >= 4


# ---- oils ------------------------------------------------------------------------------------------------------------


def test_of_two_vg_100_oils_the_one_of_higher_index_is_thicker_at_100_degrees() -> None:
    high, low = (formula("viscosity_100_from_index", 100.0, index) for index in (135.0, 95.0))
    assert high > low
    # ASTM D2270: index 95 gives about 11.1 mm²/s, index 135 about 13.6 mm²/s at 100 °C.
    assert low == pytest.approx(11.1, abs=0.15)
    assert high == pytest.approx(13.6, abs=0.25)


def test_vg_100_lies_between_90_and_110_and_85_has_no_grade() -> None:
    """ISO 3448: each grade reaches 10 % to both sides of its midpoint, and there are gaps between the grades."""
    assert (formula("grade_lower_limit", 100.0), formula("grade_upper_limit", 100.0)) == (90.0, 110.0)
    assert {formula("viscosity_grade", viscosity) for viscosity in (90.0, 100.0, 110.0)} == {100.0}
    with pytest.raises(OutOfRange, match=r"no ISO viscosity grade: VG 68 ends at 74\.8 and VG 100 begins at 90"):
        formula("viscosity_grade", 85.0)


# ---- cold ------------------------------------------------------------------------------------------------------------


def test_cold_stiffens_grease_so_that_softer_and_lower_is_asked(advise: Advise) -> None:
    mild, cold = advise(start_temperature_c="5 °C"), advise(start_temperature_c="-30 °C")
    assert limits(mild, "lower_service_c", "<=", must=True) == [5]
    assert limits(cold, "lower_service_c", "<=", must=True) == [-30]
    soft = [each for each in demands(cold, "nlgi") if each.level == 1]
    assert soft, "no softer grease is wished for"
    assert all(holds(each.test, {"nlgi": 5.0}) is False for each in soft), "NLGI 3 is too stiff"
    assert not [each for each in demands(mild, "nlgi") if each.level == 1]


def test_cold_starves_a_roller_bearing_sooner_than_a_ball_bearing(advise: Advise) -> None:
    """The same grease starts rollers 10 to 15 K less cold than balls (ASTM D1478 for balls, D4693 for rollers)."""
    ball = advise(start_temperature_c="-15 °C")
    rollers = {"bearing_type": "cylindrical_roller", "cage": "pressed_steel", "axially_loaded": "no"}
    roller = advise(start_temperature_c="-15 °C", **rollers)
    assert not limits(ball, "lower_service_c", "<=")
    assert -30 <= min(limits(roller, "lower_service_c", "<=")) <= -25


# ---- heat ------------------------------------------------------------------------------------------------------------


def barred(advice: Advice) -> set[str]:
    return {str(each) for each in advice.line("thickener").barred or {}}


def test_a_stay_above_the_steady_band_is_a_matter_of_hours(advise: Advise) -> None:
    """Lithium soap bears 120 °C for an hour a day and not for two: to 110 °C steadily, to 125 °C briefly."""
    an_hour = advise(**HOT_SPELLS, peak_share_percent="4.2 %")
    two_hours = advise(**HOT_SPELLS, peak_share_percent="8.3 %")
    assert "lithium_12OH" not in barred(an_hour)
    assert "lithium_12OH" in barred(two_hours)
    beyond = advise(**{**HOT_SPELLS, "peak_temperature_c": "130 °C"}, peak_share_percent="0.1 %")
    assert "lithium_12OH" in barred(beyond), "beyond the brief limit not even minutes are borne"


# ---- what tests are asked for ----------------------------------------------------------------------------------------


def test_vibration_asks_for_a_small_change_after_100_000_strokes(advise: Advise) -> None:
    assert not limits(advise(), "stroke_change_units", "<=")
    assert max(limits(advise(motion="turning, shaken_machine"), "stroke_change_units", "<=")) <= 30


def test_wet_service_asks_for_a_passed_rust_test_and_salt_for_a_low_rating(advise: Advise) -> None:
    """ISO 11007: in distilled water the test is passed or not, in salt water the rating is low (from memory)."""
    dry = advise(water_exposure="none")
    rain = advise(water_exposure="rain")
    salt = advise(water_exposure="splash", salt="yes", water_temperature_c="20 °C")
    assert not demands(dry, "rust_test")
    assert demands(rain, "rust_test")
    assert not demands(rain, "emcor_salt")
    assert demands(salt, "rust_test")
    assert max(limits(salt, "emcor_salt", "<=", must=True)) <= 2
    assert max(limits(salt, "emcor_salt", "<=")) <= 1
