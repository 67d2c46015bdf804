"""How much a change means: nothing, other reasons, another order, another recommendation, or safety."""

from enum import StrEnum

from advisor.advice import Advice
from advisor.explanation.seeing import rules_seen
from advisor.explanation.words import say_demand
from advisor.knowledge import Citation, Knowledge
from advisor.mutation import told
from advisor.shelf import Verdict
from advisor.specification import Demand


class Meaning(StrEnum):
    """What a difference between two advices means, worst first."""

    SAFETY = "safety"
    RECOMMENDATION = "recommendation"
    ORDER = "order only"
    REASONS = "reasons only"
    SAME = "same"


Parts = dict[tuple[str, ...], str]
"""What is said, part by part."""

_SAFETY = {"state", "withheld", "cautions", "referrals", "conflicts", "must"}


class Words:
    """Demands in words, each put into words once: most of them come again in case after case.

    `apart` are the products that only one edition has: as long as they do not fit, they change no recommendation.
    """

    def __init__(self, knowledge: Knowledge, apart: frozenset[str] = frozenset()) -> None:
        self._knowledge = knowledge
        self.apart = apart
        self._said: dict[object, str] = {}

    def say(self, demand: Demand) -> str:
        """The demand in words, which are the same whatever rule makes it."""
        key = demand.test, demand.for_, demand.level, demand.void
        if key not in self._said:
            self._said[key] = say_demand(demand, self._knowledge)
        return self._said[key]


class Sense:
    """What an advice says, under the meaning that a change of it would have; put into words as it is asked for."""

    def __init__(self, advice: Advice, words: Words) -> None:
        self._advice, self._words = advice, words
        self._known: dict[Meaning, Parts] = {Meaning.SAME: {}}
        self._branches = [(each.label, Sense(each.advice, words)) for each in advice.branches]

    def __getitem__(self, meaning: Meaning) -> Parts:
        """Everything whose change has this meaning."""
        if meaning not in self._known:
            found = self._found(meaning)
            for each in found:
                for label, branch in self._branches:
                    found[each] |= {(*part, label): text for part, text in branch[each].items()}
            self._known |= found
        return self._known[meaning]

    def judged(self) -> tuple[tuple[str, str], ...]:
        """The products that only one edition has, with their verdicts."""
        apart = self._words.apart
        return (
            tuple((each.item, each.verdict.value) for each in self._advice.shelf if each.item in apart) if apart else ()
        )

    def _found(self, meaning: Meaning) -> dict[Meaning, Parts]:
        if meaning is Meaning.ORDER:
            return {meaning: _order(self._advice, self._words.apart)}
        if meaning is Meaning.REASONS:
            return {meaning: {**_told(self._advice, self._words.apart, reasons=True)[meaning], **self._reasons()}}
        told_of = _told(self._advice, self._words.apart, reasons=False)
        both = (Meaning.SAFETY, Meaning.RECOMMENDATION)
        return {each: told_of[each] | self._demands(must=each is Meaning.SAFETY) for each in both}

    def _demands(self, *, must: bool) -> Parts:
        verb = "must" if must else "should"
        demands = (each for each in self._advice.specification.demands if each.must is must)
        said = ((each.property, self._words.say(each)) for each in demands)
        return {(verb, name, text): text for name, text in said}

    def _reasons(self) -> Parts:
        """The rules that fired, with their words and sources; who demanded what; whom a caution concerns."""
        advice = self._advice
        found: Parts = {
            ("fired", rule.id): f"{rule.rule.title} {rule.rule.because} {rule.rule.limits} {_cited(rule.rule.source)}"
            for _, rule, outcome in rules_seen(advice)
            if outcome and rule.binds
        }
        demands = advice.specification.demands
        found |= {("demanded", each.rule, each.property): self._words.say(each) for each in demands}
        for caution in advice.cautions:
            found["cautioned", caution.caution] = f"{', '.join(caution.rules)}: {', '.join(caution.concerns)}"
            written = advice.knowledge.cautions[caution.caution]
            found["words", caution.caution] = f"{written.text} {_cited(written.source)}"
        return found


def _told(advice: Advice, apart: frozenset[str], *, reasons: bool) -> dict[Meaning, Parts]:
    """What a scenario could expect of the advice, by what a change of it means; the reasons only where asked for."""
    parts: dict[Meaning, Parts] = {each: {} for each in Meaning}
    shown = {name for line in (*advice.docket, *advice.quantities) for name in line.facts}
    for part, text in told(advice, demands=False, reasons=reasons).items():
        if part[0] == "products" and part[1] in apart and text != Verdict.FITS.value:
            continue
        if part[0] == "facts" and part[1] not in shown:
            meaning = Meaning.REASONS
        elif part[0] in _SAFETY:
            meaning = Meaning.SAFETY
        elif part[0] == "barred" or (part[0] == "products" and len(part) > 2):
            meaning = Meaning.REASONS
        else:
            meaning = Meaning.RECOMMENDATION
        parts[meaning][part] = text
    return parts


def _order(advice: Advice, apart: frozenset[str]) -> Parts:
    shelf = [each for each in advice.shelf if each.item not in apart]
    order: Parts = {("order",): ", ".join(each.item for each in shelf)}
    order |= {("steps", each.item): str(each.steps) for each in shelf}
    for line in advice.docket:
        order["order", line.row] = ", ".join(map(str, line.values))
    return order


def _cited(source: tuple[Citation, ...]) -> str:
    return "; ".join(f"{each.id} {each.where} ({each.checked})" for each in source)


def worst(old: Sense, new: Sense) -> Meaning:
    """The worst that differs."""
    return next((each for each in Meaning if old[each] != new[each]), Meaning.SAME)


def differing(old: Sense, new: Sense, meaning: Meaning) -> dict[tuple[str, ...], tuple[str, str]]:
    """The parts of one meaning that differ: what was said, what is said now; empty where nothing is.

    A change in safety is told with what it changes in the recommendation.
    """
    told = (meaning, Meaning.RECOMMENDATION) if meaning is Meaning.SAFETY else (meaning,)
    before = {part: text for each in told for part, text in old[each].items()}
    after = {part: text for each in told for part, text in new[each].items()}
    names = (*before, *(each for each in after if each not in before))
    return {name: (before.get(name, ""), after.get(name, "")) for name in names if before.get(name) != after.get(name)}
