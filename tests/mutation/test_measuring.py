"""Mutants of a few rules: which are made, which the scenarios kill, and what is said of those that nobody notices."""

import json
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest
from click.testing import CliRunner

from advisor.advice import Advice, Advisor
from advisor.bending import Bender
from advisor.cli import gudgeon
from advisor.conditions import Bound, Every
from advisor.documents import Problems
from advisor.knowledge import Asks, Knowledge, Warns
from advisor.mutation import keeps_facts, told
from advisor.mutation.effects import Effects, only_cautions
from advisor.mutation.killing import Jury, assemble
from advisor.mutation.measuring import TRIES, Measured, Survivor, measure
from advisor.mutation.mutants import Mutant, mutants, pairs_of
from advisor.mutation.searching import Search
from advisor.mutation.standing_in import by_mutant, plain
from advisor.mutation.wording import as_data, as_scenario, as_text, say_mutant
from advisor.places import knowledge_folder, scenario_folder
from advisor.replay import play, read_scenario

SCENARIOS = scenario_folder() / "rolling_bearing"
DRY = SCENARIOS / "dry_motor_bearing.yaml"


@pytest.fixture(scope="module")
def made(knowledge: Knowledge) -> list[Mutant]:
    return mutants(knowledge)


@pytest.fixture(scope="module")
def jury(advisor: Advisor) -> Jury:
    scenario = read_scenario(DRY, advisor.knowledge, Problems())
    assert scenario is not None
    return assemble([scenario], advisor)


def of(rule: str, made: list[Mutant]) -> Iterator[Mutant]:
    return (each for each in made if each.rule == rule)


def test_every_agreed_rule_has_mutants_and_can_be_deleted(knowledge: Knowledge, made: list[Mutant]) -> None:
    agreed = {name for name, rule in knowledge.rules.items() if rule.status == "agreed"}
    assert {each.rule for each in made if each.kind == "rule deleted"} == agreed


def test_a_rule_over_a_table_is_changed_for_all_its_rows_at_once(knowledge: Knowledge, made: list[Mutant]) -> None:
    rows = sum(each.rule.id == "oil_brief" for each in knowledge.instances["temperature"])
    edge = next(each for each in of("oil_brief", made) if "edge" in each.key)
    assert len(edge.changed) == rows > 1


def test_levels_change_by_one_and_a_must_becomes_a_strong_wish(made: list[Mutant]) -> None:
    def levels(rule: str) -> set[int]:
        return {
            each.then[0].level
            for mutant in of(rule, made)
            for each in mutant.changed.values()
            if each is not None and isinstance(each.then[0], Asks) and "level" in mutant.key
        }

    assert levels("film_floor") == {1}
    assert levels("film_aim") == {1, 3}
    assert levels("film_comfort") == {3}


def test_no_mutant_is_the_rule_itself_and_no_two_are_the_same(knowledge: Knowledge, made: list[Mutant]) -> None:
    told = set()
    for mutant in made:
        before = knowledge.instances[mutant.step]
        meant = tuple((place, each and (each.when, each.then)) for place, each in mutant.changed.items())
        assert any(each is None or each[1:] != (before[place].when, before[place].then) for place, each in meant)
        told.add((mutant.step, meant))
    assert len(told) == len(made)


def test_a_caution_that_is_lost_is_noticed_where_it_is_expected(jury: Jury, made: list[Mutant]) -> None:
    # The dry motor bearing expects the caution drain_open, which one rule alone gives.
    lost = next(each for each in of("drain_open", made) if each.kind == "rule deleted")
    killer = jury.killer(lost)
    assert killer is not None
    assert killer.path == DRY


def test_an_advisor_by_a_mutant_leaves_the_rules_themselves_alone(jury: Jury, made: list[Mutant]) -> None:
    before = jury.advisor.knowledge.instances
    twin = by_mutant(jury.advisor, next(of("drain_open", made)))
    assert twin.knowledge.instances != before
    assert jury.advisor.knowledge.instances is before
    assert play(jury.played[0].scenario, jury.advisor).differences == ()


