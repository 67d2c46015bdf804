"""An expectation is written as the advice has it now, or left to a person; what goes is said before the signature."""

from dataclasses import replace
from pathlib import Path

import pytest

from advisor.advice import Advisor
from advisor.approval import as_data, as_markdown, as_text
from advisor.comparison.meaning import Meaning, Sense, Words, worst
from advisor.conditions import Bound, Condition
from advisor.knowledge import Asks, Instance, Knowledge
from advisor.mishaps import Refusal
from advisor.replay import play
from tests.approval.desk import Desk
from tests.approval.test_approving import begun, differing
from tests.conftest import SCENARIOS

SALT = "salt_needs_salt_test"
DECK = "deck_machine_wishes_for_more"


def loosened(knowledge: Knowledge) -> Knowledge:
    """The knowledge with a rating of 3 where the rule on salt water says at most 2."""

    def test(written: Condition) -> Condition:
        return replace(written, limit=3.0) if written == Bound("emcor_salt", "<=", 2.0) else written

    def instance(each: Instance) -> Instance:
        then = tuple(replace(one, test=test(one.test)) if isinstance(one, Asks) else one for one in each.then)
        return replace(each, then=then) if each.rule.id == SALT else each

    steps = {step: tuple(map(instance, each)) for step, each in knowledge.instances.items()}
    return replace(knowledge, instances=steps, fingerprint="3" * 16)


@pytest.fixture
def deck(tmp_path: Path, knowledge: Knowledge, advisor: Advisor) -> Desk:
    for name in (f"{DECK}_rule_by_rule", DECK, "sea_water_splash", "greased_pump_bearing_outdoors"):
        text = (SCENARIOS / f"{name}.yaml").read_text(encoding="utf-8")
        (tmp_path / f"{name}.yaml").write_text(text, encoding="utf-8")
    desk = Desk(tmp_path, advisor, Advisor(loosened(knowledge)))
    begun(desk)
    return desk


def test_what_a_rule_demands_is_rewritten_and_not_withdrawn(deck: Desk) -> None:
    file = deck.file(f"{DECK}_rule_by_rule")
    before = file.read_text(encoding="utf-8")
    assert f'{SALT}: [{{must: {{emcor_salt: {{at_most: "2"}}}}}}, ' in before
    entry = deck.sign(deck.the(SALT))
    after = file.read_text(encoding="utf-8").partition("approved:")[0]
    assert after == before.replace('{must: {emcor_salt: {at_most: "2"}}}', '{must: {emcor_salt: {at_most: "3"}}}')
    assert deck.review().groups == ()
    (words,) = next(each.accepted for each in entry.scenarios if each.path == file.name)
    assert words.endswith(
        "was must: rust in salt water at most 2, now must: rust in salt water at most 3; 2 of its demands stay"
    )


def test_a_must_that_is_loosened_is_a_matter_of_safety_as_in_the_comparison(deck: Desk) -> None:
    group = next(each for each in deck.review().groups if each.about == SALT)
    musts = [item for item in group.items if item.difference and item.difference.kind in {"demands", "demanded_by"}]
    assert len(musts) == 2
    for item in musts:
        assert item.safety
        assert item.played is not None
        before, after = (play(item.played.scenario, each).advice for each in (deck.before, deck.after))
        words = Words(deck.before.knowledge)
        assert worst(Sense(before, words), Sense(after, words)) is Meaning.SAFETY


def test_what_was_rewritten_guards_again(deck: Desk) -> None:
    deck.sign(deck.the(SALT))
    back = deck.review(deck.before).groups
    assert {item.difference.kind for group in back for item in group.items if item.difference} >= {"demanded_by"}


@pytest.mark.parametrize("name", ["demanded_by", "demanded_by_none"])
def test_the_demands_are_written_as_the_rule_makes_them(name: str, tmp_path: Path, advisor: Advisor) -> None:
    desk = differing(name, tmp_path / "scenarios", advisor)
    (group,) = desk.review().groups
    desk.sign(group.name)
    text = desk.file(name).read_text(encoding="utf-8")
    assert "film_aim: [{should: {kappa: {at_least: 1.5}}, level: 2}]}" in text
    assert desk.review().groups == ()


def test_a_rule_that_demands_nothing_any_more_is_expected_to_demand_nothing(deck: Desk, knowledge: Knowledge) -> None:
    steps = {step: tuple(each for each in found if each.rule.id != SALT) for step, found in knowledge.instances.items()}
    deck.after = Advisor(replace(knowledge, instances=steps, fingerprint="0" * 16))
    deck.edit(DECK, "demands: {emcor_salt: should at_most 1}", "facts: {water_test_c: 40}")
    begun(deck)
    for _ in range(9):
        names = deck.names()
        if not names:
            break
        deck.sign(names[0])
    assert f"{SALT}: none\n" in deck.file(f"{DECK}_rule_by_rule").read_text(encoding="utf-8")


def expecting(what: str, root: Path, advisor: Advisor) -> Desk:
    """A desk with one scenario that expects this and a bore that stays."""
    desk = differing("demand_test", root, advisor, "  facts: {bore_mm: 65}\n")
    desk.edit("demand_test", "{upper_service_c: {at_least: 300}}", what)
    begun(desk)
    return desk


def test_a_limit_is_never_withdrawn_while_something_is_demanded(tmp_path: Path, advisor: Advisor) -> None:
    desk = expecting("{load_additive: {at_least: ep}}", tmp_path / "scenarios", advisor)
    kept = desk.everything()
    (group,) = desk.review().groups
    with pytest.raises(Refusal, match=r"demand_test\.yaml:\d+:.*Write there what there is now .*at most"):
        desk.sign(group.name)
    assert desk.everything() == kept
    told = as_text(desk.review())
    assert "1 to be changed by hand first" in told
    assert "gudgeon approve" not in told, "nobody is led to a signature that is refused"


@pytest.mark.parametrize(
    ("before", "after"),
    [
        # The rule film_aim wishes for 1.5 at level 2; the must on the film never asks for more than 1.
        ("{kappa: should_3 at_least 1.5}", "{kappa: should_2 at_least 1.5}"),
        ("{kappa: should_2 at_least 2}", "{kappa: should_2 at_least 1.5}"),
        ("{kappa: {at_least: 1.5}}", "{kappa: {at_least: 1}}"),
    ],
)
def test_a_wish_keeps_its_guard_at_its_level(before: str, after: str, tmp_path: Path, advisor: Advisor) -> None:
    desk = expecting(before, tmp_path / "scenarios", advisor)
    (group,) = desk.review().groups
    desk.sign(group.name)
    assert f"demands: {after}\n" in desk.file("demand_test").read_text(encoding="utf-8")


def test_what_goes_is_listed_before_the_signature(desk: Desk) -> None:
    line = next(each for each in as_text(desk.review()).splitlines() if "withdrawn, seen" in each)
    assert line.strip().startswith("hot.yaml: line 13, barred thickener lithium_12OH: was barred by thickener_steady")
    assert "withdrawn" in as_markdown(desk.review())
    (data,) = (each for each in as_data(desk.review()) if each["about"] == "thickener_steady")
    entry = desk.sign(desk.the("thickener_steady"))
    written = [f"{each.path}: {words}" for each in entry.scenarios for words in each.accepted]
    assert sorted(data["changes"]) == sorted(written), "what is listed is what is written"
    assert data["withdrawn"] == sum("withdrawn" in each for each in written) > 0
