"""What each product meets with least to spare."""

import math
from collections.abc import Iterable
from dataclasses import dataclass

from advisor.conditions import Bound, Condition, Domain, leaves
from advisor.shelf import Judgement, judge
from advisor.specification import Demand


@dataclass(frozen=True, slots=True)
class Clearance:
    """The must that a product meets with the fewest steps to spare; `demand` is its number in the judgement."""

    demand: int
    rule: str
    seen: float
    margin: float
    steps: float


def least_clearances(judgement: Judgement, among: Iterable[int]) -> dict[int, Clearance]:
    """For the items among these: the must on a number that each meets with the fewest steps to spare."""
    found: dict[int, Clearance] = {}
    wanted = list(among)
    for number, demand in enumerate(judgement.demands):
        limits = limits_in(demand.test)
        domain = judgement.domains[demand.property]
        if demand.must and not demand.void and limits and domain.kind == "number":
            _add(judgement, number, demand, limits, domain, wanted, found)
    return found


def _add(
    judgement: Judgement,
    number: int,
    demand: Demand,
    limits: list[float],
    domain: Domain,
    wanted: list[int],
    found: dict[int, Clearance],
) -> None:
    column = judgement.columns.get(demand.property)
    if column is None:
        return
    _, not_for = judge(demand.for_, judgement.columns, judgement.catalogue.everything)
    met = column.present & ~not_for & ~judgement.failing[number]
    steps_of: dict[float, tuple[float, float]] = {}
    for place in wanted:
        seen = column.values[place]
        if not met >> place & 1 or not isinstance(seen, float | int):
            continue
        if seen not in steps_of:
            nearest = min(limits, key=lambda limit: abs(seen - limit))
            steps_of[seen] = (in_steps(domain, seen, nearest), abs(seen - nearest))
        steps, away = steps_of[seen]
        known = found.get(place)
        if known is None or (steps, demand.rule) < (known.steps, known.rule):
            found[place] = Clearance(number, demand.rule, float(seen), away, steps)


def limits_in(test: Condition) -> list[float]:
    """The numbers at which a test turns."""
    return [term.limit for term in leaves(test) if isinstance(term, Bound) and isinstance(term.limit, float)]


def in_steps(domain: Domain, seen: float, limit: float) -> float:
    """A distance in the steps of the domain, not rounded."""
    if domain.step is not None and domain.step.kind == "ratio":
        return abs(math.log(limit / seen) / math.log(domain.step.size)) if seen > 0 and limit > 0 else math.inf
    size = domain.step.size if domain.step is not None and domain.step.kind == "absolute" else 1.0
    return abs(seen - limit) / size