def test_a_plain_advisor_advises_as_the_engine_does(advisor: Advisor) -> None:
    scenario = read_scenario(DRY, advisor.knowledge, Problems())
    assert scenario is not None
    with_engine, without = (each.advise(scenario.saved.case) for each in (advisor, plain(advisor)))
    assert [each.outcomes for each in with_engine.trace] == [each.outcomes for each in without.trace]
    assert with_engine.shelf == without.shelf


def test_a_survivor_comes_with_a_scenario_that_kills_it(
    jury: Jury, made: list[Mutant], knowledge: Knowledge, tmp_path: Path
) -> None:
    # No limit of bearing_steel_hot is near the 70 degrees of the dry motor bearing, so nothing in it notices.
    edge = next(each for each in of("bearing_steel_hot", made) if each.key == ("when", "edge"))
    assert jury.killer(edge) is None
    found, _ = Search(jury, Bender(jury.advisor)).find(edge, TRIES)
    assert found is not None
    text = as_scenario(found).replace('title: ""', "title: edge").replace('guards: ""', "guards: edge")
    (tmp_path / "edge.yaml").write_text(text + "\n", encoding="utf-8")
    (tmp_path / DRY.name).write_text(DRY.read_text(encoding="utf-8"), encoding="utf-8")
    problems = Problems()
    scenario = read_scenario(tmp_path / "edge.yaml", knowledge, problems)
    assert scenario is not None, list(problems)
    assert "t_eff_c" not in text
    assert play(scenario, jury.advisor).differences == ()
    assert play(scenario, by_mutant(jury.advisor, edge)).differences != ()


def test_a_mutant_that_no_case_can_tell_is_shown_equivalent(jury: Jury, knowledge: Knowledge) -> None:
    # Every water exposure is at least 'none', the lowest place: to ask it or not is the same.
    place, instance = next(
        (place, each)
        for place, each in enumerate(knowledge.instances["environment"])
        if any(isinstance(then, Warns) for then in each.then)
    )
    always_met = Every((instance.when, Bound("water_exposure", ">=", 0.0)))
    same = Mutant(instance.rule.id, "environment", "limit", ("when",), {place: replace(instance, when=always_met)})
    assert Search(jury, Bender(jury.advisor)).region(same) == []


def test_what_a_referral_ends_before_is_shown_equivalent(jury: Jury, made: list[Mutant]) -> None:
    # A sealed bearing is referred at the first step and everything else withheld: no later rule need leave it out.
    sealed = next(each for each in of("interval_figure", made) if each.key == ("when", 0, "without", 2))
    assert Search(jury, Bender(jury.advisor)).region(sealed) == []
    oil = next(each for each in of("interval_figure", made) if each.key == ("when", 0, "without", 1))
    assert Search(jury, Bender(jury.advisor)).region(oil) != []


def test_what_only_those_who_are_asked_can_answer_makes_a_term_needless(jury: Jury, made: list[Mutant]) -> None:
    # The temperature of the water is asked from splash on, and is 20 degrees where nobody is asked.
    dropped = next(each for each in of("steam", made) if each.key == ("when", 0, "dropped"))
    assert Search(jury, Bender(jury.advisor)).region(dropped) == []


def test_words_for_a_mutant_name_what_was_and_what_is(made: list[Mutant], knowledge: Knowledge) -> None:
    up = next(each for each in of("bearing_steel_hot", made) if each.key == ("when", "limit", "up"))
    assert say_mutant(up, knowledge) == (
        "effective temperature is above 120 °C -> effective temperature is above 121 °C"
    )


def test_the_score_leaves_equivalent_mutants_out() -> None:
    survivors = (Survivor("a", "limit", "x", equivalent=True), Survivor("b", "limit", "y", tries=30))
    measured = Measured("rolling_bearing", 21, 19, survivors)
    assert measured.score == pytest.approx(0.95)
    assert "95.0 %" in as_text(measured)
    assert "not killed; no case found in 30 tries" in as_text(measured)
    assert as_data(measured)["equivalent"] == 1


def test_a_share_finds_the_same_in_one_process() -> None:
    files = [DRY]
    one = measure(knowledge_folder(), "rolling_bearing", None, files, rules=["drain_open"], tries=0, processes=1)
    assert one.made > one.killed > 0


