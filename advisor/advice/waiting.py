"""Which questions still matter to which properties, and which demands fall on a lubricant."""

from collections.abc import Iterable, Mapping

from advisor.conditions import Value, holds
from advisor.knowledge import Knowledge
from advisor.specification import Demand, mentions


class Waiting:
    """Which questions still matter to demands on which properties."""

    def __init__(self, order: Iterable[str]) -> None:
        self.by_property: dict[str, set[str]] = {}
        self._place = {name: place for place, name in enumerate(order)}

    def add(self, properties: set[str], questions: frozenset[str]) -> None:
        """Demands on these properties wait for these questions."""
        for name in properties:
            self.by_property.setdefault(name, set()).update(questions)

    def for_properties(self, names: frozenset[str]) -> tuple[str, ...]:
        """The questions that demands on these properties wait for, in the order of asking."""
        questions = set().union(*(self.by_property.get(name, set()) for name in names))
        return tuple(sorted(questions, key=self._place.__getitem__))


def falls_on(demand: Demand, values: Mapping[str, Value], knowledge: Knowledge) -> bool | None:
    """Whether a demand applies to a lubricant with these values; None where they do not say."""
    record = {
        name: knowledge.properties[name].domain.code(value)
        for name, value in values.items()
        if name in mentions(demand.for_)
    }
    return holds(demand.for_, record)
