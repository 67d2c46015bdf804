"""What is for a specialist always goes to one: the triggers are mixed into random cases, and none is ever settled."""

from collections.abc import Mapping

from hypothesis import given
from hypothesis import strategies as st

from advisor.advice import Advisor, State
from advisor.case import Case
from advisor.conditions import Value
from advisor.shelf import Verdict
from tests.properties.test_one_case import nothing_is_shown
from tests.properties.whole_cases import KNOWLEDGE, MANY, ends, whole_cases, with_more

# Each is what a person would answer; the figures are common practice, no source.
WITHHELD: Mapping[str, Mapping[str, Value]] = {
    "an oxidiser": {"dangers": ("oxidiser",)},
    "direct food contact": {"dangers": ("food_direct",)},
    "nuclear plant, or a dose above 10 000 Gy": {"dangers": ("nuclear",)},
    "vacuum or space": {"dangers": ("vacuum",)},
    "out of scope": {"dangers": ("out_of_scope",)},
    "a sealed bearing without a fitting": {"supply": "sealed_no_fitting"},
}
REFERRED: Mapping[str, Mapping[str, Value]] = {
    "an explosive atmosphere": {"dangers": ("explosive",)},
    "people lifted, rail, aircraft": {"dangers": ("people_rail_aircraft",)},
    "drinking water": {"dangers": ("drinking_water",)},
    "an ignition source in the drip path": {"dangers": ("ignition_in_drip_path",)},
    "failed twice, or white etching cracks": {"site": ("failed_twice",)},
    "faster than any grease": {"bore_mm": 100.0, "outside_mm": 200.0, "speed_rpm": 20_000.0},
    "a spherical roller thrust bearing on grease": {
        "bearing_type": "spherical_roller_thrust", "supply": "nipple_through",
    },
    "hotter than 150 °C": {"running_temperature_c": 151.0},
    "hot spells above 150 °C that last": {
        "excursions": "yes", "running_temperature_c": 100.0, "peak_temperature_c": 160.0, "peak_share_percent": 20.0,
    },
    "a start below -40 °C": {"start_temperature_c": -41.0},
    "ammonia or amines": {"site": ("chemicals",), "chemical": ("ammonia",)},
    "solvent, fuel or refrigerant": {"site": ("chemicals",), "chemical": ("solvent",)},
    "law and hot water": {"site": ("eal_required",), "water_exposure": "splash", "water_temperature_c": 61.0},
    "an unlabelled lubricant in a critical machine": {"site": ("critical",), "incumbent": "unlabelled"},
    "a load above a quarter of the rating": {"load_ratio": 0.251},
}
HARDLY_ANY_FILM: Mapping[str, Value] = {
    "bore_mm": 280.0, "outside_mm": 460.0, "speed_rpm": 0.5, "running_temperature_c": 90.0, "motion": ("turning",),
}
PRODUCTS = [each.item for each in KNOWLEDGE.shelf]


@given(case=whole_cases(known=()), trigger=st.sampled_from([*WITHHELD, *REFERRED]))
@MANY
def test_what_is_for_a_specialist_is_never_settled(case: Case, trigger: str, advisor: Advisor) -> None:
    advice = advisor.advise(with_more(case, WITHHELD.get(trigger) or REFERRED[trigger]))
    assert advice.state is State.REFERRED, trigger
    assert advice.referrals
    if trigger in WITHHELD:
        assert advice.withheld, trigger
    if advice.withheld:
        nothing_is_shown(advice)


@given(case=whole_cases(shown=True, known=()), maker=st.sampled_from(PRODUCTS), thin=st.booleans())
@MANY
def test_what_the_result_itself_brings_to_light_is_never_settled(
    case: Case, maker: str, thin: bool, advisor: Advisor
) -> None:
    """Hardly any film with the recommended grade, and a maker's lubricant that falls short of the rules."""
    found: dict[str, Value] = {"maker_item": maker, **(HARDLY_ANY_FILM if thin else {})}
    whole = advisor.advise(with_more(case, found))
    if thin:
        assert whole.state is not State.SETTLED
    for advice in ends(whole):
        verdict = next(each.verdict for each in advice.shelf if each.item == maker)
        told = {each.to for each in advice.referrals}
        assert ("maker_or_rules" in told) is (verdict is Verdict.FALLS_SHORT)
        assert ("film_specialist" in told) is (advice.kappa is not None and advice.kappa < 0.1)
        if told:
            assert advice.state is State.REFERRED
            assert whole.state is State.REFERRED
