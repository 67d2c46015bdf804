"""The recommended class of every docket row: of its candidates, those that pass the musts and miss the fewest steps."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import partial

from advisor.advice.model import Candidate, Line
from advisor.advice.waiting import Waiting
from advisor.conditions import Value
from advisor.knowledge import DocketRow, Knowledge
from advisor.shelf import Catalogue, Judgement, Judgements, Raise, judge, places
from advisor.specification import Conflict, Specification, mentions, smallest_cover

Steps = tuple[int, int, int, int]


@dataclass(slots=True)
class Recommendation:
    """What is recommended, row by row, and what the closing step may know of it."""

    lines: dict[str, Line] = field(default_factory=dict)
    form: str = ""
    kappa: float | None = None
    conflicts: list[Conflict] = field(default_factory=list)
    oils: Judgement | None = None
    oil_ranks: dict[str, Steps] = field(default_factory=dict)
    choices: Judgement | None = None
    winners: dict[str, list[int]] = field(default_factory=dict)
    oil_winners: list[int] = field(default_factory=list)


class Recommender:
    """Finds the recommended classes for one case."""

    def __init__(self, knowledge: Knowledge, oils: Catalogue, choices: Catalogue, incumbent: int | None) -> None:
        self.knowledge, self.oils, self.choices, self.incumbent = knowledge, oils, choices, incumbent
        self.domains = {name: prop.domain for name, prop in knowledge.properties.items()}
        self.of_row: dict[str, list[int]] = {}
        for place, item in enumerate(choices.items):
            self.of_row.setdefault(item.code.partition("=")[0], []).append(place)

    def recommend(
        self,
        specification: Specification,
        judgements: Judgements,
        raises: Sequence[Raise],
        waiting: Waiting,
        needed: frozenset[str],
    ) -> Recommendation:
        """The recommended class of every row."""
        judged = partial(judgements.of, domains=self.domains, raises=raises, lenient=True)
        found, context = Recommendation(), dict[str, Value]()
        demands = specification.class_demands
        own = self.incumbent is not None
        about_form = [demand for demand in demands if own or demand.property == "form"]
        seen = needed if own else needed & self.choices.looked_at(about_form, raises)
        first = judged(self.choices, about_form, needed=seen)
        form_row = next((row for row in self.knowledge.docket if row.recommends == "form"), None)
        if form_row is not None:
            line = self._choice_line(form_row, first, found, waiting)
            found.form = str(line.values[0]) if len(line.values) == 1 else ""
        if found.form:
            context["form"] = found.form
        found.oils = judged(self.oils, demands, needed=needed, context=context)
        self._oil_rows(found, first, waiting)
        if found.kappa is not None:
            context["kappa"] = found.kappa
        found.choices = judged(self.choices, demands, needed=needed, context=context)
        for row in self.knowledge.docket:
            if row.section == "docket" and row.recommends and row.id not in found.lines:
                self._choice_row(row, found, waiting)
        self._change_over(found, waiting)
        return found

    def _fewest(self, judgement: Judgement, among: int) -> tuple[list[int], dict[int, Steps]]:
        steps = judgement.steps(among)
        best = min(steps.values(), default=(0, 0, 0, 0))
        return [place for place, each in steps.items() if each == best], steps

    def _oil_rows(self, found: Recommendation, choices: Judgement, waiting: Waiting) -> None:
        """The rows for base oil and grade: usual oils that pass, the ordinary ones before the special."""
        oils = found.oils
        assert oils is not None  # noqa: S101 - judged just before
        passing = oils.passing
        if not passing:
            found.conflicts.append(_conflict("usual oils", oils, self.oils.everything))
        ordinary, _ = judge(self.knowledge.usual_oils.ordinary, oils.columns, self.oils.everything)
        pool = passing & ordinary or self._least_special(oils, passing)
        steps = oils.steps(pool)
        own = self._own_steps(choices)
        best = min([*steps.values(), *([own] if own is not None else [])], default=(0, 0, 0, 0))
        winners = [place for place, each in steps.items() if each == best]
        found.oil_winners = winners
        found.oil_ranks = {self.oils.items[place].code: each for place, each in steps.items()}
        kappas = [
            value
            for place in winners
            if "kappa" in oils.columns and (value := oils.columns["kappa"].values[place]) is not None
        ]
        for row in self.knowledge.docket:
            if row.recommends in {"vg", self.knowledge.usual_oils.family} and row.section == "docket":
                values = self._values(oils, row.recommends, winners)
                if own is not None and own == best:
                    values = self._with_own(values, choices, row.recommends)
                found.lines[row.id] = self._line(
                    row, values, oils, steps, waiting, self._barred_oils(oils, row.recommends)
                )
        if own is not None and own == best and self.incumbent is not None and "kappa" in choices.columns:
            kappas += [value for value in [choices.columns["kappa"].values[self.incumbent]] if value is not None]
        numbers = [value for value in kappas if isinstance(value, float)]
        found.kappa = min(numbers, default=None)

    def _own_steps(self, choices: Judgement) -> Steps | None:
        """Steps short of the product in use, where it is on the shelf and passes the musts."""
        if self.incumbent is None or not choices.passing >> self.incumbent & 1:
            return None
        return choices.steps(1 << self.incumbent)[self.incumbent]

    def _with_own(self, values: list[Value], choices: Judgement, name: str) -> list[Value]:
        column = choices.columns.get(name)
        coded = column.values[self.incumbent] if column and self.incumbent is not None else None
        own = None if coded is None else self.domains[name].decode(coded)
        return values if own is None or own in values else self._sorted(name, [*values, own])

    def _least_special(self, oils: Judgement, passing: int) -> int:
        column = oils.columns.get("speciality")
        if column is None or not passing:
            return passing
        least = min((value for place in places(passing) if (value := column.values[place]) is not None), default=None)
        return passing if least is None else passing & column.by_value[least]

    def _barred_oils(self, oils: Judgement, name: str) -> dict[Value, tuple[str, ...]]:
        """Values of which no usual oil passes, with the rules that bar them."""
        column = oils.columns[name]
        barred: dict[Value, tuple[str, ...]] = {}
        musts = oils.musts_failed(oils.catalogue.everything)
        for coded, items in column.by_value.items():
            if not items & oils.passing:
                barred[self.domains[name].decode(coded)] = _barring(musts, items)
        return barred

    def _choice_row(self, row: DocketRow, found: Recommendation, waiting: Waiting) -> None:
        prop = self.knowledge.properties[row.recommends]
        if prop.concluded is not None:
            return
        if prop.of and found.form and prop.of != found.form:
            found.lines[row.id] = Line(row.id, row.title, skipped=True)
            return
        assert found.choices is not None  # noqa: S101 - judged before
        self._choice_line(row, found.choices, found, waiting)

    def _choice_line(self, row: DocketRow, judgement: Judgement, found: Recommendation, waiting: Waiting) -> Line:
        name = row.recommends
        pool = 0
        for place in self.of_row.get(name, []):
            pool |= 1 << place
        family = pool
        if (
            self.incumbent is not None
            and judgement.columns.get(name) is not None
            and judgement.columns[name].values[self.incumbent] is not None
        ):
            pool |= 1 << self.incumbent
        passing = pool & judgement.passing
        winners, steps = self._fewest(judgement, passing)
        musts = judgement.musts_failed(family)
        barred = {
            judgement.catalogue.items[place].values[name]: _barring(musts, 1 << place)
            for place in places(family & judgement.fails_must)
        }
        if family and not family & judgement.passing:
            found.conflicts.append(_conflict(name, judgement, family))
        values = self._values(judgement, name, winners)
        found.winners[name] = winners
        line = self._line(row, values, judgement, steps, waiting, barred)
        found.lines[row.id] = line
        return line

    def _values(self, judgement: Judgement, name: str, winners: Sequence[int]) -> list[Value]:
        column = judgement.columns[name]
        found: list[Value] = []
        for place in winners:
            coded = column.values[place]
            if coded is not None and (value := self.domains[name].decode(coded)) not in found:
                found.append(value)
        return self._sorted(name, found)

    def _sorted(self, name: str, values: list[Value]) -> list[Value]:
        order = list(self.domains[name].choices)
        return sorted(
            values,
            key=lambda each: (
                order.index(str(each)) if str(each) in order else 0,
                each if isinstance(each, float) else 0.0,
            ),
        )

    def _line(
        self,
        row: DocketRow,
        values: list[Value],
        judgement: Judgement,
        steps: Mapping[int, Steps],
        waiting: Waiting,
        barred: Mapping[Value, tuple[str, ...]],
    ) -> Line:
        column = judgement.columns[row.recommends]
        candidates = tuple(
            Candidate(self.domains[row.recommends].decode(coded), judgement.catalogue.items[place].code, steps[place])
            for place in sorted(steps, key=lambda each: (steps[each], each))
            if (coded := column.values[place]) is not None
        )
        about = tuple(demand for demand in judgement.demands if demand.property == row.recommends)
        return Line(
            row.id,
            row.title,
            tuple(values),
            candidates,
            about,
            (),
            waiting.for_properties(self._looked_at(row, judgement, waiting)),
            barred=barred,
        )

    def _looked_at(self, row: DocketRow, judgement: Judgement, waiting: Waiting) -> frozenset[str]:
        """The properties on which this row's candidates are judged, and those that say which demands apply."""
        if not waiting.by_property:
            return frozenset()
        of_oils = row.recommends in {"vg", self.knowledge.usual_oils.family}
        own = (self.oils if of_oils else self.choices).names_with(row.recommends)
        deciding = (mentions(demand.for_) for demand in judgement.demands if demand.property in own)
        return own.union(*deciding)

    def _change_over(self, found: Recommendation, waiting: Waiting) -> None:
        """Rows on a concluded property: its value over the recommended thickeners and base oils."""
        for row in self.knowledge.docket:
            if (
                row.section != "docket"
                or not row.recommends
                or self.knowledge.properties[row.recommends].concluded is None
            ):
                continue
            values = self._over_recommended(row.recommends, found)
            domain = self.domains[row.recommends]
            unique = sorted(set(values))
            found.lines[row.id] = Line(
                row.id,
                row.title,
                tuple(domain.decode(each) for each in unique),
                waits=waiting.for_properties(frozenset({row.recommends, "thickener", "base_oil", "pair"})),
            )

    def _over_recommended(self, name: str, found: Recommendation) -> list[float]:
        assert found.choices is not None and found.oils is not None  # noqa: S101, PT018 - judged before
        oils = [
            float(value)
            for place in found.oil_winners
            if isinstance(value := found.oils.columns[name].values[place], float)
        ]
        if found.form == "oil" or "thickener" not in found.winners:
            return oils
        values: list[float] = []
        for place in found.winners["thickener"]:
            own = found.choices.columns[name].values[place]
            if not isinstance(own, float):
                continue
            values += [own] if place == self.incumbent or not oils else [max(own, oil) for oil in oils]
        return values


def _barring(musts: Sequence[tuple[str, int]], items: int) -> tuple[str, ...]:
    """The rules of the musts that some of the items fail."""
    return tuple(sorted({rule for rule, failing in musts if failing & items}))


def _conflict(about: str, judgement: Judgement, among: int) -> Conflict:
    """The fewest rules that together leave none of these items."""
    musts = judgement.musts_failed(among)
    chosen = smallest_cover(
        [frozenset(map(float, places(failing))) for _, failing in musts], frozenset(map(float, places(among)))
    )
    return Conflict(about, tuple(sorted({musts[each][0] for each in chosen or ()})))
