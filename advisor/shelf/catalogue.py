"""A catalogue: items with their properties as columns, the fixed ones once, the others anew for each case."""

from collections.abc import Mapping, Sequence
from contextlib import suppress
from dataclasses import dataclass, replace

from advisor.case import Fact, Origin
from advisor.computations import looked_up
from advisor.conditions import Coded, Condition, Value
from advisor.formulas import FORMULAS, OutOfRange
from advisor.knowledge import Formed, Knowledge, LookedUp, Property, WorstOf
from advisor.shelf.columns import Column, judge


@dataclass(frozen=True, slots=True)
class Item:
    """A product, a usual oil, or one choice of a property: what is known of it."""

    code: str
    title: str
    values: Mapping[str, Value]


@dataclass(frozen=True, slots=True)
class Raise:
    """A conclusion that raises a concluded property of some items."""

    property: str
    value: Coded
    for_: Condition
    rule: str


class Catalogue:
    """Items as columns. Columns that need no fact are made once; `for_case` adds the others."""

    def __init__(self, items: Sequence[Item], knowledge: Knowledge) -> None:
        self.items = tuple(items)
        self.knowledge = knowledge
        self.everything = (1 << len(self.items)) - 1
        self.place = {item.code: place for place, item in enumerate(self.items)}
        self._order = _dependency_order(knowledge.properties)
        self._fixed: dict[str, Column] = {}
        self._changing: list[Property] = []
        for name in self._order:
            prop = knowledge.properties[name]
            if prop.concluded is not None or prop.same_item or not self._is_fixed(prop):
                self._changing.append(prop)
                continue
            column = self._column(prop, self._fixed, {})
            if column.present:
                self._fixed[name] = column

    def _is_fixed(self, prop: Property) -> bool:
        return all(
            name in self._fixed or (name in self.knowledge.properties and not self._depends(name))
            for name in reads(prop)
        )

    def _depends(self, name: str) -> bool:
        return any(prop.name == name for prop in self._changing)

    def for_case(
        self,
        facts: Mapping[str, Fact],
        raises: Sequence[Raise] = (),
        *,
        needed: frozenset[str],
        lenient: bool = False,
        context: Mapping[str, Value] | None = None,
    ) -> dict[str, Column]:
        """The columns for the facts of a case; those that are not needed and not fixed are left out.

        `raises` are conclusions on concluded properties: they apply where their `for` holds, and (unless lenient)
        where it is unknown. `context` gives properties that every item of this catalogue is taken to have.
        """
        columns = dict(self._fixed)
        given = {name: self.knowledge.properties[name].domain.code(value) for name, value in (context or {}).items()}
        for name, coded in given.items():
            columns[name] = _filled(columns.get(name), coded, len(self.items))
        for prop in self._changing:
            if prop.name not in needed:
                continue
            if prop.concluded is not None:
                columns[prop.name] = self._raised(prop, columns, raises, lenient=lenient)
                continue
            column = self._column(prop, columns, facts)
            if prop.name in given:
                column = _filled(column, given[prop.name], len(self.items))
            if column.present or column.waiting:
                columns[prop.name] = column
        return columns

    def names_with(self, name: str) -> frozenset[str]:
        """The properties that items with this property can have, and that property itself."""
        column = self._fixed.get(name)
        items = column.present if column else 0
        fixed = {other for other, each in self._fixed.items() if each.present & items}
        changing = {prop.name for prop in self._changing if prop.concluded is None and fixed & set(reads(prop))}
        return frozenset({name} | fixed | changing)

    def _raised(
        self, prop: Property, columns: Mapping[str, Column], raises: Sequence[Raise], *, lenient: bool
    ) -> Column:
        assert prop.concluded is not None  # noqa: S101 - asked before
        start = prop.domain.code(prop.concluded.otherwise)
        raising = prop.concluded.combine == "highest"
        at: dict[Coded, int] = {start: self.everything}
        for each in raises:
            if each.property != prop.name:
                continue
            holding, failing = judge(each.for_, columns, self.everything)
            applies = holding if lenient else self.everything & ~failing
            for value in list(at):
                if (value < each.value) is raising and value != each.value:  # type: ignore[operator]  # scales code to numbers
                    moved = at[value] & applies
                    at[value] &= ~moved
                    at[each.value] = at.get(each.value, 0) | moved
        return Column.from_masks(at, len(self.items))

    def _column(self, prop: Property, columns: Mapping[str, Column], facts: Mapping[str, Fact]) -> Column:
        how = prop.how
        if how is None:
            code = prop.domain.code
            return Column(
                [None if (value := item.values.get(prop.name)) is None else code(value) for item in self.items]
            )
        if _waits(prop, self.knowledge, facts):
            return Column([None] * len(self.items), waiting=True)
        if isinstance(how, Formed):
            return Column(self._formed(how, columns, facts))
        parts = (how,) if isinstance(how, LookedUp) else how.parts
        found = self._looked_up(parts, prop, columns, facts)
        place = self.place.get(str(facts[prop.same_item].value)) if prop.same_item else None
        if place is not None:
            found[place] = prop.domain.code("same")
        return Column(found)

    def _formed(self, how: Formed, columns: Mapping[str, Column], facts: Mapping[str, Fact]) -> list[Coded | None]:
        function = FORMULAS[how.formula].function
        names = list(how.inputs)
        parts: list[Sequence[Coded | None]] = []
        for each in how.inputs.values():
            if isinstance(each, str) and each in self.knowledge.properties:
                column = columns.get(each)
                parts.append(column.values if column else [None] * len(self.items))
            else:
                fixed = facts[each].value if isinstance(each, str) else each
                parts.append([fixed] * len(self.items))  # type: ignore[list-item]  # formula inputs are numbers
        positional = FORMULAS[how.formula].inputs
        order = [names.index(each.name) for each in positional]
        parts = [parts[place] for place in order]
        found: list[Coded | None] = []
        for row in zip(*parts, strict=True):
            if None in row:
                found.append(None)
                continue
            try:
                found.append(float(function(*row)))
            except (OutOfRange, ArithmeticError):
                found.append(None)
        return found

    def _looked_up(
        self, parts: Sequence[LookedUp], prop: Property, columns: Mapping[str, Column], facts: Mapping[str, Fact]
    ) -> list[Coded | None]:
        """The worst of some look-ups, by the parts that an item has; looked up once per combination of values."""
        names = list(dict.fromkeys(name for part in parts for _, name in part.by if name in self.knowledge.properties))
        values = [columns[name].values if name in columns else [None] * len(self.items) for name in names]
        known: dict[tuple[Coded | None, ...], Coded | None] = {}
        found: list[Coded | None] = []
        for row in zip(*values, strict=True) if values else ((),) * len(self.items):
            if row not in known:
                has = dict(zip(names, row, strict=True))
                worst = [each for part in parts if (each := self._look(part, prop, has, facts)) is not None]
                known[row] = max(worst) if len(worst) > 1 else worst[0] if worst else None
            found.append(known[row])
        return found

    def _look(
        self, how: LookedUp, prop: Property, row: Mapping[str, Coded | None], facts: Mapping[str, Fact]
    ) -> Coded | None:
        """What one look-up gives; nothing where the item lacks a property that it needs."""
        if any(name in row and row[name] is None for _, name in how.by):
            return None

        def get(name: str) -> Value | None:
            if name in row:
                coded = row[name]
                return None if coded is None else self.knowledge.properties[name].domain.decode(coded)
            return facts[name].value

        outcome = looked_up(how, get, self.knowledge.tables)
        return None if outcome.value is None else prop.domain.code(outcome.value)


