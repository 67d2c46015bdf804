"""Faults that show only when the parts of the knowledge are seen together."""

from collections.abc import Iterator
from collections.abc import Mapping as Map
from dataclasses import dataclass
from itertools import pairwise

from advisor.conditions import FactRef
from advisor.conditions.terms import names
from advisor.documents import Mapping, Mark, Node, Scalar
from advisor.knowledge.model import Computation, Formed, Instance, Knowledge, LookedUp, Sets
from advisor.knowledge.reading import list_in
from advisor.knowledge.values import Scope


def inputs_of(how: Formed | LookedUp) -> list[str]:
    """The names that a binding reads."""
    if isinstance(how, Formed):
        return [each for each in how.inputs.values() if isinstance(each, str)]
    return [name for _, name in how.by]


def in_order(computations: Map[str, Computation], trees: Map[str, Mapping], scope: Scope) -> dict[str, Computation]:
    """The computations so that each comes after those it reads; a cycle is a problem."""
    done: dict[str, Computation] = {}

    def place(name: str, above: tuple[str, ...]) -> None:
        if name in done or name not in computations:
            return
        if name in above:
            _tell_circle((*above[above.index(name) :], name), trees, list(computations), scope)
            return
        for needed in inputs_of(computations[name].how):
            place(needed, (*above, name))
        done[name] = computations[name]

    for name in computations:
        place(name, ())
    return done


def _tell_circle(circle: tuple[str, ...], trees: Map[str, Mapping], order: list[str], scope: Scope) -> None:
    """Tell a circle where a computation reads one that stands below it."""
    reader, read = next(
        (pair for pair in pairwise(circle) if order.index(pair[0]) < order.index(pair[1])), (circle[0], circle[1])
    )
    message = f"these computations need one another: {' -> '.join(circle)}"
    scope.over({}, "computations", f"'{reader}'").problem(place_of(read, trees[reader]), message, "break the circle")


def place_of(name: str, node: Node) -> Mark:
    """Where a name stands in a part of the knowledge, as a key or as a value; else where the part begins."""
    return next(_places(name, node), node.mark)


def _places(name: str, node: Node) -> Iterator[Mark]:
    if isinstance(node, Scalar):
        if str(node) == name:
            yield node.mark
    elif isinstance(node, Mapping):
        for key, child in node.items():
            if key == name:
                yield node.key_marks[key]
            elif key not in {"id", "fact", "title", "because", "fires", "silent", "source"}:
                yield from _places(name, child)
    else:
        for child in node:
            yield from _places(name, child)


@dataclass(frozen=True, slots=True)
class CrossChecks:
    """Checks that every name is known by the step that reads it, and that conclusions suit their step."""

    knowledge: Knowledge
    rules: Map[str, Mapping]
    computations: Map[str, Mapping]
    ground: Scope

    def check(self) -> None:
        """Tell every such fault."""
        order = {step.id: place for place, step in enumerate(self.knowledge.steps)}
        ready = _ready(self.knowledge, order)
        for computation in self.knowledge.computations.values():
            scope = self.ground.over({}, "computations", f"'{computation.fact}'")
            for name in inputs_of(computation.how):
                if ready.get(name, -1) > order[computation.step]:
                    _late(name, computation.step, self.computations[computation.fact], scope)
        for step, instances in self.knowledge.instances.items():
            for instance in instances:
                tree, scope = self.rules[instance.rule.id], self.ground.over({}, "rules", f"'{instance.rule.id}'")
                for name in _named(instance):
                    if ready.get(name, -1) > order[step]:
                        _late(name, step, tree, scope)
                if step == "closing":
                    _closes(tree, scope)
        self._may_conflict()

    def _may_conflict(self) -> None:
        for rule in self.knowledge.rules.values():
            scope = self.ground.over({}, "rules", f"'{rule.id}'", "may_conflict")
            for other in rule.may_conflict:
                if other not in self.knowledge.rules:
                    mark = place_of(other, self.rules[rule.id]["may_conflict"])
                    message, known = f"'{other}' is no rule", self.knowledge.rules
                    scope.unknown(mark, "rules", other, message, known, "name a rule by its id")


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


def _closes(tree: Mapping, scope: Scope) -> None:
    for conclusion in list_in(tree, "then"):
        for verb in ("must", "should", "set"):
            if isinstance(conclusion, Mapping) and verb in conclusion:
                mark = conclusion.key_marks[verb]
                scope.problem(mark, "a closing rule may only caution and refer", "move the rule to an earlier step")


def _late(name: str, step: str, tree: Mapping, scope: Scope) -> None:
    scope.problem(
        place_of(name, tree),
        f"'{name}' is not known yet in step {step}",
        "concluded facts are visible from the next step on; move the rule, or what concludes the fact",
    )
