"""Limits that no quantity of their unit can reach: below absolute zero, negative lengths, more than the whole."""

import math
from collections.abc import Iterator
from typing import Final

from advisor.anomalies.finding import Finding, Witness
from advisor.anomalies.ground import Ground
from advisor.anomalies.proving import Proving, replayed
from advisor.conditions import ALWAYS, Bound, Condition, Domain, leaves
from advisor.documents import Mark
from advisor.knowledge import Asks, Band, Computation, Declaration, Instance, Knowledge, Property, Table

_LENGTHS_AND_SPEEDS: Final = ("mm", "1/min", "mm/min", "h", "months")
_MATTER: Final = ("mm²/s", "mPa·s", "kg/m³", "N", "g", "cm³", "kg", "ISO VG")
PHYSICAL: Final = {
    "°C": (-273.15, math.inf),
    "%": (0.0, 100.0),
    **dict.fromkeys((*_LENGTHS_AND_SPEEDS, *_MATTER), (0.0, math.inf)),
}
"""Absolute zero by definition of the kelvin; magnitudes are not negative; a share is at most the whole."""


def physics(ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Limits of rules, declared limits, and cells of tables outside the physical range of their unit."""
    yield from _declarations(ground.knowledge)
    for table in ground.knowledge.tables.values():
        yield from _cells(table)
    told: set[tuple[str, Bound]] = set()
    for instances in ground.knowledge.instances.values():
        for instance in instances:
            for term in _thresholds(instance):
                if (instance.rule.id, term) not in told and _beyond(term.limit, ground.declared[term.name]):
                    told.add((instance.rule.id, term))
                    yield _of_rule(instance, term, ground, proving)


def _declarations(knowledge: Knowledge) -> Iterator[Finding]:
    declared: dict[str, Declaration | Computation | Property] = {**knowledge.facts, **knowledge.computations}
    declared |= knowledge.properties
    for name, each in declared.items():
        for value in (each.domain.low, each.domain.high):
            if _beyond(value, each.domain):
                what = f"the declared limits of '{name}'"
                yield _declared(what, name, value, each.domain, each.mark, confirmed=each.domain.accepts(value))


def _cells(table: Table) -> Iterator[Finding]:
    for row in table.rows:
        for column, cell in row.cells.items():
            domain = table.columns[column]
            for value in (cell.low, cell.high) if isinstance(cell, Band) else (cell,):
                if isinstance(value, float | int) and _beyond(value, domain):
                    what = f"table {table.id}, row '{row.id}'"
                    yield _declared(what, column, value, domain, row.mark, confirmed=domain.accepts(value))


def _beyond(value: object, domain: Domain) -> bool:
    low, high = PHYSICAL.get(domain.unit, (-math.inf, math.inf)) if domain.kind == "number" else (-math.inf, math.inf)
    return isinstance(value, float | int) and math.isfinite(value) and not low <= value <= high


def _thresholds(instance: Instance) -> Iterator[Bound]:
    """Thresholds against numbers that the rule itself writes; those of a table are told at its row."""
    parts: list[Condition] = [instance.when]
    for each in instance.then:
        parts += [getattr(each, "for_", ALWAYS), *([each.test] if isinstance(each, Asks) else ())]
    cells = set(instance.row.cells.values()) if instance.row else set()
    for part in parts:
        for term in leaves(part):
            if isinstance(term, Bound) and isinstance(term.limit, float | int) and term.limit not in cells:
                yield term


def _range(unit: str) -> str:
    low, high = PHYSICAL[unit]
    return f"not below {low:g} {unit}" if math.isinf(high) else f"from {low:g} to {high:g} {unit}"


def _declared(what: str, name: str, value: float, domain: Domain, mark: Mark, *, confirmed: bool) -> Finding:
    return Finding(
        "beyond physics",
        mark,
        f"{what}: {value:g} {domain.unit} for {name} is physically impossible, as it is {_range(domain.unit)}",
        "check the unit and the decimal point",
        Witness({name: value}, "load", confirmed),
    )


def _of_rule(instance: Instance, term: Bound, ground: Ground, proving: Proving) -> Finding:
    """The engine shows that the threshold parts nothing: both ends of the physical range have one outcome."""
    domain = ground.declared[term.name]
    low, high = PHYSICAL[domain.unit]
    ends = [{term.name: low}, {term.name: high if math.isfinite(high) else max(1.0, abs(low)) * 1e6}]
    outcomes = {replayed(ground.declared, [term], record) for record in ends}
    witness = proving.witness(ends[0], confirmed=len(outcomes) == 1 and outcomes != {()})
    limit = float(term.limit) if isinstance(term.limit, float | int) else math.nan
    return Finding(
        "beyond physics",
        instance.rule.mark,
        f"rule '{instance.rule.id}': the limit {limit:g} {domain.unit} for {term.name} parts nothing,"
        f" as it is always {_range(domain.unit)}",
        "check the unit and the decimal point",
        witness,
        (instance.rule.id,),
    )