def all_reads(names: frozenset[str], properties: Mapping[str, Property]) -> frozenset[str]:
    """These properties and every property that they are found from."""
    found: set[str] = set()
    left = [name for name in names if name in properties]
    while left:
        name = left.pop()
        if name not in found:
            found.add(name)
            left += [each for each in reads(properties[name]) if each in properties]
    return frozenset(found)


def _filled(column: Column | None, coded: Coded, size: int) -> Column:
    """The column with a value put in where items lack one."""
    return Column([coded if value is None else value for value in column.values] if column else [coded] * size)


def reads(prop: Property) -> list[str]:
    """The names that a property is found from."""
    how = prop.how
    if isinstance(how, Formed):
        return [each for each in how.inputs.values() if isinstance(each, str)]
    parts = (how,) if isinstance(how, LookedUp) else how.parts if isinstance(how, WorstOf) else ()
    return [name for part in parts for _, name in part.by]


def _waits(prop: Property, knowledge: Knowledge, facts: Mapping[str, Fact]) -> bool:
    names = [name for name in reads(prop) if name not in knowledge.properties] + (
        [prop.same_item] if prop.same_item else []
    )
    return any(name not in facts or facts[name].origin in {Origin.UNANSWERED, Origin.VOID} for name in names)


def _dependency_order(properties: Mapping[str, Property]) -> list[str]:
    done: list[str] = []

    def visit(name: str, above: tuple[str, ...]) -> None:
        if name in done or name in above or name not in properties:
            return
        for needed in reads(properties[name]):
            visit(needed, (*above, name))
        done.append(name)

    for name, prop in properties.items():
        if prop.concluded is None:
            visit(name, ())
    return done + [name for name, prop in properties.items() if prop.concluded is not None]


