"""Conventional units, blends and grade systems, judged by the open library `chemicals` and the facts of the trade."""

from collections.abc import Callable
from itertools import pairwise

import pytest
from chemicals.viscosity import viscosity_converter
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.formulas import FORMULAS, LOOKUPS, Named, OutOfRange
from advisor.formulas.blends import blend, blend_viscosity, blend_viscosity_by_mass, share_for_viscosity
from advisor.formulas.consistency import NLGI_GRADES, nlgi_grade, nlgi_penetration, penetration_limits
from advisor.formulas.conventional_units import (
    engler_degrees,
    redwood_seconds,
    saybolt_furol_122,
    saybolt_furol_210,
    saybolt_universal,
    viscosity_from_engler,
    viscosity_from_furol_122,
    viscosity_from_furol_210,
    viscosity_from_redwood,
    viscosity_from_saybolt,
)
from advisor.formulas.grade_systems import (
    AGMA_GRADES,
    ENGINE_GRADES,
    GEAR_GRADES,
    agma_of_vg,
    sae_j300_grades,
    sae_j306_grades,
    vg_of_agma,
)
from advisor.formulas.viscosity import grade_of, viscosity_100_from_index, viscosity_at

F_100, F_210 = 340 / 9, 890 / 9  # °C


def _judged(viscosity: float, scale: str) -> float:
    """The value on a scale of flow cups that `chemicals` gives a kinematic viscosity in mm²/s."""
    return float(viscosity_converter(viscosity * 1e-6, "kinematic viscosity", scale))


@settings(deadline=None)  # the judge is loaded at the first call
@given(viscosity=st.floats(1.8, 4000))
def test_saybolt_universal_agrees_with_the_judge_there_and_back(viscosity: float) -> None:
    # The same equation of ASTM D2161 at 100 °F.
    seconds = saybolt_universal(viscosity, F_100)
    assert seconds == pytest.approx(_judged(viscosity, "saybolt universal"), rel=1e-6)
    assert viscosity_from_saybolt(seconds, F_100) == pytest.approx(viscosity, rel=1e-9)


@given(viscosity=st.floats(75, 50_000))
def test_saybolt_universal_is_linear_for_thick_oils(viscosity: float) -> None:
    # ASTM D2161, 5.2: 4.632 at 100 °F and 4.664 at 210 °F.
    assert saybolt_universal(viscosity, F_100) == pytest.approx(4.632 * viscosity, rel=0.0013)
    assert saybolt_universal(viscosity, F_210) == pytest.approx(4.664 * viscosity, rel=0.0013)


@settings(deadline=None)  # the judge builds its splines at the first call
@given(viscosity=st.floats(55, 4000))
def test_saybolt_furol_agrees_with_the_judge_within_the_stated_uncertainty(viscosity: float) -> None:
    assert saybolt_furol_122(viscosity) == pytest.approx(_judged(viscosity, "saybolt furol"), rel=0.04)
    assert "4 %" in FORMULAS["saybolt_furol_122"].note


@settings(deadline=None)  # as above
@given(viscosity=st.floats(2, 4000))
def test_engler_degrees_agree_with_the_judge_within_the_stated_uncertainty(viscosity: float) -> None:
    judged = _judged(viscosity, "engler")
    assert viscosity_from_engler(judged) == pytest.approx(viscosity, rel=0.07 if judged < 1.8 else 0.04)
    assert "4 %" in FORMULAS["engler_degrees"].note


@settings(deadline=None)  # as above
@given(viscosity=st.floats(4.5, 1000))
def test_redwood_seconds_agree_with_the_judge_within_the_stated_uncertainty(viscosity: float) -> None:
    assert viscosity_from_redwood(_judged(viscosity, "redwood standard")) == pytest.approx(viscosity, rel=0.06)
    assert "6 %" in FORMULAS["redwood_seconds"].note


@given(viscosity=st.floats(49, 50_000))
def test_every_scale_leads_back_to_the_viscosity(viscosity: float) -> None:
    assert viscosity_from_furol_122(saybolt_furol_122(viscosity)) == pytest.approx(viscosity, rel=1e-9)
    assert viscosity_from_furol_210(saybolt_furol_210(viscosity)) == pytest.approx(viscosity, rel=1e-9)
    assert viscosity_from_engler(engler_degrees(viscosity)) == pytest.approx(viscosity, rel=1e-9)
    assert viscosity_from_redwood(redwood_seconds(viscosity)) == pytest.approx(viscosity, rel=1e-9)


def test_a_scale_is_bound_to_its_temperature() -> None:
    # An oil of 46 mm²/s at 40 °C is thicker at 100 °F (37.8 °C), where its Saybolt seconds are usually stated.
    at_100_f = viscosity_at(46, 6.8, F_100)
    assert saybolt_universal(at_100_f, F_100) > 1.08 * saybolt_universal(46, 40)


@pytest.mark.parametrize("thin", [
    lambda: saybolt_universal(1.7, F_100), lambda: viscosity_from_saybolt(30, F_100), lambda: saybolt_furol_122(40),
    lambda: viscosity_from_furol_210(10), lambda: viscosity_from_engler(0.9), lambda: viscosity_from_redwood(30),
])
def test_a_scale_refuses_what_lies_before_its_beginning(thin: Callable[[], float]) -> None:
    with pytest.raises(OutOfRange, match="must lie between"):
        thin()


OILS = st.floats(2, 5000)


