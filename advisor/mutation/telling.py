"""What an advice tells, part by part, so that two advices can be held against each other in a scenario's words."""

from collections.abc import Iterator

from advisor.advice import Advice
from advisor.case import Origin
from advisor.conditions import Value
from advisor.explanation.falling import falling
from advisor.explanation.seeing import deciding_run
from advisor.explanation.written_demands import write_demand
from advisor.shelf import Judgement, Ranked, Verdict

Part = tuple[str, ...]
"""A part of an expectation: its key, and the names below it."""


def told(advice: Advice, *, demands: bool = True, reasons: bool = True) -> dict[Part, str]:
    """Everything that a scenario can expect of the advice, and what it would have to say.

    Without `reasons` the rules are left out that bar a value or rule out a product.
    """
    parts = dict[Part, str]()
    parts["state",] = str(advice.state)
    parts["withheld",] = "yes" if advice.withheld else "no"
    for caution in advice.cautions:
        parts["cautions", caution.caution] = caution.caution
    for referral in advice.referrals:
        parts["referrals", referral.to] = referral.to
    for question in advice.open_questions:
        parts["open_questions", question.fact] = question.fact
    for conflict in advice.conflicts:
        parts["conflicts", *conflict.rules] = _listed(tuple(conflict.rules))
    parts |= _facts(advice)
    if not advice.withheld:
        parts |= {("codes", "din"): _listed(advice.codes.din), ("codes", "iso"): _listed(advice.codes.iso)}
        parts |= _docket(advice, reasons=reasons)
        parts |= dict(_products(advice, reasons=reasons))
        parts |= _demanded(advice) if demands else {}
    return parts


def _facts(advice: Advice) -> dict[Part, str]:
    """The facts that rules conclude or formulas give, and which figures are shown."""
    found: dict[Part, str] = {}
    for name, fact in advice.facts.items():
        if name in advice.knowledge.facts and advice.knowledge.facts[name].concluded is None:
            continue
        if fact.value is not None or fact.origin is Origin.VOID:
            found["facts", name] = written(fact.value)
    for line in advice.quantities:
        found["shown", line.row] = "no" if line.skipped else "yes"
    return found


def _docket(advice: Advice, *, reasons: bool) -> dict[Part, str]:
    found: dict[Part, str] = {}
    rows = {row.id: row.recommends for row in advice.knowledge.docket}
    for line in advice.docket:
        if name := rows[line.row]:
            found["recommended", name] = _listed(line.values)
            for value, rules in (line.barred or {}).items() if reasons else ():
                found |= {("barred", name, written(value), rule): rule.partition("/")[0] for rule in rules}
    return found


def _products(advice: Advice, *, reasons: bool) -> Iterator[tuple[Part, str]]:
    for ranked in advice.shelf:
        judgement = deciding_run(advice, ranked.place).judgement if reasons else None
        rules = _deciding(judgement, ranked) if judgement else ()
        yield ("products", ranked.item), ranked.verdict.value
        for rule in rules:
            yield ("products", ranked.item, rule), f"{ranked.verdict.value} by {rule}"


def _deciding(judgement: Judgement, ranked: Ranked) -> tuple[str, ...]:
    """The written rules whose musts a product misses."""
    if ranked.verdict not in {Verdict.FALLS_SHORT, Verdict.UNPROVEN}:
        return ()
    unproven = ranked.verdict is Verdict.UNPROVEN
    missed = [each for each in judgement.shortfalls(ranked.place) if each.demand.must]
    chosen = [each for each in missed if (each.seen is None or bool(each.demand.void)) is unproven]
    return tuple(dict.fromkeys(each.demand.rule.partition("/")[0] for each in chosen))


def _demanded(advice: Advice) -> dict[Part, str]:
    """What each rule demands of everything that is recommended."""
    found: dict[str, set[str]] = {}
    for name in dict.fromkeys(each.property for each in advice.specification.demands):
        kept = [
            {(each.rule.partition("/")[0], each.test, each.level) for each in demands}
            for demands in falling(advice, name)
        ]
        for rule, test, level in set.intersection(*kept):
            found.setdefault(rule, set()).add(write_demand(name, test, level, advice.knowledge))
    return {("demanded_by", rule): f"[{', '.join(sorted(texts))}]" for rule, texts in found.items()}


def _listed(values: tuple[Value, ...]) -> str:
    return f"[{', '.join(map(written, values))}]"


def written(value: Value | None) -> str:
    """A value as a scenario writes it."""
    if value is None:
        return "void"
    if isinstance(value, float):
        return f"{value:.12g}"
    return _listed(value) if isinstance(value, tuple) else value