def products(knowledge: Knowledge, only: frozenset[str] | None = None) -> Catalogue:
    """The shelf as a catalogue."""
    return Catalogue(
        [Item(each.item, each.title, each.values) for each in knowledge.shelf if only is None or each.item in only],
        knowledge,
    )


def usual_oils(knowledge: Knowledge) -> Catalogue:
    """Every family of the base-oil table with every grade that it is made in."""
    how = knowledge.usual_oils
    table = knowledge.tables[how.table]
    items: list[Item] = []
    for row in table.rows:
        low, high, index = (row.cells.get(column) for column in (how.low, how.high, how.index))
        if not all(isinstance(each, float) for each in (low, high, index)):
            continue
        label = knowledge.properties[how.family].domain.label(row.id)
        for grade in knowledge.properties["vg"].domain.places:
            if low <= grade <= high:  # type: ignore[operator]  # floats by the check above
                values = {how.family: row.id, "vg": grade, **_viscosities(grade, float(index))}  # type: ignore[arg-type]  # a float
                items.append(Item(f"{row.id} {grade:g}", f"{label}, ISO VG {grade:g}", values))
    return Catalogue(items, knowledge)


def _viscosities(grade: float, index: float) -> dict[str, Value]:
    """The two viscosities of an oil at the midpoint of its grade."""
    midpoint = float(FORMULAS["grade_midpoint"].function(grade))
    found: dict[str, Value] = {"viscosity_40": midpoint}
    with suppress(OutOfRange):
        found["viscosity_100"] = FORMULAS["viscosity_100_from_index"].function(midpoint, index)
    return found


def choices(knowledge: Knowledge, incumbent: Item | None = None) -> Catalogue:
    """Every choice of every property that the docket recommends, as items with that one property."""
    items: list[Item] = []
    for row in knowledge.docket:
        prop = knowledge.properties.get(row.recommends)
        if prop is None or prop.concluded is not None or row.recommends in {"vg", knowledge.usual_oils.family}:
            continue
        for choice in prop.domain.choices:
            values: dict[str, Value] = {row.recommends: choice}
            if prop.of:
                values["form"] = prop.of
            items.append(Item(f"{row.recommends}={choice}", prop.domain.choices[choice], values))
    if incumbent is not None:
        items.append(replace(incumbent))
    return Catalogue(items, knowledge)
