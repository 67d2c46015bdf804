"""What must hold of the advice for any single case, whatever is answered: 2,000 whole cases, all claims on each."""

import re
from collections.abc import Callable, Sequence

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.advice import Advice, Advisor, State
from advisor.case import Case, Origin
from advisor.conditions import FactRef, holds, leaves
from advisor.designations import DinCode, IsoCode, din_serves, iso_serves
from advisor.knowledge import Asks, Sets
from advisor.shelf import Judgement, Raise, Verdict, all_reads
from advisor.specification import Demand, combine, mentions
from tests.properties.whole_cases import ASKED, KNOWLEDGE, MANY, SLOW, ends, whole_cases

DOMAINS = {name: prop.domain for name, prop in KNOWLEDGE.properties.items()}
IN = {Verdict.FITS, Verdict.SECOND_BEST, Verdict.STILL_IN}
CHANGE_OVER, PAIR = DOMAINS["change_over"].code, DOMAINS["pair"].code

# A lithium-calcium soap is made of the 12-hydroxystearates of both metals (common practice, no source).
MIXED_SOAPS = {"lithium_calcium_mixed": ("lithium_12OH", "calcium_anhydrous_12OH")}

# DIN 51502: upper temperature of each letter; N and above leave the water rating to agreement.
DIN_UPPER = dict(
    zip("CDEFGHKMNPRSTU", (60, 60, 80, 80, 100, 100, 120, 120, 140, 160, 180, 200, 220, float("inf")), strict=True)
)
DIN_WATER = dict(zip("CDEFGHKM", ((40, 1), (40, 3), (40, 1), (40, 3), (90, 1), (90, 3), (90, 1), (90, 3)), strict=True))
# ISO 6743-9: lower and upper temperature symbols; the water symbol is a grid of environment and rust protection.
ISO_LOWER = {"A": 0, "B": -20, "C": -30, "D": -40, "E": float("-inf")}
ISO_UPPER = {"A": 60, "B": 90, "C": 120, "D": 140, "E": 160, "F": 180, "G": float("inf")}
NLGI = ("000", "00", "0", "1", "2", "3", "4", "5", "6")


def drawn_from_rules(kind: type[Asks] | type[Sets]) -> list[Asks | Sets]:
    """What the rules conclude somewhere, where it needs no fact for a limit."""
    concluded = [then for instances in KNOWLEDGE.instances.values() for each in instances for then in each.then]
    return [then for then in concluded if isinstance(then, kind) and not _refers_to_a_fact(then)]


def _refers_to_a_fact(then: Asks | Sets) -> bool:
    terms = [*leaves(then.for_), *(leaves(then.test) if isinstance(then, Asks) else ())]
    value = then.value if isinstance(then, Sets) else None
    return isinstance(value, FactRef) or any(isinstance(getattr(term, "limit", None), FactRef) for term in terms)


DEMANDS = drawn_from_rules(Asks)
CHANGE_OVERS = [then for then in drawn_from_rules(Sets) if isinstance(then, Sets) and then.name == "change_over"]

DIN_CODES = [
    f"K{additives}{nlgi}{letter}{lower}"
    for additives in ("", "P", "F", "PF")
    for nlgi in NLGI
    for letter in DIN_UPPER
    for lower in (-10, -20, -30, -40, -50, -60)
]
ISO_CODES = [
    f"ISO-L-X{lower}{upper}{water}{load} {nlgi}"
    for lower in ISO_LOWER
    for upper in ISO_UPPER
    for water in "ABCDEFGHI"
    for load in "AB"
    for nlgi in NLGI
]


@given(
    case=whole_cases(),
    demand=st.sampled_from(DEMANDS),
    conclusion=st.sampled_from(CHANGE_OVERS),
    din=st.sampled_from(DIN_CODES),
    iso=st.sampled_from(ISO_CODES),
)
@MANY
def test_what_holds_of_every_case(
    case: Case, demand: Asks, conclusion: Sets, din: str, iso: str, advisor: Advisor
) -> None:
    whole = advisor.advise(case)
    the_safety_cautions_stand(whole)
    for advice in ends(whole):
        the_safety_cautions_stand(advice)
        no_factor_is_above_one(advice)
        no_figure_without_its_caution_or_below_100_h(advice)
        if advice.withheld:
            nothing_is_shown(advice)
            continue
        a_missing_value_never_passes_a_must(advice)
        one_more_demand_never_loosens(advice, demand)
        one_more_rule_never_lowers_the_change_over(advice, conclusion)
        a_mixed_soap_is_never_laxer_than_its_worst_component(advice)
        codes_cover_the_case(advice, advisor)
        a_code_serves_exactly_when_every_part_does(advice, advisor, din, iso)


