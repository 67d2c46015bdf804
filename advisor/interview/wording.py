"""Short words for what stands: docket rows, quantities, codes, answers, and the reason beside a product."""

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from advisor.advice import Advice, Line, Ranked, State, falls_on
from advisor.answers import DONT_KNOW
from advisor.case import Answer
from advisor.conditions import Bound, Coded, Condition, Domain, Either, Every, Member, Stated, Ticked, Value
from advisor.explanation.contrasts import VERDICTS
from advisor.explanation.seeing import instances_of
from advisor.explanation.words import fill_in, say_value
from advisor.knowledge import Declaration, Instance, Knowledge
from advisor.quantities import show
from advisor.shelf import Shortfall, Verdict
from advisor.specification import STRONG, Demand
Known = Mapping[str, tuple[str, Instance, bool | None]]
"""Step, rule instance and outcome by the instance's id."""


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
        return RowShown(line.row, line.title, _narrowed(advice, line), rules, _first_waited(advice.knowledge, line.waits))
    recommends = next((row.recommends for row in advice.knowledge.docket if row.id == line.row), "")
    if recommends:
        return RowShown(line.row, line.title, _choices(advice.knowledge.domain(recommends), line.values), rules)
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


def _choices(domain: Domain, values: Sequence[Value]) -> str:
    if not values:
        return "no choice is left"
    if len(values) == len(domain.choices) > 1:
        return "any"
    return " / ".join(f"{each:g}" if isinstance(each, float) else domain.label(each) for each in values)


# ---- demands ---------------------------------------------------------------------------------------------------


def demands_text(advice: Advice, demands: Sequence[Demand]) -> str:
    """What is asked of each property: musts, then what is better; conditional ones where they concern the result."""
    settled = {line.row: line.values[0] for line in advice.docket if len(line.values) == 1}
    values = {row.recommends: settled[row.id] for row in advice.knowledge.docket if row.recommends and row.id in settled}
    by_property: dict[str, list[Demand]] = {}
    for demand in demands:
        if not demand.void and falls_on(demand, values, advice.knowledge) is not False and demand.level <= STRONG:
            by_property.setdefault(demand.property, []).append(demand)
    return ", ".join(_asked_of(advice.knowledge, name, each) for name, each in by_property.items())


def _title(knowledge: Knowledge, name: str) -> str:
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
    return f"{_title(knowledge, name)} {'; '.join(parts)}"


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


def product_reasons(advice: Advice) -> list[str]:
    """For each product of the shelf what decides about it, in the order of the shelf."""
    known = instances_of(advice)
    return [_product_reason(advice, each, known) for each in advice.shelf]


def _product_reason(advice: Advice, ranked: Ranked, known: Known) -> str:
    """What decides about a product, with the numbers: the first thing it misses, else the film it makes."""
    assert advice.judgement is not None  # noqa: S101 - products are ranked by it
    missed = advice.judgement.shortfalls(ranked.place)
    wanted = [each for each in missed if each.demand.must] or [each for each in missed if each.demand.level <= STRONG]
    if ranked.verdict is Verdict.FALLS_SHORT:
        wanted = [each for each in wanted if each.seen is not None] or wanted
    if wanted and ranked.verdict in {Verdict.FALLS_SHORT, Verdict.UNPROVEN, Verdict.SECOND_BEST}:
        return _missed(advice, wanted[0], known)
    kappa = advice.judgement.columns.get("kappa")
    seen = kappa.values[ranked.place] if kappa else None
    floor = asked(advice.knowledge.domain("kappa"), [each.test for each in advice.specification.demands if each.must and each.property == "kappa"])
    if isinstance(seen, float):
        return f"kappa {show(seen, '')}" + (f", asked {floor}" if floor else "")
    return "nothing missed so far" if ranked.verdict is Verdict.STILL_IN else "misses nothing"


def _missed(advice: Advice, shortfall: Shortfall, known: Known) -> str:
    demand = shortfall.demand
    domain = advice.knowledge.properties[demand.property].domain
    title, limit = _title(advice.knowledge, demand.property), asked(domain, [demand.test])
    if demand.void:
        return f"{title}: the limit cannot be worked out here"
    seen: Coded | None = shortfall.seen
    if seen is None:
        return f"sheet does not state {title}, asked {limit}"
    if isinstance(demand.test, Member | Ticked) and not demand.test.wanted:
        return _because(advice, demand.rule, known) or f"{title} {limit}"
    return f"{title} {say_value(domain, seen)}, {'asked' if demand.must else 'better'} {limit}"