@given(a=OILS, b=OILS, share=st.floats(0, 1))
def test_a_blend_lies_between_its_oils_and_its_share_can_be_found_back(a: float, b: float, share: float) -> None:
    found = blend_viscosity(a, b, share)
    low, high = min(a, b), max(a, b)
    assert low * (1 - 4e-4) <= found <= high * (1 + 4e-4)
    assert low * (1 - 1e-9) <= blend_viscosity_by_mass(a, b, share) <= high * (1 + 1e-9)
    if high > 1.2 * low and low <= found <= high:
        assert share_for_viscosity(a, b, found) == pytest.approx(share, rel=0, abs=2e-3)


@given(viscosities=st.lists(OILS, min_size=1, max_size=6))
def test_a_blend_of_many_in_equal_parts_is_a_blend_of_two_blends(viscosities: list[float]) -> None:
    equal = [1 / len(viscosities)] * len(viscosities)
    assert blend([*viscosities, *viscosities], [share / 2 for share in equal * 2]) == pytest.approx(
        blend(viscosities, equal), rel=1e-9
    )


def test_both_blending_rules_give_the_published_example_alike() -> None:
    # 60 % of 5 and 40 % of 20 mm²/s: 8.08 by volume (ASTM D7152 form), 8.11 by mass (Refutas).
    assert blend_viscosity(5, 20, 0.6) == pytest.approx(8.08, abs=0.01)
    assert blend_viscosity_by_mass(5, 20, 0.6) == pytest.approx(8.11, abs=0.01)


@pytest.mark.parametrize(("refused", "why"), [
    (lambda: blend([32, 46], [0.5, 0.4]), "add up to 1"),
    (lambda: blend([32, 46], [1.0]), "one share for each oil"),
    (lambda: blend([32, 46], [1.5, -0.5]), "between 0 and 1"),
    (lambda: share_for_viscosity(32, 68, 100), "between those of two different oils"),
    (lambda: share_for_viscosity(68, 68, 68), "between those of two different oils"),
])
def test_an_impossible_blend_is_refused(refused: Callable[[], float], why: str) -> None:
    with pytest.raises(OutOfRange, match=why):
        refused()


def test_of_two_oils_of_one_grade_the_one_of_higher_index_is_thicker_when_hot() -> None:
    # A fact of the trade: two oils of ISO VG 100, viscosity index 135 and 95.
    assert viscosity_100_from_index(100, 135) > viscosity_100_from_index(100, 95)


def test_vg_100_lies_between_90_and_110_and_85_has_no_grade() -> None:
    # ISO 3448:1992.
    assert [grade_of(each) for each in (90, 100, 110)] == [100, 100, 100]
    assert grade_of(85) is None


@given(viscosity=st.floats(4.0, 26.0))
def test_an_engine_oil_viscosity_has_one_grade_or_two_neighbours(viscosity: float) -> None:
    # SAE J300:2015: only the grades 8 to 20 overlap.
    names = sae_j300_grades(viscosity).names
    order = [grade.number for grade in ENGINE_GRADES]
    assert 1 <= len(names) <= 3
    assert all(order.index(name) <= order.index("20") for name in names if len(names) > 1)


def test_a_grade_begins_at_its_lowest_viscosity_and_ends_below_the_next() -> None:
    assert sae_j300_grades(9.29).names == ("20",)
    assert sae_j300_grades(9.3).names == ("30",)
    assert sae_j306_grades(18.49).names == ("90",)
    assert sae_j306_grades(18.5).names == ("110",)


@given(viscosity=st.floats(3.8, 500))
def test_a_gear_oil_viscosity_has_exactly_one_grade(viscosity: float) -> None:
    # SAE J306:2019 leaves neither gaps nor overlaps.
    assert len(sae_j306_grades(viscosity).names) == 1
    assert all(low.below == high.low for low, high in pairwise(GEAR_GRADES))


def test_outside_the_grades_there_is_no_name_but_a_sentence() -> None:
    assert sae_j300_grades(3.5) == Named((), "no grade of SAE J300:2015")
    assert sae_j300_grades(26.1).names == ()
    assert sae_j306_grades(3.0) == Named((), "no grade of SAE J306:2019")
    assert agma_of_vg(22).names == ()


def test_agma_numbers_and_iso_grades_lead_back_to_each_other() -> None:
    for number, grade in AGMA_GRADES.items():
        assert vg_of_agma(number).names == (str(grade),)
        assert agma_of_vg(grade).names == (number,)


@pytest.mark.parametrize("grade", [each.number for each in NLGI_GRADES])
def test_both_ends_of_a_consistency_grade_belong_to_it(grade: str) -> None:
    lowest, highest = penetration_limits(grade)
    assert highest - lowest == 30
    assert nlgi_grade(lowest).names == nlgi_grade(highest).names == (grade,)
    assert nlgi_penetration(grade).text == f"{lowest:g} to {highest:g}"


@pytest.mark.parametrize(("penetration", "told"), [
    (300, "between 1 and 2"), (390, "between 00 and 0"), (122, "between 5 and 6"), (500, "softer than NLGI 000"),
    (60, "stiffer than NLGI 6"),
])
def test_a_penetration_in_a_gap_has_no_grade_and_names_the_neighbours(penetration: float, told: str) -> None:
    assert nlgi_grade(penetration) == Named((), told)


@pytest.mark.parametrize(("name", "edition"), [
    ("sae_j300_grades", "2015"), ("sae_j306_grades", "2019"), ("vg_of_agma", "9005-D94"),
])
def test_a_grade_system_names_its_edition(name: str, edition: str) -> None:
    assert edition in LOOKUPS[name].source
