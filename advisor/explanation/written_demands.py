"""Demands as rules and scenarios write them."""

from collections.abc import Iterable, Sequence

from advisor.conditions import Bound, Condition, FactRef, Member, Ticked, Value, leaves
from advisor.conditions.terms import Term
from advisor.explanation.data_terms import OPERATORS
from advisor.knowledge import Knowledge

Told = tuple[str, Condition, int]
"""A property, the test on it, and the level."""


def write_demands(told: Sequence[Told], knowledge: Knowledge) -> str:
    """The demands as a list on one line; `none` where there are none."""
    return ", ".join(write_demand(*each, knowledge) for each in told).join("[]") if told else "none"


def write_demand(name: str, test: Condition, level: int, knowledge: Knowledge) -> str:
    """One demand: a must, or a should with its level."""
    said = f"{{{name}: {write_test(test, knowledge)}}}"
    return f"{{should: {said}, level: {level}}}" if level else f"{{must: {said}}}"


def write_test(test: Condition, knowledge: Knowledge) -> str:
    """The test on one property."""
    terms = list(leaves(test))
    if len(terms) == 1 and isinstance(terms[0], Bound) and terms[0].sign == "=":
        return _operand(terms[0].limit, terms[0].name, knowledge)
    return f"{{{', '.join(_operation(each, knowledge) for each in terms)}}}"


def _operation(term: Term, knowledge: Knowledge) -> str:
    if isinstance(term, Bound):
        return f"{OPERATORS[term.sign]}: {_operand(term.limit, term.name, knowledge)}"
    if isinstance(term, Member | Ticked):
        values = sorted(term.among, key=_place)
        listed = ", ".join(_operand(each, term.name, knowledge) for each in values)
        return f"{'any_of' if term.wanted else 'none_of'}: [{listed}]"
    return "stated" if term.wanted else "not_stated"


def _place(value: float | str) -> tuple[float, str]:
    return (value, "") if isinstance(value, float) else (0.0, value)


def _operand(value: float | str | FactRef, name: str, knowledge: Knowledge) -> str:
    if isinstance(value, FactRef):
        return f"{{fact: {value.name}}}"
    return write_value(knowledge.properties[name].domain.decode(value))


def write_value(value: Value) -> str:
    """A value as a scenario writes it."""
    if isinstance(value, tuple):
        return write_list(value)
    if isinstance(value, int | float):
        return f"{value:.0f}" if float(value).is_integer() and abs(value) < 1e15 else repr(value)
    return value if value[:1].isalpha() and value.replace("_", "a").replace("-", "a").isalnum() else f'"{value}"'


def write_list(values: Iterable[Value]) -> str:
    """Values in a list on one line."""
    return f"[{', '.join(map(write_value, values))}]"
