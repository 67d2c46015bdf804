"""Whole cases drawn from the declared facts: every type, supply and tick, numbers of a realistic size, don't knows.

A case is decoded from a string of bytes, two for each question: that is one draw, so that thousands of cases cost
little, and a failing case is still made smaller question by question, towards the first value of each.
"""

from collections.abc import Iterable, Mapping, Sequence
from functools import cache
from itertools import combinations

from hypothesis import HealthCheck, settings
from hypothesis import strategies as st

from advisor.advice import Advice
from advisor.case import Answer, Case
from advisor.conditions import Domain, Member, Ticked, Value, leaves
from advisor.knowledge import Declaration, Refers, load
from advisor.places import knowledge_folder

# Loaded once more here, since strategies are needed before any fixture is made.
KNOWLEDGE = load(knowledge_folder())
ASKED: Mapping[str, Declaration] = {name: each for name, each in KNOWLEDGE.facts.items() if each.question is not None}

SLOW = [HealthCheck.too_slow]
MANY = settings(max_examples=2000, deadline=None, suppress_health_check=SLOW)
FEW = settings(max_examples=40, deadline=None, suppress_health_check=SLOW)

DONT_KNOW = Answer(None, "?")
PRODUCTS = frozenset(each.item for each in KNOWLEDGE.shelf)


def whole(low: int, high: int, step: int = 1) -> tuple[float, ...]:
    return tuple(float(each) for each in range(low, high + 1, step))


# Each pool begins with an ordinary value; what is commoner stands in it more often.
USUAL: Mapping[str, Sequence[Value]] = {
    "running_temperature_c": (70.0, *whole(20, 110) * 5, *whole(-20, 190)),
    "peak_temperature_c": (100.0, *whole(40, 150), *whole(0, 230)),
    "peak_share_percent": (1.0, *(tenths / 10 for tenths in range(121)), *whole(0, 100)),
    "start_temperature_c": (5.0, *whole(-25, 30) * 5, *whole(-55, 40)),
    "feed_line_max_c": (20.0, *whole(-20, 250)),
    "water_temperature_c": (20.0, *whole(0, 150)),
    "load_ratio": (0.06, *(each / 1000 for each in (*range(150), *range(150), *range(150), *range(350)))),
    "dynamic_rating_n": (50_000.0, *whole(1000, 900_000, 1000)),
    # 3 mm to about 860 mm, each an eighth bigger than the one before
    "bore_mm": (65.0, *(float(round(3 * 1.12**place)) for place in range(51))),
}
SPEED_FACTORS = (100_000.0, *(10 ** (place / 12) for place in (*range(36, 66), *range(36, 66), *range(12, 75))))
"""Speed times mean diameter: from 10 to about 1.5 million mm/min."""
RATIOS = (2.0, 1.25, 1.4, 1.6, 1.8, 2.2, 2.6)
"""Outside diameter over bore."""

TOGETHER = ("outside_mm", "width_mm", "speed_rpm")
"""Numbers that are made to suit the bore."""


def answer_of(value: Value) -> Answer:
    return Answer(value, ", ".join(value) if isinstance(value, tuple) else str(value))


def in_order(case: Case, answers: Mapping[str, Answer]) -> Case:
    return Case(case.point_kind, case.title, {name: answers[name] for name in ASKED if name in answers})


def with_values(case: Case, values: Mapping[str, Value]) -> Case:
    """The case with these answers given instead."""
    return in_order(case, {**case.answers, **{name: answer_of(value) for name, value in values.items()}})


def with_more(case: Case, values: Mapping[str, Value]) -> Case:
    """The same, but ticks are added to those already made."""
    return with_values(case, {name: _joined(case, name, value) for name, value in values.items()})


def _joined(case: Case, name: str, value: Value) -> Value:
    answered = case.answers[name].value if name in case.answers else None
    if not isinstance(value, tuple) or not isinstance(answered, tuple):
        return value
    return tuple(tick for tick in ASKED[name].domain.choices if tick in value or tick in answered)


def ends(advice: Advice) -> list[Advice]:
    """The advice itself, or those of its runs where something was left open."""
    return list(advice.single)


@cache
def withheld_by() -> Mapping[str, frozenset[str]]:
    """For each question, the choices with which a referral hides everything."""
    found: dict[str, frozenset[str]] = {}
    for instances in KNOWLEDGE.instances.values():
        for each in instances:
            if any(isinstance(then, Refers) and then.withhold for then in each.then):
                for term in leaves(each.when):
                    if isinstance(term, Member | Ticked) and term.wanted:
                        found[term.name] = found.get(term.name, frozenset()) | frozenset(map(str, term.among))
    return found


