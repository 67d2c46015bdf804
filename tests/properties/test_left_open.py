"""What is left open is run once per value: forks, alternatives, ranges; and what their branches share."""

import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from itertools import pairwise

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.advice import Advice, Advisor, Part, State, TooOpen
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


def read_off(advice: Advice) -> dict[tuple[str, str], object]:
    """What a user reads, thing by thing."""
    rows = {row.id for row in KNOWLEDGE.docket if row.recommends}
    found: dict[tuple[str, str], object] = {("state", ""): advice.state.value}
    found |= {("row", each.row): None if each.skipped else each.values for each in advice.docket if each.row in rows}
    found |= {("product", each.item): each.verdict.value for each in advice.shelf}
    found |= {("code", "din"): advice.codes.din, ("code", "iso"): advice.codes.iso}
    found |= {("caution", each.caution): True for each in advice.cautions}
    found |= {("referral", each.to): True for each in advice.referrals}
    found |= {("figure", each.row): True for each in advice.quantities if not each.skipped}
    return found


def verdicts(advice: Advice) -> Mapping[str, Verdict]:
    return {each.item: each.verdict for each in advice.shelf}


def opened(case: Case, name: str, typed: str) -> Case:
    """The case with an answer that leaves something open."""
    return in_order(case, {**case.answers, name: answer(ASKED[name], typed)})


def step_of(name: str) -> float:
    step = ASKED[name].domain.step
    return step.size if step else 1.0


def shares_only_what_every_run_has(whole: Advice, runs: Sequence[Advice]) -> None:
    assert whole.state is min((each.state for each in runs), key=STATES.index)
    recommending = {row.id for row in KNOWLEDGE.docket if row.recommends}
    for line in whole.docket:
        rows = [each.line(line.row) for each in runs]
        assert set(line.values) == set(rows[0].values).intersection(*(each.values for each in rows)), line.row
        if line.row in recommending:
            # Where no run recommends anything, what the row shows is what is asked.
            silent = not any(each.values for each in rows)
            shown = {(each.values, each.skipped, frozenset(each.demands) if silent else None) for each in rows}
            assert line.differs is (len(shown) > 1), line.row
        # What is recommended over all is barred nowhere, and what is barred anywhere is barred.
        barred = {value for each in rows for value in each.barred or {}}
        assert not barred & set(line.values), line.row
        assert set(line.barred or {}) == barred, line.row
        assert line.skipped is all(each.skipped for each in rows), line.row
    for item, verdict in verdicts(whole).items():
        assert verdict is max((verdicts(each)[item] for each in runs), key=VERDICTS.index), item
    told, all_told = said(whole), [said(each) for each in runs]
    assert told == set().union(*all_told)
    tells_its_figures(whole, runs)


def tells_its_figures(whole: Advice, runs: Sequence[Advice]) -> None:
    """Every figure of a quantity lies between the ends that are told, and both ends are reached."""
    for name in (name for line in whole.quantities for name in line.facts):
        values = [fact.value if (fact := each.facts.get(name)) else None for each in runs]
        numbers = [each for each in values if isinstance(each, float)]
        if len(set(values)) == 1 or not numbers:
            continue
        spread = whole.spread[name]
        assert (min(numbers), max(numbers)) == (spread.values[0], spread.values[-1]), name
        assert spread.lacking is (None in values), name


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
    shares_only_what_every_run_has(whole, alone)


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
        shares_only_what_every_run_has(whole, alone)


def test_the_same_choice_named_twice_leaves_nothing_open(advise: Advise) -> None:
    assert not advise(shock="none or none").branches


# ---- ranges ----------------------------------------------------------------------------------------------------------


def holds_over_every_value(case: Case, name: str, low: float, high: float, advisor: Advisor) -> None:
    """On every value of the range the advice is what the range says of it, and changes are named to the step."""
    step = step_of(name)
    spanned = {**case.answers, name: Answer(None, f"{low}..{high}", span=(low, high))}
    whole = advisor.advise(in_order(case, spanned))
    values = [round(low + step * place, 9) for place in range(round((high - low) / step) + 1)]
    alone = [advisor.advise(with_values(case, {name: value})) for value in values]
    if any(each.withheld for each in alone):
        nothing_is_shown(whole)
        return
    if whole.span is None:
        assert name in whole.set_aside
        return
    assert whole.span.surely
    told = {(each.what, each.name): each.parts for each in whole.courses}
    read = [read_off(each) for each in alone]
    for thing in set().union(*read):
        seen = [each.get(thing, False) for each in read]
        for value, reading in zip(values, seen, strict=True):
            parts = told.get(thing)
            expected = seen[0] if parts is None else reading_at(parts, value)
            assert expected == reading, (thing, value)
        for before, after in pairwise(told.get(thing, ())):
            assert after.low == pytest.approx(before.high + step), thing
            assert before.reading != after.reading, thing
    shares_only_what_every_run_has(whole, alone)
    parts_of_the_range_hold(whole, values, alone)


