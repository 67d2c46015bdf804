"""The engine fires exactly the conditions that definitely hold.

Expected outcomes come from `conditions.holds`, which is written independently of the engine.
"""

from contextlib import closing
from itertools import product

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from advisor.conditions import (
    ALWAYS,
    VOID,
    Bound,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    Ticked,
    alternatives,
    branches,
    holds,
    negated,
)
from advisor.inference import Matcher, StepRules
from advisor.inference.compiling import MOST_BRANCHES
from tests.inference.made_up import DOMAINS, NUMBERS, TEXTS, a_condition, a_record, seeded

SEEDS = st.integers(0, 2**32)


def fired(conditions: list[Condition], record: Record) -> frozenset[int]:
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        return matcher.fired(record)


def test_over_300_000_judgements_the_engine_fires_what_definitely_holds_and_closures_agree_in_all_outcomes() -> None:
    judged = {True: 0, False: 0, None: 0}

    @settings(max_examples=100, deadline=None, database=None)
    @given(SEEDS)
    def each_step(seed: int) -> None:
        draw = seeded(seed)
        conditions = [a_condition(draw) for _ in range(50)]
        with closing(StepRules(conditions, DOMAINS)) as rules, closing(Matcher(conditions, DOMAINS)) as matcher:
            for _ in range(60):
                record = a_record(draw)
                expected = tuple(holds(condition, record) for condition in conditions)
                assert matcher.fired(record) == {index for index, outcome in enumerate(expected) if outcome is True}
                assert rules.judge(record) == expected
                for outcome in expected:
                    judged[outcome] += 1

    each_step()
    assert sum(judged.values()) >= 300_000
    assert min(judged.values()) >= 30_000, "all three outcomes occur often"


@settings(max_examples=150, deadline=None)
@given(SEEDS, SEEDS)
def test_one_condition_alone_fires_as_it_holds(condition_seed: int, record_seed: int) -> None:
    condition, record = a_condition(seeded(condition_seed)), a_record(seeded(record_seed))
    assert (fired([condition], record) == {0}) is (holds(condition, record) is True)


@settings(max_examples=150, deadline=None)
@given(SEEDS, SEEDS)
def test_a_condition_and_its_negation_never_fire_together_and_one_does_on_known_values(rule: int, case: int) -> None:
    condition = a_condition(seeded(rule), depth=1)
    record = {name: value for name, value in a_record(seeded(case)).items() if value is not VOID}
    opposite = negated(condition)
    assume(alternatives(Every((condition, opposite))) <= MOST_BRANCHES)
    assume(alternatives(opposite) <= MOST_BRANCHES)
    assert fired([condition, opposite, Every((condition, opposite))], record) == {
        True: {0}, False: {1}, None: set()
    }[holds(condition, record)]  # fmt: skip


@settings(max_examples=200, deadline=None)
@given(SEEDS, SEEDS)
def test_branches_have_the_same_three_outcomes_as_the_condition(condition_seed: int, record_seed: int) -> None:
    condition, record = a_condition(seeded(condition_seed)), a_record(seeded(record_seed))
    spread = Either(tuple(Every(branch) for branch in branches(condition)))
    assert holds(spread, record) is holds(condition, record)


@settings(max_examples=10, deadline=None)
@given(SEEDS)
def test_the_order_of_the_rules_changes_nothing(seed: int) -> None:
    draw = seeded(seed)
    conditions = [a_condition(draw) for _ in range(40)]
    shuffled = draw.sample(range(40), 40)
    moved = [conditions[index] for index in shuffled]
    with closing(Matcher(conditions, DOMAINS)) as plain, closing(Matcher(moved, DOMAINS)) as other:
        for _ in range(20):
            record = a_record(draw)
            assert {shuffled[place] for place in other.fired(record)} == plain.fired(record)


@settings(max_examples=60, deadline=None)
@given(st.lists(st.floats(allow_nan=False, allow_infinity=False), min_size=3, max_size=6))
def test_any_two_finite_numbers_are_compared_exactly(numbers: list[float]) -> None:
    conditions: list[Condition] = [
        Bound("number_0", sign, limit) for sign in ("<", "<=", ">", ">=", "=", "!=") for limit in numbers
    ]
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        for seen in numbers:
            record: Record = {"number_0": seen}
            assert matcher.fired(record) == {i for i, each in enumerate(conditions) if holds(each, record)}


@settings(max_examples=60, deadline=None)
@given(st.lists(st.text(max_size=40), min_size=2, max_size=8, unique=True))
def test_texts_are_equal_only_to_themselves(texts: list[str]) -> None:
    conditions: list[Condition] = [Member("text", frozenset({each})) for each in texts]
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        assert [matcher.fired({"text": each}) for each in texts] == [{index} for index in range(len(texts))]


def test_two_facts_compare_exactly_for_all_pairs_of_awkward_numbers() -> None:
    conditions: list[Condition] = [
        Bound("number_0", sign, FactRef("number_1")) for sign in ("<", "<=", ">", ">=", "=", "!=")
    ]
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        for seen in NUMBERS:
            for limit in NUMBERS:
                record: Record = {"number_0": seen, "number_1": limit}
                assert matcher.fired(record) == {i for i, each in enumerate(conditions) if holds(each, record)}


