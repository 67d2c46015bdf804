"""Boxes against brute force: on a grid that meets every limit and every gap, set operations agree with conditions."""

from itertools import product

from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.boxes import Box, boxes_of, covered, uncovered
from advisor.conditions import (
    VOID,
    Bound,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Record,
    Step,
    Ticked,
    Valueless,
    holds,
    negated,
)

DOMAINS = {
    "t": Domain("number", low=0, high=4, step=Step("absolute", 0.5)),
    "u": Domain("number", low=1, high=6),
    "vg": Domain("number", places=(1.0, 2.0, 3.0)),
    "water": Domain("scale", choices={"dry": "", "humid": "", "wash": ""}),
    "oil": Domain("choice", choices={"pao": "", "ester": "", "pag": ""}),
    "item": Domain("item", choices={"none": ""}, open_choices=True),
    "site": Domain("several", choices={"a": "", "b": "", "c": ""}),
}
VOIDABLE = frozenset({"t", "vg", "oil"})
VALUES = {
    "t": [n / 4 for n in range(17)],
    "u": [1 + n / 4 for n in range(21)],
    "vg": [1.0, 2.0, 3.0],
    "water": [0.0, 1.0, 2.0],
    "oil": ["pao", "ester", "pag"],
    "item": ["none", "made_up", "another"],
    "site": [frozenset(c for c, on in zip("abc", flags, strict=True) if on) for flags in product([0, 1], repeat=3)],
}
SIGNS = st.sampled_from(["<", "<=", ">", ">=", "=", "!="])
LIMITS = st.sampled_from([-1.0, 0.0, 0.5, 1.0, 2.0, 2.5, 3.0, 4.0, 5.0])

terms = st.one_of(
    st.builds(Bound, st.sampled_from(["t", "u", "vg", "water"]), SIGNS, LIMITS),
    st.builds(Bound, st.sampled_from(["t", "u", "vg"]), SIGNS, st.builds(FactRef, st.sampled_from(["t", "u", "vg"]))),
    st.builds(Member, st.just("oil"), st.frozensets(st.sampled_from(["pao", "ester"]), min_size=1), st.booleans()),
    st.builds(Member, st.just("item"), st.frozensets(st.sampled_from(["none", "made_up"]), min_size=1), st.booleans()),
    st.builds(Member, st.just("vg"), st.frozensets(st.sampled_from([1.0, 3.0]), min_size=1), st.booleans()),
    st.builds(Member, st.just("u"), st.frozensets(st.sampled_from([1.0, 3.0]), min_size=1), st.booleans()),
    st.builds(Ticked, st.just("site"), st.frozensets(st.sampled_from("abc"), min_size=1), st.booleans()),
    st.builds(Valueless, st.sampled_from(sorted(VOIDABLE)), st.booleans()),
)
conditions = st.recursive(
    terms,
    lambda part: st.one_of(
        st.builds(lambda parts: Every(tuple(parts)), st.lists(part, min_size=1, max_size=3)),
        st.builds(lambda parts: Either(tuple(parts)), st.lists(part, min_size=1, max_size=3)),
    ),
    max_leaves=5,
)


@st.composite
def records(draw: st.DrawFn) -> Record:
    return {
        name: draw(st.sampled_from([*values, VOID] if name in VOIDABLE else values)) for name, values in VALUES.items()
    }


def boxes(condition: Condition) -> list[Box]:
    return boxes_of(condition, DOMAINS, VOIDABLE)


def inside(box: Box, record: Record) -> bool:
    """Asked of a box in its own words: the one point of the record meets it."""
    point = Every(tuple(_point(name, value) for name, value in record.items()))
    return any(box.intersect(each) for each in boxes(point))


def _point(name: str, value: object) -> Condition:
    if value is VOID:
        return Valueless(name)
    if isinstance(value, float):
        return Bound(name, "=", value)
    if isinstance(value, frozenset):
        set_, clear = [Ticked(name, frozenset({c})) for c in value], frozenset("abc") - value
        return Every((*set_, Ticked(name, clear, wanted=False)))
    return Member(name, frozenset({value}))


