"""Short words for what stands: docket rows, quantities, codes, answers, and the reason beside a product."""

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from advisor.advice import Advice, Line, falls_on
from advisor.answers import DONT_KNOW
from advisor.case import Answer
from advisor.conditions import Bound, Condition, Domain, Either, Every, Member, Stated, Ticked, Value
from advisor.explanation.reasons import differing, everywhere
from advisor.explanation.seeing import say_known
from advisor.explanation.words import say_value
from advisor.knowledge import Declaration, Knowledge
from advisor.specification import STRONG, Demand


@dataclass(frozen=True, slots=True)
class RowShown:
    """A docket row as people read it; `waits_for` is the title of the first question it waits for."""

    id: str
    title: str
    text: str
    rules: tuple[str, ...]
    waits_for: str = ""

    @property
    def full(self) -> str:
        """The whole row in words."""
        waits = f"waits for {self.waits_for}" if self.waits_for else ""
        return ", ".join(part for part in (self.text, waits) if part)


def rows_shown(advice: Advice) -> tuple[RowShown, ...]:
    """The docket, row by row."""
    return tuple(row_shown(advice, line) for line in advice.docket)


def row_shown(advice: Advice, line: Line) -> RowShown:
    """One row: what is settled, or how far the choice has narrowed and what it waits for."""
    if line.skipped:
        return RowShown(line.row, line.title, "does not apply", ())
    rules = tuple(dict.fromkeys(demand.rule for demand in line.demands))
    if line.waits:
        return RowShown(
            line.row, line.title, _narrowed(advice, line), rules, _first_waited(advice.knowledge, line.waits)
        )
    recommends = next((row.recommends for row in advice.knowledge.docket if row.id == line.row), "")
    if recommends:
        return RowShown(line.row, line.title, _choices(advice, advice.knowledge.domain(recommends), line), rules)
    return RowShown(line.row, line.title, demands_text(advice, line.demands) or "nothing asked", rules)


def _first_waited(knowledge: Knowledge, waits: Sequence[str]) -> str:
    order = list(knowledge.facts)
    first = min(waits, key=lambda name: order.index(name) if name in order else len(order))
    return knowledge.title(first)


def _narrowed(advice: Advice, line: Line) -> str:
    """How many choices are left while the row waits, where some are ruled out already."""
    recommends = next((row.recommends for row in advice.knowledge.docket if row.id == line.row), "")
    if not recommends or not line.barred:
        return ""
    domain = advice.knowledge.domain(recommends)
    every = len(domain.places) or len(domain.choices)
    return f"{every - len(line.barred)} of {every} left"


def _choices(advice: Advice, domain: Domain, line: Line) -> str:
    said = " / ".join(f"{each:g}" if isinstance(each, float) else domain.label(each) for each in line.values)
    if line.differs:
        return f"{said}, {everywhere(advice)}" if said else f"{differing(advice)}{_between(advice, line)}"
    if len(line.values) == len(domain.choices) > 1:
        return "any"
    return said or "no choice is left"


def _between(advice: Advice, line: Line) -> str:
    """Between which grades a row lies that the runs of a case do not share."""
    found = [each for run in advice.single for each in run.line(line.row).values if isinstance(each, float)]
    return f": {min(found):g} to {max(found):g}" if found else ""


# ---- demands ---------------------------------------------------------------------------------------------------


def demands_text(advice: Advice, demands: Sequence[Demand]) -> str:
    """What is asked of each property: musts, then what is better; conditional ones where they concern the result."""
    settled = {line.row: line.values[0] for line in advice.docket if len(line.values) == 1}
    values = {
        row.recommends: settled[row.id] for row in advice.knowledge.docket if row.recommends and row.id in settled
    }
    by_property: dict[str, list[Demand]] = {}
    for demand in demands:
        if not demand.void and falls_on(demand, values, advice.knowledge) is not False and demand.level <= STRONG:
            by_property.setdefault(demand.property, []).append(demand)
    return ", ".join(_asked_of(advice.knowledge, name, each) for name, each in by_property.items())


def short_title(knowledge: Knowledge, name: str) -> str:
    """The title, shortened to its last word where that is the name itself: kappa."""
    title = knowledge.title(name)
    return name if title.endswith(f" {name}") else title


def _asked_of(knowledge: Knowledge, name: str, demands: Sequence[Demand]) -> str:
    domain = knowledge.properties[name].domain
    musts = asked(domain, [each.test for each in demands if each.must])
    better = asked(domain, [each.test for each in demands if not each.must])
    parts = [musts] if musts else []
    if better and better != musts:
        parts.append(f"better {better}")
    return f"{short_title(knowledge, name)} {'; '.join(parts)}"


