"""Compare an advice with what a scenario expects of it, kind by kind."""

import math
from collections.abc import Iterable
from dataclasses import replace
from functools import singledispatch

from advisor.advice import Advice
from advisor.case import Origin
from advisor.explanation.seeing import deciding_run, rules_seen
from advisor.knowledge import Instance, Refers, Warns
from advisor.quantities import show
from advisor.replay import docket_compared, reasons
from advisor.replay.demanded import demanded
from advisor.replay.differing import Difference
from advisor.replay.expectations import (
    AsksAtLeast,
    AsksFor,
    Assumes,
    Bars,
    CautionIs,
    CodeServes,
    ConflictBetween,
    DemandedBy,
    Expectation,
    FactIs,
    FactWithin,
    FillIs,
    IntervalIs,
    KeepsFrom,
    LeavesOpen,
    ProductIs,
    Recommends,
    ReferralIs,
    RuleIs,
    StateIs,
    WithheldIs,
)
from advisor.shelf import Judgement, Ranked, Verdict
from advisor.specification import Conflict


def differences(advice: Advice, expectations: Iterable[Expectation]) -> tuple[Difference, ...]:
    """Every expectation that the advice does not meet, in the order written."""
    return tuple(found for each in expectations if (found := _difference(each, advice)) is not None)


_OF_EVERY_RUN = FactIs | FactWithin | Bars | AsksFor | AsksAtLeast | DemandedBy | IntervalIs | FillIs
"""What is expected of each run of a case that leaves something open: it cannot be put together."""


def _difference(expected: Expectation, advice: Advice) -> Difference | None:
    if not isinstance(expected, _OF_EVERY_RUN):
        return compare(expected, advice)
    for label, run in advice.runs:
        if (found := compare(expected, run)) is not None:
            return replace(found, because=(f"So it is for {label}.", *found.because))
    return None if advice.runs else compare(expected, advice)


@singledispatch
def compare(expected: object, _advice: Advice) -> Difference | None:
    """The difference from one expectation, if there is any."""
    raise TypeError(f"{expected!r} is no expectation")


compare.register(Recommends, docket_compared.recommends)
compare.register(KeepsFrom, docket_compared.keeps_from)
compare.register(Bars, docket_compared.bars)
compare.register(AsksFor, docket_compared.asks_for)
compare.register(AsksAtLeast, docket_compared.asks_at_least)
compare.register(DemandedBy, demanded)
compare.register(CodeServes, docket_compared.code_serves)
compare.register(IntervalIs, docket_compared.interval)
compare.register(FillIs, docket_compared.fill)


@compare.register
def _state(expected: StateIs, advice: Advice) -> Difference | None:
    if advice.state is expected.state:
        return None
    because = [f"{each.rule} refers to {each.to}." for each in advice.referrals]
    because += [_conflict_words(each) for each in advice.conflicts]
    because += [
        f"'{each.fact}' is not answered, and this waits for it: {', '.join(each.waiting[: reasons.MOST])}. "
        "Answer it in the case; a question that old cases may leave out has 'optional' and 'unasked'."
        for each in advice.open_questions
        if each.decides == "lubricant"
    ]
    because += [f"'{name}' is assumed, which keeps the advice open." for name in advice.keeping_open]
    return Difference("state", "", expected.state, advice.state, tuple(because), expected.mark)


def _conflict_words(conflict: Conflict) -> str:
    return f"The rules {', '.join(conflict.rules)} cannot be met together ({conflict.about.replace('_', ' ')})."


@compare.register
def _withheld(expected: WithheldIs, advice: Advice) -> Difference | None:
    if advice.withheld is expected.withheld:
        return None
    because = reasons.of_rules(
        advice, lambda rule: any(isinstance(each, Refers) and each.withhold for each in rule.then)
    )
    return Difference("withheld", "", _yes(expected.withheld), _yes(advice.withheld), because, expected.mark)


def _yes(outcome: bool) -> str:
    return "yes" if outcome else "no"


@compare.register
def _fact_is(expected: FactIs, advice: Advice) -> Difference | None:
    fact, name = advice.facts.get(expected.name), expected.name
    if expected.value is None:
        same = fact is not None and fact.origin is Origin.VOID
    elif isinstance(expected.value, float):
        same = (
            fact is not None
            and isinstance(fact.value, float)
            and math.isclose(fact.value, expected.value, rel_tol=1e-9, abs_tol=1e-12)
        )
    else:
        same = fact is not None and fact.value == expected.value
    wanted = "void" if expected.value is None else reasons.written(advice.knowledge, name, expected.value)
    return None if same else _fact_differs(name, wanted, advice, expected)


@compare.register
def _fact_within(expected: FactWithin, advice: Advice) -> Difference | None:
    fact = advice.facts.get(expected.name)
    value = fact.value if fact is not None else None
    if isinstance(value, float) and expected.low <= value <= expected.high:
        return None
    unit = advice.knowledge.domain(expected.name).unit
    return _fact_differs(expected.name, f"{show(expected.low, unit)} to {show(expected.high, unit)}", advice, expected)


