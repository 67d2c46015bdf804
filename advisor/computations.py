"""Formulas and look-ups bound to facts: what they give, what they wait for, and why they are void."""

from collections.abc import Callable, Iterable, Mapping
from typing import NamedTuple

from advisor.case import Fact, Origin
from advisor.conditions import Value
from advisor.formulas import FORMULAS, OutOfRange
from advisor.knowledge import Band, Computation, Formed, LookedUp, Row, Table

Get = Callable[[str], Value | None]


class Outcome(NamedTuple):
    """A value; or, without one, the names it waits for; or, without these, the reason why it is void."""

    value: Value | None = None
    waits: frozenset[str] = frozenset()
    void: str = ""


def compute(computation: Computation, facts: Mapping[str, Fact], tables: Mapping[str, Table]) -> Outcome:
    """The outcome of one computation on the facts known so far."""
    how, void = computation.how, ""
    waits = []
    for name in computation.needs:
        fact = facts.get(name)
        if fact is None or fact.origin is Origin.UNANSWERED:
            waits.append(name)
        elif fact.origin is Origin.VOID and not void:
            void = f"{name} has no value: {fact.note}"
    if waits or void:
        return Outcome(waits=frozenset(waits)) if waits else Outcome(void=void)
    outcome = _formed(how, facts) if isinstance(how, Formed) else looked_up(how, lambda name: facts[name].value, tables)
    domain = computation.domain
    if isinstance(outcome.value, float) and not domain.low <= outcome.value <= domain.high:
        ends = f"{domain.low:g} to {domain.high:g} {domain.unit}".strip()
        return Outcome(void=f"{outcome.value:.4g} lies outside {ends}")
    return outcome


def _formed(how: Formed, facts: Mapping[str, Fact]) -> Outcome:
    values = {name: _number(facts[each].value) if isinstance(each, str) else each for name, each in how.inputs.items()}
    formula = FORMULAS[how.formula]
    try:
        result = formula(**values)
    except OutOfRange as fault:
        return Outcome(void=str(fault))
    return Outcome(value=float(result))


def _number(value: Value | None) -> float:
    if not isinstance(value, float | int):
        raise TypeError("the loader binds formulas to numbers only")
    return value


def looked_up(how: LookedUp, get: Get, tables: Mapping[str, Table]) -> Outcome:
    """What a look-up gives for these values."""
    table = tables[how.table]
    seen = [(column, get(name)) for column, name in how.by]
    if table.matrix:
        found = table.matrix.get((str(seen[0][1]), str(seen[1][1])))
        return _or_otherwise(found, how, f"no entry for {seen[0][1]} with {seen[1][1]}")
    cells = [row.cells[how.column] for row in _candidates(table, seen) if how.column in row.cells and _meets(row, seen)]
    values = [cell for cell in cells if not isinstance(cell, Band)]
    if not values:
        return _or_otherwise(None, how, f"table {table.id} has no row for " + ", ".join(f"{c} {v}" for c, v in seen))
    if how.combine:
        pick = max if how.combine == "highest" else min
        domain = table.columns[how.column]
        return Outcome(value=pick(values, key=domain.code))
    if any(value != values[0] for value in values):
        return Outcome(void=f"table {table.id} has rows that disagree")
    return Outcome(value=values[0])


def _candidates(table: Table, seen: list[tuple[str, Value | None]]) -> Iterable[Row]:
    """The rows that may meet: all, or the one of the key where the key is given."""
    for column, value in seen:
        if column == table.key and isinstance(value, str):
            row = table.row_of.get(value)
            return () if row is None else (row,)
    return table.rows


def _or_otherwise(value: Value | None, how: LookedUp, reason: str) -> Outcome:
    if value is not None:
        return Outcome(value=value)
    return Outcome(value=how.otherwise) if how.otherwise is not None else Outcome(void=reason)


def _meets(row: Row, seen: list[tuple[str, Value | None]]) -> bool:
    for column, value in seen:
        cell = row.cells.get(column)
        if cell is None:
            continue
        if isinstance(cell, Band):
            if not isinstance(value, float | int) or not cell.meets(value):
                return False
        elif isinstance(value, tuple):
            if cell not in value:
                return False
        elif cell != value:
            return False
    return True