def asked(domain: Domain, tests: Sequence[Condition]) -> str:
    """Several tests on one property in a few words.

    >>> asked(Domain("number", unit="°C"), [Bound("t", ">=", 120.0), Bound("t", ">=", 130.0)])
    '≥ 130 °C'
    """
    terms = [term for test in tests for term in _parts(test)]
    lows = [t for t in terms if isinstance(t, Bound) and t.sign in {">", ">="}]
    highs = [t for t in terms if isinstance(t, Bound) and t.sign in {"<", "<="}]
    words = []
    low = max(lows, key=_limit, default=None)
    high = min(highs, key=_limit, default=None)
    if low and high and low.sign == ">=" and high.sign == "<=":
        words.append(f"{say_value(domain, _limit(low))} to {say_value(domain, _limit(high))}")
    else:
        words += [f"{_SIGNS[each.sign]} {say_value(domain, _limit(each))}" for each in (low, high) if each]
    words += dict.fromkeys(text for term in terms if term not in (*lows, *highs) and (text := _term(domain, term)))
    return ", ".join(words)


_SIGNS = {">=": "≥", "<=": "≤", ">": ">", "<": "<", "=": "", "!=": "not"}


def _parts(test: Condition) -> Iterator[Condition]:
    if isinstance(test, Every):
        for part in test.parts:
            yield from _parts(part)
    else:
        yield test


def _limit(term: Bound) -> float:
    return float(term.limit) if isinstance(term.limit, float | int) else 0.0


def _term(domain: Domain, term: Condition) -> str:
    if isinstance(term, Bound):
        return f"{_SIGNS[term.sign]} {say_value(domain, _limit(term))}".strip()
    if isinstance(term, Member | Ticked):
        among: list[float | str] = sorted(term.among, key=str)
        labels = " or ".join(say_value(domain, each) for each in among[:3]) + (" ..." if len(among) > 3 else "")
        return labels if term.wanted else f"not {labels}"
    if isinstance(term, Either):
        return " or ".join(asked(domain, [part]) for part in term.parts)
    return "stated" if isinstance(term, Stated) else ""


# ---- products, quantities, codes, answers ----------------------------------------------------------------------


def quantities_text(advice: Advice) -> str:
    """Fill, quantity and interval in one line; what is still to come is named."""
    known = [
        (line.title, text)
        for line in advice.quantities
        if not line.skipped and not line.waits and (text := _figure(advice, line))
    ]
    waits = [name for line in advice.quantities for name in line.waits]
    parts = [f"{title} {text}" for title, text in known]
    if waits:
        parts.append(
            f"the rest waits for {_first_waited(advice.knowledge, waits)}"
            if parts
            else f"waits for {_first_waited(advice.knowledge, waits)}"
        )
    return "; ".join(parts) or "none shown here"


def _figure(advice: Advice, line: Line) -> str:
    """A figure; where the runs of a case do not agree on it, the lowest to the highest."""
    if not any(name in advice.spread for name in line.facts):
        text = _facts(advice, line.facts)
    else:
        text = ", ".join(dict.fromkeys(say_known(advice, name) for name in line.facts))
    return f"{text} where given" if text and line.differs else text


def _facts(advice: Advice, names: Sequence[str]) -> str:
    values = [fact.value for name in names if (fact := advice.facts.get(name)) is not None and fact.value is not None]
    if len(values) != len(names):
        return ""
    texts = list(
        dict.fromkeys(
            say_value(advice.knowledge.domain(name), value) for name, value in zip(names, values, strict=True)
        )
    )
    return (
        " to ".join(texts)
        if len(names) > 1 and len({advice.knowledge.domain(name).unit for name in names}) == 1
        else ", ".join(texts)
    )


def codes_text(advice: Advice) -> str:
    """The codes to write on the order, or why there is none."""
    codes = [*advice.codes.din, *advice.codes.iso]
    return (
        ", ".join(codes)
        if codes
        else next((each for each in (advice.codes.din_none, advice.codes.iso_none) if each), "")
    )


def answer_shown(declaration: Declaration, given: Answer) -> str:
    """An answer as one line: what was typed, what it reads as, or what stands for a don't know."""
    if given.value is None and given.typed != DONT_KNOW:
        return given.typed
    if given.value is None:
        assumed = declaration.assume
        return f"don't know, taken as {shown_value(declaration, assumed.value)}" if assumed else "don't know"
    text = shown_value(declaration, given.value)
    if declaration.domain.kind == "number" and given.estimate:
        return f"{given.typed.replace('_', ' ')}, about {text}"
    return text


def if_unknown(declaration: Declaration) -> str:
    """What a don't know to this question does."""
    if declaration.assume is None:
        return "don't know: this stays open"
    stays = "; the case stays open" if declaration.assume.keeps_open else ""
    return f"don't know: taken as {shown_value(declaration, declaration.assume.value)}{stays}"


def shown_value(declaration: Declaration, value: Value) -> str:
    """A value of a question as people read it."""
    return exactly(value, declaration.domain.unit) if isinstance(value, float) else declaration.domain.label(value)


def exactly(value: float, unit: str) -> str:
    """A number as it was understood: to two decimals, small ones to four digits.

    >>> exactly(82.2222222, "°C"), exactly(1450.0, "1/min"), exactly(0.045, "")
    ('82.22 °C', '1 450 1/min', '0.045')
    """
    text = f"{value:,.2f}".replace(",", " ") if abs(value) >= 1 or not value else f"{value:.4g}"
    text = text.rstrip("0").rstrip(".") if "." in text else text
    return f"{text} {unit}".strip() if math.isfinite(value) else str(value)