def test_the_command_lists_survivors_and_ends_with_1() -> None:
    done = CliRunner().invoke(gudgeon, ["mutate", str(DRY), "--rule", "drain_open", "--tries", "0", "--json"])
    assert done.exit_code == 1
    (data,) = json.loads(done.output)
    assert data["mutants"] == data["killed"] + len(data["survivors"])


def test_a_rule_that_is_not_there_is_refused() -> None:
    done = CliRunner().invoke(gudgeon, ["mutate", str(DRY), "--rule", "no_such_rule"])
    assert done.exit_code != 0
    assert "'no_such_rule' is no rule" in str(done.output) + str(done.exception)


# One of every kind: facts concluded, a demand, one with a `for`, a caution, a referral that withholds, the last step.
TAKEN_UP = (
    "usual_top",
    "film_floor",
    "ep_sliding",
    "drain_open",
    "sealed_is_not_greased",
    "film_below_1",
    "central_line",
)
FEW = (
    "dry_motor_bearing",
    "sealed_motor_bearing",
    "vibrating_screen",
    "no_temperature_measured",
    "both_policies_side_by_side",
)


@pytest.fixture(scope="module")
def few(advisor: Advisor) -> Jury:
    read = (read_scenario(SCENARIOS / f"{name}.yaml", advisor.knowledge, Problems()) for name in FEW)
    return assemble([each for each in read if each is not None], advisor)


@pytest.mark.parametrize("rule", TAKEN_UP)
def test_an_advice_taken_up_from_a_run_is_the_advice_from_the_start(
    rule: str, few: Jury, made: list[Mutant], knowledge: Knowledge
) -> None:
    for mutant in of(rule, made):
        twin = by_mutant(few.advisor, mutant)
        for known in few.cases:
            anew = twin.advise(known.case, assume_gaps=known.assume_gaps, only=known.only)
            taken_up = known.by(twin, same_facts=keeps_facts(pairs_of(mutant, knowledge), knowledge))
            assert _said(taken_up) == _said(anew)
            assert [each.outcomes for each in taken_up.trace] == [each.outcomes for each in anew.trace]


@pytest.mark.parametrize("rule", TAKEN_UP)
def test_where_a_mutant_has_no_effect_the_advice_is_the_same(
    rule: str, few: Jury, made: list[Mutant], knowledge: Knowledge
) -> None:
    for mutant in of(rule, made):
        does = Effects(mutant, knowledge.instances[mutant.step])
        twin = by_mutant(few.advisor, mutant)
        if twin.setters != few.advisor.setters:
            # Deleted, the rule leaves its fact to the first step: then even a sealed bearing shows it.
            continue
        for known in (each for each in few.cases if not does.touches(each.advice)):
            anew = twin.advise(known.case, assume_gaps=known.assume_gaps, only=known.only)
            assert _said(anew) == _said(known.advice)


@pytest.mark.parametrize("rule", ["drain_open", "film_below_1", "safety_always", "lithium_label"])
def test_a_mutant_that_only_moves_cautions_moves_nothing_else(
    rule: str, few: Jury, made: list[Mutant], knowledge: Knowledge
) -> None:
    for mutant in of(rule, made):
        does = Effects(mutant, knowledge.instances[mutant.step])
        for known in (each for each in few.cases if each.run is not None):
            moved = only_cautions(does.on(known.advice))
            if moved is None:
                continue
            anew = by_mutant(few.advisor, mutant).advise(known.case, assume_gaps=known.assume_gaps, only=known.only)
            assert _said(replace(anew, cautions=known.advice.cautions)) == _said(known.advice)
            assert {each.caution for each in anew.cautions} ^ {each.caution for each in known.advice.cautions} <= moved


def test_scenarios_on_one_case_share_its_advice(advisor: Advisor) -> None:
    names = ("caustic_cleaning", "caustic_cleaning_rule_by_rule", "dry_motor_bearing")
    read = (read_scenario(SCENARIOS / f"{name}.yaml", advisor.knowledge, Problems()) for name in names)
    shared = assemble([each for each in read if each is not None], advisor)
    assert shared.alike == [0, 0, 1]
    assert shared.played[0].advice is shared.played[1].advice


def _said(advice: Advice) -> object:
    """Everything that an advice says."""
    return told(advice), advice.facts, advice.docket, advice.shelf, advice.cautions, advice.at_limit
