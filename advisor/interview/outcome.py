"""What came out in a few words: the count, the reason beside each product, outcome, cautions, referrals."""

from collections.abc import Mapping
from textwrap import shorten

from advisor.advice import Advice, State, said_at
from advisor.conditions import Coded, Member, Ticked
from advisor.explanation.changing_over import change_overs, differ_from_the_classes, say_change_over
from advisor.explanation.contrasts import VERDICTS
from advisor.explanation.seeing import deciding_run, instances_of
from advisor.explanation.words import fill_in, say_value
from advisor.interview.wording import asked, short_title
from advisor.knowledge import Instance
from advisor.quantities import show
from advisor.shelf import USABLE, Ranked, Shortfall, Verdict
from advisor.specification import STRONG

Known = Mapping[str, tuple[str, Instance, bool | None]]
"""Step, rule instance and outcome by the instance's id."""


def product_reasons(advice: Advice) -> list[str]:
    """For each product of the shelf what decides about it, in the order of the shelf."""
    known = instances_of(advice)
    needed = change_overs(advice) if differ_from_the_classes(advice) else {}
    reasons = [_product_reason(advice, each, known) for each in advice.shelf]
    return [
        f"{say_change_over(advice, needed[each.item])}; {reason}" if each.item in needed else reason
        for each, reason in zip(advice.shelf, reasons, strict=True)
    ]


def _product_reason(whole: Advice, ranked: Ranked, known: Known) -> str:
    """What decides about a product, with the numbers: the first thing it misses, else the film it makes."""
    advice = deciding_run(whole, ranked.place)
    if advice.judgement is None:
        return ""
    missed = advice.judgement.shortfalls(ranked.place)
    wanted = [each for each in missed if each.demand.must] or [each for each in missed if each.demand.level <= STRONG]
    if ranked.verdict is Verdict.FALLS_SHORT:
        wanted = [each for each in wanted if each.seen is not None] or wanted
    if wanted and ranked.verdict in {Verdict.FALLS_SHORT, Verdict.UNPROVEN, Verdict.SECOND_BEST}:
        return _missed(advice, wanted[0], known)
    return _film(whole, ranked) or ("nothing missed so far" if ranked.verdict is Verdict.STILL_IN else "misses nothing")


def _film(advice: Advice, ranked: Ranked) -> str:
    """The film that a product makes; where something was left open, the lowest to the highest."""
    columns = [
        run.judgement.columns["kappa"] for run in advice.single if run.judgement and "kappa" in run.judgement.columns
    ]
    seen = [value for column in columns if isinstance(value := column.values[ranked.place], float)]
    if not seen:
        return ""
    demands = (each for run in advice.single for each in run.specification.demands)
    musts = [each.test for each in demands if each.must and each.property == "kappa"]
    said = " to ".join(dict.fromkeys((show(min(seen), ""), show(max(seen), ""))))
    return f"kappa {said}" + (f", asked {asked(advice.knowledge.domain('kappa'), musts)}" if musts else "")


def _missed(advice: Advice, shortfall: Shortfall, known: Known) -> str:
    demand = shortfall.demand
    domain = advice.knowledge.properties[demand.property].domain
    title, limit = short_title(advice.knowledge, demand.property), asked(domain, [demand.test])
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
    alive = sum(each.verdict in USABLE for each in advice.shelf)
    still = any(each.verdict is Verdict.STILL_IN for each in advice.shelf)
    return f"{alive} of {len(advice.shelf)} {'still in' if still else 'fit'}"


def outcome_text(advice: Advice) -> str:
    """The outcome in two or three sentences."""
    if advice.withheld:
        return "The interview ends here: no lubricant is named, a person must decide. First read what to mind."
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
        found.append(
            f"Assumed, to be made sure of: {', '.join(advice.knowledge.title(name) for name in advice.keeping_open)}."
        )
    if advice.branches:
        found.append(
            f"Worked out for {len(advice.branches)} variants: {' | '.join(each.label for each in advice.branches)}."
        )
    elif advice.held_over:
        found.append(f"This holds for {advice.held_over} as one.")
    found += [f"Cannot be had together: {', '.join(conflict.rules)}." for conflict in advice.conflicts]
    return " ".join(found)


def variant_text(advice: Advice, number: int) -> str:
    """Which variant this is, in few words; 0 is what all of them share."""
    count = len(advice.branches)
    if not number:
        return f"what {count} variants share" if count else ""
    branch = advice.branches[number - 1]
    said = []
    for name, value in branch.settings.items():
        domain = advice.knowledge.domain(name)
        ends = branch.stretch if advice.span is not None and name == advice.span.fact else None
        if ends is not None:
            said.append(" to ".join(dict.fromkeys(said_at(each, domain) for each in ends)))
        else:
            said.append(shorten(say_value(domain, value), _SHORT, placeholder=" ..."))
    return f"variant {number} of {count}: {', '.join(said)}"


_SHORT = 26
_STATES = {
    State.SETTLED: "Settled.",
    State.OPEN: "Still open.",
    State.REFERRED: "A person must decide.",
    State.CONFLICT: "The demands cannot all be met.",
}


def cautions_told(advice: Advice) -> list[str]:
    """The cautions in full."""
    return [advice.knowledge.cautions[each.caution].text for each in advice.cautions]


def referrals_told(advice: Advice) -> list[tuple[str, str]]:
    """To whom the case goes, and what is to be told."""
    known = [advice.knowledge.referrals[name] for name in dict.fromkeys(each.to for each in advice.referrals)]
    return [(each.to, each.text) for each in known]


def care_text(advice: Advice) -> str:
    """How much there is to mind, in one line."""
    count = len(advice.cautions)
    return f"! {count} {'caution' if count == 1 else 'cautions'}, F3 lists them" if count else "nothing special so far"


def referrals_added(before: Advice | None, advice: Advice) -> list[str]:
    """The referrals that were not there before, in full sentences; all of them where nothing was before."""
    known = referrals_told(before) if before is not None else []
    return [f"This goes to {to}. {text}" for to, text in referrals_told(advice) if (to, text) not in known]
