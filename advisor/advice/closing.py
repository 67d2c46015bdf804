"""What can be said only once all is judged: cautions with what they concern, musts met with nothing to spare."""

from collections.abc import Set as AbstractSet

from advisor.advice.model import AtLimit, CautionGiven
from advisor.advice.recommending import Recommendation
from advisor.advice.running import RESULT_OF, Run
from advisor.conditions import ALWAYS, VOID, Bound, Coded, Condition, failures
from advisor.conditions.terms import Void
from advisor.knowledge import Asks, Instance
from advisor.shelf import Judgement, at_limit, judge, places
from advisor.specification import MUST, mentions, with_limits


def closing_record(run: Run, found: Recommendation, judgement: Judgement) -> dict[str, Coded | Void]:
    """What the closing step sees: the facts, and named results."""
    record: dict[str, Coded | Void] = dict(run.facts.record)
    record["recommended_kappa"] = VOID if found.kappa is None else found.kappa
    record["recommended_form"] = found.form or VOID
    record["shelf_fits"] = float(judgement.passing != 0)
    for result, fact in RESULT_OF.items():
        if fact not in run.facts.basis and fact in run.facts.facts:
            record[result] = _verdict_on(str(run.facts.facts[fact].value), judgement)
    return record


def _verdict_on(item: str, judgement: Judgement) -> str:
    """What became of a named product: that of the machine maker, or the one in use."""
    place = judgement.catalogue.place.get(item)
    if place is None:
        return "none_named" if item in {"none_named", "none"} else "not_on_the_shelf"
    return judgement.verdict(place).value


def cautions(run: Run, recommendation: Recommendation | None, judgement: Judgement | None) -> tuple[CautionGiven, ...]:
    """The cautions drawn; one with a `for` is given where a recommended class or a product meets it."""
    rules: dict[str, list[str]] = {}
    concerned: dict[str, list[str]] = {}
    general: set[str] = set()
    for instance, each in run.drawn.warns:
        if each.for_ == ALWAYS:
            general.add(each.caution)
        else:
            for_, waits, void = with_limits(each.for_, run.facts.record)
            if waits or void or not (concerns := _concerned(for_, run, recommendation, judgement)):
                continue
            concerned.setdefault(each.caution, []).extend(concerns)
        rules.setdefault(each.caution, []).append(instance.id)
    return tuple(
        CautionGiven(
            name,
            tuple(dict.fromkeys(rules[name])),
            () if name in general else tuple(dict.fromkeys(concerned[name])),
        )
        for name in run.knowledge.cautions
        if name in rules
    )


def _concerned(
    for_: Condition, run: Run, recommendation: Recommendation | None, judgement: Judgement | None
) -> list[str]:
    """The recommended classes, and the products with no must against them, that meet the caution's `for`."""
    if recommendation is None or judgement is None:
        return []
    found: list[str] = []
    told_by = mentions(for_)
    winners = [place for places_ in recommendation.winners.values() for place in places_]
    for one, chosen in ((recommendation.oils, recommendation.oil_winners), (recommendation.choices, winners)):
        if one is not None:
            meeting = _meeting(for_, told_by, run, one, sum(1 << place for place in set(chosen)))
            found += [one.catalogue.items[place].title for place in chosen if meeting >> place & 1]
    meeting = _meeting(for_, told_by, run, judgement, judgement.passing)
    return found + [judgement.catalogue.items[place].code for place in places(meeting)]


def _meeting(for_: Condition, told_by: AbstractSet[str], run: Run, judgement: Judgement, among: int) -> int:
    """Those of these items that do not fail the condition and have at least one of the properties it names."""
    if not among:
        return 0
    catalogue = judgement.catalogue
    columns = catalogue.with_more(judgement.columns, told_by, run.facts.facts, among)
    _, failing = judge(for_, columns, catalogue.everything)
    told = 0
    for name in told_by:
        column = columns.get(name)
        told |= column.present if column else 0
    return told & ~failing & among


def musts_at_limit(run: Run, recommendation: Recommendation, judgement: Judgement) -> tuple[AtLimit, ...]:
    """Musts met with nothing to spare: by products that no must rules out, and by recommended classes."""
    found: list[AtLimit] = []
    for place, demand in enumerate(judgement.demands):
        if demand.level == MUST and _is_measure(judgement, demand.property):
            items = places(at_limit(judgement, place, judgement.passing))
            found += [AtLimit("product", judgement.catalogue.items[each].code, demand.rule) for each in items]
    recommended = {value for line in recommendation.lines.values() for value in line.values}
    for step in run.trace:
        for instance, outcome in zip(step.instances, step.outcomes, strict=True):
            if (
                outcome is False
                and instance.row is not None
                and instance.row.id in recommended
                and instance.binds
                and _missed_by_nothing(run, instance)
            ):
                found.append(AtLimit("class", instance.row.id, instance.id))
    return tuple(dict.fromkeys(found))


def _is_measure(judgement: Judgement, name: str) -> bool:
    domain = judgement.domains[name]
    return domain.kind == "number" and not domain.places


def _missed_by_nothing(run: Run, instance: Instance) -> bool:
    if not any(isinstance(each, Asks) and each.level == 0 for each in instance.then):
        return False
    return any(
        isinstance(term, Bound)
        and term.sign in {">", "<"}
        and isinstance(term.limit, float)
        and run.facts.record.get(term.name) == term.limit
        for term in failures(instance.when, run.facts.record)
    )
