"""What is left open is run once per value: forks, alternatives, ranges; and what their branches share."""

import re
from collections.abc import Callable, Mapping
from dataclasses import replace
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.advice import Advice, Advisor, Branch, State, TooOpen
from advisor.answers import answer
from advisor.case import Answer, Case
from advisor.conditions import Ticked, Value
from advisor.knowledge import Fork, Knowledge
from advisor.shelf import Verdict
from tests.properties.test_one_case import nothing_is_shown
from tests.properties.whole_cases import ASKED, FEW, KNOWLEDGE, in_order, pool, whole_cases, with_values

Advise = Callable[..., Advice]
STATES, VERDICTS = list(State), list(Verdict)

# A contested point of the trade: thick oil for the swing, thin oil that bleeds for the vibration (common practice).
WHICH_MOTION = Fork(
    id="which_motion",
    title="which motion governs",
    when=Ticked("motion", frozenset({"swinging"})),
    fact="motion",
    branches=(("the swing", ("vibration_at_standstill",)), ("the vibration", ("swinging",))),
    because="made for a test",
    source=(),
)


def result(advice: Advice) -> object:
    """State, classes and verdicts: what has to be the same over a branch."""
    classes = [(line.row, line.values, line.skipped) for line in advice.docket]
    return advice.state, classes, {each.item: each.verdict for each in advice.shelf}


def verdicts(advice: Advice) -> Mapping[str, Verdict]:
    return {each.item: each.verdict for each in advice.shelf}


def opened(case: Case, name: str, typed: str) -> Case:
    """The case with an answer that leaves something open."""
    return in_order(case, {**case.answers, name: answer(ASKED[name], typed)})


def step_of(name: str) -> float:
    step = ASKED[name].domain.step
    return step.size if step else 1.0


def stretch(branch: Branch, name: str) -> tuple[float, float]:
    """The first and the last value of a branch over a range."""
    first = branch.settings[name]
    last = first if branch.other_end is None else branch.other_end.case.answers[name].value
    assert isinstance(first, float)
    assert isinstance(last, float)
    return first, last


def shares_only_what_every_branch_has(whole: Advice, branches: list[Advice]) -> None:
    assert whole.state is min((each.state for each in branches), key=STATES.index)
    for line in whole.docket:
        values = [each.line(line.row).values for each in branches]
        assert set(line.values) == set(values[0]).intersection(*values[1:]), line.row
        assert line.differs is (len(set(values)) > 1), line.row
    for item, verdict in verdicts(whole).items():
        assert verdict is max((verdicts(each)[item] for each in branches), key=VERDICTS.index), item
    told, all_told = said(whole), [said(each) for each in branches]
    assert told == set().union(*all_told)


def said(advice: Advice) -> set[tuple[str, str]]:
    """Cautions, referrals and open questions."""
    found = {("caution", each.caution) for each in advice.cautions} | {("to", each.to) for each in advice.referrals}
    return found | {("open", each.fact) for each in advice.open_questions}


# ---- alternatives ----------------------------------------------------------------------------------------------------


def test_two_cages_left_open_give_the_advice_of_each_and_what_they_share(advise: Advise) -> None:
    plain = {"bearing_type": "cylindrical_roller", "axially_loaded": "no", "running_temperature_c": "105 °C"}
    whole = advise(**plain, cage="pressed_steel or polyamide")
    alone = [advise(**plain, cage=each) for each in ("pressed_steel", "polyamide")]
    assert [result(each.advice) for each in whole.branches] == [result(each) for each in alone]
    assert [each.settings["cage"] for each in whole.branches] == ["pressed_steel", "polyamide"]
    shares_only_what_every_branch_has(whole, alone)


@given(case=whole_cases(known=()), data=st.data())
@FEW
def test_alternatives_share_only_what_every_one_of_them_has(case: Case, data: st.DataObject, advisor: Advisor) -> None:
    choosable = [name for name in case.answers if ASKED[name].domain.kind in {"choice", "scale"}]
    name = data.draw(st.sampled_from([each for each in choosable if each != "designation"]))
    domain = ASKED[name].domain
    several = st.lists(st.sampled_from(sorted(domain.choices)), min_size=2, max_size=3, unique=True)
    chosen = tuple(data.draw(several))
    case = with_values(case, {"motion": ("turning",)})
    answers = {**case.answers, name: Answer(None, " or ".join(chosen), alternatives=chosen)}
    whole = advisor.advise(Case(case.point_kind, case.title, answers))
    alone = [advisor.advise(with_values(case, {name: each})) for each in chosen]
    if any(each.withheld for each in alone):
        nothing_is_shown(whole)
    else:
        shares_only_what_every_branch_has(whole, alone)


def test_the_same_choice_named_twice_leaves_nothing_open(advise: Advise) -> None:
    assert not advise(shock="none or none").branches


# ---- ranges ----------------------------------------------------------------------------------------------------------


