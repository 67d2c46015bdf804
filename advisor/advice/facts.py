"""The facts of a case as they arise: answered, assumed, not asked, tuned, computed and concluded, step by step."""

from collections.abc import Iterable, Mapping

from advisor.case import Case, Fact, Origin
from advisor.computations import compute, looked_up
from advisor.conditions import VOID, Coded, FactRef, Value, holds, waits_for
from advisor.conditions.terms import Void
from advisor.knowledge import Computation, Declaration, FromItem, Knowledge, LookedUp

_NOTHING: frozenset[str] = frozenset()


class Facts:
    """Facts by name.

    `record` is what conditions see; `basis` leads from a fact without a value to the questions behind it.
    """

    def __init__(self, case: Case, knowledge: Knowledge, *, assume_gaps: bool = False) -> None:
        self.knowledge = knowledge
        self.facts: dict[str, Fact] = {}
        self.record: dict[str, Coded | Void] = {}
        self.basis: dict[str, frozenset[str]] = {}
        self.set_aside: list[str] = []
        self.overridden: dict[str, Value] = {}
        for declaration in knowledge.facts.values():
            if declaration.tunable is not None:
                self.put(Fact(declaration.name, declaration.tunable.value, Origin.TUNED))
            elif declaration.question is not None:
                self._ask(declaration, case, assume_gaps=assume_gaps)

    def put(self, fact: Fact, basis: Iterable[str] = ()) -> None:
        """Add a fact; without a value it is void, or it waits for the questions of its basis."""
        self.facts[fact.name] = fact
        if fact.value is not None:
            self.record[fact.name] = self.knowledge.domain(fact.name).code(fact.value)
        elif fact.origin is Origin.VOID:
            self.record[fact.name] = VOID
        else:
            self.basis[fact.name] = frozenset(basis)

    def questions_behind(self, names: Iterable[str]) -> frozenset[str]:
        """The questions whose answers these facts wait for."""
        return _NOTHING.union(*(self.basis[name] for name in names if name in self.basis))

    def _ask(self, declaration: Declaration, case: Case, *, assume_gaps: bool) -> None:
        assert declaration.question is not None  # noqa: S101 - asked facts only
        name = declaration.name
        asked = holds(declaration.question.when, self.record)
        answer = case.answers.get(name)
        if asked is False:
            if answer is not None:
                self.set_aside.append(name)
            self._stand_in(declaration)
        elif asked is None:
            self.put(
                Fact(name, None, Origin.UNANSWERED),
                self.questions_behind(waits_for(declaration.question.when, self.record)),
            )
        elif answer is not None and answer.left_open:
            self.put(Fact(name, None, Origin.UNANSWERED), (name,))
        elif answer is not None and answer.assumed and declaration.assume is not None:
            self.put(Fact(name, answer.value, Origin.ASSUMED, declaration.assume.because))
        elif answer is not None and answer.value is not None:
            self._note_overridden(declaration, answer.value)
            self.put(Fact(name, answer.value, Origin.ANSWERED, "an estimate" if answer.estimate else ""))
        elif declaration.filled is not None and self._filled(declaration, declaration.filled):
            return
        elif declaration.question.optional and answer is None:
            self._stand_in(declaration)
        elif (answer is not None or assume_gaps) and declaration.assume is not None:
            self.put(Fact(name, declaration.assume.value, Origin.ASSUMED, declaration.assume.because))
        else:
            self.put(Fact(name, None, Origin.UNANSWERED), (name,))

    def _note_overridden(self, declaration: Declaration, value: Value) -> None:
        """Note where an own answer goes before what a table says."""
        how = declaration.filled
        if how is None or any(self.facts[name].value is None for _, name in how.by):
            return
        found = looked_up(how, lambda name: self.facts[name].value, self.knowledge.tables).value
        if found is not None and found != value:
            self.overridden[declaration.name] = found

    def _filled(self, declaration: Declaration, how: LookedUp) -> bool:
        """Fill the answer in from a table, where a fact asked earlier allows; else it waits, or is asked itself."""
        waits = [name for _, name in how.by if self.facts[name].value is None]
        if waits:
            questions = self.questions_behind(waits)
            self.put(Fact(declaration.name, None, Origin.UNANSWERED), questions)
            return bool(questions)
        found = looked_up(how, lambda name: self.facts[name].value, self.knowledge.tables).value
        if found is not None:
            told = ", ".join(str(self.facts[name].value) for _, name in how.by)
            self.put(Fact(declaration.name, found, Origin.LOOKED_UP, f"from table {how.table}, {told}"))
        return found is not None

    def _stand_in(self, declaration: Declaration) -> None:
        name, unasked = declaration.name, declaration.unasked
        if isinstance(unasked, FactRef):
            other = self.facts[unasked.name]
            origin = other.origin if other.value is None else Origin.NOT_ASKED
            self.put(Fact(name, other.value, origin, other.note), self.basis.get(unasked.name, ()))
        elif isinstance(unasked, FromItem):
            self.put(Fact(name, self._of_item(unasked), Origin.NOT_ASKED, f"from the product in {unasked.fact}"))
        elif unasked is not None:
            self.put(Fact(name, unasked, Origin.NOT_ASKED))

    def _of_item(self, wanted: FromItem) -> Value:
        item = self.facts[wanted.fact].value
        for product in self.knowledge.shelf:
            if product.item == item:
                return product.values.get(wanted.property, wanted.otherwise)
        return wanted.otherwise

    def compute(self, computation: Computation) -> None:
        """Add a computed fact: a value, void, or waiting."""
        outcome = compute(computation, self.facts, self.knowledge.tables)
        name = computation.fact
        if outcome.value is not None:
            origin = Origin.COMPUTED if hasattr(computation.how, "formula") else Origin.LOOKED_UP
            self.put(Fact(name, outcome.value, origin))
        elif outcome.waits:
            self.put(Fact(name, None, Origin.UNANSWERED), self.questions_behind(outcome.waits))
        else:
            self.put(Fact(name, None, Origin.VOID, outcome.void))

    def conclude(
        self, declaration: Declaration, drawn: list[tuple[str, Coded | FactRef]], undecided: frozenset[str]
    ) -> None:
        """Add a concluded fact from the conclusions of fired rules; `undecided` are questions that could add one."""
        assert declaration.concluded is not None  # noqa: S101 - concluded facts only
        name = declaration.name
        values: list[tuple[str, Coded]] = []
        waits = set(undecided)
        for rule, value in drawn:
            if not isinstance(value, FactRef):
                values.append((rule, value))
                continue
            seen = self.record.get(value.name)
            if isinstance(seen, Void):
                self.put(Fact(name, None, Origin.VOID, f"{rule} sets it to {value.name}, which has no value"))
                return
            if seen is None:
                waits |= self.basis.get(value.name, frozenset())
            else:
                values.append((rule, seen))
        if waits:
            self.put(Fact(name, None, Origin.UNANSWERED), waits)
            return
        self._combine(declaration, values)

    def _combine(self, declaration: Declaration, values: list[tuple[str, Coded]]) -> None:
        assert declaration.concluded is not None  # noqa: S101 - concluded facts only
        name, how, domain = declaration.name, declaration.concluded, declaration.domain
        if how.combine == "one":
            if len({value for _, value in values}) > 1:
                rules = " and ".join(sorted({rule for rule, _ in values}))
                self.put(Fact(name, None, Origin.VOID, f"{rules} conclude different values"))
                return
            chosen = values[0][1] if values else domain.code(how.otherwise)
        else:
            pick = max if how.combine == "highest" else min
            chosen = pick(value for _, value in values) if values else domain.code(how.otherwise)
        rules = ", ".join(rule for rule, value in values if value == chosen)
        self.put(Fact(name, domain.decode(chosen), Origin.CONCLUDED, rules))


def disagreeing(facts: Mapping[str, Fact], knowledge: Knowledge) -> list[str]:
    """Concluded facts for which rules gave different values where only one may be."""
    return [
        name
        for name, each in knowledge.facts.items()
        if each.concluded and each.concluded.combine == "one" and name in facts and facts[name].origin is Origin.VOID
    ]
