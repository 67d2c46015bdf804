"""A case bent so that a fact takes a wanted value, by changing the answer to one question behind it."""

from collections.abc import Callable, Iterator
from itertools import islice

from advisor.advice import Advisor
from advisor.bending.regions import domains_seen, unmet, wanted_on, where
from advisor.boxes import Box
from advisor.case import Answer, Case
from advisor.conditions import Coded, Condition, FactRef, Record, Value, holds
from advisor.conditions.terms import Void, names
from advisor.knowledge import CLOSING_FACTS, Declaration, Formed, FromItem, Knowledge, Sets

MOST_FIXES = 4
WAYS_EACH = 6
REMEMBERED = 2000
_TRIES = 8
_CLOSE = 1e-9
_TRIED = (0.1, 0.5, 2.0, 10.0)


class Bender:
    """Finds answers for wanted values; what the facts of a case are is worked out without the shelf."""

    def __init__(self, advisor: Advisor) -> None:
        self.advisor = advisor
        self.knowledge = advisor.knowledge
        self.domains = domains_seen(advisor.knowledge)
        self.left = 1000
        self._behind: dict[str, tuple[str, ...]] = {}
        self._records: dict[object, Record] = {}

    def record(self, case: Case, *, assume_gaps: bool = False) -> Record:
        """What the rules of the case would see; a closing step sees the result too, which is not worked out here.

        The last ones are remembered: on its way into a box a case comes by the same answers many times.
        """
        key = assume_gaps, answers_of(case)
        if key not in self._records:
            if len(self._records) >= REMEMBERED:
                self._records.clear()
            self._records[key] = self.advisor.run(case, assume_gaps=assume_gaps).facts.record
        return self._records[key]

    def behind(self, fact: str) -> tuple[str, ...]:
        """The questions on whose answers a fact rests, the nearest first."""
        if fact not in self._behind:
            self._behind[fact] = ()
            self._behind[fact] = tuple(dict.fromkeys(self._questions(fact)))
        return self._behind[fact]

    def _questions(self, fact: str) -> Iterator[str]:
        declaration = self.knowledge.facts.get(fact)
        if declaration is not None and declaration.question is not None:
            yield fact
        elif fact in self.knowledge.computations:
            how = self.knowledge.computations[fact].how
            inputs = how.inputs.values() if isinstance(how, Formed) else [name for _, name in how.by]
            for name in inputs:
                if isinstance(name, str):
                    yield from self.behind(name)
        else:
            for name in _deciding(fact, self.knowledge):
                yield from self.behind(name)

    def bent(self, case: Case, fact: str, wanted: Coded, *, assume_gaps: bool = False) -> Iterator[Case]:
        """The case with one answer changed so that the fact has the wanted value, for each question that can do it."""
        for question in self.behind(fact):
            if question == fact:
                yield answered(case, question, self.knowledge.domain(fact).decode(wanted), self.knowledge)
            elif isinstance(wanted, float) and self.knowledge.domain(question).kind == "number":
                for asked in self._asked(case, question, wanted, assume_gaps=assume_gaps):
                    found = self._solved(asked, question, fact, wanted, assume_gaps=assume_gaps)
                    if found is not None:
                        yield answered(asked, question, found, self.knowledge)

    def _asked(self, case: Case, question: str, start: float, *, assume_gaps: bool) -> Iterator[Case]:
        """The case with some answer to a question; where the case is not asked, one that is."""
        unlock = self._unasked(question, self.record(case, assume_gaps=assume_gaps))
        if unlock is None:
            yield case
            return
        for box in where(unlock, self.knowledge)[:WAYS_EACH]:
            for bent in islice(self._fixed(box, case, assume_gaps, 1), 1):
                yield self._filled(answered(bent, question, start, self.knowledge), assume_gaps=assume_gaps)

    def _filled(self, case: Case, *, assume_gaps: bool) -> Case:
        """The case with an answer to each question that it newly asks: one that changes as little as can be."""
        record = self.record(case, assume_gaps=assume_gaps)
        for name, fact in self.knowledge.facts.items():
            if name in record or name in case.answers or fact.question is None:
                continue
            if holds(fact.question.when, record) and (value := _plain_answer(fact)) is not None:
                case = answered(case, name, value, self.knowledge)
        return case

    def _solved(self, case: Case, question: str, fact: str, wanted: float, *, assume_gaps: bool) -> float | None:
        """The answer for which a computed number is as wanted, by the secant, rounded to the step where that serves."""
        domain = self.knowledge.domain(question)
        given = case.answers.get(question)
        if given is None or not isinstance(given.value, float):
            return None

        def off(answer: float) -> float | None:
            if not domain.low <= answer <= domain.high:
                return None
            bent = answered(case, question, answer, self.knowledge)
            seen = self.record(bent, assume_gaps=assume_gaps).get(fact)
            return None if seen is None or isinstance(seen, Void | str | frozenset) else seen - wanted

        step = domain.step.size if domain.step else 1.0
        return _root(off, given.value, step)

    def into(self, box: Box, case: Case, *, assume_gaps: bool = False, fixes: int = MOST_FIXES) -> Iterator[Case]:
        """The case with answers changed, fact after fact, until what its rules see lies in the box.

        What only the closing step sees is passed over; `left` says how many more cases may be looked at.
        """
        yield from self._fixed(box, case, assume_gaps, fixes)

    def _fixed(self, box: Box, case: Case, assume_gaps: bool, left: int) -> Iterator[Case]:
        """The case with answers changed, fact after fact, until it lies in the box."""
        self.left -= 1
        record = self.record(case, assume_gaps=assume_gaps)
        lacking = [name for name in unmet(box, record) if name not in CLOSING_FACTS]
        if not lacking:
            yield case
            return
        if not left or self.left < 0:
            return
        name = lacking[0]
        if (unlock := self._unasked(name, record)) is not None:
            for asked in where(unlock, self.knowledge)[:WAYS_EACH]:
                for bent in islice(self._fixed(asked, case, assume_gaps, left - 1), WAYS_EACH):
                    if self._unasked(name, self.record(bent, assume_gaps=assume_gaps)) is None:
                        filled = self._filled(bent, assume_gaps=assume_gaps)
                        yield from self._fixed(box, filled, assume_gaps, left - 1)
            return
        for wanted in wanted_on(box.sides[name], record.get(name), self.domains[name]):
            for bent in islice(self._towards(case, name, wanted, assume_gaps), WAYS_EACH):
                yield from self._fixed(box, bent, assume_gaps, left - 1)

    def _unasked(self, name: str, record: Record) -> Condition | None:
        """For whom a question is asked that the case is not asked; nothing where it is."""
        declaration = self.knowledge.facts.get(name)
        if declaration is None or declaration.question is None:
            return None
        return None if holds(declaration.question.when, record) else declaration.question.when

    def _towards(self, case: Case, name: str, wanted: Coded, assume_gaps: bool) -> Iterator[Case]:
        numeric = isinstance(wanted, float) and self.domains[name].kind == "number"
        if name in self.behind(name) or numeric:
            yield from self.bent(case, name, wanted, assume_gaps=assume_gaps)
            return
        for question in self.behind(name):
            if question != name:
                for value in self.others(case, question):
                    self.left -= 1
                    bent = answered(case, question, value, self.knowledge)
                    if self.record(bent, assume_gaps=assume_gaps).get(name) == wanted:
                        yield bent

    def others(self, case: Case, question: str) -> Iterator[Value]:
        """Other answers to a question than the one given."""
        domain = self.knowledge.domain(question)
        given = case.answers.get(question)
        value = given.value if given is not None else None
        if domain.kind == "several":
            ticked = value if isinstance(value, tuple) else ()
            for tick in domain.choices:
                chosen = set(ticked) ^ {tick}
                yield tuple(each for each in domain.choices if each in chosen)
        elif domain.kind == "number" and isinstance(value, float):
            size = domain.step.size if domain.step else 0.0
            near = [value - 10 * size, value + 10 * size, *(value * share for share in _TRIED)]
            yield from (round(each, 6) for each in near if domain.low <= each <= domain.high and each != value)
        else:
            yield from (choice for choice in domain.choices if choice != value)


