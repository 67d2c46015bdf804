"""The shelf judged column by column agrees with judging product by product, and ranks without rank reversal."""

from collections.abc import Callable

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from advisor.advice import Advice, Advisor
from advisor.case import Case
from advisor.conditions import ALWAYS, Bound, Coded, Domain, Every, Member, Step, holds
from advisor.knowledge import Knowledge
from advisor.shelf import Verdict, steps_short
from advisor.specification import Conflict, Demand, combine

FIXED = settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
NAMES = [
    "hot_wet_roller_table",
    "bridge_trunnion_parked",
    "motor_keeps_its_polyurea",
    "vibrating_screen",
    "unlabelled_brown_grease",
]


def one_by_one(advice: Advice, place: int) -> tuple[Verdict, set[str]]:
    """The verdict on one product and the rules it misses, by judging each demand on its record alone."""
    judgement = advice.judgement
    assert judgement is not None
    record: dict[str, Coded] = {}
    for name, column in judgement.columns.items():
        value = column.values[place]
        if value is not None:
            record[name] = value
    failed_must = unproven = weak = False
    missed: set[str] = set()
    for demand in advice.specification.demands:
        if holds(demand.for_, record) is False:
            continue
        outcome = holds(demand.test, record)
        if outcome:
            continue
        missed.add(demand.rule)
        failed_must |= demand.must and outcome is False
        unproven |= demand.must and outcome is None
        weak |= not demand.must and demand.level <= 2
    if failed_must:
        return Verdict.FALLS_SHORT, missed
    if unproven:
        return Verdict.UNPROVEN, missed
    return (Verdict.SECOND_BEST if weak else Verdict.FITS), missed


@pytest.mark.parametrize("name", NAMES)
def test_columns_agree_with_one_by_one(name: str, advisor: Advisor, saved: Callable[[str], Case]) -> None:
    advice = advisor.advise(saved(name))
    assert advice.judgement is not None
    assert len(advice.shelf) >= 40
    for ranked in advice.shelf:
        verdict, missed = one_by_one(advice, ranked.place)
        assert ranked.verdict is verdict, ranked.item
        assert {short.demand.rule for short in advice.judgement.shortfalls(ranked.place)} == missed, ranked.item


@given(data=st.data())
@FIXED
def test_other_products_never_change_the_order_of_two(
    data: st.DataObject, advisor: Advisor, saved: Callable[[str], Case], knowledge: Knowledge
) -> None:
    case = saved(data.draw(st.sampled_from(NAMES)))
    items = [product.item for product in knowledge.shelf]
    kept = frozenset(data.draw(st.lists(st.sampled_from(items), min_size=2, unique=True)))
    whole = [each.item for each in advisor.advise(case).shelf]
    part = [each.item for each in advisor.advise(case, only=kept).shelf]
    assert part == [item for item in whole if item in kept]


def test_a_product_that_breaks_a_must_is_never_above_one_that_does_not(
    advisor: Advisor, saved: Callable[[str], Case]
) -> None:
    order = list(Verdict)
    for name in NAMES:
        places = [order.index(each.verdict) for each in advisor.advise(saved(name)).shelf]
        assert places == sorted(places)


NLGI = Domain("scale", choices={each: each for each in ("000", "00", "0", "1", "2", "3")})
VG = Domain("number", unit="ISO VG", places=(68.0, 100.0, 150.0, 220.0, 320.0, 460.0), step=Step("places"))
KELVIN = Domain("number", unit="°C", step=Step("absolute", 10))
RATIO = Domain("number", step=Step("ratio", 1.5))


@pytest.mark.parametrize(
    ("test", "value", "domain", "steps"),
    [
        (Bound("t", ">=", 130.0), 130.0, KELVIN, 0),
        (Bound("t", ">=", 130.0), 129.0, KELVIN, 1),
        (Bound("t", ">=", 130.0), 120.0, KELVIN, 1),
        (Bound("t", ">=", 130.0), 119.9, KELVIN, 2),
        (Bound("kappa", ">=", 1.5), 1.0, RATIO, 1),
        (Bound("kappa", ">=", 1.5), 0.25, RATIO, 5),  # log(6)/log(1.5) = 4.42
        (Bound("kappa", ">=", 1.5), 0.35, RATIO, 4),  # log(4.286)/log(1.5) = 3.59
        (Bound("vg", "<=", 220.0), 460.0, VG, 2),
        (Member("nlgi", frozenset({2.0, 3.0})), 4.0, NLGI, 1),
        (Member("nlgi", frozenset({2.0, 3.0})), 0.0, NLGI, 2),
        (Member("thickener", frozenset({"ptfe"})), "sodium", Domain("choice", choices={"ptfe": "", "sodium": ""}), 1),
        (Every((Bound("vg", ">=", 68.0), Bound("vg", "<=", 150.0))), 320.0, VG, 2),
    ],
)
def test_whole_steps(test: Bound, value: Coded, domain: Domain, steps: int) -> None:
    """Counted by hand from the declared step: 10 K, a ratio of 1.5, one place, one choice; each rounded up."""
    assert steps_short(test, value, domain) == steps


