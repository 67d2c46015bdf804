"""What was left open is told in every output: first what all variants share, then what each has of its own."""

import json
import re
from collections.abc import Callable

import pytest

from advisor.advice import Advice
from advisor.explanation import as_json, html, markdown, text, why, why_not
from advisor.explanation.variants import shared_lines, variant_lines

Advise = Callable[..., Advice]
AdviceOf = Callable[[str], Advice]


@pytest.fixture(scope="module")
def warm(advise: Advise) -> Advice:
    """From 70 to 90 °C: anhydrous calcium leaves after 80 °C, the letter G of the code with it."""
    return advise(running_temperature_c="70..90 °C")


@pytest.fixture(scope="module")
def bridge(advice_of: AdviceOf) -> Advice:
    return advice_of("bridge_trunnion_both_motions")


def section(report: str, title: str = "What was left open") -> str:
    """One section of a text report, its lines joined."""
    found = re.search(rf"^{title}\n-+\n(.*?)(?=^\S[^\n]*\n---|\Z)", report, re.MULTILINE | re.DOTALL)
    assert found is not None
    return " ".join(found.group(1).split())


def test_every_output_tells_the_shared_part_before_the_variants(bridge: Advice) -> None:
    for report in (text(bridge, full=False), text(bridge), markdown(bridge), html(bridge)):
        plain = " ".join(report.split())
        places = [
            plain.index(each)
            for each in (
                "What all of them share",
                "Variant 1: which motion governs: the swing",
                "Variant 2: which motion governs: the vibration at standstill",
            )
        ]
        assert places == sorted(places)


def test_a_variant_tells_only_what_it_has_of_its_own(bridge: Advice) -> None:
    """By hand, from common practice: VG 460 for the swing, 46 to 100 (150) for the vibration; both NLGI 1 with EP."""
    shared = shared_lines(bridge)
    assert {"NLGI grade: 1", "Load additive: EP", "Change-over: test or clean"} <= set(shared)
    (_, swing), (_, vibration) = variant_lines(bridge)
    assert "ISO VG: 460" in swing
    assert "ISO VG: 46, 68, 100 or 150" in vibration
    assert not {"NLGI grade: 1", "Load additive: EP"} & {*swing, *vibration}


def test_a_contested_point_is_told_with_its_reason_and_sources(bridge: Advice) -> None:
    told = section(text(bridge, full=False))
    assert "Contested: which motion governs. Habit wants thick oil" in told
    assert "Source: Schwack" in told


def test_a_referral_is_told_with_the_figures_of_the_variant_that_refers(bridge: Advice) -> None:
    """ISO 281: kappa 1 needs 45000 x 0.5^-0.83 x 370^-0.5 = 4159 mm²/s; VG 46 at 40 °C gives kappa 0.0111."""
    told = section(text(bridge, full=False), "State")
    assert "only kappa 0.0111" in told
    assert "for which motion governs: the vibration at standstill" in told


def test_a_range_tells_where_each_class_is_recommended(warm: Advice) -> None:
    told = section(text(warm, full=False))
    assert "anhydrous calcium 12-hydroxystearate to 80 °C" in told
    assert "lithium 12-hydroxystearate throughout" in told
    assert "DIN 51825: K2G-10 to 80 °C; K2K-10 from 81 °C" in told
    assert "not given to 79 °C; given from 80 °C" in told


def test_a_range_tells_how_closely_it_was_looked_at(warm: Advice, advise: Advise) -> None:
    assert "Each of the 21 values on the step of 1 K was looked at." in section(text(warm))
    held = section(text(advise(width_mm="30..40 mm")))
    assert "The docket holds for width 30 mm to 40 mm as one" in held
    assert "between them nothing can change" in held
    loose = section(text(advise(speed_rpm="1400..1500 rpm")))
    assert "of 10 001 values on the step of 0.01 1/min were looked at" in loose
    assert "a change that is taken back between two values looked at would not be seen" in loose