def holds_over_its_stretches(case: Case, name: str, low: float, high: float, advisor: Advisor) -> None:
    """Every value on the fact's step has the result of its branch, and each branch ends where the next begins."""
    step = step_of(name)
    spanned = {**case.answers, name: Answer(None, f"{low}..{high}", span=(low, high))}
    whole = advisor.advise(in_order(case, spanned))
    values = [round(low + step * place, 9) for place in range(round((high - low) / step) + 1)]
    results = [advisor.advise(with_values(case, {name: value})) for value in values]
    if any(each.withheld for each in results):
        nothing_is_shown(whole)
        return
    if not whole.branches:
        assert whole.held_over
        assert all(result(each) == result(results[0]) for each in results)
        return
    ends = [stretch(branch, name) for branch in whole.branches]
    assert ends[0][0] == low
    assert ends[-1][1] == high
    for (_, last), (first, _) in pairwise(ends):
        assert first == pytest.approx(last + step)
    for branch, (first, last) in zip(whole.branches, ends, strict=True):
        within = [each for value, each in zip(values, results, strict=True) if first <= value <= last]
        assert within
        assert all(result(each) == result(branch.advice) for each in within)
        assert branch.other_end is None or result(branch.other_end) == result(branch.advice)
    shares_only_what_every_branch_has(whole, results)


def test_a_range_of_temperature_says_at_which_degree_the_advice_changes(
    advise: Advise, make_case: Callable[..., Case], advisor: Advisor
) -> None:
    holds_over_its_stretches(make_case(), "running_temperature_c", 70.0, 90.0, advisor)
    # Neale: sodium soap to 80 °C, and 10 K are kept as a margin (common practice), so it goes at 71 °C.
    whole = advise(running_temperature_c="68..73 °C", water_exposure="none")
    assert whole.branches
    for branch in whole.branches:
        first, last = stretch(branch, "running_temperature_c")
        assert ("sodium" in (branch.advice.line("thickener").barred or {})) is (first >= 71)
        assert last <= 70 or first >= 71


@pytest.mark.parametrize(
    ("name", "low", "high"),
    [
        ("load_ratio", 0.09, 0.16),
        ("start_temperature_c", -25.0, 5.0),
        ("outside_mm", 138.0, 140.0),
        ("peak_share_percent", 3.0, 6.0),
    ],
)
def test_a_range_holds_over_its_stretches(
    name: str, low: float, high: float, make_case: Callable[..., Case], advisor: Advisor
) -> None:
    case = make_case(excursions="yes", peak_temperature_c="105 °C", peak_share_percent="1 %")
    holds_over_its_stretches(case, name, low, high, advisor)


@given(case=whole_cases(known=()), data=st.data())
@FEW
def test_a_range_in_any_case_holds_over_its_stretches(case: Case, data: st.DataObject, advisor: Advisor) -> None:
    name = data.draw(st.sampled_from([name for name in case.answers if ASKED[name].domain.kind == "number"]))
    low = data.draw(st.sampled_from(pool(name, shown=False)))
    assert isinstance(low, float)
    high = round(low + step_of(name) * data.draw(st.integers(1, 15)), 9)
    if high <= ASKED[name].domain.high:
        holds_over_its_stretches(with_values(case, {"motion": ("turning",)}), name, low, high, advisor)


def test_a_wide_range_misses_no_change_between_the_values_looked_at_first(
    make_case: Callable[..., Case], advisor: Advisor
) -> None:
    """A range of speed has a hundred thousand steps: still the value before each change differs from the one after."""
    case = make_case()
    whole = advisor.advise(opened(case, "speed_rpm", "1000..3000 rpm"))
    assert len(whole.branches) > 1
    for before, after in pairwise(whole.branches):
        last, first = stretch(before, "speed_rpm")[1], stretch(after, "speed_rpm")[0]
        assert first == pytest.approx(last + 0.01)
        assert before.other_end is None or result(before.other_end) == result(before.advice)
        for value, branch in ((last, before), (first, after)):
            assert result(advisor.advise(with_values(case, {"speed_rpm": value}))) == result(branch.advice)


def test_a_range_over_which_nothing_changes_gives_one_advice_and_says_so(advise: Advise) -> None:
    whole = advise(start_temperature_c="10..12 °C")
    assert not whole.branches
    assert "10 °C to 12 °C" in whole.held_over
    assert result(whole) == result(advise(start_temperature_c="11 °C"))


# ---- forks -----------------------------------------------------------------------------------------------------------

BRIDGE = {"swing": ("swinging",), "vibration": ("vibration_at_standstill",)}


@pytest.fixture(scope="module")
def forking(knowledge: Knowledge) -> Advisor:
    return Advisor(replace(knowledge, forks={WHICH_MOTION.id: WHICH_MOTION}))


