"""Tables: rows that overlap where one row should answer, and cases that no row of a complete table takes."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import islice

from advisor.anomalies.axes import Axis, axis
from advisor.anomalies.finding import Finding, Witness
from advisor.anomalies.ground import Ground, cell_met, equals
from advisor.anomalies.proving import Proving, replayed
from advisor.anomalies.sweeps import Grid, Region, joined, numbers_in
from advisor.boxes.sides import a_value
from advisor.computations import looked_up
from advisor.conditions import Condition, Domain, Every, Record, Value
from advisor.conditions.terms import Void
from advisor.knowledge import Knowledge, LookedUp, Row, Table, WorstOf

_MOST_TOLD = 20
_MOST_CASES = 2
_MOST_REGIONS = 2000
_MOST_IN_ENGINE = 60


@dataclass(frozen=True, slots=True)
class Reading:
    """How a table is read: the names that stand for its columns; `single` where one row must answer.

    `whole` where some row must; `by_rules` where rules over its rows read it, so that its columns stand for themselves.
    """

    table: Table
    by: tuple[tuple[str, str], ...]
    single: bool
    whole: bool
    by_rules: bool = False


def tables(ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Overlaps in unique and complete tables, gaps in complete ones."""
    for table in ground.knowledge.tables.values():
        if table.matrix or table.policy == "all":
            continue
        for reading in _readings(table, ground.knowledge):
            yield from of_reading(reading, ground, proving)


def of_reading(reading: Reading, ground: Ground, proving: Proving) -> Iterator[Finding]:
    """The findings for one way in which a table is looked up."""
    table = reading.table
    axes = [_axis(table, column, name, ground) for column, name in reading.by]
    placed = [(row, region) for row in table.rows if (region := _region(row, axes)) is not None]
    grid = Grid([each.size for each in axes], [region for _, region in placed])
    rows = [row for row, _ in placed]
    if reading.single:
        for told, (number, met) in enumerate(grid.overlaps()):
            if told >= _MOST_TOLD:
                break
            others = [rows[each] for each in numbers_in(met)]
            shared = tuple(
                (max(one[0], two[0]), min(one[1], two[1]))
                for one, two in zip(placed[number][1], placed[next(numbers_in(met))][1], strict=True)
            )
            witness = _overlapping(reading, (rows[number], others[0]), _record(axes, shared), ground, proving, told)
            yield _overlap(reading, rows[number], others, witness)
    if reading.whole:
        gaps = joined(list(islice(grid.gaps(tuple(each.everything for each in axes)), _MOST_REGIONS)))
        for told, region in enumerate(gaps[:_MOST_TOLD]):
            yield _gap(reading, len(gaps), _missed(reading, _record(axes, region), ground, proving, told))


def _readings(table: Table, knowledge: Knowledge) -> list[Reading]:
    """The different ways in which facts and properties look the table up.

    Else its bands and key are judged by themselves, and what the rules over its rows compare.
    """
    hows = [each.how for each in knowledge.computations.values()]
    hows += [part for prop in knowledge.properties.values() for part in _parts(prop.how)]
    hows += [each.filled for each in knowledge.facts.values() if each.filled is not None]
    ways: dict[tuple[tuple[str, str], ...], bool] = {}
    for how in hows:
        if isinstance(how, LookedUp) and how.table == table.id:
            ways[how.by] = ways.get(how.by, False) or not how.combine
    looked_up = bool(ways)
    if table.bands and not looked_up:
        own = tuple((column, column) for column in table.columns if column in table.bands or column == table.key)
        ways = {own: True}
    readings = [Reading(table, by, single, table.policy == "complete") for by, single in ways.items()]
    return readings if looked_up else [*readings, *_by_rules(table, knowledge)]


def _by_rules(table: Table, knowledge: Knowledge) -> Iterator[Reading]:
    """What the rules over the rows of a table compare: one row for each case, and of choices a row for all of them.

    The rules pass over a row without such a cell; that no two rows have one key, the loader sees to.
    """
    compared = {column for rule in knowledge.rules.values() if rule.table == table.id for column in rule.matched}
    columns = [each for each in table.columns if each in (compared & {table.key} if table.key else compared)]
    choices = [each for each in columns if table.columns[each].kind != "number"]
    if columns and not table.key:
        yield _reading_of(table, columns, single=True)
    if choices and table.policy == "complete":
        yield _reading_of(table, choices, single=False)


def _reading_of(table: Table, columns: list[str], *, single: bool) -> Reading:
    filled = replace(table, rows=tuple(row for row in table.rows if row.cells.keys() >= set(columns)))
    return Reading(filled, tuple((each, f"row.{each}") for each in columns), single, not single, by_rules=True)


def _parts(how: object) -> list[LookedUp]:
    return list(how.parts) if isinstance(how, WorstOf) else [how] if isinstance(how, LookedUp) else []


