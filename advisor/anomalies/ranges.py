"""What each fact can be: declared limits, narrowed by what tables, conclusions and monotonic formulas can give."""

import math
from collections.abc import Iterable, Mapping
from dataclasses import replace

from advisor.conditions import Domain, FactRef, Value
from advisor.formulas import FORMULAS, OutOfRange
from advisor.knowledge import Band, Computation, Formed, Knowledge, LookedUp, Sets

_SLACK = 1e-9


def reachable(knowledge: Knowledge) -> dict[str, Domain]:
    """The domain of every fact, no wider than what a case can give it."""
    found: dict[str, Domain] = {}
    for name, declaration in knowledge.facts.items():
        domain = declaration.domain
        if declaration.tunable is not None:
            domain = narrowed(domain, [declaration.tunable.value])
        elif declaration.concluded is not None:
            values = _concluded(knowledge, name)
            domain = domain if values is None else narrowed(domain, [declaration.concluded.otherwise, *values])
        found[name] = domain
    for name, computation in knowledge.computations.items():
        found[name] = _computed(computation, found, knowledge)
    return found


def narrowed(domain: Domain, values: Iterable[Value]) -> Domain:
    """The domain cut down to some of its values; of numbers, to the span of them."""
    values = list(values)
    numbers = [float(each) for each in values if isinstance(each, float | int)]
    if domain.kind == "number":
        if not numbers or domain.places:
            return domain
        return replace(domain, low=max(domain.low, min(numbers)), high=min(domain.high, max(numbers)))
    if domain.kind == "choice":
        left = {str(each): domain.choices.get(str(each), str(each)) for each in values}
        return replace(domain, choices=left, open_choices=False)
    return domain


def _concluded(knowledge: Knowledge, name: str) -> list[Value] | None:
    """The constants that rules set; nothing where one sets it to another fact."""
    found: list[Value] = []
    for instances in knowledge.instances.values():
        for instance in instances:
            for each in instance.then if instance.binds else ():
                if isinstance(each, Sets) and each.name == name:
                    if isinstance(each.value, FactRef):
                        return None
                    found.append(knowledge.domain(name).decode(each.value))
    return found


def _computed(computation: Computation, found: Mapping[str, Domain], knowledge: Knowledge) -> Domain:
    how, domain = computation.how, computation.domain
    if isinstance(how, LookedUp):
        values = looked_up_values(how, knowledge)
        return narrowed(domain, values) if values else domain
    low, high = _span(how, found)
    return replace(domain, low=max(domain.low, low), high=min(domain.high, high))


def looked_up_values(how: LookedUp, knowledge: Knowledge) -> list[Value]:
    """All values that a look-up can give."""
    table = knowledge.tables[how.table]
    cells = [row.cells[how.column] for row in table.rows if how.column in row.cells]
    values: list[Value] = [cell for cell in cells if not isinstance(cell, Band)]
    values += table.matrix.values()
    return [*values, how.otherwise] if how.otherwise is not None else values


def _span(how: Formed, found: Mapping[str, Domain]) -> tuple[float, float]:
    """The least and the greatest result, by the corners of the inputs; unbounded where the formula is not monotonic."""
    formula = FORMULAS[how.formula]
    low: dict[str, float] = {}
    high: dict[str, float] = {}
    for each in formula.inputs:
        bound = how.inputs[each.name]
        ends = (bound, bound) if not isinstance(bound, str) else (found[bound].low, found[bound].high)
        if ends[0] != ends[1] and (each.direction == "none" or each.joints):
            return -math.inf, math.inf
        low[each.name], high[each.name] = ends if each.direction != "down" else ends[::-1]
    return _end(how.formula, low, -1), _end(how.formula, high, 1)


def _end(formula: str, corner: Mapping[str, float], sign: int) -> float:
    try:
        value = FORMULAS[formula](**corner)
    except (OutOfRange, ValueError):
        return sign * math.inf
    return value + sign * _SLACK * max(1.0, abs(value))