def the_safety_cautions_stand(advice: Advice) -> None:
    assert {"maker", "sds", "loto"} <= {each.caution for each in advice.cautions}


def nothing_is_shown(advice: Advice) -> None:
    assert advice.state is State.REFERRED
    assert not advice.docket
    assert not advice.shelf
    assert not advice.branches
    assert not advice.open_questions
    assert not advice.conflicts
    assert not advice.at_limit
    assert not advice.codes.din
    assert not advice.codes.iso
    assert not advice.specification.demands
    assert not any(each.concerns for each in advice.cautions)


def no_factor_is_above_one(advice: Advice) -> None:
    for name, fact in advice.facts.items():
        if (name.startswith("f_") or name == "interval_factor") and fact.value is not None:
            assert isinstance(fact.value, float)
            assert 0 < fact.value <= 1, name


def no_figure_without_its_caution_or_below_100_h(advice: Advice) -> None:
    given_now = {each.caution for each in advice.cautions}
    for line in advice.quantities:
        for name in line.facts:
            value = advice.facts[name].value
            if not line.skipped and isinstance(value, float) and KNOWLEDGE.domain(name).unit == "h":
                assert value >= 100, name
                assert "interval_formula_source" in given_now, name


def a_missing_value_never_passes_a_must(advice: Advice) -> None:
    """Judged once more, product by product: every must that falls on a product in the running is met by a value."""
    judgement = advice.judgement
    assert judgement is not None
    musts = [demand for demand in judgement.demands if demand.must and not _waits(demand, judgement)]
    for each in advice.shelf:
        if each.verdict not in IN:
            continue
        sheet = {name: column.values[each.place] for name, column in judgement.columns.items()}
        record = {name: value for name, value in sheet.items() if value is not None}
        for demand in musts:
            if holds(demand.for_, record) is not False:
                assert not demand.void, (each.item, demand)
                assert holds(demand.test, record) is True, (each.item, demand)


def _waits(demand: Demand, judgement: Judgement) -> bool:
    columns = [judgement.columns.get(name) for name in {demand.property, *mentions(demand.for_)}]
    return any(column is not None and column.waiting for column in columns)


def one_more_demand_never_loosens(advice: Advice, asks: Asks) -> None:
    before = advice.specification
    one_more = Demand(asks.property, asks.test, asks.level, asks.for_, "one more")
    after = combine((*before.class_demands, one_more), DOMAINS)
    for name, values in before.allowed.items():
        assert after.allowed[name] <= values, name
    assert {each.about for each in before.conflicts} <= {each.about for each in after.conflicts}
    order = list(Verdict)
    for judged, demands, counts in (
        (advice.judgement, after.demands, True),
        (advice.oils, after.class_demands, False),
        (advice.choices, after.class_demands, False),
    ):
        assert judged is not None
        now = Judgement(judged.catalogue, judged.columns, demands, DOMAINS, missing_counts=counts)
        assert not now.passing & ~judged.passing, asks
        if counts:
            for each in advice.shelf:
                settled_verdict = judged.verdict(each.place)
                assert order.index(now.verdict(each.place)) >= order.index(settled_verdict), (each.item, asks)


def one_more_rule_never_lowers_the_change_over(advice: Advice, conclusion: Sets) -> None:
    judgement = advice.judgement
    assert judgement is not None
    raised = [
        Raise(then.name, then.value, then.for_, instance.id)
        for step in advice.trace
        for instance, outcome in zip(step.instances, step.outcomes, strict=True)
        if outcome and instance.binds
        for then in instance.then
        if isinstance(then, Sets) and then.name == "change_over" and not isinstance(then.value, FactRef)
    ]
    before = judgement.columns["change_over"].values
    assert not isinstance(conclusion.value, FactRef)
    one_more = Raise("change_over", conclusion.value, conclusion.for_, "one more")
    looked_at = frozenset({"change_over"}).union(*(mentions(each.for_) for each in (*raised, one_more)))
    needed = all_reads(looked_at, KNOWLEDGE.properties)
    after = judgement.catalogue.for_case(advice.facts, [*raised, one_more], needed=needed)["change_over"].values
    for low, high in zip(before, after, strict=True):
        assert isinstance(low, float)
        assert isinstance(high, float)
        assert high >= low, conclusion