@cache
def pool(name: str, *, shown: bool) -> Sequence[Value]:
    """The values of one question to draw from; `shown` leaves out those with which everything is withheld."""
    domain = ASKED[name].domain
    barred = withheld_by().get(name, frozenset()) if shown else frozenset()
    choices = [choice for choice in domain.choices if choice not in barred]
    if domain.kind == "several":
        some = [(), *((one,) for one in choices), *combinations(choices, 2), *combinations(choices[:8], 3)]
        return [()] * (4 * len(some)) + some
    if domain.kind == "item":
        named = [choice for choice in choices if choice not in PRODUCTS]
        return [*named * (6 * len(choices) // len(named)), *choices]
    if domain.kind != "number":
        return choices
    return USUAL.get(name) or _numbers(domain)


def _numbers(domain: Domain) -> Sequence[float]:
    step = domain.step.size if domain.step else 1.0
    count = int(min(domain.high - domain.low, 1000 * step) / step)
    return [round(domain.low + place * step, 6) for place in range(count + 1)]


def optional(name: str) -> bool:
    question = ASKED[name].question
    return question is not None and question.optional


def stood_for(name: str) -> bool:
    """Whether one value stands for a don't know, so that the case can still be decided."""
    assumed = ASKED[name].assume
    return assumed is not None and not assumed.each


def whole_cases(
    *, shown: bool = False, known: Iterable[str] | None = None, given: Mapping[str, Sequence[Value]] | None = None
) -> st.SearchStrategy[Case]:
    """Cases in which every question has an answer, up to three of them a don't know.

    `shown` leaves out what withholds everything. With `known`, these questions have a value, and so have all others
    for which nothing stands. `given` are pools of some questions instead of the usual ones.
    """
    own = given or {}
    suited = dict.fromkeys(TOGETHER, RATIOS) | {"speed_rpm": SPEED_FACTORS}
    pools = {name: own.get(name) or suited.get(name) or pool(name, shown=shown) for name in ASKED}
    unsure = [
        name
        for name, fact in ASKED.items()
        if name not in own
        and not optional(name)
        and (stood_for(name) or (known is None and fact.assume is None))
        and name not in (known or ())
    ]
    size = 2 * (len(pools) + 3)
    return st.binary(min_size=size, max_size=size).map(lambda drawn: decoded(drawn, pools, unsure, frozenset(own)))


def decoded(
    drawn: bytes, pools: Mapping[str, Sequence[Value]], unsure: Sequence[str], own: frozenset[str]
) -> Case:
    """The case that a string of bytes stands for."""
    numbers = [high * 256 + low for high, low in zip(drawn[::2], drawn[1::2], strict=True)]
    values: dict[str, Value] = {
        name: each[number * len(each) >> 16] for (name, each), number in zip(pools.items(), numbers, strict=False)
    }
    suit = {name for name in TOGETHER if name not in own}
    values.update({name: value for name, value in sizes(values).items() if name in suit})
    unknown = {unsure[(number - 32768) * len(unsure) >> 15] for number in numbers[len(pools) :] if number >= 32768}
    drawn_odd = {name for (name, _), number in zip(pools.items(), numbers, strict=False) if number % 2}
    answers = {
        name: DONT_KNOW if name in unknown else answer_of(value)
        for name, value in values.items()
        if not (optional(name) and name in drawn_odd - own)
    }
    return Case(KNOWLEDGE.point_kind.id, "drawn at random", answers)


def sizes(values: Mapping[str, Value]) -> Mapping[str, float]:
    """Outside diameter, width and speed for a bore, drawn as ratios and as a speed factor."""
    bore, ratio, share, factor = (values[name] for name in ("bore_mm", "outside_mm", "width_mm", "speed_rpm"))
    assert isinstance(bore, float)
    outside = max(float(round(bore * float(ratio))), bore + 4)  # type: ignore[arg-type]  # a pool of numbers
    speed = round(float(factor) * 2 / (bore + outside), 2)  # type: ignore[arg-type]  # the same
    width = max(1.0, float(round((outside - bore) / 2 / float(share) * 1.6)))  # type: ignore[arg-type]  # the same
    return {"outside_mm": outside, "width_mm": width, "speed_rpm": min(max(speed, 0.01), 200_000.0)}
