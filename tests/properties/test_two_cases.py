"""What must hold between two cases that differ in one answer: 2,000 pairs of whole cases for each claim."""

from hypothesis import given
from hypothesis import strategies as st
from whole_cases import DONT_KNOW, KNOWLEDGE, MANY, ends, in_order, whole_cases, with_values

from advisor.advice import Advice, Advisor
from advisor.case import Case
from advisor.conditions import Bound, leaves
from advisor.shelf import places

PAIR, CHANGE_OVER = KNOWLEDGE.properties["pair"].domain.code, KNOWLEDGE.properties["change_over"].domain.code
GREASES = [each.item for each in KNOWLEDGE.shelf if each.values.get("form") == "grease"]
FILMED = (("turning",), ("swinging",), ("turning", "vertical"), ("turning", "outer_ring_turns"), ("turning", "shaken_machine"))
"""Motions in which a film is asked for."""

NEEDED = ("bore_mm", "outside_mm", "speed_rpm", "running_temperature_c", "bearing_type", "load_ratio", "shock")


def thickeners(advice: Advice) -> set[str]:
    """The thickeners that no must rules out."""
    judged = advice.choices
    assert judged is not None
    codes = [judged.catalogue.items[place].code for place in places(judged.passing)]
    return {code.partition("=")[2] for code in codes if code.startswith("thickener=")}


def base_oils(advice: Advice) -> set[str]:
    """The base oils that no must on the base oil rules out."""
    judged = advice.oils
    assert judged is not None
    barred = 0
    for demand, failing in zip(judged.demands, judged.failing, strict=True):
        if demand.must and demand.property == "base_oil":
            barred |= failing
    left = judged.catalogue.everything & ~barred
    return {str(judged.catalogue.items[place].values["base_oil"]) for place in places(left)}


def thinnest(advice: Advice) -> dict[str, float]:
    """For each base oil among the usual oils, the thinnest grade that reaches the kappa wished for."""
    judged = advice.oils
    assert judged is not None
    aims = [
        term.limit
        for demand in judged.demands
        if demand.property == "kappa" and not demand.must
        for term in leaves(demand.test)
        if isinstance(term, Bound) and term.sign == ">=" and isinstance(term.limit, float)
    ]
    assert aims, "no film is wished for"
    found: dict[str, float] = {}
    for item, kappa in zip(judged.catalogue.items, judged.columns["kappa"].values, strict=True):
        oil, grade = str(item.values["base_oil"]), item.values["vg"]
        found.setdefault(oil, float("inf"))
        if isinstance(kappa, float) and isinstance(grade, float) and kappa >= max(aims):
            found[oil] = min(found[oil], grade)
    return found


@given(
    case=whole_cases(
        shown=True,
        known=NEEDED,
        given={"motion": FILMED, "running_temperature_c": tuple(float(each) for each in range(20, 181))},
    ),
    rise=st.integers(1, 100),
)
@MANY
def test_a_hotter_bearing_gets_no_thickener_more_and_no_thinner_grade(case: Case, rise: int, advisor: Advisor) -> None:
    celsius = case.answers["running_temperature_c"].value
    assert isinstance(celsius, float)
    hotter = with_values(case, {"running_temperature_c": celsius + rise})
    for cool, hot in zip(ends(advisor.advise(case)), ends(advisor.advise(hotter)), strict=True):
        assert thickeners(hot) <= thickeners(cool)
        before, after = thinnest(cool), thinnest(hot)
        assert len(before) > 10
        for oil, grade in before.items():
            assert after[oil] >= grade, oil


@given(
    case=whole_cases(shown=True, known=NEEDED, given={"motion": FILMED}),
    times=st.integers(1, 400).map(lambda each: 1 + each * each / 1000),
)
@MANY
def test_a_faster_bearing_never_gets_a_thicker_thinnest_grade(case: Case, times: float, advisor: Advisor) -> None:
    """The reference viscosity steps down by 2.3 % at 1000 1/min (ISO 281), so there too a faster bearing asks less."""
    rpm = case.answers["speed_rpm"].value
    assert isinstance(rpm, float)
    faster = with_values(case, {"speed_rpm": min(200_000.0, round(rpm * times, 2))})
    for slow, fast in zip(ends(advisor.advise(case)), ends(advisor.advise(faster)), strict=True):
        before, after = thinnest(slow), thinnest(fast)
        for oil, grade in before.items():
            assert after[oil] <= grade, oil


@given(case=whole_cases(shown=True, known=("running_temperature_c", "peak_temperature_c", "peak_share_percent"), given={"excursions": ("yes",)}))
@MANY
def test_a_share_of_hot_spells_not_known_allows_no_more_than_any_known_share(case: Case, advisor: Advisor) -> None:
    unknown = in_order(case, {**case.answers, "peak_share_percent": DONT_KNOW})
    for told, untold in zip(ends(advisor.advise(case)), ends(advisor.advise(unknown)), strict=True):
        assert "peak_share_percent" in untold.assumptions
        assert thickeners(untold) <= thickeners(told)
        assert base_oils(untold) <= base_oils(told)


@given(
    case=whole_cases(shown=True, known=("incumbent",)), one=st.sampled_from(GREASES), other=st.sampled_from(GREASES)
)
@MANY
def test_two_greases_are_the_same_pair_both_ways_and_the_same_one_needs_nothing(
    case: Case, one: str, other: str, advisor: Advisor
) -> None:
    pairs: list[object] = []
    for in_use, new in ((one, other), (other, one)):
        for advice in ends(advisor.advise(with_values(case, {"incumbent": in_use}))):
            assert advice.judgement is not None
            columns, place = advice.judgement.columns, advice.judgement.catalogue.place
            assert columns["change_over"].values[place[in_use]] == CHANGE_OVER("nothing_to_do")
            assert columns["pair"].values[place[in_use]] == PAIR("same")
            pairs.append(columns["pair"].values[place[new]])
    assert len(set(pairs)) == 1, (one, other)