def test_the_docket_of_a_range_holds_for_its_hot_end_and_figures_go_from_to(warm: Advice) -> None:
    """The declared temperature covers 90 °C. Factor: 0.9 (humid) at 70 °C, 0.9 x 0.5^(20/15) = 0.357 at 90 °C."""
    assert why(warm, "hot").conclusion.startswith("upper service temperature at least 90 °C")
    assert "strictest along the range" in why(warm, "hot").conclusion
    assert why(warm, "factor").conclusion == "0.357 to 0.9"
    assert "told for running temperature 70 °C" in why(warm, "factor").notes
    assert "Interval: 3262 h to 8220 h" in " ".join(text(warm, full=False).split())


def test_derivations_say_for_which_value_they_are_told(warm: Advice) -> None:
    for head in ("What decides", "Why", "How computed", "Rules that did not fire"):
        assert section(text(warm), head).endswith("Told for running temperature 70 °C.")


def test_the_answers_show_the_range_as_it_counts(warm: Advice) -> None:
    assert "70..90 °C 70 °C to 90 °C" in section(text(warm), "Answers")


def test_a_class_that_is_barred_somewhere_is_told_with_the_rule_that_bars_it(warm: Advice) -> None:
    told = why_not(warm, "calcium_anhydrous_12OH")
    assert told.verdict.startswith("barred")
    assert any(miss.rule.rule == "thickener_steady" for miss in told.misses)


def test_a_product_is_told_with_what_it_misses_where_its_verdict_is_worst(advise: Advise) -> None:
    """GR-123 is an anhydrous calcium grease: it falls short from 81 °C, by the steady limit of its thickener."""
    whole = advise(running_temperature_c="70..90 °C")
    told = why_not(whole, "GR-123")
    assert told.verdict == "falls short"
    assert any(miss.rule.rule == "thickener_steady" for miss in told.misses)


def test_json_holds_the_variants_the_stretches_and_the_figures(warm: Advice) -> None:
    written = as_json(warm)
    assert written == as_json(warm)
    data = json.loads(written)
    assert 1 < len(data["branches"]) <= 6
    assert (data["branches"][0]["from"], data["branches"][-1]["to"]) == (70, 90)
    along = {(each["what"], each.get("name", "")): each["parts"] for each in data["range"]["along"]}
    assert along["code", "din"] == [
        {"from": 70, "to": 80, "reads": ["K2G-10"]},
        {"from": 81, "to": 90, "reads": ["K2K-10"]},
    ]
    assert (data["range"]["fact"], data["range"]["looked_at"], data["range"]["surely"]) == (
        "running_temperature_c",
        21,
        True,
    )
    factor = data["renewal"]["factor"]["values"]["interval_factor"]
    assert (factor["from"], factor["to"]) == pytest.approx((0.9 * 0.5 ** (20 / 15), 0.9))
    facts = {each["fact"]: each for each in data["facts"]}
    assert (facts["t_eff_c"]["from"], facts["t_eff_c"]["to"]) == (70, 90)
    assert data["told_for"] == "running temperature 70 °C"
    shelf = {each["item"]: each for each in data["shelf"]}
    assert shelf["GR-123"]["verdict"] == "falls_short"
    assert "thickener_steady" in {miss["rule"].partition("/")[0] for miss in shelf["GR-123"]["misses"]}


def test_json_names_the_contested_point_of_each_variant(bridge: Advice) -> None:
    data = json.loads(as_json(bridge))
    assert [each["contested"] for each in data["branches"]] == [["swing_or_standstill"], ["swing_or_standstill"]]
    assert "range" not in data


def test_without_anything_left_open_nothing_is_said_of_variants(advise: Advise) -> None:
    plain = advise()
    assert "left open" not in text(plain)
    data = json.loads(as_json(plain))
    assert data["branches"] == []
    assert not {"range", "told_for", "held_over"} & set(data)
