"""Grease designations after DIN 51825 and ISO 6743-9: the lowest code that suffices, written, read and compared."""

import math
import re
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Protocol

from advisor.case import Fact, Origin
from advisor.conditions import Record, Value, holds
from advisor.documents import Problems
from advisor.knowledge import Knowledge, Row, Scope, condition
from advisor.specification import Demand, Specification, mentions


@dataclass(frozen=True, slots=True)
class DinCode:
    """A DIN 51825 code: what the letters say."""

    additives: str
    oil: str
    nlgi: str
    letter: str
    upper_c: float
    water_test_c: float
    water_rating_to: float
    lower_c: float

    def __str__(self) -> str:
        return f"K{self.additives}{self.oil}{self.nlgi}{self.letter}{self.lower_c:g}"


@dataclass(frozen=True, slots=True)
class IsoCode:
    """An ISO 6743-9 code: what the symbols say."""

    lower: str
    upper: str
    water: str
    load: str
    nlgi: str
    lower_c: float
    upper_c: float
    environment: float
    rust: float

    def __str__(self) -> str:
        return f"ISO-L-X{self.lower}{self.upper}{self.water}{self.load} {self.nlgi}"


class Recommended(Protocol):
    """What a designer needs to know of the recommendation."""

    form: str
    kappa: float | None

    @property
    def lines(self) -> Mapping[str, Any]:
        """The docket rows by id."""


class NoCode(ValueError):
    """No code can be given; the message says why."""


class Designer:
    """Writes and reads codes from the tables of the knowledge."""

    def __init__(self, knowledge: Knowledge) -> None:
        self.knowledge = knowledge
        self.din: Mapping[str, Any] = knowledge.designations.get("din", {})  # type: ignore[assignment]  # trees of the file
        self.iso: Mapping[str, Any] = knowledge.designations.get("iso", {})  # type: ignore[assignment]  # trees of the file

    def codes(
        self,
        facts: Mapping[str, Fact],
        record: Record,
        specification: Specification,
        recommended: Recommended,
        *,
        lacking: str,
    ) -> "CodesFound":
        """The codes asked for, one for each recommended NLGI grade; or the reasons why there are none."""
        din, din_none = self._each(
            lambda nlgi: self.din_code(facts, specification, recommended, nlgi), recommended, lacking=lacking
        )
        iso, iso_none = self._each(
            lambda nlgi: self.iso_code(facts, record, specification, recommended, nlgi),
            recommended,
            lacking=lacking,
        )
        return CodesFound(tuple(map(str, din)), tuple(map(str, iso)), din_none, iso_none)

    def _each(self, write: Any, recommended: Recommended, *, lacking: str) -> tuple[list[Any], str]:
        if recommended.form == "oil":
            return [], "an oil is recommended, and these codes are for greases"
        if recommended.form != "grease":
            return [], "the form is not settled"
        if lacking:
            return [], lacking
        grades = recommended.lines["nlgi"].values if "nlgi" in recommended.lines else ()
        if not grades:
            return [], "no NLGI grade is left"
        try:
            return [write(str(grade)) for grade in grades], ""
        except NoCode as fault:
            return [], str(fault)

    def din_code(
        self, facts: Mapping[str, Fact], specification: Specification, recommended: Recommended, nlgi: str
    ) -> DinCode:
        """The lowest DIN 51825 code that suffices."""
        need, cold = _number(facts, self.din["need"]), _number(facts, self.din["cold"])
        water = _number(facts, self.din["water_test"])
        letters = "".join(
            letter for letter, asks in self.din["additive"].items() if self._asked(asks, specification, recommended)
        )
        for row in self.rows("din", "upper"):
            upper, test, rating = self._din_row(row)
            if upper >= need and self._water_serves(test, rating, water):
                lower = self._lower("din", self._warmest("din", cold))
                return DinCode(letters, "", nlgi, row.id, upper, test, rating, lower)
        raise NoCode(f"no letter reaches {need:g} °C")

    def _din_row(self, row: Row) -> tuple[float, float, float]:
        names = self.din["upper"]
        return (
            _cell(row, names["upper"], math.inf),
            _cell(row, names["water_test"], math.nan),
            _cell(row, names["rating_to"], math.nan),
        )

    def _water_serves(self, test_c: float, rating_to: float, asked_c: float) -> bool:
        """Whether a letter carries the water demand; where it leaves water to agreement, the sheet declares it."""
        if math.isnan(test_c):
            return True
        best = float(self.din["rating_at_most"])
        if asked_c <= 0:
            return rating_to <= best
        return test_c >= asked_c and rating_to <= best

    def iso_code(
        self,
        facts: Mapping[str, Fact],
        record: Record,
        specification: Specification,
        recommended: Recommended,
        nlgi: str,
    ) -> IsoCode:
        """The lowest ISO 6743-9 code that suffices."""
        if self._iso_excluded(record):
            raise NoCode("ISO 6743-9 does not speak of contact with food")
        need, cold = _number(facts, self.iso["need"]), _number(facts, self.iso["cold"])
        water = facts[str(self.iso["water"])]
        if water.value is None:
            raise NoCode(f"{water.name} has no value")
        lower = self._warmest("iso", cold)
        upper = next((row for row in self.rows("iso", "upper") if self._upper(row) >= need), None)
        if upper is None:
            raise NoCode(f"no symbol reaches {need:g} °C")
        load = self.iso["load"]
        symbol = load["with"] if self._asked(load, specification, recommended) else load["without"]
        return self._iso(lower.id, upper.id, str(water.value), str(symbol), nlgi)

    def _iso_excluded(self, record: Record) -> bool:
        node = self.iso.get("none_when")
        if node is None:
            return False
        names = {name: each.domain for name, each in self.knowledge.facts.items()}
        return holds(condition(node, Scope(Problems(), names)), record) is True

    def _iso(self, lower: str, upper: str, water: str, load: str, nlgi: str) -> IsoCode:
        grid, names = self._row("iso", "water_grid", water), self.iso["water_grid"]
        return IsoCode(
            lower,
            upper,
            water,
            load,
            nlgi,
            self._lower("iso", self._row("iso", "lower", lower)),
            self._upper(self._row("iso", "upper", upper)),
            _cell(grid, names["environment"], 0.0),
            _cell(grid, names["rust"], 0.0),
        )

    def _lower(self, standard: str, row: Row) -> float:
        return _cell(row, (self.din if standard == "din" else self.iso)["lower"]["lower"], -math.inf)

    def _upper(self, row: Row) -> float:
        return _cell(row, self.iso["upper"]["upper"], math.inf)

    def _warmest(self, standard: str, cold: float) -> Row:
        rows = [row for row in self.rows(standard, "lower") if self._lower(standard, row) <= cold]
        if not rows:
            raise NoCode(f"no symbol reaches down to {cold:g} °C")
        return max(rows, key=lambda row: self._lower(standard, row))

    def rows(self, standard: str, part: str) -> tuple[Row, ...]:
        """The rows of one table that a standard uses."""
        return self.knowledge.tables[str((self.din if standard == "din" else self.iso)[part]["table"])].rows

    def _row(self, standard: str, part: str, key: str) -> Row:
        for row in self.rows(standard, part):
            if row.id == key:
                return row
        raise NoCode(f"'{key}' is no symbol of {'DIN 51825' if standard == 'din' else 'ISO 6743-9'} here")

    def _asked(self, asks: Mapping[str, Any], specification: Specification, recommended: Recommended) -> bool:
        """Whether a must or a should, as it falls on what is recommended, asks for one of the values."""
        name = str(asks["property"])
        domain = self.knowledge.properties[name].domain
        wanted = {domain.code(str(each)) for each in asks["values"]}
        others = {domain.code(each) for each in domain.choices} - wanted
        return any(
            demand.property == name
            and self._falls(demand, recommended)
            and not any(holds(demand.test, {name: each}) for each in others)
            and any(holds(demand.test, {name: each}) for each in wanted)
            for demand in specification.demands
        )

    def _falls(self, demand: Demand, recommended: Recommended) -> bool:
        known: dict[str, Value] = {"form": recommended.form}
        if recommended.kappa is not None:
            known["kappa"] = recommended.kappa
        record = {
            name: self.knowledge.properties[name].domain.code(value)
            for name, value in known.items()
            if name in mentions(demand.for_)
        }
        return holds(demand.for_, record) is not False

    def read_din(self, text: str) -> DinCode:
        """Read a DIN 51825 code back."""
        found = re.fullmatch(r"K(P?F?)(E|FK|HC|PG|PH|SI|X)?(000|00|[0-6])([A-Z])(-\d+)", text.strip())
        if found is None:
            raise NoCode(f"'{text}' is no DIN 51825 code; an example is KP2K-30")
        additives, oil, nlgi, letter, lower = found.groups()
        upper, test, rating = self._din_row(self._row("din", "upper", letter))
        if float(lower) not in {self._lower("din", row) for row in self.rows("din", "lower")}:
            raise NoCode(f"{lower} is no lower temperature of DIN 51825")
        return DinCode(additives, oil or "", nlgi, letter, upper, test, rating, float(lower))

    def read_iso(self, text: str) -> IsoCode:
        """Read an ISO 6743-9 code back."""
        found = re.fullmatch(r"ISO-L-X([A-Z])([A-Z])([A-Z])([AB]) (000|00|[0-6])", text.strip())
        if found is None:
            raise NoCode(f"'{text}' is no ISO 6743-9 code; an example is ISO-L-XBCEB 2")
        return self._iso(*found.groups())


