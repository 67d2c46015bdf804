"""What the rules of a step saw, what is known of a fact, and what an advice that is withheld keeps to itself."""

from collections.abc import Iterator

from advisor.advice import Advice, Line
from advisor.conditions import Record, Value
from advisor.explanation.words import NO_VALUE, domain_of, say_fact, say_value
from advisor.knowledge import Instance

CLOSING = "closing"
Steps = tuple[int, int, int, int]


def hides(advice: Advice, name: str) -> bool:
    """Whether a withheld advice keeps the value of this fact to itself: products and grades."""
    if not advice.withheld:
        return False
    domain = domain_of(name, advice.knowledge)
    return domain.kind == "item" or domain.unit == "ISO VG"


def say_known(advice: Advice, name: str) -> str:
    """The value of a fact; where it differs between the runs of a case, the lowest to the highest, or each."""
    spread = advice.spread.get(name)
    if spread is None:
        return say_fact(advice.facts.get(name), advice.knowledge)
    domain = domain_of(name, advice.knowledge)
    said = [say_value(domain, each) for each in spread.values]
    joined = " to " if all(isinstance(each, float | int) for each in spread.values) else " or "
    return joined.join(said) + (f", or {NO_VALUE}" if spread.lacking else "")


def deciding_run(advice: Advice, place: int) -> Advice:
    """The advice that gave a product its verdict; where nothing was left open the advice itself."""
    ranked = next((each for each in advice.shelf if each.place == place), None)
    return next((run for run in advice.single if ranked in run.shelf), advice)


def run_against(advice: Advice, line: Line, value: Value) -> Advice:
    """The first run that bars a class, else the first that does not recommend it, else the advice itself."""
    barring = (run for run in advice.single if value in (run.line(line.row).barred or {}))
    passing_over = (run for run in advice.single if value not in run.line(line.row).values)
    return next(barring, next(passing_over, advice.single[0]))


def run_assuming(advice: Advice, name: str) -> Advice:
    """The first run in which an assumption stands for a fact."""
    return next((run for run in advice.single if name in run.assumptions), advice)


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