def _because(advice: Advice, rule: str, known: Known) -> str:
    """The sentence of a rule, filled in."""
    if rule not in known:
        return ""
    _, instance, _ = known[rule]
    return fill_in(instance.rule.because, instance, advice.facts, advice.record, advice.knowledge)


def count_text(advice: Advice) -> str:
    """How many products of the shelf fit, or are still in."""
    alive = sum(each.verdict in {Verdict.FITS, Verdict.SECOND_BEST, Verdict.STILL_IN} for each in advice.shelf)
    still = any(each.verdict is Verdict.STILL_IN for each in advice.shelf)
    return f"{alive} of {len(advice.shelf)} {'still in' if still else 'fit'}"


def quantities_text(advice: Advice) -> str:
    """Fill, quantity and interval in one line; what is still to come is named."""
    known = [(line.title, text) for line in advice.quantities if not line.skipped and not line.waits and (text := _facts(advice, line.facts))]
    waits = [name for line in advice.quantities for name in line.waits]
    parts = [f"{title} {text}" for title, text in known]
    if waits:
        parts.append(f"the rest waits for {_first_waited(advice.knowledge, waits)}" if parts else f"waits for {_first_waited(advice.knowledge, waits)}")
    return "; ".join(parts) or "none shown here"


def _facts(advice: Advice, names: Sequence[str]) -> str:
    values = [fact.value for name in names if (fact := advice.facts.get(name)) is not None and fact.value is not None]
    if len(values) != len(names):
        return ""
    texts = list(dict.fromkeys(say_value(advice.knowledge.domain(name), value) for name, value in zip(names, values, strict=True)))
    return " to ".join(texts) if len(names) > 1 and len({advice.knowledge.domain(name).unit for name in names}) == 1 else ", ".join(texts)


def codes_text(advice: Advice) -> str:
    """The codes to write on the order, or why there is none."""
    codes = [*advice.codes.din, *advice.codes.iso]
    return ", ".join(codes) if codes else next((each for each in (advice.codes.din_none, advice.codes.iso_none) if each), "")


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


# ---- what came out ---------------------------------------------------------------------------------------------


def outcome_text(advice: Advice) -> str:
    """The outcome in two or three sentences."""
    if advice.withheld:
        return "The interview ends here: no lubricant is named. A person must decide; read what to mind before anything is touched."
    found = [_STATES[advice.state], f"{count_text(advice)[0].upper()}{count_text(advice)[1:]}."]
    first = next(iter(advice.shelf), None)
    if first is not None and first.verdict in {Verdict.FITS, Verdict.SECOND_BEST}:
        found.append(f"First on the shelf: {first.item}, {VERDICTS[first.verdict]}.")
    elif advice.state is not State.OPEN:
        found.append("No product on the shelf fits.")
    unknown = [advice.knowledge.title(each.fact) for each in advice.open_questions if each.dont_know]
    if unknown:
        found.append(f"Not known, and it matters: {', '.join(unknown)}.")
    if advice.keeping_open:
        found.append(f"Assumed, to be made sure of: {', '.join(advice.knowledge.title(name) for name in advice.keeping_open)}.")
    for conflict in advice.conflicts:
        found.append(f"Cannot be had together: {', '.join(conflict.rules)}.")
    return " ".join(found)


_STATES = {
    State.SETTLED: "Settled.", State.OPEN: "Still open.", State.REFERRED: "A person must decide.",
    State.CONFLICT: "The demands cannot all be met."}


def cautions_told(advice: Advice) -> list[str]:
    """The cautions in full."""
    return [advice.knowledge.cautions[each.caution].text for each in advice.cautions]


def referrals_told(advice: Advice) -> list[tuple[str, str]]:
    """To whom the case goes, and what is to be told."""
    known = [advice.knowledge.referrals[name] for name in dict.fromkeys(each.to for each in advice.referrals)]
    return [(each.to, each.text) for each in known]


def care_text(advice: Advice) -> str:
    """How much there is to mind, in one line."""
    parts = [f"goes to {to}" for to, _ in referrals_told(advice)]
    parts += [f"! {len(advice.cautions)} cautions, F3 lists them"] if advice.cautions else []
    return "; ".join(parts) or "nothing special so far"
