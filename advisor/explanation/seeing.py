"""What the rules of a step saw, and what an advice that is withheld keeps to itself."""

from collections.abc import Iterator

from advisor.advice import Advice
from advisor.conditions import Record
from advisor.explanation.words import domain_of
from advisor.knowledge import Instance

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
    return advice.closing if step == CLOSING else advice.record


def recommended_oils(advice: Advice) -> list[int]:
    """The places of the usual oils that are fewest steps short."""
    if advice.oils is None or not advice.oil_ranks:
        return []
    best = min(advice.oil_ranks.values())
    return sorted(advice.oils.catalogue.place[code] for code, each in advice.oil_ranks.items() if each == best)