def _root(off: Callable[[float], float | None], start: float, step: float) -> float | None:
    """Where `off` is zero, by the secant from `start`; a value on the grid of the step wins.

    >>> _root(lambda value: 2 * value - 50.0, 10.0, 1.0)
    25.0
    """
    one, other = start, start + step
    for _ in range(_TRIES):
        at_one, at_other = off(one), off(other)
        if at_one is None or at_other is None:
            return None
        for value, away in ((one, at_one), (other, at_other)):
            rounded = round(round(value / step) * step, 9)
            if abs(away) <= _CLOSE * max(1.0, abs(value)):
                return rounded if off(rounded) == 0 else value
        if at_one == at_other:
            return None
        one, other = other, other - at_other * (other - one) / (at_other - at_one)
    return None


def _plain_answer(fact: Declaration) -> Value | None:
    """An answer that changes as little as can be."""
    if fact.unasked is not None and not isinstance(fact.unasked, FactRef | FromItem):
        return fact.unasked
    if fact.assume is not None:
        return fact.assume.value
    if fact.domain.kind == "several":
        return ()
    return next(iter(fact.domain.choices), None)


def _deciding(fact: str, knowledge: Knowledge) -> Iterator[str]:
    """The facts on which the rules that conclude a fact depend."""
    for instances in knowledge.instances.values():
        for instance in instances:
            if any(isinstance(each, Sets) and each.name == fact for each in instance.then):
                yield from names(instance.when)


def answers_of(case: Case) -> object:
    """What tells two cases apart."""
    return tuple(case.answers.items())


def answered(case: Case, question: str, value: Value, knowledge: Knowledge) -> Case:
    """The case with one answer as if it had been typed, the answers in the order of asking."""
    answers = {**case.answers, question: Answer(value, typed(value, question, knowledge))}
    return Case(case.point_kind, case.title, {name: answers[name] for name in knowledge.facts if name in answers})


def typed(value: Value, question: str, knowledge: Knowledge) -> str:
    """A value as one would type it into a file."""
    if isinstance(value, tuple):
        return f"[{', '.join(value)}]"
    if isinstance(value, float):
        unit = knowledge.domain(question).unit
        return f"{value:.12g} {unit}".strip()
    return str(value)