def reading_at(parts: Sequence[Part], value: float) -> object:
    return next(part.reading for part in parts if part.low <= value <= part.high)


def parts_of_the_range_hold(whole: Advice, values: Sequence[float], alone: Sequence[Advice]) -> None:
    """At most six stretches that follow one another; each shares only what every value in it has."""
    assert len(whole.branches) <= 6
    if not whole.branches:
        assert whole.held_over
        return
    covered: list[float] = []
    for branch in whole.branches:
        assert branch.stretch is not None
        low, high = branch.stretch
        within = [each for value, each in zip(values, alone, strict=True) if low <= value <= high]
        covered += [value for value in values if low <= value <= high]
        shares_only_what_every_run_has(branch.advice, within)
    assert covered == list(values)


def test_a_range_of_temperature_says_at_which_degree_the_advice_changes(
    advise: Advise, make_case: Callable[..., Case], advisor: Advisor
) -> None:
    holds_over_every_value(make_case(), "running_temperature_c", 70.0, 90.0, advisor)
    # Neale: sodium soap to 80 °C, and 10 K are kept as a margin (common practice), so it goes at 71 °C.
    whole = advise(running_temperature_c="68..73 °C", water_exposure="none")
    for run in whole.single:
        celsius = run.facts["running_temperature_c"].value
        assert isinstance(celsius, float)
        assert ("sodium" in (run.line("thickener").barred or {})) is (celsius >= 71)


@pytest.mark.parametrize(
    ("name", "low", "high"),
    [
        ("load_ratio", 0.09, 0.16),
        ("start_temperature_c", -25.0, 5.0),
        ("outside_mm", 138.0, 140.0),
        ("peak_share_percent", 3.0, 6.0),
    ],
)
def test_a_range_holds_over_every_value(
    name: str, low: float, high: float, make_case: Callable[..., Case], advisor: Advisor
) -> None:
    case = make_case(excursions="yes", peak_temperature_c="105 °C", peak_share_percent="1 %")
    holds_over_every_value(case, name, low, high, advisor)


@given(case=whole_cases(known=()), data=st.data())
@FEW
def test_a_range_in_any_case_holds_over_every_value(case: Case, data: st.DataObject, advisor: Advisor) -> None:
    name = data.draw(st.sampled_from([name for name in case.answers if ASKED[name].domain.kind == "number"]))
    low = data.draw(st.sampled_from(pool(name, shown=False)))
    assert isinstance(low, float)
    high = round(low + step_of(name) * data.draw(st.integers(1, 15)), 9)
    if high <= ASKED[name].domain.high:
        holds_over_every_value(with_values(case, {"motion": ("turning",)}), name, low, high, advisor)


@given(case=whole_cases(known=()), data=st.data())
@settings(FEW, max_examples=4)
def test_where_it_is_said_that_nothing_changes_between_nothing_does(
    case: Case, data: st.DataObject, advisor: Advisor
) -> None:
    """Longer ranges of numbers that move few rules are not run value by value; still every value is as told."""
    name = data.draw(st.sampled_from(["load_ratio", "start_temperature_c", "water_temperature_c"]))
    if name not in case.answers or not case.answers[name].known:
        return
    low = {"load_ratio": 0.02, "start_temperature_c": -45.0, "water_temperature_c": 20.0}[name]
    case = with_values(case, {"motion": ("turning",)})
    holds_over_every_value(case, name, low, round(low + 80 * step_of(name), 9), advisor)


def test_a_wide_range_names_its_changes_to_the_step(make_case: Callable[..., Case], advisor: Advisor) -> None:
    """A range of speed has a hundred thousand steps: still the value before each cut differs from the one after."""
    case = make_case()
    whole = advisor.advise(opened(case, "speed_rpm", "1000..3000 rpm"))
    assert 1 < len(whole.branches) <= 6
    for before, after in pairwise(whole.branches):
        assert before.stretch is not None
        assert after.stretch is not None
        last, first = before.stretch[1], after.stretch[0]
        assert first == pytest.approx(last + 0.01)
        classes = [
            [(line.values, line.skipped) for line in advisor.advise(with_values(case, {"speed_rpm": value})).docket]
            for value in (last, first)
        ]
        assert classes[0] != classes[1]


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
    shares_only_what_every_run_has(whole, [swing, vibration])
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
    assert [each.advice.state for each in whole.branches] == [State.SETTLED, State.REFERRED]


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
