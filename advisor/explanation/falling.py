"""Demands as they fall on what is recommended: for every combination of recommended classes, what is asked of it."""

from collections.abc import Iterable, Iterator
from itertools import pairwise, product

from advisor.advice import Advice
from advisor.conditions import (
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    Member,
    Record,
    Stated,
    Value,
    holds,
    leaves,
)
from advisor.specification import Demand, mentions

Demands = tuple[Demand, ...]


def falling(advice: Advice, name: str) -> list[Demands]:
    """The demands on a property, once for every combination of recommended classes that tells them apart.

    What a class does not say counts as met, as for a product whose sheet is silent.
    """
    about = [demand for demand in advice.specification.demands if demand.property == name and not demand.void]
    mentioned = sorted(set().union(*(mentions(demand.for_) for demand in about)))
    known = {each: values for each in mentioned if (values := _recommended(advice, each))}
    combinations = [dict(zip(known, chosen, strict=True)) for chosen in product(*known.values())]
    return [tuple(demand for demand in about if _meets(demand.for_, record)) for record in combinations]


def _recommended(advice: Advice, name: str) -> list[Coded]:
    """The recommended values of a property, as conditions see them."""
    if name == "kappa":
        kappa = advice.kappa
        return [] if kappa is None else [kappa]
    shown = [row.id for row in advice.knowledge.docket if row.recommends == name]
    domain = advice.knowledge.properties[name].domain
    return [domain.code(value) for line in advice.docket if line.row in shown for value in line.values]


def _meets(condition: Condition, record: Record) -> bool:
    return holds(_unless_unsaid(condition), record) is not False


def _unless_unsaid(condition: Condition) -> Condition:
    """The condition without `stated`: no class has a sheet."""
    if isinstance(condition, Every | Either):
        parts = tuple(_unless_unsaid(part) for part in condition.parts)
        return Either(parts) if isinstance(condition, Either) else Every(parts)
    return Every() if isinstance(condition, Stated) else condition


def asks(demands: Iterable[Demand], value: Value, domain: Domain) -> bool:
    """Whether the demands, taken together, ask for this value.

    They do where they leave it alone, or where it is the end up to which a scale or a series is left;
    `at_most anti_wear` asks for nothing, since it leaves `none`.
    """
    tests = [demand.test for demand in demands]
    everything = _all(domain)
    left = [each for each in everything if all(_meets_test(test, each) for test in tests)]
    wanted = domain.code(value)
    if wanted not in left or len(left) == len(everything):
        return False
    if len(left) == 1:
        return True
    if (none := nothing(domain)) and domain.code(none) in left:
        return False
    if domain.ordered:
        return wanted == left[0] != everything[0] or wanted == left[-1] != everything[-1]
    terms = [term for test in tests for term in leaves(test)]
    return any(isinstance(term, Member) and term.wanted and wanted in term.among for term in terms)


def turns_against(demand: Demand, domain: Domain) -> bool:
    """Whether a demand leaves `none`, but not the most there is; on choices without order: nothing else."""
    left = [each for each in _all(domain) if _meets_test(demand.test, each)]
    none = domain.code(nothing(domain))
    return none in left and (_all(domain)[-1] not in left if domain.ordered else len(left) == 1)


def _meets_test(test: Condition, coded: Coded) -> bool:
    return holds(test, {term.name: coded for term in leaves(test)}) is True


def _all(domain: Domain) -> list[Coded]:
    return list(domain.places) if domain.places else [domain.code(choice) for choice in domain.choices]


def nothing(domain: Domain) -> str:
    """The choice that means that there is nothing of it; empty where there is none."""
    return next((choice for choice in ("none", "no") if choice in domain.choices), "")


def say_at_least(demands: Iterable[Demand], test: Condition, domain: Domain) -> bool:
    """Whether everything that the demands together leave meets the test."""
    tests = [demand.test for demand in demands]
    tried = _all(domain) or list(_samples([*tests, test]))
    return all(_meets_test(test, each) for each in tried if all(_meets_test(one, each) for one in tests))


def _samples(tests: list[Condition]) -> Iterator[float]:
    """Numbers at, between and beyond all limits: enough to compare thresholds."""
    terms = [term for test in tests for term in leaves(test)]
    limits = sorted({term.limit for term in terms if isinstance(term, Bound) and isinstance(term.limit, float)})
    yield from limits
    yield from ((low + high) / 2 for low, high in pairwise(limits))
    yield limits[0] - 1
    yield limits[-1] + 1
