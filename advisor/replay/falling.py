"""Demands as they fall on what is recommended: for every combination of recommended classes, what is asked of it."""

from collections.abc import Iterable, Iterator
from itertools import product

from advisor.advice import Advice
from advisor.conditions import Bound, Coded, Condition, Domain, Either, Every, Member, Record, Stated, Value, holds, leaves
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
        kappa = recommended_kappa(advice)
        return [] if kappa is None else [kappa]
    shown = [row.id for row in advice.knowledge.docket if row.recommends == name]
    domain = advice.knowledge.properties[name].domain
    return [domain.code(value) for line in advice.docket if line.row in shown for value in line.values]


def recommended_kappa(advice: Advice) -> float | None:
    """The smallest viscosity ratio among the best usual oils."""
    if advice.oils is None or not advice.oil_ranks or "kappa" not in advice.oils.columns:
        return None
    best = min(advice.oil_ranks.values())
    values = advice.oils.columns["kappa"].values
    items = advice.oils.catalogue.items
    found = [value for place, value in enumerate(values) if advice.oil_ranks.get(items[place].code) == best and isinstance(value, float)]
    return min(found, default=None)


def _meets(condition: Condition, record: Record) -> bool:
    return holds(_unless_unsaid(condition), record) is not False


def _unless_unsaid(condition: Condition) -> Condition:
    """The condition without `stated`: no class has a sheet."""
    if isinstance(condition, Every | Either):
        parts = tuple(_unless_unsaid(part) for part in condition.parts)
        return Either(parts) if isinstance(condition, Either) else Every(parts)
    return Every() if isinstance(condition, Stated) else condition


def asks(demand: Demand, value: Value, domain: Domain) -> bool:
    """Whether a demand asks for this value: it is what the demand leaves, or the end up to which it leaves values."""
    return _asked([demand.test], value, domain)


def must_ask(demands: Iterable[Demand], value: Value, domain: Domain) -> bool:
    """Whether the musts among the demands, taken together, ask for this value."""
    return _asked([demand.test for demand in demands if demand.must], value, domain)


def _asked(tests: list[Condition], value: Value, domain: Domain) -> bool:
    left = [each for each in _all(domain) if all(holds(test, {name: each}) for test in tests for name in _names(test))]
    wanted = domain.code(value)
    if wanted not in left or len(left) == len(_all(domain)):
        return False
    if len(left) == 1:
        return True
    if domain.ordered:
        everything = _all(domain)
        return (wanted == left[0] != everything[0]) or (wanted == left[-1] != everything[-1])
    return any(isinstance(term, Member) and term.wanted and wanted in term.among for test in tests for term in leaves(test))


def _names(test: Condition) -> set[str]:
    return {term.name for term in leaves(test)}


def _all(domain: Domain) -> list[Coded]:
    return list(domain.places) if domain.places else [domain.code(choice) for choice in domain.choices]


def nothing(domain: Domain) -> str:
    """The choice that means that there is nothing of it."""
    return "none" if "none" in domain.choices else "no"


def say_at_least(demands: Iterable[Demand], test: Condition, name: str, domain: Domain) -> bool:
    """Whether everything that all musts among the demands leave meets the test."""
    musts = [demand.test for demand in demands if demand.must]
    tried = _all(domain) or list(_samples([*musts, test]))
    return all(holds(test, {name: each}) for each in tried if all(holds(must, {name: each}) for must in musts))


def _samples(tests: list[Condition]) -> Iterator[float]:
    """Numbers at, between and beyond all limits: enough to compare thresholds."""
    limits = sorted({term.limit for test in tests for term in leaves(test) if isinstance(term, Bound) and isinstance(term.limit, float)})
    yield from limits
    yield from ((low + high) / 2 for low, high in zip(limits, limits[1:], strict=False))
    yield limits[0] - 1
    yield limits[-1] + 1