def a_mixed_soap_is_never_laxer_than_its_worst_component(advice: Advice) -> None:
    assert advice.choices is not None
    column = advice.choices.columns.get("pair")
    if column is None or column.waiting:
        return
    place = advice.choices.catalogue.place
    for mixed, components in MIXED_SOAPS.items():
        pairs = [column.values[place[f"thickener={each}"]] for each in (mixed, *components)]
        assert all(isinstance(pair, float) for pair in pairs)
        assert pairs[0] >= max(pairs[1:]), mixed  # type: ignore[type-var]  # floats by the line above


def codes_cover_the_case(advice: Advice, advisor: Advisor) -> None:
    peak, start = advice.facts["bearing_peak_c"].value, advice.facts["start_temperature_c"].value
    for text in advice.codes.din:
        code = advisor.designer.read_din(text)
        assert str(code) == text
        assert re.fullmatch(r"KP?F?(000|00|[0-6])[C-HKMNPR-U]-[1-6]0", text), text
        assert DIN_UPPER[code.letter] >= peak, text  # type: ignore[operator]  # a code is given for a known temperature
        assert code.lower_c <= start, text  # type: ignore[operator]  # the same
        _names_one_grade(code.nlgi, advice)
    for text in advice.codes.iso:
        grease = advisor.designer.read_iso(text)
        assert str(grease) == text
        assert ISO_UPPER[grease.upper] >= peak, text  # type: ignore[operator]  # the same
        assert ISO_LOWER[grease.lower] <= start, text  # type: ignore[operator]  # the same
        _names_one_grade(grease.nlgi, advice)
    if advice.state in {State.OPEN, State.CONFLICT} and advice.open_questions:
        lacking = any(each.decides == "lubricant" for each in advice.open_questions)
        assert not (lacking and (advice.codes.din or advice.codes.iso))


def _names_one_grade(nlgi: str, advice: Advice) -> None:
    assert nlgi in NLGI
    assert nlgi in advice.line("nlgi").values


def a_code_serves_exactly_when_every_part_does(advice: Advice, advisor: Advisor, din: str, iso: str) -> None:
    read_din, read_iso = advisor.designer.read_din, advisor.designer.read_iso
    offered, greased = read_din(din), read_iso(iso)
    assert str(offered) == din
    assert str(greased) == iso
    for asked in map(read_din, (*advice.codes.din, din)):
        assert din_serves(offered, asked) == all(_din_parts(offered, asked)), (din, str(asked))
    for wanted in map(read_iso, (*advice.codes.iso, iso)):
        assert iso_serves(greased, wanted) == all(_iso_parts(greased, wanted)), (iso, str(wanted))


def _din_parts(offered: DinCode, asked: DinCode) -> Sequence[bool]:
    own, other = DIN_WATER.get(offered.letter), DIN_WATER.get(asked.letter)
    return (
        offered.nlgi == asked.nlgi,
        DIN_UPPER[offered.letter] >= DIN_UPPER[asked.letter],
        offered.lower_c <= asked.lower_c,
        set(offered.additives) >= set(asked.additives),
        own is None or other is None or (own[0] >= other[0] and own[1] <= other[1]),
    )


def _iso_parts(offered: IsoCode, asked: IsoCode) -> Sequence[bool]:
    own, other = "ABCDEFGHI".index(offered.water), "ABCDEFGHI".index(asked.water)
    return (
        offered.nlgi == asked.nlgi,
        ISO_UPPER[offered.upper] >= ISO_UPPER[asked.upper],
        ISO_LOWER[offered.lower] <= ISO_LOWER[asked.lower],
        own // 3 >= other // 3,
        own % 3 >= other % 3,
        offered.load >= asked.load,
    )


@given(case=whole_cases(given={"dangers": (("oxidiser",), ("oxidiser", "explosive"), ("oxidiser", "vacuum"))}))
@MANY
def test_an_oxidiser_is_referred_and_shows_nothing_whatever_else_is_answered(case: Case, advisor: Advisor) -> None:
    advice = advisor.advise(case)
    assert advice.withheld
    nothing_is_shown(advice)
    assert "gas_specialist" in {each.to for each in advice.referrals}


