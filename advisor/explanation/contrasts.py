"""Why not: every demand that a product or a class misses, by how much, and by which rule."""

from collections.abc import Iterable
from dataclasses import dataclass
from difflib import get_close_matches

from advisor.advice import Advice, Line
from advisor.conditions import Bound, Coded, Condition, Domain, Member, Value, leaves
from advisor.explanation.ruling import RuleReason, Rules
from advisor.explanation.seeing import deciding_run, run_against
from advisor.explanation.weighing import Field, field_of, oil_title
from advisor.explanation.words import (
    LEVELS,
    SHEET_SILENT,
    margin,
    say_condition,
    say_margin,
    say_steps,
    say_test,
    say_value,
    title_of,
)
from advisor.explanation.workings import NotHere
from advisor.knowledge import DocketRow
from advisor.shelf import Judgement, Shortfall, Verdict
from advisor.specification import Demand

VERDICTS = {
    Verdict.FITS: "fits",
    Verdict.SECOND_BEST: "second best",
    Verdict.STILL_IN: "still in",
    Verdict.UNPROVEN: "unproven",
    Verdict.FALLS_SHORT: "falls short",
}


@dataclass(frozen=True, slots=True)
class Miss:
    """A demand that is missed: what it asks, what was seen, by how much, and the rule behind it.

    `barred`: the demand rules out the very value that was seen.
    `shared`: the recommended class misses it as well, so it tells nothing against this one.
    """

    property: str
    demand: str
    level: int
    strength: str
    barred: bool
    for_: str
    seen: str
    margin: str
    steps: int
    rule: RuleReason
    shared: bool = False


@dataclass(frozen=True, slots=True)
class WhyNot:
    """Why a product or a class is not recommended; without misses it is, or is held off for what the verdict says."""

    subject: str
    title: str
    kind: str
    verdict: str
    misses: tuple[Miss, ...]


def why_not(advice: Advice, subject: str) -> WhyNot:
    """Why a product (by its item code) or a class (`thickener=sodium`, or as the docket says it) is not recommended.

    Raises:
        NotHere: where neither the shelf nor a row has it; the message names the nearest.
    """
    if advice.withheld or advice.judgement is None:
        raise NotHere("Nothing is recommended here, so there is nothing to compare: see the referral.")
    place = advice.judgement.catalogue.place.get(subject)
    if place is not None:
        return product(advice, place)
    line, value = find_class(advice, subject)
    return of_class(advice, line, value)


def product(advice: Advice, place: int, rules: Rules | None = None) -> WhyNot:
    """All demands that a product misses, musts first."""
    run = deciding_run(advice, place)
    if run is not advice:
        return product(run, place)
    judgement = advice.judgement
    assert judgement is not None  # noqa: S101 - asked by the callers
    item = judgement.catalogue.items[place]
    ranked = next(each for each in advice.shelf if each.place == place)
    said = rules if rules is not None else Rules(advice)
    misses = tuple(_miss(said, each) for each in judgement.shortfalls(place))
    verdict = VERDICTS[ranked.verdict]
    if ranked.verdict is not Verdict.FALLS_SHORT:
        verdict += f": {say_steps(ranked.steps)}"
    return WhyNot(item.code, item.title, "product", verdict, misses)


def _miss(rules: Rules, short: Shortfall, *, shared: bool = False) -> Miss:
    advice, demand = rules.advice, short.demand
    domain = advice.knowledge.properties[demand.property].domain
    return Miss(
        title_of(demand.property, advice.knowledge),
        say_test(demand.test, advice.knowledge),
        demand.level,
        LEVELS[demand.level],
        isinstance(demand.test, Member) and not demand.test.wanted,
        "" if not list(leaves(demand.for_)) else say_condition(demand.for_, advice.knowledge),
        _seen(demand, short.seen, say_value(domain, short.seen)),
        _say_apart(demand, short.seen, advice),
        short.steps,
        rules.reason(demand.rule),
        shared,
    )


def _seen(demand: Demand, seen: Coded | None, said: str) -> str:
    if demand.void:
        return f"the limit has no value: {', '.join(sorted(demand.void))}"
    return SHEET_SILENT if seen is None else said


def _say_apart(demand: Demand, seen: Coded | None, advice: Advice) -> str:
    domain = advice.knowledge.properties[demand.property].domain
    away = apart(demand.test, seen)
    return "" if away is None or domain.kind == "yes_no" else say_margin(away, domain)


def apart(test: Condition, seen: Coded | None) -> float | None:
    """How far a value lies from the nearest limit of a test that it misses; None where nothing is counted."""
    away = [each for term in leaves(test) if isinstance(term, Bound) and (each := margin(term, seen, {})) is not None]
    return min(away, default=None)


