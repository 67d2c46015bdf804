"""Asking in turn, changing one's mind, and the claim that the way to the answers does not matter."""

import itertools
from pathlib import Path

import pytest
from hypothesis import HealthCheck, Phase, settings
from hypothesis import strategies as st
from hypothesis.stateful import RuleBasedStateMachine, invariant, precondition, rule, run_state_machine_as_test

from advisor.advice import Advice, Advisor
from advisor.answers import Unsuitable, read_case
from advisor.case import Case
from advisor.documents import Problems
from advisor.interview import Session
from advisor.places import scenario_folder

# An ordinary motor bearing, answered as a fitter would type it.
MOTOR = {
    "designation": "6313",
    "bearing_type": "deep_groove_ball",
    "dangers": "",
    "site": "converter_fed",
    "supply": "nipple_through",
    "incumbent": "GR-301",
    "maker_item": "none_named",
    "bore_mm": "65",
    "outside_mm": "140",
    "speed_rpm": "1 480 rpm",
    "motion": "turning",
    "running_temperature_c": "167 °F",
    "measured_where": "outer_ring_probe",
    "excursions": "no",
    "start_temperature_c": "5",
    "load_ratio": "0.06",
    "shock": "none",
    "water_exposure": "humid",
    "dust": "none",
    "seal": "",
    "width_mm": "33",
}


def answer_all(session: Session, answers: dict[str, str]) -> None:
    while session.question is not None:
        session.answer(answers[session.question.name])


def give(session: Session, **answers: str) -> None:
    """Answer these questions, whichever is in place."""
    for name, text in answers.items():
        session.revise(name)
        session.answer(text)


def result(advice: Advice) -> tuple[object, ...]:
    """What a user reads of an advice."""
    docket = [(line.row, line.values, line.demands, bool(line.waits), line.skipped) for line in advice.docket]
    quantities = [
        (line.row, line.skipped, [advice.facts[name].value for name in line.facts if name in advice.facts])
        for line in advice.quantities
    ]
    return (
        advice.state,
        advice.withheld,
        docket,
        quantities,
        advice.codes,
        [(each.item, each.verdict, each.steps) for each in advice.shelf],
        [each.caution for each in advice.cautions],
        [each.to for each in advice.referrals],
    )


def test_an_ordinary_motor_bearing_is_settled_with_at_most_twenty_questions(advisor: Advisor) -> None:
    session = Session(advisor)
    answer_all(session, MOTOR)
    assert session.advice.state.value == "settled"
    assert len(session.answered) <= 20
    assert session.finished
    assert session.advice.shelf[0].item == "GR-301"


def test_without_a_designation_twenty_answers_settle_the_lubricant(advisor: Advisor) -> None:
    """What is asked after that tunes quantities only, and the user may stop."""
    session = Session(advisor)
    answers = {**MOTOR, "designation": "other"}
    while session.question is not None and not session.only_quantities_left:
        session.answer(answers[session.question.name])
    assert len(session.answered) <= 20
    assert session.advice.state.value == "settled"


def test_questions_come_in_the_declared_order(advisor: Advisor) -> None:
    session = Session(advisor)
    order = list(session.knowledge.facts)
    asked = []
    while session.question is not None:
        asked.append(order.index(session.question.name))
        session.answer(MOTOR[session.question.name])
    assert asked == sorted(asked)


def test_an_unsuitable_answer_changes_nothing_and_says_why(advisor: Advisor) -> None:
    session = Session(advisor)
    before = session.advice
    session.revise("bearing_type")
    with pytest.raises(Unsuitable, match="'ball' is not one of the choices"):
        session.answer("ball")
    assert session.advice is before
    assert not session.answered
    assert not session.history


def test_a_word_for_a_number_may_be_written_with_a_space(advisor: Advisor) -> None:
    session = Session(advisor)
    give(session, load_ratio="Very heavy")
    assert session.case.answers["load_ratio"].estimate
    assert session.case.answers["load_ratio"].value == session.knowledge.facts["load_ratio"].domain.named["very_heavy"]


def test_a_question_put_off_comes_again_after_the_others(advisor: Advisor) -> None:
    session = Session(advisor)
    first = session.question
    assert first is not None
    session.later()
    assert session.question is not None
    assert session.question.name != first.name
    while session.question is not None and session.question.name != first.name:
        session.answer(MOTOR[session.question.name])
    assert session.question is first
    session.later()
    assert session.question is first