DOMAINS = {"vg": VG, "nlgi": NLGI, "t": KELVIN}
DEMANDS = st.one_of(
    st.builds(
        lambda sign, limit, level: Demand("vg", Bound("vg", sign, limit), level, ALWAYS, f"vg{sign}{limit}"),
        st.sampled_from(["<=", ">="]),
        st.sampled_from(VG.places),
        st.integers(0, 4),
    ),
    st.builds(
        lambda among, wanted, level: Demand(
            "nlgi", Member("nlgi", among, wanted), level, ALWAYS, f"nlgi{wanted}{sorted(among)}"
        ),
        st.frozensets(st.sampled_from([0.0, 1.0, 2.0, 3.0, 4.0, 5.0]), min_size=1),
        st.booleans(),
        st.integers(0, 4),
    ),
    st.builds(
        lambda among, limit: Demand(
            "vg", Bound("vg", "<=", limit), 0, Member("nlgi", among), f"vg for {sorted(among)}"
        ),
        st.frozensets(st.sampled_from([0.0, 1.0, 2.0]), min_size=1),
        st.sampled_from(VG.places),
    ),
    st.builds(
        lambda sign, limit: Demand("t", Bound("t", sign, float(limit)), 0, ALWAYS, f"t{sign}{limit}"),
        st.sampled_from(["<=", ">="]),
        st.integers(-40, 200),
    ),
)
LUBRICANTS = [
    {"vg": vg, "nlgi": float(nlgi), "t": t} for vg in VG.places for nlgi in range(6) for t in (-30.0, 20.0, 90.0, 150.0)
]


def admitted(demands: list[Demand]) -> list[int]:
    specification = combine(demands, DOMAINS)
    return [
        place
        for place, lubricant in enumerate(LUBRICANTS)
        if all(
            holds(demand.test, lubricant)
            for demand in specification.demands
            if demand.must and holds(demand.for_, lubricant)
        )
    ]


@given(st.lists(DEMANDS, max_size=6), DEMANDS)
@settings(max_examples=300, deadline=None)
def test_one_more_demand_never_loosens_the_specification(demands: list[Demand], more: Demand) -> None:
    assert set(admitted([*demands, more])) <= set(admitted(demands))


@given(st.lists(DEMANDS, max_size=7), st.randoms(use_true_random=False))
@settings(max_examples=300, deadline=None)
def test_the_order_of_demands_does_not_matter(demands: list[Demand], order) -> None:  # type: ignore[no-untyped-def]  # hypothesis' random
    shuffled = list(demands)
    order.shuffle(shuffled)
    assert admitted(shuffled) == admitted(demands)
    assert {conflict.about for conflict in combine(shuffled, DOMAINS).conflicts} == {
        conflict.about for conflict in combine(demands, DOMAINS).conflicts
    }


@given(st.lists(DEMANDS, max_size=6))
@settings(max_examples=300, deadline=None)
def test_combining_admits_exactly_what_the_demands_admit(demands: list[Demand]) -> None:
    plainly = [
        place
        for place, lubricant in enumerate(LUBRICANTS)
        if all(holds(demand.test, lubricant) for demand in demands if demand.must and holds(demand.for_, lubricant))
    ]
    assert admitted(demands) == plainly


def test_an_empty_intersection_names_the_fewest_rules() -> None:
    demands = [
        Demand("vg", Bound("vg", ">=", 150.0), 0, ALWAYS, "thick"),
        Demand("vg", Bound("vg", "<=", 320.0), 0, ALWAYS, "harmless"),
        Demand("vg", Bound("vg", "<=", 100.0), 0, ALWAYS, "thin"),
    ]
    assert combine(demands, DOMAINS).conflicts == (Conflict("vg", ("thick", "thin")),)


def test_thresholds_on_a_measure_conflict_too() -> None:
    demands = [
        Demand("t", Bound("t", ">=", 150.0), 0, ALWAYS, "hot"),
        Demand("t", Bound("t", "<", 150.0), 0, ALWAYS, "cold"),
    ]
    assert combine(demands, DOMAINS).conflicts == (Conflict("t", ("cold", "hot")),)