def find_class(advice: Advice, subject: str) -> tuple[Line, Coded]:
    """The row and the coded value that a subject means."""
    wanted = subject.replace(":", "=", 1).casefold()
    known: list[str] = []
    for line in advice.docket:
        row = next(each for each in advice.knowledge.docket if each.id == line.row)
        if not row.recommends:
            continue
        domain = advice.knowledge.properties[row.recommends].domain
        values: tuple[Value, ...] = (*domain.places, *domain.choices)
        for each in values:
            if wanted in _names_of(row, domain, each):
                return line, domain.code(each)
            known.append(_subject(row, each))
    codes = advice.judgement.catalogue.place if advice.judgement is not None else ()
    near = get_close_matches(subject, [*codes, *known], n=3, cutoff=0.4)
    raise NotHere(
        f"'{subject}' is no product of this shelf and no class of the docket."
        + (f" Nearest: {', '.join(near)}." if near else "")
    )


def _subject(row: DocketRow, value: Value) -> str:
    return f"{row.recommends}={value:g}" if isinstance(value, float) else f"{row.recommends}={value}"


def _names_of(row: DocketRow, domain: Domain, value: Value) -> set[str]:
    """Everything that may be typed for a class: `sodium`, `thickener=sodium`, `NLGI 2`, `VG 100`."""
    plain = f"{value:g}" if isinstance(value, float) else str(value)
    words = {plain, say_value(domain, value)}
    heads = {row.id, row.recommends, row.title}
    found = words | {f"{head}={plain}" for head in heads} | {f"{head} {plain}" for head in heads}
    found |= {f"{head.split()[-1] if head.startswith('ISO') else head.split()[0]} {plain}" for head in heads}
    return {each.casefold() for each in found}


def of_class(advice: Advice, line: Line, value: Coded, rules: Rules | None = None) -> WhyNot:
    """What stands against a class of a row, beside the recommended one."""
    if advice.runs:
        run = run_against(advice, line, advice.knowledge.domain(_property(advice, line)).decode(value))
        return of_class(run, run.line(line.row), value)
    row = next(each for each in advice.knowledge.docket if each.id == line.row)
    domain = advice.knowledge.properties[row.recommends].domain
    said = say_value(domain, value)
    subject = _subject(row, domain.decode(value))
    field = field_of(advice, line)
    chosen = {domain.code(each) for each in line.values}
    if value in chosen:
        return WhyNot(subject, said, "class", "recommended", ())
    own = [place for place in field.misses if field.value(place) == value] if field is not None else []
    if field is None or not own:
        reason = (
            "does not apply"
            if line.skipped
            else "no usual oil has it"
            if field is not None
            else "not the conclusion of the rules: see why"
        )
        return WhyNot(subject, said, "class", reason, ())
    closest = min(own, key=lambda place: _distance(field, place))
    return WhyNot(
        subject,
        said,
        "class",
        _class_verdict(field, own, closest),
        tuple(_against(rules if rules is not None else Rules(advice), field, closest)),
    )


def _property(advice: Advice, line: Line) -> str:
    return next(each.recommends for each in advice.knowledge.docket if each.id == line.row)


def _distance(field: Field, place: int) -> tuple[object, ...]:
    """How far a candidate is from being recommended: ordinary ones first, then by musts missed, then by steps."""
    musts = sum(field.judgement.demands[each].must for each in field.misses[place])
    return (not field.ordinary >> place & 1, musts, field.steps(place), place)


def _class_verdict(field: Field, own: list[int], closest: int) -> str:
    among = f"; of {len(own)} usual oils the closest is {oil_title(field.judgement, closest)}" if len(own) > 1 else ""
    passing = [place for place in field.misses if not field.bars(place)]
    if field.bars(closest):
        special = sum(place in passing for place in own)
        return f"barred{among}" + (f"; {special} out of the ordinary would pass" if special else "")
    if closest not in field.narrowed(passing):
        return f"allowed, but out of the ordinary, and ordinary ones pass{among}"
    return f"allowed, but {say_steps(field.steps(closest))}{among}"


def _against(rules: Rules, field: Field, closest: int) -> Iterable[Miss]:
    """What the closest candidate of the class misses."""
    judgement, best = field.judgement, field.best()
    numbers = sorted(field.misses[closest], key=lambda each: judgement.demands[each].level)
    for number in numbers:
        demand = judgement.demands[number]
        short = Shortfall(demand, _value(judgement, demand, closest), field.misses[closest][number])
        shared = bool(best) and all(field.misses[place].get(number, 0) >= short.steps for place in best)
        yield _miss(rules, short, shared=shared)


def _value(judgement: Judgement, demand: Demand, place: int) -> Coded | None:
    column = judgement.columns.get(demand.property)
    return column.values[place] if column is not None else None
