"""The candidates of a docket row, what each one misses, and which demands decide between them."""

from dataclasses import dataclass

from advisor.advice import Advice, Line
from advisor.conditions import Coded
from advisor.explanation.words import say_value
from advisor.knowledge import DocketRow
from advisor.shelf import Judgement, judge, places, steps_short
from advisor.specification import Demand

NOTHING = (0, 0, 0, 0)


@dataclass(frozen=True, slots=True)
class Field:
    """The candidates of one row: their places in a judgement, and for each the demands it misses with the steps."""

    row: DocketRow
    judgement: Judgement
    pool: int
    ordinary: int
    misses: dict[int, dict[int, int]]

    def value(self, place: int) -> Coded | None:
        """The coded value of the row's property."""
        return self.judgement.columns[self.row.recommends].values[place]

    def label(self, place: int) -> str:
        """The value in words."""
        return say_value(self.judgement.domains[self.row.recommends], self.value(place))

    def bars(self, place: int, skip: int = -1) -> bool:
        """Whether a must bars the candidate, one demand left out."""
        return any(self.judgement.demands[each].must for each in self.misses[place] if each != skip)

    def steps(self, place: int, skip: int = -1) -> tuple[int, ...]:
        """The candidate's steps short, level by level, one demand left out."""
        short = list(NOTHING)
        for each, steps in self.misses[place].items():
            demand = self.judgement.demands[each]
            if each != skip and not demand.must:
                short[demand.level - 1] += steps
        return tuple(short)

    def best(self, skip: int = -1) -> list[int]:
        """The places of the candidates that are fewest steps short, one demand left out."""
        kept = self.narrowed([place for place in self.misses if not self.bars(place, skip)])
        steps = {place: self.steps(place, skip) for place in kept}
        least = min(steps.values(), default=NOTHING)
        return [place for place, each in steps.items() if each == least]

    def narrowed(self, passing: list[int]) -> list[int]:
        """The ordinary ones, or where there are none the least special."""
        ordinary = [place for place in passing if self.ordinary >> place & 1]
        special = self.judgement.columns.get("speciality")
        if ordinary or special is None or not passing:
            return ordinary or passing
        degrees = {place: value for place in passing if isinstance(value := special.values[place], float)}
        least = min(degrees.values(), default=None)
        return passing if least is None else [place for place, each in degrees.items() if each == least]

    def decisive(self) -> set[int]:
        """The demands without which other classes would be recommended."""
        usual = {self.value(place) for place in self.best()}
        asked = {each for misses in self.misses.values() for each in misses}
        return {each for each in asked if {self.value(place) for place in self.best(each)} != usual}


def is_oil_row(advice: Advice, name: str) -> bool:
    """Whether a row's candidates are the usual oils."""
    return name in {"vg", advice.knowledge.usual_oils.family}


def field_of(advice: Advice, line: Line) -> Field | None:
    """The candidates of a row; None where it recommends none of several classes."""
    row = next((each for each in advice.knowledge.docket if each.id == line.row), None)
    judgement = advice.oils if row is not None and is_oil_row(advice, row.recommends) else advice.choices
    if row is None or not row.recommends or judgement is None or row.recommends not in judgement.columns:
        return None
    if advice.knowledge.properties[row.recommends].concluded is not None or line.skipped:
        return None
    everything = judgement.catalogue.everything
    pool, ordinary = _own_kind(row.recommends, line, judgement), everything
    if judgement is advice.oils:
        pool = everything
        ordinary, _ = judge(advice.knowledge.usual_oils.ordinary, judgement.columns, everything)
    return Field(row, judgement, pool, ordinary, misses_of(judgement, pool))


def _own_kind(name: str, line: Line, judgement: Judgement) -> int:
    """The choices of the row's property, and the product in use where it was a candidate."""
    own = {each.item for each in line.candidates}
    return sum(
        1 << place
        for place, item in enumerate(judgement.catalogue.items)
        if item.code.startswith(f"{name}=") or item.code in own
    )


def misses_of(judgement: Judgement, among: int) -> dict[int, dict[int, int]]:
    """For each item among these: the demands that it misses, by their number, with the steps."""
    found: dict[int, dict[int, int]] = {place: {} for place in places(among)}
    for number, (demand, failing, missing) in enumerate(
        zip(judgement.demands, judgement.failing, judgement.missing, strict=True)
    ):
        for place in places(missing & among):
            found[place][number] = 1
        for place in places(failing & among):
            found[place][number] = _steps(judgement, demand, place)
    return found


def _steps(judgement: Judgement, demand: Demand, place: int) -> int:
    column = judgement.columns.get(demand.property)
    seen = column.values[place] if column is not None else None
    return 1 if seen is None else steps_short(demand.test, seen, judgement.domains[demand.property])


def oil_title(judgement: Judgement, place: int) -> str:
    """A usual oil as it is said: family and grade."""
    family = judgement.catalogue.knowledge.usual_oils.family
    parts = [(name, judgement.columns[name].values[place]) for name in (family, "vg") if name in judgement.columns]
    return " ".join(say_value(judgement.domains[name], value) for name, value in parts)