def test_back_and_later_walk_along_the_answered_questions(advisor: Advisor) -> None:
    session = Session(advisor)
    give(session, bearing_type="deep_groove_ball", dangers="", site="converter_fed")
    open_one = session.question
    walked = []
    for _ in range(4):
        session.back()
        walked.append(session.question.name if session.question else "")
    assert walked == ["site", "dangers", "bearing_type", "bearing_type"]
    for _ in range(3):
        session.later()
    assert session.question is open_one


def test_an_answer_that_became_irrelevant_is_kept_aside_and_comes_back(advisor: Advisor) -> None:
    session = Session(advisor)
    give(session, bearing_type="cylindrical_roller", axially_loaded="yes", cage="machined_brass")
    give(session, bearing_type="deep_groove_ball")
    assert {"axially_loaded", "cage"} <= set(session.advice.set_aside)
    assert "cage" not in session.answered
    give(session, bearing_type="cylindrical_roller")
    assert session.case.answers["cage"].value == "machined_brass"
    assert {"axially_loaded", "cage"} <= set(session.answered)


def test_undo_takes_answers_back_one_by_one_and_notes_it(advisor: Advisor) -> None:
    session = Session(advisor)
    give(session, bearing_type="deep_groove_ball", dangers="")
    give(session, bearing_type="tapered_roller")
    assert session.undo()
    assert session.case.answers["bearing_type"].value == "deep_groove_ball"
    assert session.undo()
    assert session.question is not None
    assert session.question.name == "dangers"
    assert session.undo()
    assert not session.undo()
    assert len(session.history) == 6


def test_a_withheld_referral_ends_the_interview_until_its_answer_is_changed(advisor: Advisor) -> None:
    session = Session(advisor)
    give(session, bearing_type="deep_groove_ball", dangers="oxidiser")
    assert session.advice.withheld
    assert session.finished
    assert session.question is None
    give(session, dangers="")
    assert not session.finished


def test_the_user_may_stop_when_only_quantities_are_left(advisor: Advisor) -> None:
    session = Session(advisor)
    answers = {**MOTOR, "designation": "other"}
    while session.question is not None and session.question.name != "width_mm":
        assert not session.only_quantities_left
        session.answer(answers[session.question.name])
    assert session.only_quantities_left
    assert session.advice.state.value == "settled"
    session.dont_know()
    assert session.finished


def test_a_question_says_which_rows_it_helps_to_settle_also_once_answered(advisor: Advisor) -> None:
    session = Session(advisor)
    titles = {line.title for line in session.advice.docket}
    helps = session.helps_settle()
    assert titles & set(helps)
    first = session.question
    assert first is not None
    session.answer(MOTOR[first.name])
    session.revise(first.name)
    assert set(session.helps_settle()) == set(helps)


def test_changed_rows_are_those_that_read_differently(advisor: Advisor) -> None:
    session = Session(advisor)
    answer_all(session, MOTOR)
    give(session, start_temperature_c="-20")
    assert "cold" in session.changed_rows()
    assert "additive" not in session.changed_rows()
    session.undo()
    give(session, start_temperature_c="5 °C")
    assert not session.changed_rows()


def test_the_answers_of_every_scenario_lead_to_the_same_advice_when_asked_one_by_one(advisor: Advisor) -> None:
    """An interview stops asking once nothing waits, so it may leave answers of the scenario unasked."""
    names = (
        "motor_keeps_its_polyurea",
        "hot_wet_roller_table",
        "unlabelled_brown_grease",
        "bridge_trunnion_parked",
        "oxygen_booster_motor",
    )
    for name in names:
        saved = read_case(Path(scenario_folder(), "rolling_bearing", f"{name}.yaml"), advisor.knowledge, Problems())
        assert saved is not None
        session = Session(advisor)
        answer_all(session, {"designation": "other", **{fact: each.typed for fact, each in saved.case.answers.items()}})
        assert result(session.advice) == result(advisor.advise(saved.case)), name


def test_what_cannot_be_worked_out_changes_nothing(advisor: Advisor) -> None:
    """Only one range at a time is worked out."""
    session = Session(advisor)
    give(session, running_temperature_c="70..90 °C")
    before = session.advice
    session.revise("bore_mm")
    with pytest.raises(Unsuitable, match="left open at once"):
        session.answer("60..70")
    assert session.advice is before
    assert "bore_mm" not in session.case.answers
    assert len(session.history) == 1