def _fact_differs(name: str, wanted: str, advice: Advice, expected: FactIs | FactWithin) -> Difference:
    got = reasons.written_fact(advice, advice.facts.get(name))
    return Difference("facts", name, wanted, got, reasons.of_fact(advice, name), expected.mark)


@compare.register
def _caution(expected: CautionIs, advice: Advice) -> Difference | None:
    name, given = expected.caution, {each.caution for each in advice.cautions}
    if (name in given) is expected.given:
        return None

    def concerns(rule: Instance) -> bool:
        return any(isinstance(each, Warns) and each.caution == name for each in rule.then)

    because = list(reasons.of_rules(advice, concerns))
    if expected.given and any(outcome and concerns(rule) for _, rule, outcome in rules_seen(advice)):
        because.append("Nothing that is recommended or still in meets the 'for' of the caution.")
    return Difference("cautions", name, *_given(expected.given), tuple(because), expected.mark)


def _given(given: bool) -> tuple[str, str]:
    return ("given", "not given") if given else ("not given", "given")


@compare.register
def _referral(expected: ReferralIs, advice: Advice) -> Difference | None:
    made = {each.to for each in advice.referrals}
    if (expected.to in made) is expected.given:
        return None
    because = reasons.of_rules(
        advice, lambda rule: any(isinstance(each, Refers) and each.to == expected.to for each in rule.then)
    )
    return Difference("referrals", expected.to, *_given(expected.given), because, expected.mark)


@compare.register
def _product(expected: ProductIs, advice: Advice) -> Difference | None:
    wanted = f"{expected.verdict}{f' by {expected.rule}' if expected.rule else ''}"
    ranked = next((each for each in advice.shelf if each.item == expected.item), None)
    if ranked is None or advice.judgement is None:
        return Difference("products", expected.item, wanted, "no verdict", ("Products are withheld.",), expected.mark)
    advice = deciding_run(advice, ranked.place)
    assert advice.judgement is not None  # noqa: S101 - the product has a verdict
    rules = _deciding(advice.judgement, ranked)
    if ranked.verdict is expected.verdict and (not expected.rule or reasons.named(rules, expected.rule)):
        return None
    got = f"{ranked.verdict}{' by ' if rules else ''}{', '.join(rules)}"
    because = reasons.of_shortfalls(advice, advice.judgement, ranked.place)
    if expected.rule and not reasons.named(rules, expected.rule):
        because = (*reasons.of_rule(advice, expected.rule), *because)
    return Difference("products", expected.item, wanted, got, because, expected.mark)


def _deciding(judgement: Judgement, ranked: Ranked) -> list[str]:
    """The rules whose musts a product fails, or whose musts its sheet does not prove."""
    missed = [each for each in judgement.shortfalls(ranked.place) if each.demand.must]
    unproven = ranked.verdict is Verdict.UNPROVEN
    chosen = [each for each in missed if (each.seen is None or bool(each.demand.void)) is unproven]
    return list(dict.fromkeys(each.demand.rule for each in chosen))


@compare.register
def _open_question(expected: LeavesOpen, advice: Advice) -> Difference | None:
    if expected.fact in {each.fact for each in advice.open_questions}:
        return None
    return Difference(
        "open_questions",
        expected.fact,
        "open",
        _standing(advice, expected.fact),
        reasons.of_fact(advice, expected.fact),
        expected.mark,
    )


@compare.register
def _assumption(expected: Assumes, advice: Advice) -> Difference | None:
    if expected.fact in advice.assumptions:
        return None
    return Difference(
        "assumptions",
        expected.fact,
        "assumed",
        _standing(advice, expected.fact),
        reasons.of_fact(advice, expected.fact),
        expected.mark,
    )


def _standing(advice: Advice, name: str) -> str:
    fact = advice.facts.get(name)
    if fact is None or fact.value is None:
        return f"{reasons.written_fact(advice, fact)}, and nothing waits for it"
    return f"{fact.origin.value}: {reasons.written_fact(advice, fact)}"


@compare.register
def _conflict(expected: ConflictBetween, advice: Advice) -> Difference | None:
    if any(all(reasons.named(conflict.rules, rule) for rule in expected.rules) for conflict in advice.conflicts):
        return None
    got = "; ".join(" with ".join(conflict.rules) for conflict in advice.conflicts) or "no conflict"
    because = tuple(sentence for rule in expected.rules for sentence in reasons.of_rule(advice, rule))
    return Difference("conflicts", "", " with ".join(expected.rules), got, because, expected.mark)


@compare.register
def _rule(expected: RuleIs, advice: Advice) -> Difference | None:
    seen = (each for run in advice.single for each in rules_seen(run))
    fired = any(outcome and reasons.named((rule.id,), expected.rule) for _, rule, outcome in seen)
    if fired is expected.fires:
        return None
    wanted, got = ("fires", "silent") if expected.fires else ("silent", "fires")
    return Difference(
        "rules", expected.rule, wanted, got, reasons.of_rule(advice, expected.rule), expected.mark, read=False
    )