@dataclass(frozen=True, slots=True)
class CodesFound:
    """The designations asked for, or why there are none."""

    din: tuple[str, ...] = ()
    iso: tuple[str, ...] = ()
    din_none: str = ""
    iso_none: str = ""


def din_serves(offered: DinCode, asked: DinCode) -> bool:
    """Whether an offered code meets every part of the asked one."""
    water = (
        math.isnan(offered.water_test_c)
        or math.isnan(asked.water_test_c)
        or (offered.water_test_c >= asked.water_test_c and offered.water_rating_to <= asked.water_rating_to)
    )
    return (
        offered.nlgi == asked.nlgi
        and offered.upper_c >= asked.upper_c
        and offered.lower_c <= asked.lower_c
        and set(asked.additives) <= set(offered.additives)
        and water
    )


def iso_serves(offered: IsoCode, asked: IsoCode) -> bool:
    """Whether an offered code meets every part of the asked one."""
    return (
        offered.nlgi == asked.nlgi
        and offered.upper_c >= asked.upper_c
        and offered.lower_c <= asked.lower_c
        and offered.environment >= asked.environment
        and offered.rust >= asked.rust
        and offered.load >= asked.load
    )


def _number(facts: Mapping[str, Fact], name: object) -> float:
    fact = facts.get(str(name))
    if fact is None or not isinstance(fact.value, float):
        reason = fact.note if fact is not None and fact.origin is Origin.VOID else "it has no value"
        raise NoCode(f"{str(name).replace('_', ' ')}: {reason}")
    return fact.value


def _cell(row: Row, column: object, otherwise: float) -> float:
    cell = row.cells.get(str(column))
    return cell if isinstance(cell, float) else otherwise