class Wandering(RuleBasedStateMachine):
    """Answer, revise, postpone, go back and undo in any order."""

    advisor: Advisor

    def __init__(self) -> None:
        super().__init__()
        self.session = Session(self.advisor)

    def _suitable(self, data: st.DataObject) -> str:
        question = self.session.question
        assert question is not None
        domain = question.domain
        if domain.kind == "number":
            return (
                f"{data.draw(st.integers(max(int(domain.low) + 1, -30), min(int(domain.high), 160)))}"
                if domain.high > 1
                else "0.06"
            )
        if domain.kind == "several":
            ticks = data.draw(
                st.lists(
                    st.sampled_from([each for each in domain.choices if each not in {"oxidiser", "nuclear"}]),
                    max_size=2,
                    unique=True,
                )
            )
            return ", ".join(ticks)
        return data.draw(st.sampled_from(list(domain.choices)))

    @precondition(lambda self: self.session.question is not None)
    @rule(data=st.data())
    def answer(self, data: st.DataObject) -> None:
        self.session.answer(self._suitable(data))

    @precondition(lambda self: self.session.question is not None)
    @rule(data=st.data())
    def answer_several(self, data: st.DataObject) -> None:
        for _ in range(4):
            if self.session.question is not None:
                self.session.answer(self._suitable(data))

    @precondition(lambda self: self.session.question is not None)
    @rule()
    def do_not_know(self) -> None:
        self.session.dont_know()

    @precondition(lambda self: self.session.answered)
    @rule(data=st.data())
    def revise(self, data: st.DataObject) -> None:
        self.session.revise(data.draw(st.sampled_from(self.session.answered)))
        self.session.answer(self._suitable(data))

    @rule()
    def undo(self) -> None:
        self.session.undo()

    @rule()
    def back(self) -> None:
        self.session.back()

    @rule()
    def later(self) -> None:
        self.session.later()

    @invariant()
    def the_question_in_place_is_open_or_answered(self) -> None:
        question = self.session.question
        assert question is None or question.name in self.session.open or question.name in self.session.case.answers

    def teardown(self) -> None:
        fresh = Session(self.advisor)
        for _ in itertools.count():
            waiting = [name for name in (*fresh.open, *fresh.may_be_asked) if name in self.session.case.answers]
            if not waiting or fresh.advice.withheld:
                break
            fresh.revise(waiting[0])
            fresh.answer(self.session.case.answers[waiting[0]].typed)
        assert result(fresh.advice) == result(self.session.advice)
        again = self.advisor.advise(Case(self.session.case.point_kind, "", dict(self.session.case.answers)))
        assert result(again) == result(self.session.advice)


def test_the_final_answers_alone_decide_the_advice(advisor: Advisor) -> None:
    Wandering.advisor = advisor
    settled = settings(
        max_examples=12,
        stateful_step_count=15,
        deadline=None,
        suppress_health_check=list(HealthCheck),
        phases=[Phase.explicit, Phase.reuse, Phase.generate],  # a walk is short enough to be read as it is
    )
    run_state_machine_as_test(Wandering, settings=settled)


# ---- variants -------------------------------------------------------------------------------------------------------


def test_variants_are_looked_at_one_by_one_and_an_answer_returns_to_the_whole(advisor: Advisor) -> None:
    """Anhydrous calcium stands 90 °C with 10 K kept (common practice), the letter G of DIN 51825 reaches 100 °C."""
    session = Session(advisor)
    answer_all(session, {**MOTOR, "running_temperature_c": "70..90 °C"})
    whole, count = session.advice, len(session.advice.branches)
    assert 1 < count <= 6
    assert session.shown is whole
    seen = []
    for _ in range(count):
        session.next_variant()
        seen.append(session.shown)
    assert seen == [each.advice for each in whole.branches]
    assert (seen[0].codes.din, seen[-1].codes.din) == (("K2G-10",), ("K2K-10",))
    session.next_variant()
    assert session.shown is whole
    session.next_variant()
    give(session, running_temperature_c="75 °C")
    assert session.shown is session.advice
    assert not session.advice.branches


def test_without_anything_left_open_there_is_no_variant_to_look_at(advisor: Advisor) -> None:
    session = Session(advisor)
    answer_all(session, MOTOR)
    session.next_variant()
    assert session.shown is session.advice


def test_too_much_left_open_is_refused_as_an_answer(advisor: Advisor) -> None:
    session = Session(advisor)
    give(session, running_temperature_c="70..90 °C")
    with pytest.raises(Unsuitable, match="Too much is left open at once"):
        give(session, load_ratio="0.1..0.2")
    assert "load_ratio" not in session.case.answers
