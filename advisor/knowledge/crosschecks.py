"""Faults that show only when the parts of the knowledge are seen together."""

from collections.abc import Iterator
from collections.abc import Mapping as Map

from advisor.conditions import FactRef
from advisor.conditions.terms import names
from advisor.documents import Mark, Problem, Problems
from advisor.knowledge.model import Asks, Computation, Formed, Instance, Knowledge, LookedUp, Sets


def inputs_of(how: Formed | LookedUp) -> list[str]:
    """The names that a binding reads."""
    if isinstance(how, Formed):
        return [each for each in how.inputs.values() if isinstance(each, str)]
    return [name for _, name in how.by]


def ordered(computations: Map[str, Computation], problems: Problems) -> dict[str, Computation]:
    """The computations so that each comes after those it reads; a cycle is a problem."""
    done: dict[str, Computation] = {}

    def place(name: str, above: tuple[str, ...]) -> None:
        if name in done or name not in computations:
            return
        if name in above:
            mark = computations[name].mark
            circle = " -> ".join((*above[above.index(name) :], name))
            problems.add(
                Problem(
                    mark.file,
                    mark.line,
                    mark.column,
                    ("computations", f"'{name}'"),
                    f"these computations need one another: {circle}",
                    "break the circle",
                )
            )
            return
        for needed in inputs_of(computations[name].how):
            place(needed, (*above, name))
        done[name] = computations[name]

    for name in computations:
        place(name, ())
    return done


def cross_check(knowledge: Knowledge, problems: Problems) -> None:
    """Check that every name is known by the step that reads it, and that conclusions suit their step."""
    order = {step.id: place for place, step in enumerate(knowledge.steps)}
    ready = _ready(knowledge, order)
    for computation in knowledge.computations.values():
        for name in inputs_of(computation.how):
            if ready.get(name, -1) > order[computation.step]:
                _late(problems, computation.mark, ("computations", f"'{computation.fact}'"), name, computation.step)
    told: set[tuple[Mark, str]] = set()
    for step, instances in knowledge.instances.items():
        for instance in instances:
            for name in _named(instance):
                key = (instance.rule.mark, name)
                if ready.get(name, -1) > order[step] and key not in told:
                    told.add(key)
                    _late(problems, instance.rule.mark, ("rules", f"'{instance.rule.id}'"), name, step)
            if step == "closing" and any(isinstance(each, Asks | Sets) for each in instance.then):
                mark = instance.rule.mark
                problems.add(
                    Problem(
                        mark.file,
                        mark.line,
                        mark.column,
                        ("rules", f"'{instance.rule.id}'"),
                        "a closing rule may only caution and refer",
                        "move the rule to an earlier step",
                    )
                )
    _may_conflict(knowledge, problems)


def _ready(knowledge: Knowledge, order: Map[str, int]) -> dict[str, int]:
    """The first step whose rules see a computed or concluded fact."""
    ready = {name: order[each.step] for name, each in knowledge.computations.items()}
    for step, instances in knowledge.instances.items():
        for instance in instances:
            for conclusion in instance.then:
                if isinstance(conclusion, Sets) and conclusion.name in knowledge.facts:
                    ready[conclusion.name] = max(ready.get(conclusion.name, -1), order[step] + 1)
    return ready


def _named(instance: Instance) -> Iterator[str]:
    yield from names(instance.when)
    for conclusion in instance.then:
        if isinstance(conclusion, Sets) and isinstance(conclusion.value, FactRef):
            yield conclusion.value.name


def _late(problems: Problems, mark: Mark, trail: tuple[str, ...], name: str, step: str) -> None:
    problems.add(
        Problem(
            mark.file,
            mark.line,
            mark.column,
            trail,
            f"'{name}' is not known yet in step {step}",
            "concluded facts are visible from the next step on; move the rule, or what concludes the fact",
        )
    )


def _may_conflict(knowledge: Knowledge, problems: Problems) -> None:
    for rule in knowledge.rules.values():
        for other in rule.may_conflict:
            if other not in knowledge.rules:
                problems.add(
                    Problem(
                        rule.mark.file,
                        rule.mark.line,
                        rule.mark.column,
                        ("rules", f"'{rule.id}'", "may_conflict"),
                        f"'{other}' is no rule",
                        "name a rule by its id",
                    )
                )
