"""A catalogue: items with their properties as columns, the fixed ones once, the others anew for each case."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass

from advisor.case import Fact, Origin
from advisor.computations import looked_up
from advisor.conditions import Coded, Condition, Value
from advisor.formulas import FORMULAS, OutOfRange
from advisor.knowledge import Formed, Knowledge, LookedUp, Property, WorstOf
from advisor.shelf.columns import Column, judge, places
from advisor.specification import Demand, mentions


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
        self.codes = [item.code for item in self.items]
        self.place = {code: place for place, code in enumerate(self.codes)}
        self._empty = Column({}, len(self.items))
        self._order = _dependency_order(knowledge.properties)
        self._behind = {name: all_reads(frozenset({name}), knowledge.properties) for name in knowledge.properties}
        self._known: dict[tuple[str, tuple[Value | None, ...]], dict[tuple[Coded | None, ...], Coded | None]] = {}
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
            columns[name] = columns.get(name, self._empty).filled(coded)
        for prop in self._changing:
            if prop.name not in needed:
                continue
            if prop.concluded is not None:
                columns[prop.name] = self._raised(prop, columns, raises, lenient=lenient)
                continue
            column = self._column(prop, columns, facts)
            if prop.name in given:
                column = column.filled(given[prop.name])
            if column.present or column.waiting:
                columns[prop.name] = column
        return columns

    def with_more(
        self, columns: Mapping[str, Column], names: Iterable[str], facts: Mapping[str, Fact], among: int
    ) -> Mapping[str, Column]:
        """The columns of a case with those of these properties too, which are found for these items only."""
        unknown = [name for name in names if name not in columns]
        wanted = frozenset().union(*(self._behind[name] for name in unknown if name in self._behind))
        if not wanted:
            return columns
        more = dict(columns)
        for prop in self._changing:
            if prop.name in wanted and prop.name not in more and prop.concluded is None:
                column = self._column(prop, more, facts, among)
                if column.present or column.waiting:
                    more[prop.name] = column
        return more

    def looked_at(
        self, demands: Iterable[Demand], raises: Iterable[Raise], also: Iterable[str] = ()
    ) -> frozenset[str]:
        """The properties that these demands and raises look at, and every property that those are found from."""
        names = {name for demand in demands for name in (demand.property, *mentions(demand.for_))}
        names.update(also, *(mentions(each.for_) for each in raises))
        return frozenset().union(*(self._behind[name] for name in names if name in self._behind))

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
        return Column(at, len(self.items))

    def _column(
        self, prop: Property, columns: Mapping[str, Column], facts: Mapping[str, Fact], among: int | None = None
    ) -> Column:
        how = prop.how
        if how is None:
            code = prop.domain.code
            return Column.of(
                [None if (value := item.values.get(prop.name)) is None else code(value) for item in self.items]
            )
        if _waits(prop, self.knowledge, facts):
            return Column({}, len(self.items), waiting=True)
        if isinstance(how, Formed):
            return Column.of(self._formed(how, columns, facts, among))
        parts = (how,) if isinstance(how, LookedUp) else how.parts
        found = self._looked_up(parts, prop, columns, facts)
        place = self.place.get(str(facts[prop.same_item].value)) if prop.same_item else None
        if place is not None:
            found = {value: items & ~(1 << place) for value, items in found.items()}
            same = prop.domain.code("same")
            found[same] = found.get(same, 0) | 1 << place
        return Column(found, len(self.items))

    def _formed(
        self, how: Formed, columns: Mapping[str, Column], facts: Mapping[str, Fact], among: int | None
    ) -> list[Coded | None]:
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
        ordered = [parts[names.index(each.name)] for each in FORMULAS[how.formula].inputs]

        def result(*row: Coded | None) -> float | None:
            try:
                return None if None in row else float(function(*row))
            except (OutOfRange, ArithmeticError):
                return None

        if among is None:
            return list(map(result, *ordered))
        found: list[Coded | None] = [None] * len(self.items)
        for place in places(among):
            found[place] = result(*(part[place] for part in ordered))
        return found

    def _looked_up(
        self, parts: Sequence[LookedUp], prop: Property, columns: Mapping[str, Column], facts: Mapping[str, Fact]
    ) -> dict[Coded, int]:
        """The worst of some look-ups, by the parts that an item has; looked up once per combination of values."""
        by = dict.fromkeys(name for part in parts for _, name in part.by)
        names = [name for name in by if name in self.knowledge.properties]
        of_case = tuple([facts[name].value for name in by if name not in self.knowledge.properties])
        named = not any(isinstance(each, float | int) for each in of_case)
        known = self._known.setdefault((prop.name, of_case), {}) if named else {}
        found: dict[Coded, int] = {}
        for row, items in self._alike(names, columns):
            if row not in known:
                known[row] = self._worst(parts, prop, dict(zip(names, row, strict=True)), facts)
            value = known[row]
            if value is not None:
                found[value] = found.get(value, 0) | items
        return found

    def _worst(
        self, parts: Sequence[LookedUp], prop: Property, row: Mapping[str, Coded | None], facts: Mapping[str, Fact]
    ) -> Coded | None:
        found = [each for part in parts if (each := self._look(part, prop, row, facts)) is not None]
        return max(found) if len(found) > 1 else found[0] if found else None

    def _alike(self, names: Sequence[str], columns: Mapping[str, Column]) -> list[tuple[tuple[Coded | None, ...], int]]:
        """The items by their combination of values of these properties."""
        groups: list[tuple[tuple[Coded | None, ...], int]] = [((), self.everything)]
        for name in names:
            column = columns.get(name, self._empty)
            split: list[tuple[tuple[Coded | None, ...], int]] = []
            for row, items in groups:
                split += [((*row, value), both) for value, mask in column.by_value.items() if (both := items & mask)]
                if lacking := items & ~column.present:
                    split.append(((*row, None), lacking))
            groups = split
        return groups

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


def facts_read(prop: Property, knowledge: Knowledge) -> frozenset[str]:
    """The facts of a case that a property is found from."""
    return frozenset(name for name in (*reads(prop), prop.same_item) if name and name not in knowledge.properties)


def reads(prop: Property) -> list[str]:
    """The names that a property is found from."""
    how = prop.how
    if isinstance(how, Formed):
        return [each for each in how.inputs.values() if isinstance(each, str)]
    parts = (how,) if isinstance(how, LookedUp) else how.parts if isinstance(how, WorstOf) else ()
    return [name for part in parts for _, name in part.by]


def _waits(prop: Property, knowledge: Knowledge, facts: Mapping[str, Fact]) -> bool:
    return any(
        name not in facts or facts[name].origin in {Origin.UNANSWERED, Origin.VOID}
        for name in facts_read(prop, knowledge)
    )


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
