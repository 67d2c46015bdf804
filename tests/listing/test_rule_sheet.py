"""`gudgeon rules --show`: a rule in words, with its example, its scenarios, and what would change without it."""

import json
from dataclasses import replace

import pytest
from click.testing import CliRunner

from advisor.advice import Advisor
from advisor.cli import gudgeon
from advisor.knowledge import Knowledge
from advisor.mishaps import Refusal
from advisor.replay import Outcome, find, play, replay
from advisor.rule_sheet import as_data, as_text, rule_sheet
from tests.conftest import SCENARIOS


@pytest.fixture(scope="module")
def outcome(advisor: Advisor) -> Outcome:
    names = ("brass_cage_and_ep", "oxygen_booster_motor", "quiet_motor_bearing", "slow_hot_roller_on_a_nipple")
    return replay(find([SCENARIOS / f"{name}.yaml" for name in names]), {"rolling_bearing": advisor})


def test_a_rule_is_said_in_words(advisor: Advisor, outcome: Outcome) -> None:
    sheet = rule_sheet("ep_copper", advisor, outcome)
    rule = advisor.knowledge.rules["ep_copper"]
    assert sheet.title == rule.title
    assert "copper" in sheet.condition
    assert sheet.concludes[0].startswith("must: ")
    assert "{" not in sheet.because + sheet.limits
    assert sheet.place.endswith(f":{rule.mark.line}")
    for each in (sheet.title, sheet.condition, *sheet.concludes, sheet.because, *sheet.sources):
        assert each in as_text(sheet)


def test_the_reason_is_filled_for_the_example_of_the_rule(advisor: Advisor, outcome: Outcome) -> None:
    sheet = rule_sheet("thickener_steady", advisor, outcome)
    steady = advisor.knowledge.rules["thickener_steady"].fires["steady_need_c"]
    assert f"needed are {steady:.0f} °C" in sheet.because
    assert sheet.row
    assert sheet.rows == len({each.id for each in advisor.knowledge.instances["temperature"]
                              if each.rule.id == "thickener_steady"})  # fmt: skip


def test_every_rule_can_be_shown(advisor: Advisor) -> None:
    nothing = Outcome((), ())
    for name, rule in advisor.knowledge.rules.items():
        text = as_text(rule_sheet(name, advisor, nothing))
        assert rule.title in text
        assert "\nBecause\n" in text
        assert "{row." not in text


def test_scenarios_that_fire_it_are_named_with_what_would_change(advisor: Advisor, outcome: Outcome) -> None:
    (fired,) = rule_sheet("oxidiser_is_referred", advisor, outcome).fired
    assert fired.name == "oxygen_booster_motor"
    assert ("state", "referred") in {(each.kind, str(each.expected)) for each in fired.changes}


def test_what_would_change_is_what_a_replay_without_the_rule_finds(
    advisor: Advisor, knowledge: Knowledge, outcome: Outcome
) -> None:
    instances = {
        step: tuple(each for each in of_step if each.rule.id != "ep_copper")
        for step, of_step in knowledge.instances.items()
    }
    without = Advisor(replace(knowledge, instances=instances))
    played = next(each for each in outcome.played if each.scenario.name == "brass_cage_and_ep")
    wanted = [(each.kind, each.what, each.got) for each in play(played.scenario, without).differences if each.read]
    sheet = rule_sheet("ep_copper", advisor, outcome)
    shown = next(each for each in sheet.fired if each.name == "brass_cage_and_ep").changes
    assert [(each.kind, each.what, each.got) for each in shown] == wanted
    assert wanted


def test_a_rule_that_no_scenario_fires_says_so(advisor: Advisor) -> None:
    assert "No scenario of 0 fires it" in as_text(rule_sheet("ep_copper", advisor, Outcome((), ())))


def test_a_misspelt_rule_is_refused_with_the_nearest(advisor: Advisor) -> None:
    with pytest.raises(Refusal, match="Did you mean 'thickener_steady'"):
        rule_sheet("thickner_steady", advisor, Outcome((), ()))


def test_the_sheet_as_data_is_plain(advisor: Advisor, outcome: Outcome) -> None:
    data = json.loads(json.dumps(as_data(rule_sheet("ep_copper", advisor, outcome))))
    assert data["id"] == "ep_copper"
    assert data["fired"][0]["changes"][0].keys() == {"kind", "what", "expected", "without"}


def test_the_command_shows_a_rule() -> None:
    found = CliRunner().invoke(gudgeon, ["rules", "--show", "oxidiser_is_referred"])
    assert found.exit_code == 0, found.output
    assert "oxygen_booster_motor" in found.output