@pytest.mark.parametrize("record", [{}, {"number_0": 5.0}, {"number_1": 5.0}, {"number_0": 5.0, "number_1": VOID}])
def test_a_limit_that_is_unknown_or_void_never_fires(record: Record) -> None:
    conditions: list[Condition] = [Bound("number_0", sign, FactRef("number_1")) for sign in ("<", ">=", "!=")]
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        assert [matcher.fired(record) for _ in range(50)] == [frozenset()] * 50


@pytest.mark.parametrize("known", [{}, {"number_0": VOID}, {"number_0": 1.0}])
def test_conditions_without_terms_always_hold_and_empty_alternatives_never(known: Record) -> None:
    either = Either((Bound("number_0", ">", 9.0), ALWAYS))
    assert fired([ALWAYS, Either(()), either, Every((ALWAYS,))], known) == {0, 2, 3}


def test_a_matcher_without_conditions_fires_nothing() -> None:
    assert fired([], {"number_0": 1.0}) == frozenset()


@pytest.mark.parametrize("count", [59, 60, 61, 119, 120, 121, 130, 200])
def test_any_number_of_branches_is_split_without_loss(count: int) -> None:
    conditions: list[Condition] = [Bound("number_0", ">=", float(limit)) for limit in range(count)]
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        assert matcher.fired({"number_0": float(count)}) == set(range(count))
        assert matcher.fired({"number_0": 57.5}) == set(range(58))


def test_many_branches_of_many_rules_all_pending_at_once_are_split_without_loss() -> None:
    pair = Either(tuple(Every((Bound("number_0", ">", float(n)), Bound("number_1", ">", float(n)))) for n in range(40)))
    with closing(Matcher([pair] * 20, DOMAINS)) as matcher:
        assert matcher.fired({"number_0": 99.0, "number_1": 99.0}) == set(range(20))
        assert matcher.fired({"number_0": 99.0, "number_1": 0.0}) == frozenset()


@pytest.mark.parametrize("among", ["a", "ab", "abcd"])
@pytest.mark.parametrize("others", [(), ("second",), ("second", "third")])
def test_choices_in_great_numbers_are_split_without_loss(among: str, others: tuple[str, ...]) -> None:
    # Alternatives of a choice share a rule set where no record can meet two, so those that can must not overrun it.
    choices = {name: Domain("choice", choices=dict.fromkeys("abcd", "")) for name in ("first", "second", "third")}
    domains = {**choices, "number": Domain("number")}
    chosen = Either(tuple(Member(name, frozenset(among)) for name in ("first", *others)))
    conditions: list[Condition] = [Every((Bound("number", ">", float(n)), chosen)) for n in range(130)]
    with closing(Matcher(conditions, domains)) as matcher:
        for first, second, third in product("abe", repeat=3):
            record: Record = {"first": first, "second": second, "third": third, "number": 129.5}
            assert matcher.fired(record) == {i for i, each in enumerate(conditions) if holds(each, record)}


def test_many_rules_of_many_choices_are_split_without_loss() -> None:
    # 1,200 branches, few of which any record meets; the engine hangs when some hundreds stand in one rule set.
    conditions: list[Condition] = [Member("text", frozenset(f"{n}_{m}" for m in range(40))) for n in range(30)]
    with closing(Matcher(conditions, DOMAINS)) as matcher:
        assert [matcher.fired({"text": f"{n}_39"}) for n in range(30)] == [{n} for n in range(30)]


def test_more_facts_than_one_record_of_the_engine_may_hold_are_split_without_loss() -> None:
    domains = {f"fact_{n}": Domain("number") for n in range(600)}
    conditions: list[Condition] = [
        Every(tuple(Bound(f"fact_{n}", ">", 0.0) for n in range(start, start + 100))) for start in range(0, 501, 50)
    ]
    record: dict[str, float] = dict.fromkeys(domains, 1.0)
    with closing(Matcher(conditions, domains)) as matcher:
        assert matcher.fired(record) == set(range(11))
        assert matcher.fired({**record, "fact_599": 0.0}) == set(range(10))


def test_ticks_of_a_long_list_are_told_apart() -> None:
    choices = {f"choice_{n}": f"choice {n}" for n in range(40)}
    domains = {"ticks": Domain("several", choices=choices)}
    conditions: list[Condition] = [Ticked("ticks", frozenset({each})) for each in choices]
    with closing(Matcher(conditions, domains)) as matcher:
        assert matcher.fired({"ticks": frozenset({"choice_3", "choice_39"})}) == {3, 39}
        assert matcher.fired({"ticks": frozenset()}) == frozenset()


@pytest.mark.parametrize("spelling", TEXTS)
def test_every_awkward_text_is_equal_to_itself_and_unequal_to_none_of_itself(spelling: str) -> None:
    among = frozenset({spelling})
    assert fired([Member("text", among), Member("text", among, wanted=False)], {"text": spelling}) == {0}


def test_whole_numbers_match_as_floats_do() -> None:
    conditions: list[Condition] = [Bound("number_0", "=", 85.0), Bound("number_0", ">=", float(2**53))]
    assert fired(conditions, {"number_0": 85}) == {0}
    assert fired(conditions, {"number_0": 2**53}) == {1}
