"""Why a row of the docket shows what it shows: the conclusion, its demands, their rules, and the facts behind these."""

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

from advisor.advice import Advice, Line
from advisor.case import Origin
from advisor.conditions import Condition, Every, FactRef, holds
from advisor.conditions.terms import names
from advisor.explanation.ruling import RuleReason, Rules, why_not_rule
from advisor.explanation.seeing import say_known
from advisor.explanation.weighing import Field, field_of
from advisor.explanation.words import say_condition, say_demand, say_test, say_value, title_of
from advisor.explanation.workings import NotHere, Premise, premise
from advisor.knowledge import Sets
from advisor.shelf import places
from advisor.specification import Demand

WAITS = "waits for answers"
WITHHELD = "withheld: see the referral"


@dataclass(frozen=True, slots=True)
class Reason:
    """A demand that made a conclusion. `decides`: without it alone another class would be recommended.

    `against` are the classes that it bars or sets back.
    """

    demand: str
    level: int
    rule: RuleReason
    decides: bool
    against: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Why:
    """The tree behind one row: the conclusion on top."""

    row: str
    title: str
    conclusion: str
    reasons: tuple[Reason, ...]
    premises: tuple[Premise, ...]
    short: tuple[str, ...]
    waits: tuple[str, ...]
    notes: tuple[str, ...]


def why(advice: Advice, row_id: str, rules: Rules | None = None) -> Why:
    """Why this row of the docket, or this quantity, is what it is.

    Raises:
        NotHere: where there is no such row.
    """
    rows = {row.id: row for row in advice.knowledge.docket}
    if row_id not in rows:
        raise NotHere(f"'{row_id}' is no row; the rows are {', '.join(rows)}.")
    if advice.withheld:
        return Why(row_id, rows[row_id].title, WITHHELD, (), (), (), (), ())
    line = advice.line(row_id)
    field, said = field_of(advice, line), rules if rules is not None else Rules(advice)
    reasons, short = _weighed(advice, field, said) if field is not None else (_plain(advice, line, said), [])
    return Why(
        row_id,
        line.title,
        say_line(advice, line),
        tuple(reasons),
        tuple(premise(advice, name) for name in line.facts if not line.skipped),
        tuple(short),
        tuple(title_of(each, advice.knowledge) for each in line.waits),
        _notes(advice, line, said),
    )


def say_line(advice: Advice, line: Line) -> str:
    """What a row shows, in words."""
    knowledge = advice.knowledge
    row = next(each for each in knowledge.docket if each.id == line.row)
    if line.skipped:
        return "no figure for this point" if row.section != "docket" else "does not apply"
    if row.recommends:
        domain = knowledge.properties[row.recommends].domain
        every = len(domain.choices) > 1 and not domain.ordered and set(line.values) >= set(domain.choices)
        said = "any" if every else " or ".join(dict.fromkeys(say_value(domain, each) for each in line.values))
        if line.differs:
            return f"{said}, {everywhere(advice)}" if said else differing(advice)
        return said or (WAITS if line.waits else "nothing is left")
    if line.facts:
        said = _say_facts(advice, line.facts)
        return f"{said}, where a figure is given" if line.differs else said
    musts = [demand for demand in line.demands if demand.must] or list(line.demands)
    counts = Counter(demand.property for demand in musts)
    said = "; ".join(dict.fromkeys(_short_demand(demand, advice, counts[demand.property]) for demand in musts))
    if said and line.differs:
        said += " (the strictest of all variants)" if _variants(advice) else " (the strictest along the range)"
    return said or (WAITS if line.waits else "nothing asked")


def everywhere(advice: Advice) -> str:
    """Where something holds that all runs of a case share."""
    return "in every variant" if _variants(advice) else "over the whole range"


def differing(advice: Advice) -> str:
    """That something is not the same in all runs of a case."""
    return "differs between the variants" if _variants(advice) else "differs along the range"


def _variants(advice: Advice) -> bool:
    """Whether something else than a range was left open."""
    if advice.span is None:
        return True
    return any(set(branch.settings) - {advice.span.fact} for branch in advice.branches)


def _short_demand(demand: Demand, advice: Advice, alike: int) -> str:
    """A demand in a row; where it is one of several on the property, with the classes it is for."""
    said = say_test(demand.test, advice.knowledge) + ("" if demand.must else " (wished)")
    parts = demand.for_.parts if isinstance(demand.for_, Every) else (demand.for_,)
    plain = ({"form"}, {demand.property})
    narrower = Every(tuple(part for part in parts if set(names(part)) not in plain))
    return f"{said}, where {say_condition(narrower, advice.knowledge)}" if alike > 1 and narrower.parts else said


def _say_facts(advice: Advice, names_: tuple[str, ...]) -> str:
    said = [say_known(advice, name) for name in names_]
    if len(set(said)) == 1:
        return said[0]
    low_high = len(said) == 2 and names_[0].endswith("_lo")
    if low_high and any(name in advice.spread for name in names_):
        return f"{said[0]} at least, {said[1]} at most"
    if low_high:
        return f"{said[0].split(' ')[0]} to {said[1]}"
    rest = [f"{title_of(name, advice.knowledge)} {each}" for name, each in zip(names_[1:], said[1:], strict=True)]
    return ", ".join([said[0], *rest])


