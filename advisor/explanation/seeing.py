"""What the rules of a step saw, and what an advice that is withheld keeps to itself."""

from collections.abc import Iterator

from advisor.advice import Advice
from advisor.conditions import VOID, Coded, Record
from advisor.conditions.terms import Void
from advisor.explanation.words import domain_of
from advisor.knowledge import Instance
from advisor.shelf import Verdict
from advisor.shelf.judging import Judgement

CLOSING = "closing"
Steps = tuple[int, int, int, int]


def hides(advice: Advice, name: str) -> bool:
    """Whether a withheld advice keeps the value of this fact to itself: products and grades."""
    if not advice.withheld:
        return False
    domain = domain_of(name, advice.knowledge)
    return domain.kind == "item" or domain.unit == "ISO VG"


def rules_seen(advice: Advice) -> Iterator[tuple[str, Instance, bool | None]]:
    """Every rule instance of every visited step with its outcome, in order."""
    for step in advice.trace:
        for instance, outcome in zip(step.instances, step.outcomes, strict=True):
            yield step.step, instance, outcome


def instances_of(advice: Advice) -> dict[str, tuple[str, Instance, bool | None]]:
    """Step, instance and outcome by the instance's id."""
    return {instance.id: (step, instance, outcome) for step, instance, outcome in rules_seen(advice)}


def record_at(advice: Advice, step: str) -> Record:
    """What the rules of a step saw; the closing step also sees the result."""
    return closing_record(advice) if step == CLOSING else advice.record


def closing_record(advice: Advice) -> dict[str, Coded | Void]:
    """The facts of the case with the results that the closing step looks at."""
    record: dict[str, Coded | Void] = dict(advice.record)
    kappa = recommended_kappa(advice)
    record["recommended_kappa"] = VOID if kappa is None else kappa
    forms = [line.values for line in advice.docket if line.row == "form"]
    record["recommended_form"] = str(forms[0][0]) if forms and len(forms[0]) == 1 else VOID
    record["shelf_fits"] = float(advice.fits)
    verdict = _maker_verdict(advice)
    if verdict:
        record["maker_verdict"] = verdict
    return record


def _maker_verdict(advice: Advice) -> str:
    fact = advice.facts.get("maker_item")
    if fact is not None and fact.value is None:
        return ""
    named = str(fact.value) if fact is not None else "none_named"
    ranked = next((each for each in advice.shelf if each.item == named), None)
    if ranked is None:
        return "none_named" if named == "none_named" else "not_on_the_shelf"
    return Verdict.FITS.value if ranked.verdict is Verdict.STILL_IN else ranked.verdict.value


def recommended_kappa(advice: Advice) -> float | None:
    """The least kappa of the recommended oils; the product in use counts where it is as good as the best."""
    steps: dict[str, Steps] = dict(advice.oil_ranks)
    own = _own(advice)
    if own is not None:
        steps[""] = own[1]
    best = min(steps.values(), default=None)
    found = [
        _kappa(advice.oils, advice.oils.catalogue.place[code])
        for code, each in steps.items()
        if code and advice.oils is not None and each == best
    ]
    if own is not None and own[1] == best:
        found.append(_kappa(advice.choices, own[0]))
    return min((each for each in found if each is not None), default=None)


def _own(advice: Advice) -> tuple[int, Steps] | None:
    """The place of the product in use among the choices, and its steps short, where no must rules it out."""
    fact, choices = advice.facts.get("incumbent"), advice.choices
    place = choices.catalogue.place.get(str(fact.value)) if choices is not None and fact is not None else None
    if place is None or choices is None or not choices.passing >> place & 1:
        return None
    return place, choices.steps(1 << place)[place]


def _kappa(judgement: Judgement | None, place: int) -> float | None:
    column = judgement.columns.get("kappa") if judgement is not None else None
    value = column.values[place] if column is not None else None
    return value if isinstance(value, float) else None


def recommended_oils(advice: Advice) -> list[int]:
    """The places of the usual oils that are fewest steps short."""
    if advice.oils is None or not advice.oil_ranks:
        return []
    best = min(advice.oil_ranks.values())
    return sorted(advice.oils.catalogue.place[code] for code, each in advice.oil_ranks.items() if each == best)
