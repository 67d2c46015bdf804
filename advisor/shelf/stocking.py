"""What fills a catalogue: the products of the shelf, the usual oils, the choices of the docket's rows."""

from contextlib import suppress
from dataclasses import replace

from advisor.conditions import Value
from advisor.formulas import FORMULAS, OutOfRange
from advisor.knowledge import Knowledge
from advisor.shelf.catalogue import Catalogue, Item


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
