"""Conditions and demands as plain data, in the words of the knowledge language."""

from collections.abc import Mapping
from typing import Any

from advisor.advice import Advice
from advisor.conditions import (
    ALWAYS,
    Bound,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Stated,
    Ticked,
    Value,
    Valueless,
)
from advisor.explanation.words import say_demand
from advisor.specification import Demand

OPERATORS = {"<": "below", "<=": "at_most", ">": "above", ">=": "at_least", "=": "is", "!=": "is_not"}


def demand_data(demand: Demand, advice: Advice) -> dict[str, Any]:
    """A demand: property, test, level, rule, for which lubricants, and in words."""
    domains = {name: each.domain for name, each in advice.knowledge.properties.items()}
    data: dict[str, Any] = {
        "property": demand.property,
        "test": condition_data(demand.test, domains),
        "level": demand.level,
        "rule": demand.rule,
        "text": say_demand(demand, advice.knowledge),
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
    return [condition.name, "any_of" if condition.wanted else "none_of", _among(condition, domains.get(condition.name))]


def _limit(term: Bound, domains: Mapping[str, Domain]) -> Any:
    if isinstance(term.limit, FactRef):
        return {"fact": term.limit.name}
    domain = domains.get(term.name)
    return number(domain.decode(term.limit) if domain is not None else term.limit)


def _among(term: Member | Ticked, domain: Domain | None) -> list[Any]:
    if domain is None:
        return sorted(map(str, term.among))
    order = {choice: place for place, choice in enumerate(domain.choices)}
    meant = [domain.decode(each) for each in term.among]
    return [number(each) for each in sorted(meant, key=lambda each: (order.get(str(each), len(order)), str(each)))]


def number(value: Value) -> Any:
    """A whole number without its fraction."""
    return int(value) if isinstance(value, float) and value.is_integer() and abs(value) < 1e15 else value