def _axis(table: Table, column: str, name: str, ground: Ground) -> Axis:
    return axis(column, name, _domain(table, column, name, ground), [row.cells.get(column) for row in table.rows])


def _domain(table: Table, column: str, name: str, ground: Ground) -> Domain:
    """The domain of what is looked up, within the limits of the column."""
    own = table.columns[column]
    domain = ground.possible.get(name, own) if name != column or name in ground.possible else own
    if domain.kind == "number" and own.kind == "number":
        return replace(domain, low=max(domain.low, own.low), high=min(domain.high, own.high))
    return domain


def _region(row: Row, axes: Sequence[Axis]) -> Region | None:
    runs = [each.run(row.cells.get(each.column)) for each in axes]
    return tuple(run for run in runs if run is not None) if None not in runs else None


def _record(axes: Sequence[Axis], region: Region) -> Record:
    return {each.name: a_value(each.side(run), each.domain) for each, run in zip(axes, region, strict=True)}


def _met(reading: Reading, row: Row, domains: dict[str, Domain]) -> Condition:
    cells = [(name, row.cells[column]) for column, name in reading.by if column in row.cells]
    return Every(tuple(cell_met(name, cell, domains[name]) for name, cell in cells))


def _domains(reading: Reading, ground: Ground) -> dict[str, Domain]:
    own = {name: ground.declared.get(name, reading.table.columns[column]) for column, name in reading.by}
    return {name: replace(each, open_choices=False) for name, each in own.items()}


def _overlap(reading: Reading, row: Row, others: list[Row], witness: Witness) -> Finding:
    more = f" and {len(others) - 1} more" if len(others) > 1 else ""
    return Finding(
        "overlap",
        others[0].mark,
        f"table {reading.table.id} is to have one row for each case, and row '{row.id}' (line {row.mark.line})"
        f" overlaps with row '{others[0].id}'{more}",
        "take one of them out, or give the table 'policy: all'"
        if reading.by_rules
        else "part the rows, or give the table 'policy: all' and its look-ups 'combine'",
        witness,
    )


def _gap(reading: Reading, count: int, witness: Witness) -> Finding:
    where = ", ".join(column if reading.by_rules else name for column, name in reading.by)
    regions = f"{count} such regions" if count < _MOST_TOLD else f"{count} such regions or more"
    regions = "nowhere else" if count == 1 else regions
    return Finding(
        "gap",
        reading.table.mark,
        f"table {reading.table.id} is to be complete, and no row takes some values of {where} ({regions})",
        "add a row for them: the rules over its rows say nothing of them"
        if reading.by_rules
        else "add a row for them, or leave a cell blank where it does not matter",
        witness,
    )


def _overlapping(
    reading: Reading, rows: tuple[Row, Row], record: Record, ground: Ground, proving: Proving, told: int
) -> Witness:
    """A case, or a record, that both rows take."""
    domains = _domains(reading, ground)
    conditions = [_met(reading, row, domains) for row in rows]
    return _shown(record, domains, conditions, (True, True), ground, proving, case=told < _MOST_CASES)


def _missed(reading: Reading, record: Record, ground: Ground, proving: Proving, told: int) -> Witness:
    """A case, or a record, that no row takes; of a long table the look-up itself says so."""
    table, domains = reading.table, _domains(reading, ground)
    if len(table.rows) <= _MOST_IN_ENGINE:
        conditions = [_met(reading, row, domains) for row in table.rows]
        wanted = (False,) * len(conditions)
        return _shown(record, domains, conditions, wanted, ground, proving, case=told < _MOST_CASES)
    how = LookedUp(table.id, reading.by, next(iter(table.columns)), "", None)
    values = _decoded(record, domains)
    found = looked_up(how, values.get, {table.id: _read_by_place(table)})
    return Witness(values, confirmed=found.value is None)


def _read_by_place(table: Table) -> Table:
    """The table with the number of the row in its first column, so that any row that answers shows."""
    first = next(iter(table.columns))
    return replace(table, rows=tuple(replace(row, cells={first: 1.0, **row.cells}) for row in table.rows))


def _shown(
    record: Record,
    domains: dict[str, Domain],
    conditions: Sequence[Condition],
    wanted: tuple[bool, ...],
    ground: Ground,
    proving: Proving,
    *,
    case: bool,
) -> Witness:
    facts = {*ground.knowledge.facts, *ground.knowledge.computations}
    if case and facts.issuperset(record):
        point = Every(tuple(equals(name, value, domains[name]) for name, value in _decoded(record, domains).items()))
        for box in ground.boxes(point):
            found = proving.shows(box, conditions, wanted)
            if found.confirmed:
                return found
    return Witness(_decoded(record, domains), confirmed=replayed(domains, conditions, record) == wanted)


def _decoded(record: Record, domains: dict[str, Domain]) -> dict[str, Value]:
    return {name: domains[name].decode(value) for name, value in record.items() if not isinstance(value, Void)}
