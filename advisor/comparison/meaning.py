"""How much a change means: nothing, other reasons, another order, another recommendation, or safety."""

from collections.abc import Mapping
from enum import StrEnum

from advisor.advice import Advice
from advisor.explanation.seeing import rules_seen
from advisor.explanation.words import say_demand
from advisor.knowledge import Citation
from advisor.mutation import told


class Meaning(StrEnum):
    """What a difference between two advices means, worst first."""

    SAFETY = "safety"
    RECOMMENDATION = "recommendation"
    ORDER = "order only"
    REASONS = "reasons only"
    SAME = "same"


Sense = Mapping[Meaning, Mapping[tuple[str, ...], str]]
"""What an advice says, part by part, under the meaning that a change of it would have."""

_SAFETY = {"state", "withheld", "cautions", "referrals", "conflicts", "must"}


def sense_of(advice: Advice) -> Sense:
    """Everything that an advice says, by what a change of it means."""
    parts: dict[Meaning, dict[tuple[str, ...], str]] = {each: {} for each in Meaning}
    shown = {name for line in (*advice.docket, *advice.quantities) for name in line.facts}
    for part, text in told(advice, demands=False).items():
        if part[0] == "facts" and part[1] not in shown:
            meaning = Meaning.REASONS
        elif part[0] in _SAFETY:
            meaning = Meaning.SAFETY
        elif part[0] == "barred" or (part[0] == "products" and len(part) > 2):
            meaning = Meaning.REASONS
        else:
            meaning = Meaning.RECOMMENDATION
        parts[meaning][part] = text
    for demand in advice.specification.demands:
        meaning = Meaning.SAFETY if demand.must else Meaning.RECOMMENDATION
        said = say_demand(demand, advice.knowledge)
        parts[meaning]["must" if demand.must else "should", demand.property, said] = said
    parts[Meaning.ORDER] |= _order(advice)
    parts[Meaning.REASONS] |= _reasons(advice)
    return parts


def _order(advice: Advice) -> dict[tuple[str, ...], str]:
    order: dict[tuple[str, ...], str] = {("order",): ", ".join(each.item for each in advice.shelf)}
    order |= {("steps", each.item): str(each.steps) for each in advice.shelf}
    for line in advice.docket:
        order["order", line.row] = ", ".join(map(str, line.values))
    return order


def _reasons(advice: Advice) -> dict[tuple[str, ...], str]:
    """The rules that fired, with their words and sources; who demanded what; whom a caution concerns."""
    found: dict[tuple[str, ...], str] = {
        ("fired", rule.id): f"{rule.rule.title} {rule.rule.because} {rule.rule.limits} {_cited(rule.rule.source)}"
        for _, rule, outcome in rules_seen(advice)
        if outcome and rule.binds
    }
    demands = advice.specification.demands
    found |= {("demanded", each.rule, each.property): say_demand(each, advice.knowledge) for each in demands}
    for caution in advice.cautions:
        found["cautioned", caution.caution] = f"{', '.join(caution.rules)}: {', '.join(caution.concerns)}"
        written = advice.knowledge.cautions[caution.caution]
        found["words", caution.caution] = f"{written.text} {_cited(written.source)}"
    return found


def _cited(source: tuple[Citation, ...]) -> str:
    return "; ".join(f"{each.id} {each.where} ({each.checked})" for each in source)


def worst(old: Sense, new: Sense) -> Meaning:
    """The worst that differs."""
    return next((each for each in Meaning if old[each] != new[each]), Meaning.SAME)


def differing(old: Sense, new: Sense, meaning: Meaning) -> dict[tuple[str, ...], tuple[str, str]]:
    """The parts of one meaning that differ: what was said, what is said now; empty where nothing is."""
    before, after = old[meaning], new[meaning]
    names = (*before, *(each for each in after if each not in before))
    return {name: (before.get(name, ""), after.get(name, "")) for name in names if before.get(name) != after.get(name)}