@given(case=whole_cases(shown=True, given={"incumbent": ("unlabelled",)}))
@MANY
def test_an_unlabelled_lubricant_in_use_mixes_with_nothing_and_is_cleaned_out(case: Case, advisor: Advisor) -> None:
    for advice in ends(advisor.advise(case)):
        assert advice.judgement is not None
        worst = CHANGE_OVER("dismantle_and_clean")
        assert all(value == worst for value in advice.judgement.columns["change_over"].values)
        assert set(advice.line("change_over").values) <= {"dismantle_and_clean"}
        assert _pairs_of_greases(advice) == {PAIR("I")}


def _pairs_of_greases(advice: Advice) -> set[object]:
    assert advice.judgement is not None
    pairs = advice.judgement.columns["pair"].values
    items = advice.judgement.catalogue.items
    return {pairs[place] for place, each in enumerate(items) if each.values.get("form") == "grease"}


@pytest.mark.parametrize("thickener", ["not_known", "aluminium_soap_simple"])
def test_a_pair_outside_the_tables_does_not_mix(thickener: str, advise: Callable[..., Advice]) -> None:
    for oil in ASKED["incumbent_base_oil"].domain.choices:
        advice = advise(incumbent="other", incumbent_thickener=thickener, incumbent_base_oil=oil)
        assert _pairs_of_greases(advice) == {PAIR("I")}, oil


def test_a_dont_know_about_the_lubricant_in_use_is_a_pair_outside_the_tables(advise: Callable[..., Advice]) -> None:
    advice = advise(incumbent="other", incumbent_thickener="?", incumbent_base_oil="?")
    assert advice.facts["incumbent_thickener"].origin is Origin.ASSUMED
    assert _pairs_of_greases(advice) == {PAIR("I")}


def test_the_table_of_pairs_is_symmetric_and_no_mixed_soap_is_laxer_in_it() -> None:
    for table in ("compat_encoded", "base_oil_miscible"):
        matrix = KNOWLEDGE.tables[table].matrix
        assert all(matrix[(a, b)] == matrix[(b, a)] for a, b in matrix)
    matrix = KNOWLEDGE.tables["compat_encoded"].matrix
    names = {pair[0] for pair in matrix}
    for other in names:
        parts = [PAIR(matrix[(each, other)]) for each in ("Li", "CaAnh")]
        assert PAIR(matrix[("LiCa", other)]) >= max(parts), other  # type: ignore[operator]  # a scale codes to numbers


def test_no_factor_of_a_table_is_above_one() -> None:
    rows = [row for table in KNOWLEDGE.tables.values() for row in table.rows]
    factors = [row.cells["factor"] for row in rows if "factor" in row.cells]
    assert len(factors) > 20
    assert all(isinstance(each, float) and 0 < each <= 1 for each in factors)


def test_the_cases_drawn_are_varied(advisor: Advisor) -> None:
    """The generator itself: the claims above are made over every state, form and verdict, and over conflicts."""
    seen: set[str] = set()

    @given(case=whole_cases())
    @settings(max_examples=600, derandomize=True, database=None, deadline=None, suppress_health_check=SLOW)
    def look(case: Case) -> None:
        for advice in ends(advisor.advise(case)):
            seen.update((advice.state.value, *(each.verdict.value for each in advice.shelf)))
            seen.update(str(value) for line in advice.docket if line.row == "form" for value in line.values)
            seen.update("conflict" for _ in advice.conflicts)
            seen.update("code" for _ in advice.codes.din)
            seen.update("withheld" for _ in (1,) if advice.withheld)

    look()
    expected = {*(each.value for each in State), *(each.value for each in Verdict), "grease", "oil", "code", "withheld"}
    assert expected <= seen


def test_an_answer_is_drawn_for_every_question() -> None:
    always = {name for name, fact in ASKED.items() if fact.question is not None and not fact.question.optional}

    @given(case=whole_cases())
    @settings(max_examples=20, derandomize=True, database=None, deadline=None, suppress_health_check=SLOW)
    def look(case: Case) -> None:
        assert always <= set(case.answers) <= set(ASKED)
        for name, each in case.answers.items():
            assert each.value is None or ASKED[name].domain.accepts(each.value), name

    look()
