"""Conditions and demands as plain data, in the words of the knowledge language."""

from collections.abc import Iterable, Mapping
from typing import Any

from advisor.conditions import (
    ALWAYS,
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Stated,
    Value,
    Valueless,
)
from advisor.specification import Demand

OPERATORS = {"<": "below", "<=": "at_most", ">": "above", ">=": "at_least", "=": "is", "!=": "is_not"}


def demand_data(number_: int, demand: Demand, domains: Mapping[str, Domain]) -> dict[str, Any]:
    """A demand: its number, property, test, level (0 is a must), rule, and for which lubricants."""
    data: dict[str, Any] = {
        "number": number_,
        "property": demand.property,
        "test": condition_data(demand.test, domains),
        "level": demand.level,
        "rule": demand.rule,
    }
    if demand.for_ != ALWAYS:
        data["for"] = condition_data(demand.for_, domains)
    return data | ({"void": sorted(demand.void)} if demand.void else {})


def condition_data(condition: Condition, domains: Mapping[str, Domain]) -> Any:
    """A condition: a term is [name, operator, limit]; several are {"all": [...]}, alternatives {"either": [...]}."""
    if isinstance(condition, Every | Either):
        parts = [condition_data(part, domains) for part in condition.parts]
        return parts[0] if len(parts) == 1 else {"all" if isinstance(condition, Every) else "either": parts}
    if isinstance(condition, Stated | Valueless):
        return [condition.name, "stated" if isinstance(condition, Stated) else "void", condition.wanted]
    if isinstance(condition, Bound):
        return [condition.name, OPERATORS[condition.sign], _limit(condition, domains)]
    return [
        condition.name,
        "any_of" if condition.wanted else "none_of",
        in_order(condition.among, domains.get(condition.name)),
    ]


def _limit(term: Bound, domains: Mapping[str, Domain]) -> Any:
    if isinstance(term.limit, FactRef):
        return {"fact": term.limit.name}
    domain = domains.get(term.name)
    return number(domain.decode(term.limit) if domain is not None else term.limit)


def in_order(among: Iterable[Coded], domain: Domain | None) -> list[Any]:
    """Choices in their declared order, so that sets give the same bytes every time."""
    if domain is None:
        return sorted(map(str, among))
    meant = [domain.decode(each) for each in among]
    if len(meant) > 1:
        order = domain.order
        meant.sort(key=lambda each: (order.get(str(each), len(order)), str(each)))
    return [number(each) for each in meant]


def number(value: Value) -> Any:
    """A whole number without its fraction."""
    return int(value) if isinstance(value, float) and value.is_integer() and abs(value) < 1e15 else value
