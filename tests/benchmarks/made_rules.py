"""Made-up rules and cases of the size of a real knowledge folder: 8 steps of 40 rules over 60 facts."""

import random
from dataclasses import dataclass
from typing import Final

from advisor.conditions import Bound, Coded, Condition, Domain, Either, Every, FactRef, Member
from advisor.conditions.terms import Term

STEPS: Final = 8
RULES_PER_STEP: Final = 40
CHOICES: Final = tuple(f"choice_{place}" for place in range(6))
NUMBERS: Final = tuple(f"number_{place:02}" for place in range(30))
PICKS: Final = tuple(f"choice_{place:02}" for place in range(15))
SCALES: Final = tuple(f"scale_{place:02}" for place in range(15))

Case = dict[str, Coded]


@dataclass(frozen=True, slots=True)
class Workload:
    """What every contender is given; the number of rules fired in a step is a fact of the next (`fired_<step>`)."""

    domains: dict[str, Domain]
    steps: tuple[tuple[Condition, ...], ...]
    cases: tuple[Case, ...]


def workload(seed: int, cases: int, missing: float) -> Workload:
    """The same rules and cases for the same seed; `missing` is the share of unanswered facts."""
    draw = random.Random(seed)  # made-up rules are no secrets
    domains = {
        **{name: Domain("number") for name in (*NUMBERS, *(f"fired_{step}" for step in range(STEPS)))},
        **{name: Domain("choice", choices={each: each for each in CHOICES}) for name in PICKS},
        **{name: Domain("scale", choices={each: each for each in CHOICES[:5]}) for name in SCALES},
    }
    steps = tuple(_step(draw, step) for step in range(STEPS))
    return Workload(domains, steps, tuple(_case(draw, missing) for _ in range(cases)))


def _step(draw: random.Random, step: int) -> tuple[Condition, ...]:
    numbers, picks, scales = draw.sample(NUMBERS, 9), draw.sample(PICKS, 5), draw.sample(SCALES, 4)
    if step:
        numbers.append(f"fired_{step - 1}")

    def term() -> Term:
        kind = draw.random()
        if kind < 0.06:
            first, second = draw.sample([name for name in numbers if name in NUMBERS], 2)
            return Bound(first, draw.choice(("<", ">=")), FactRef(second))
        if kind < 0.5:
            return Bound(draw.choice(numbers), draw.choice(("<", "<=", ">", ">=")), float(draw.randrange(5, 96, 5)))
        if kind < 0.7:
            return Bound(draw.choice(scales), draw.choice(("<=", ">=")), float(draw.randrange(1, 4)))
        wanted = draw.random() < 0.6
        among = frozenset(draw.sample(CHOICES, draw.choice((1, 1, 2)) if wanted else draw.choice((1, 2))))
        return Member(draw.choice(picks), among, wanted)

    def rule() -> Condition:
        terms: list[Term] = []
        while len(terms) < 5:
            # Two terms on one fact are rare in real rules, and CLIPS refuses those that cannot both hold.
            if (one := term()).name not in {other.name for other in terms}:
                terms.append(one)
        wanted = draw.choice((2, 2, 3, 4))
        if draw.random() < 0.35:
            return Every((*terms[: wanted - 1], Either((terms[-2], terms[-1]))))
        return Every(tuple(terms[:wanted]))

    return tuple(rule() for _ in range(RULES_PER_STEP))


def _case(draw: random.Random, missing: float) -> Case:
    case: Case = {}
    for name in (*NUMBERS, *PICKS, *SCALES):
        if draw.random() < missing:
            continue
        if name in NUMBERS:
            case[name] = round(draw.uniform(0.0, 100.0), 2)
        else:
            case[name] = draw.choice(CHOICES) if name in PICKS else float(draw.randrange(5))
    return case