@pytest.mark.parametrize("own", [True, False], ids=["fork of the knowledge", "fork made here"])
def test_a_bridge_trunnion_with_both_motions_shows_both_variants(
    own: bool, saved: Callable[[str], Case], advisor: Advisor, forking: Advisor
) -> None:
    """Worked by hand from common practice: VG 460 for the swing, thin oil that bleeds for the vibration."""
    case = saved("bridge_trunnion_swinging")
    both = with_values(case, {"motion": ("swinging", "vibration_at_standstill")})
    whole = (advisor if own else forking).advise(both)
    swing, vibration = (each.advice for each in whole.branches)
    assert [each.settings["motion"] for each in whole.branches] == list(BRIDGE.values())
    assert swing.line("vg").values == (460.0,)
    assert {46.0, 68.0, 100.0} <= set(vibration.line("vg").values) <= {46.0, 68.0, 100.0, 150.0}
    assert whole.line("vg").values == ()
    assert whole.line("vg").differs
    assert whole.state is State.REFERRED
    assert result(swing) == result(saved_alone(case, "swing", advisor))
    assert result(vibration) == result(saved_alone(case, "vibration", advisor))
    shares_only_what_every_branch_has(whole, [swing, vibration])
    assert not whole.codes.din
    assert "differs" in whole.codes.din_none


def saved_alone(case: Case, which: str, advisor: Advisor) -> Advice:
    return advisor.advise(with_values(case, {"motion": BRIDGE[which]}))


def test_a_fork_keeps_the_other_ticks_in_every_branch(make_case: Callable[..., Case], forking: Advisor) -> None:
    whole = forking.advise(make_case(motion="swinging, vibration_at_standstill, vertical"))
    assert [each.settings["motion"] for each in whole.branches] == [
        ("swinging", "vertical"),
        ("vibration_at_standstill", "vertical"),
    ]


def test_no_fork_where_its_condition_does_not_hold(make_case: Callable[..., Case], forking: Advisor) -> None:
    assert not forking.advise(make_case(motion="turning")).branches
    assert not forking.advise(make_case(motion="vibration_at_standstill")).branches


def test_a_dont_know_that_stands_for_each_of_several_is_run_for_each(
    knowledge: Knowledge, make_case: Callable[..., Case]
) -> None:
    shock = knowledge.facts["shock"]
    assert shock.assume is not None
    each = replace(shock, assume=replace(shock.assume, each=("none", "strong")))
    advisor = Advisor(replace(knowledge, facts={**knowledge.facts, "shock": each}))
    whole = advisor.advise(make_case(shock="?"))
    alone = [advisor.advise(make_case(shock=one)) for one in ("none", "strong")]
    assert [result(one.advice) for one in whole.branches] == [result(one) for one in alone]


# ---- one bad branch spoils the whole, and too much is refused --------------------------------------------------------


def test_a_referral_in_one_branch_refers(advise: Advise) -> None:
    whole = advise(load_ratio="0.24..0.26")
    assert whole.state is State.REFERRED
    assert "load_specialist" in {each.to for each in whole.referrals}
    assert [each.advice.state for each in whole.branches if stretch(each, "load_ratio")[1] <= 0.25] != [State.REFERRED]


@pytest.mark.parametrize("supply", ["sealed_no_fitting or nipple_through", "nipple_through or sealed_no_fitting"])
def test_withheld_in_one_branch_withholds_all(supply: str, advise: Advise) -> None:
    whole = advise(supply=supply)
    assert whole.withheld
    nothing_is_shown(whole)
    assert {"maker", "sds", "loto"} <= {each.caution for each in whole.cautions}


def test_a_caution_that_concerns_all_in_one_branch_concerns_all(advise: Advise) -> None:
    """A caution names what it concerns in any branch; given for everything in one, it is given for everything."""
    whole = advise(incumbent_thickener="polyurea_diurea_modern or lithium_12OH")
    for each in whole.cautions:
        given_now = [one for branch in whole.branches for one in branch.advice.cautions if one.caution == each.caution]
        if all(one.concerns for one in given_now):
            assert set(each.concerns) == {name for one in given_now for name in one.concerns}
        else:
            assert not each.concerns


TWO = {"shock": "none or moderate", "dust": "none or light"}


@pytest.mark.parametrize(
    ("changed", "named"),
    [
        ({"load_ratio": "0.05..0.10", "running_temperature_c": "70..90 °C"}, ["load ratio", "running temperature"]),
        ({**TWO, "load_ratio": "0.05..0.10"}, ["shock", "dust", "load ratio"]),
        ({**TWO, "excursions": "yes or no"}, ["shock", "dust", "hot spells"]),
        ({"shock": "none or moderate or strong", "dust": "none or light or heavy"}, ["variants"]),
    ],
)
def test_too_much_left_open_is_refused_in_a_sentence(changed: dict[str, str], named: list[str], advise: Advise) -> None:
    with pytest.raises(TooOpen) as refused:
        advise(**changed)
    assert all(each in str(refused.value) for each in named)
    assert re.fullmatch(r"[A-Z].*\. (Leave|Answer) .*\.", str(refused.value))


def test_two_things_left_open_make_a_branch_for_each_pair(advise: Advise) -> None:
    whole = advise(shock="none or moderate", dust="none or light or heavy")
    settings: list[Mapping[str, Value]] = [each.settings for each in whole.branches]
    assert len(settings) == 6
    assert all(set(each) == {"shock", "dust"} for each in settings)
    assert KNOWLEDGE.title("shock") in whole.branches[0].label
