"""One step either way: what a neighbouring value is, by the declared step of a fact or of its like."""

from collections.abc import Iterator

from advisor.conditions import Coded, Domain
from advisor.knowledge import CLOSING_FACTS, Knowledge

_SHARE = 0.05
"""The step of a number for which nothing of its unit declares one, as a share of the limit."""


class Stepper:
    """Neighbours of values. A number without a declared step borrows that of an asked fact in its unit."""

    def __init__(self, knowledge: Knowledge) -> None:
        self._knowledge = knowledge
        self._by_unit: dict[str, Domain] = {}
        facts = [each.domain for each in knowledge.facts.values()]
        for domain in (*facts, *(each.domain for each in knowledge.properties.values())):
            if domain.unit and domain.step is not None:
                self._by_unit.setdefault(domain.unit, domain)

    def domain(self, name: str) -> Domain:
        """The domain of a fact, a property or a result."""
        return CLOSING_FACTS[name] if name in CLOSING_FACTS else self._knowledge.domain(name)

    def beside(self, domain: Domain, value: float) -> Iterator[tuple[str, float]]:
        """The values one step down and up, each with the word for its direction, ends of the domain included."""
        for word, direction in (("down", -1), ("up", 1)):
            found = self._next(domain, value, direction)
            if found is not None and found != value and self._inside(domain, found):
                yield word, found

    def other_choices(self, domain: Domain, value: Coded) -> Iterator[tuple[str, Coded]]:
        """The neighbours of any single value; of a choice, the next one in declared order."""
        if isinstance(value, float):
            yield from self.beside(domain, value)
        elif isinstance(value, str) and len(domain.choices) > 1 and value in domain.choices:
            order = list(domain.choices)
            yield "along", order[(order.index(value) + 1) % len(order)]

    def _next(self, domain: Domain, value: float, direction: int) -> float | None:
        if domain.kind != "number":
            return value + direction
        like = domain if domain.step or domain.places else self._by_unit.get(domain.unit, domain)
        if like.places:
            beyond = [each for each in like.places if (each - value) * direction > 0]
            return min(beyond, key=lambda each: abs(each - value), default=None)
        if like.step is None:
            return value * (1 + direction * _SHARE) if value else None
        if like.step.kind == "ratio":
            return float(value * like.step.size**direction)
        return round(value + direction * like.step.size, 9)

    @staticmethod
    def _inside(domain: Domain, value: float) -> bool:
        if domain.kind == "number":
            return domain.low <= value <= domain.high
        return 0 <= value < len(domain.choices)
