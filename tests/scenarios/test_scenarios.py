"""Every scenario holds, every agreed rule is fired by one, and none can be taken away unnoticed."""

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.documents import Problems
from advisor.knowledge import Knowledge
from advisor.replay import Outcome, Played, find, kinds_of, play, read_scenario
from advisor.replay import replay as replay_all

FILES = find([])


@pytest.fixture(scope="module")
def outcome(advisor: Advisor) -> Outcome:
    return replay_all(FILES, {"rolling_bearing": advisor})


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_scenario(path: Path, advisor: Advisor) -> None:
    problems = Problems()
    scenario = read_scenario(path, advisor.knowledge, problems)
    assert scenario is not None, "\n".join(map(str, problems))
    found = play(scenario, advisor).differences
    told = [f"line {each.mark.line}: {each}\n  " + "\n  ".join(each.because) for each in found]
    assert not told, f"{scenario.guards}\n" + "\n".join(told)


def test_the_scenarios_speak_of_kinds_of_point_that_are_known() -> None:
    assert kinds_of(FILES) == ["rolling_bearing"]


def agreed(knowledge: Knowledge) -> list[str]:
    return [rule.id for rule in knowledge.rules.values() if rule.status == "agreed"]


def rules_fired(played: Played) -> set[str]:
    return {instance.partition("/")[0] for instance in played.fired}


def test_every_agreed_rule_is_fired_by_a_scenario(outcome: Outcome, knowledge: Knowledge) -> None:
    fired = set().union(*(rules_fired(played) for played in outcome.played))
    assert [rule for rule in agreed(knowledge) if rule not in fired] == []


def without(knowledge: Knowledge, rule: str) -> Knowledge:
    """The knowledge with one written rule taken away."""
    instances = {
        step: tuple(each for each in found if each.rule.id != rule) for step, found in knowledge.instances.items()
    }
    rules = {name: each for name, each in knowledge.rules.items() if name != rule}
    return replace(knowledge, rules=rules, instances=instances)


def read(played: Played) -> set[str]:
    """The differences in what people read."""
    return {str(each) for each in played.differences if each.read}


def unnoticed(outcome: Outcome, knowledge: Knowledge) -> Iterator[str]:
    """The agreed rules whose removal makes no scenario differ anew in anything that people read."""
    for rule in agreed(knowledge):
        advisor = Advisor(without(knowledge, rule))
        touched = [played for played in outcome.played if rule in rules_fired(played)]
        if not any(read(play(played.scenario, advisor)) - read(played) for played in touched):
            yield rule


def test_every_agreed_rule_is_missed_when_it_is_taken_away(outcome: Outcome, knowledge: Knowledge) -> None:
    survivors = list(unnoticed(outcome, knowledge))
    assert survivors == [], f"nobody would notice if these {len(survivors)} rules were lost"