@settings(max_examples=300, deadline=None)
@given(conditions, st.lists(records(), min_size=8, max_size=8))
def test_a_record_lies_in_a_box_exactly_where_the_condition_holds(condition: Condition, some: list[Record]) -> None:
    made = boxes(condition)
    for record in some:
        assert any(inside(box, record) for box in made) is (holds(condition, record) is True)


@settings(max_examples=300, deadline=None)
@given(conditions)
def test_every_witness_makes_the_condition_hold(condition: Condition) -> None:
    for box in boxes(condition):
        if box.may_be_wider:
            continue
        record = box.witness(DOMAINS)
        assert holds(condition, record) is True
        given_values = {name: value for name, value in record.items() if value is not VOID}
        assert all(DOMAINS[name].accepts(DOMAINS[name].decode(value)) for name, value in given_values.items())


@settings(max_examples=300, deadline=None)
@given(conditions, conditions, st.lists(records(), min_size=8, max_size=8))
def test_intersection_and_difference_hold_where_they_should(
    one: Condition, other: Condition, some: list[Record]
) -> None:
    met = [found for box in boxes(one) for each in boxes(other) if (found := box.intersect(each))]
    left = [piece for box in boxes(one) for piece in uncovered(box, boxes(other))]
    for record in some:
        first, second = holds(one, record) is True, holds(other, record) is True
        assert any(inside(box, record) for box in met) is (first and second)
        assert any(inside(box, record) for box in left) is (first and not second)
    for box in left:
        if not box.may_be_wider:
            witness = box.witness(DOMAINS)
            assert holds(one, witness) is True
            assert holds(other, witness) is not True


@settings(max_examples=200, deadline=None)
@given(conditions, conditions)
def test_the_pieces_of_a_difference_are_disjoint(one: Condition, other: Condition) -> None:
    for box in boxes(one)[:2]:
        pieces = uncovered(box, boxes(other))
        for place, piece in enumerate(pieces):
            assert not any(piece.intersect(later) for later in pieces[place + 1 :])


@settings(max_examples=200, deadline=None)
@given(conditions)
def test_a_condition_and_its_opposite_cover_everything_and_share_nothing(condition: Condition) -> None:
    opposite = negated(condition, VOIDABLE)
    (everything,) = boxes(Every())
    assert covered(everything, [*boxes(condition), *boxes(opposite)])
    met = [found for box in boxes(condition) for each in boxes(opposite) if (found := box.intersect(each))]
    assert all(box.may_be_wider for box in met)


def test_thresholds_that_meet_leave_nothing_or_a_point() -> None:
    assert not boxes(Every((Bound("t", ">", 2.0), Bound("t", "<=", 2.0))))
    assert boxes(Every((Bound("t", ">=", 2.0), Bound("t", "<=", 2.0))))[0].witness() == {"t": 2.0}


def test_the_declared_limits_count() -> None:
    assert not boxes(Bound("t", ">", 4.0))
    assert covered(boxes(Every())[0], boxes(Either((Bound("t", ">=", 0.0), Valueless("t")))))


def test_a_witness_lies_on_the_declared_step() -> None:
    (box,) = boxes(Every((Bound("t", ">", 1.1), Bound("t", "<", 1.9))))
    assert box.witness() == {"t": 1.5}


def test_facts_in_order_get_values_in_order() -> None:
    (box,) = boxes(Every((Bound("t", ">", FactRef("u")), Bound("u", ">=", FactRef("vg")), Bound("vg", ">", 1.0))))
    found = box.witness()
    assert found["t"] > found["u"] >= found["vg"] > 1.0  # type: ignore[operator]  # all are numbers here
    assert not boxes(Every((Bound("t", ">", FactRef("u")), Bound("u", ">=", 4.0))))


def test_a_ring_of_facts_is_said_to_be_wider() -> None:
    ring = (Bound("t", "<", FactRef("u")), Bound("u", "<", FactRef("vg")), Bound("vg", "<", FactRef("t")))
    assert all(box.may_be_wider for box in boxes(Every(ring)))