def _weighed(advice: Advice, field: Field, rules: Rules) -> tuple[list[Reason], list[str]]:
    """The demands that tell candidates apart, decisive ones first; and those that every candidate misses alike."""
    deciding = field.decisive()
    best = field.best()
    reasons, short = [], []
    for number, demand in enumerate(field.judgement.demands):
        missed = {place: misses[number] for place, misses in field.misses.items() if number in misses}
        about = demand.property == field.row.recommends
        alike = len(missed) == len(field.misses) and len(set(missed.values())) == 1 and not about
        if not demand.must and not alike and any(place in missed for place in best):
            short.append(_short(advice, field, number, best))
        against = _against(field, number, best)
        if about or (not alike and (number in deciding or against)):
            reason = rules.reason(demand.rule)
            decides = number in deciding
            reasons.append(Reason(say_demand(demand, advice.knowledge), demand.level, reason, decides, against))
    reasons.sort(key=lambda each: (not each.decides, each.level, -len(each.against)))
    return reasons, list(dict.fromkeys(short))


def _short(advice: Advice, field: Field, number: int, best: list[int]) -> str:
    demand = field.judgement.demands[number]
    steps = sorted({field.misses[place].get(number, 0) for place in best})
    count = str(steps[0]) if len(steps) == 1 else f"{steps[0]} to {steps[-1]}"
    return f"{count} step{'s' * (count != '1')} short of: {say_demand(demand, advice.knowledge)} ({demand.rule})"


def _against(field: Field, number: int, best: list[int]) -> tuple[str, ...]:
    """The classes of which every candidate is barred by the demand, or misses it by more than the recommended ones."""
    must = field.judgement.demands[number].must
    allowed = 0 if must else min((field.misses[place].get(number, 0) for place in best), default=0)
    least: dict[str, int] = {}
    for place in places(field.pool):
        label, steps = field.label(place), field.misses[place].get(number, 0)
        least[label] = min(least.get(label, steps), steps)
    return tuple(label for label, steps in least.items() if steps > allowed)


def _plain(advice: Advice, line: Line, rules: Rules) -> list[Reason]:
    """The demands of a row that recommends nothing, and the rules that set what it shows."""
    found = [
        Reason(say_demand(demand, advice.knowledge), demand.level, rules.reason(demand.rule), demand.must, ())
        for demand in line.demands
    ]
    row = next(each for each in advice.knowledge.docket if each.id == line.row)
    for name in (row.recommends, *row.facts):
        found += _setters(advice, name, line, rules)
    return sorted(found, key=lambda each: (not each.decides, each.level))


def _setters(advice: Advice, name: str, line: Line, rules: Rules) -> Iterator[Reason]:
    """The fired rules that set a fact or a property of some lubricants, to what the row shows or to what gave way."""
    shown = {advice.knowledge.domain(name).code(value) for value in line.values} if name else set()
    fact = advice.facts.get(name)
    counting = fact.note.split(", ") if fact is not None and fact.origin is Origin.CONCLUDED else None
    for _, instance, outcome in rules.seen.values():
        fired = outcome is True and instance.binds
        for each in instance.then if fired else ():
            if isinstance(each, Sets) and each.name == name and (not shown or each.value in shown):
                gives_way = counting is not None and instance.id not in counting
                said = _say_set(advice, each) + (
                    f", which gives way: the {_combined(advice, name)} counts" if gives_way else ""
                )
                yield Reason(said, 0, rules.reason(instance.id), decides=not gives_way, against=())


def _combined(advice: Advice, name: str) -> str:
    declared = advice.knowledge.facts[name].concluded
    return declared.combine if declared is not None else ""


def _say_set(advice: Advice, sets: Sets) -> str:
    knowledge, value = advice.knowledge, sets.value
    domain = knowledge.domain(sets.name)
    said = title_of(value.name, knowledge) if isinstance(value, FactRef) else say_value(domain, value)
    for_ = "" if sets.for_ == Every() else f", where {say_condition(sets.for_, knowledge)}"
    return f"{title_of(sets.name, knowledge)}: {said}{for_}"


def _notes(advice: Advice, line: Line, rules: Rules) -> tuple[str, ...]:
    """Why a row is empty, where it is; and for which run its reasons are told, where there are several."""
    row = next(each for each in advice.knowledge.docket if each.id == line.row)
    if not line.skipped:
        return (f"told for {advice.told_for}",) if any(name in advice.spread for name in line.facts) else ()
    if row.section != "docket":
        return tuple(_guard(advice, row.shown_if, rules))
    return (f"only for {advice.knowledge.properties[row.recommends].of}",)


def _guard(advice: Advice, shown_if: Condition, rules: Rules) -> Iterator[str]:
    """What a figure's guard saw: the rules that would have opened it, and why they did not."""
    wanted = set(names(shown_if))
    for _, instance, outcome in rules.seen.values():
        if outcome is not True and any(isinstance(each, Sets) and each.name in wanted for each in instance.then):
            verdict = why_not_rule(advice, instance.id)
            yield f"{instance.rule.title} ({instance.id}) did not hold: {'; '.join(verdict.saw or verdict.waits)}"
    if holds(shown_if, advice.record) is False:
        yield f"shown where {say_condition(shown_if, advice.knowledge)}"
