"""Scenarios that leave something open: what is expected must hold over all of it."""

from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.documents import Problems, to_yaml
from advisor.documents.writing import Plain
from advisor.explanation import as_json
from advisor.knowledge import Knowledge
from advisor.replay import Outcome, Played, play, read_scenario, replay, saved_advice
from tests.conftest import ORDINARY


def written(folder: Path, expect: Mapping[str, Plain], gaps: str = "open", **changed: str | None) -> Path:
    """A scenario about an ordinary motor bearing with some answers changed; `None` takes one away."""
    answers: dict[str, Plain] = {name: text for name, text in {**ORDINARY, **changed}.items() if text is not None}
    path = folder / "left_open.yaml"
    path.write_text(
        to_yaml(
            {
                "format": 1,
                "title": "made for a test",
                "point_kind": "rolling_bearing",
                "guards": "made for a test",
                "status": "agreed",
                "answers": answers,
                "gaps": gaps,
                "expect": dict(expect),
            }
        ),
        encoding="utf-8",
    )
    return path


def replayed(path: Path, advisor: Advisor) -> Outcome:
    return replay([path], {"rolling_bearing": advisor})


def played(path: Path, advisor: Advisor) -> Played:
    outcome = replayed(path, advisor)
    assert not outcome.problems
    return outcome.played[0]


WARM = {"running_temperature_c": "70..85 °C"}


@pytest.mark.parametrize(
    ("expect", "met"),
    [
        # 0.9 x 9133 h at 70 °C, half of it 15 K above
        ({"interval": {"from": 4000, "to": 8300}}, True),
        ({"interval": {"from": 8000, "to": 8300}}, False),
        ({"interval": {"from": 4000, "to": 4200}}, False),
        ({"facts": {"t_eff_c": {"from": 70, "to": 85}}}, True),
        ({"facts": {"t_eff_c": {"from": 70, "to": 84}}}, False),
        ({"facts": {"t_eff_c": "70"}}, False),
        # a declared upper service temperature of the bearing's at least: 85 °C is not asked at 70 °C
        ({"demands": {"upper_service_c": {"at_least": 70}}}, True),
        ({"demands": {"upper_service_c": {"at_least": 85}}}, False),
        # anhydrous calcium stands 90 °C with 10 K kept: barred from 81 °C only; sodium from 71 °C; hydrated at once
        ({"barred": {"thickener": {"calcium_hydrated": "thickener_steady"}}}, True),
        ({"barred": {"thickener": {"calcium_anhydrous_12OH": "thickener_steady"}}}, False),
        ({"must_not": {"thickener": ["calcium_anhydrous_12OH"]}}, True),
        ({"codes": {"din": "K2K-10"}}, True),
        ({"codes": {"din": "K2G-10"}}, False),
        ({"fill": {"housing": ["30", "40"]}}, True),
        ({"products": {"GR-123": "falls_short by thickener_steady"}}, True),
        # the caution about EP in the heat begins at 80 °C: it is given somewhere, and its rule fires somewhere
        ({"cautions": ["ep_warm"]}, True),
        ({"rules_fired": ["ep_warm"]}, True),
        ({"rules_silent": ["ep_warm"]}, False),
    ],
    ids=str,
)
def test_what_is_expected_of_a_range_holds_over_all_of_it(
    expect: dict[str, Plain], met: bool, tmp_path: Path, advisor: Advisor
) -> None:
    found = played(written(tmp_path, expect, **WARM), advisor)
    assert bool(found.differences) is not met, [str(each) for each in found.differences]


def test_a_difference_in_one_run_says_in_which(tmp_path: Path, advisor: Advisor) -> None:
    expect: dict[str, Plain] = {"interval": {"from": 4000, "to": 8000}}
    (found,) = played(written(tmp_path, expect, **WARM), advisor).differences
    assert found.because[0] == "So it is for running temperature 70 °C."


def test_rules_that_fire_in_any_run_are_covered(tmp_path: Path, advisor: Advisor) -> None:
    found = played(written(tmp_path, {"state": "settled"}, **WARM, load_ratio="0.06"), advisor)
    assert "ep_warm" in found.fired


def test_gaps_that_count_as_dont_know_are_run_for_each_value_that_stands_for_them(
    tmp_path: Path, knowledge: Knowledge
) -> None:
    """Strong shock makes EP a must, and none leaves it unwanted: with either possible, EP is what both stand."""
    shock = knowledge.facts["shock"]
    assert shock.assume is not None
    each = replace(shock, assume=replace(shock.assume, each=("none", "strong")))
    advisor = Advisor(replace(knowledge, facts={**knowledge.facts, "shock": each}))
    for gaps, branches in (("dont_know", 2), ("open", 0)):
        path = written(tmp_path, {"state": "settled"}, gaps, shock=None)
        scenario = read_scenario(path, advisor.knowledge, Problems())
        assert scenario is not None
        found = play(scenario, advisor)
        assert len(found.advice.branches) == branches
        assert bool(found.differences) is (gaps == "open")


def test_a_scenario_that_leaves_too_much_open_is_a_fault_of_the_file(tmp_path: Path, advisor: Advisor) -> None:
    path = written(tmp_path, {"state": "settled"}, **WARM, load_ratio="0.1..0.2")
    outcome = replayed(path, advisor)
    assert not outcome.played
    (problem,) = outcome.problems
    assert "Too much is left open at once" in problem.message
    assert Path(problem.file) == path


def test_saved_advice_over_a_range_is_given_again_byte_by_byte(tmp_path: Path, advisor: Advisor) -> None:
    path = written(tmp_path, {"state": "settled"}, **WARM, shock="none or moderate")
    file = tmp_path / "saved.json"
    file.write_text(as_json(played(path, advisor).advice), encoding="utf-8")
    assert saved_advice.replay(file, lambda _: advisor).identical
