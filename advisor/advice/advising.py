"""The path of one case: answers, facts step by step, rules, specification, docket, shelf, closing, advice."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from advisor.advice.facts import Facts, disagreeing
from advisor.advice.model import (
    Advice,
    AtLimit,
    Line,
    OpenQuestion,
    Ranked,
    Referral,
    State,
    StepTrace,
    Warning,
)
from advisor.advice.recommending import Recommendation, Recommender, Waiting
from advisor.case import Case, Fact, Origin
from advisor.conditions import ALWAYS, VOID, Bound, Coded, Condition, FactRef, Record, failures, holds
from advisor.designations import CodesFound, Designer
from advisor.inference import StepRules
from advisor.knowledge import CLOSING_FACTS, Asks, Instance, Knowledge, Refers, Sets, Warns
from advisor.shelf import Catalogue, Item, Judgement, Raise, Verdict, all_reads, at_limit, choices, judge, places, products, usual_oils
from advisor.shelf.catalogue import reads
from advisor.specification import Conflict, Demand, Specification, combine, mentions, with_limits

CLOSING = "closing"


@dataclass(slots=True)
class _Drawn:
    """What the fired rules of all steps concluded."""

    asks: list[tuple[Instance, Asks]] = field(default_factory=list)
    raises: list[tuple[Instance, Sets]] = field(default_factory=list)
    warns: list[tuple[Instance, Warns]] = field(default_factory=list)
    refers: list[Referral] = field(default_factory=list)
    sets: dict[str, list[tuple[str, Coded | FactRef]]] = field(default_factory=dict)


class Advisor:
    """Gives advice from one body of knowledge. Use one per thread: the rules engine belongs to its thread."""

    def __init__(self, knowledge: Knowledge) -> None:
        self.knowledge = knowledge
        domains = {name: each.domain for name, each in knowledge.facts.items()}
        domains |= {name: each.domain for name, each in knowledge.computations.items()}
        self.rules = {
            step.id: StepRules(
                [instance.when for instance in knowledge.instances.get(step.id, ())],
                {**domains, **CLOSING_FACTS} if step.id == CLOSING else domains)
            for step in knowledge.steps
        }
        self.property_domains = {name: each.domain for name, each in knowledge.properties.items()}
        self.oils = usual_oils(knowledge)
        self.designer = Designer(knowledge)
        self._shelves: dict[frozenset[str] | None, Catalogue] = {}
        self._choices: dict[str, Catalogue] = {}
        self._setters = self._steps_of_setters()
        self.always_needed = frozenset(
            {row.recommends for row in knowledge.docket if row.recommends} | mentions(knowledge.usual_oils.ordinary) | {"kappa"})

    def _steps_of_setters(self) -> dict[str, list[str]]:
        """After which step each concluded fact is complete: the last one with a rule that sets it."""
        last: dict[str, str] = {}
        for step in self.knowledge.steps:
            for instance in self.knowledge.instances.get(step.id, ()):
                for each in instance.then:
                    if isinstance(each, Sets) and each.name in self.knowledge.facts:
                        last[each.name] = step.id
        first = self.knowledge.steps[0].id
        found: dict[str, list[str]] = {}
        for name, declaration in self.knowledge.facts.items():
            if declaration.concluded is not None:
                found.setdefault(last.get(name, first), []).append(name)
        return found

    def shelf(self, only: frozenset[str] | None = None) -> Catalogue:
        """The shelf, or a part of it, as a catalogue made once."""
        if only not in self._shelves:
            self._shelves[only] = products(self.knowledge, only)
        return self._shelves[only]

    def advise(self, case: Case, *, assume_gaps: bool = False, only: frozenset[str] | None = None) -> Advice:
        """The advice for a case.

        `assume_gaps` treats every question without an answer as a don't know; `only` keeps to these products.
        """
        return _Run(self, case, self.shelf(only), assume_gaps=assume_gaps).advice()

    def recommender(self, incumbent: str) -> Recommender:
        """The docket's candidates, the product in use among them where it is on the shelf."""
        if incumbent not in self._choices:
            own = next((Item(each.item, each.title, each.values) for each in self.knowledge.shelf if each.item == incumbent), None)
            self._choices[incumbent] = choices(self.knowledge, own)
        catalogue = self._choices[incumbent]
        return Recommender(self.knowledge, self.oils, catalogue, catalogue.place.get(incumbent))


class _Run:
    """One case on its way through the steps."""

    def __init__(self, advisor: Advisor, case: Case, shelf: Catalogue, *, assume_gaps: bool) -> None:
        self.advisor, self.knowledge, self.case, self.shelf = advisor, advisor.knowledge, case, shelf
        self.facts = Facts(case, self.knowledge, assume_gaps=assume_gaps)
        self.drawn = _Drawn()
        self.trace: list[StepTrace] = []
        self.undecided: list[tuple[Instance, frozenset[str]]] = []
        self.waiting = Waiting()

    def advice(self) -> Advice:
        """Run all steps; a withheld referral ends the case."""
        for step in self.knowledge.steps:
            if step.id == CLOSING:
                continue
            self._step(step.id)
            if any(referral.withhold for referral in self.drawn.refers):
                return self._withheld()
        return self._complete()

    def _step(self, step: str) -> None:
        computed = []
        for computation in self.knowledge.computations.values():
            if computation.step == step:
                self.facts.compute(computation)
                computed.append(computation.fact)
        self._fire(step, tuple(computed), self.facts.record)
        for name in self.advisor._setters.get(step, ()):  # noqa: SLF001 - the run is part of the advisor
            undecided = frozenset().union(*(
                questions for instance, questions in self.undecided
                if any(isinstance(each, Sets) and each.name == name for each in instance.then)))
            self.facts.conclude(self.knowledge.facts[name], self.drawn.sets.get(name, []), undecided)

    def _fire(self, step: str, computed: tuple[str, ...], record: Record) -> None:
        instances = self.knowledge.instances.get(step, ())
        rules = self.advisor.rules[step]
        outcomes = rules.judge(record)
        self.trace.append(StepTrace(step, computed, instances, outcomes))
        for place, (instance, outcome) in enumerate(zip(instances, outcomes, strict=True)):
            if outcome is False or not instance.binds:
                continue
            if outcome is None:
                self.undecided.append((instance, self.facts.questions_behind(rules.waits(place, record))))
            else:
                self._draw(instance)

    def _draw(self, instance: Instance) -> None:
        for each in instance.then:
            if isinstance(each, Asks):
                self.drawn.asks.append((instance, each))
            elif isinstance(each, Warns):
                self.drawn.warns.append((instance, each))
            elif isinstance(each, Refers):
                self.drawn.refers.append(Referral(each.to, instance.id, each.withhold))
            elif each.name in self.knowledge.facts:
                self.drawn.sets.setdefault(each.name, []).append((instance.id, each.value))
            else:
                self.drawn.raises.append((instance, each))

    def _demands(self) -> list[Demand]:
        """All demands with facts put in for limits; those that still wait are kept aside."""
        found: list[Demand] = []
        record = self.facts.record
        for instance, each in self.drawn.asks:
            test, waits, void = with_limits(each.test, record)
            for_, more, void_too = with_limits(each.for_, record)
            if waits | more:
                self.undecided.append((instance, self.facts.questions_behind(waits | more)))
            else:
                found.append(Demand(each.property, test, each.level, for_, instance.id, frozenset(void | void_too)))
        return found

    def _raises(self) -> list[Raise]:
        found = []
        for instance, each in self.drawn.raises:
            for_, waits, void = with_limits(each.for_, self.facts.record)
            value = each.value
            if not waits and not void and not isinstance(value, FactRef):
                found.append(Raise(each.name, value, for_, instance.id))
        return found

    def _needed(self, specification: Specification, raises: Sequence[Raise]) -> frozenset[str]:
        """The properties that something in this case looks at."""
        names = set(self.advisor.always_needed)
        for demand in specification.demands:
            names.add(demand.property)
            names |= mentions(demand.for_)
        for each in raises:
            names |= mentions(each.for_)
        for _, warns in self.drawn.warns:
            names |= mentions(warns.for_)
        return all_reads(frozenset(names), self.knowledge.properties)

    def _note_waiting(self) -> None:
        if not self.facts.basis:
            return
        for instance, questions in self.undecided:
            names = {each.property for each in instance.then if isinstance(each, Asks)}
            names |= {each.name for each in instance.then if isinstance(each, Sets) and each.name in self.knowledge.properties}
            self.waiting.add(names, questions)
        for name, prop in self.knowledge.properties.items():
            needed = self._facts_read(name)
            questions = self.facts.questions_behind(needed)
            if questions and prop.how is not None:
                self.waiting.add({name}, questions)

    def _facts_read(self, name: str) -> set[str]:
        prop = self.knowledge.properties[name]
        direct = {each for each in reads(prop) if each not in self.knowledge.properties}
        return direct | ({prop.same_item} if prop.same_item else set())

    def _open_questions(self) -> tuple[OpenQuestion, ...]:
        """Questions without a value that rules, computations or product properties still wait for."""
        if not self.facts.basis:
            return ()
        waiting: dict[str, list[str]] = {}
        for instance, questions in self.undecided:
            for name in questions:
                waiting.setdefault(name, []).append(instance.id)
        for computation in self.knowledge.computations.values():
            for name in self.facts.basis.get(computation.fact, ()):
                waiting.setdefault(name, []).append(computation.fact)
        for name in self.knowledge.properties:
            for question in self.facts.questions_behind(self._facts_read(name)):
                waiting.setdefault(question, []).append(name)
        found = []
        for name, declaration in self.knowledge.facts.items():
            if name in waiting and declaration.question is not None:
                found.append(OpenQuestion(name, declaration.question.decides, tuple(dict.fromkeys(waiting[name])), name in self.case.answers))
        return tuple(found)

    def _assumptions(self) -> tuple[tuple[str, ...], tuple[str, ...]]:
        assumed = tuple(fact.name for fact in self.facts.facts.values() if fact.origin is Origin.ASSUMED)
        keeping = []
        for name in assumed:
            declared = self.knowledge.facts[name].assume
            if declared is not None and declared.keeps_open:
                keeping.append(name)
        return assumed, tuple(keeping)

    def _withheld(self) -> Advice:
        """A referral that hides products and grades: nothing is specified, nothing is judged."""
        assumed, keeping = self._assumptions()
        return Advice(
            self.case, self.knowledge, State.REFERRED, dict(self.facts.facts), dict(self.facts.record), Specification(), (), (), (), None, None,
            {}, CodesFound(din_none="withheld: see the referral", iso_none="withheld: see the referral"), withheld=True,
            cautions=self._cautions(None, None), referrals=tuple(self.drawn.refers), assumptions=assumed, keeping_open=keeping,
            open_questions=(), conflicts=(), at_limit=(), set_aside=tuple(self.facts.set_aside), trace=tuple(self.trace))

    def _complete(self) -> Advice:
        specification = combine(self._demands(), self.advisor.property_domains)
        raises = self._raises()
        self._note_waiting()
        facts = self.facts.facts
        needed = self._needed(specification, raises)
        incumbent = str(facts["incumbent"].value) if "incumbent" in facts else ""
        recommendation = self.advisor.recommender(incumbent).recommend(
            specification, facts, raises, self.waiting, needed)
        columns = self.shelf.for_case(facts, raises, needed=needed)
        judgement = Judgement(self.shelf, columns, specification.demands, self.advisor.property_domains, missing_counts=True)
        open_questions = self._open_questions()
        assumed, keeping = self._assumptions()
        is_open = any(each.decides == "lubricant" for each in open_questions)
        shelf = tuple(Ranked(place, self.shelf.items[place].code, verdict, steps) for place, verdict, steps in judgement.ranking(is_open=is_open))
        conflicts = (*specification.conflicts, *self._new(recommendation.conflicts, specification.conflicts), *self._disagreements())
        self._close(recommendation, shelf)
        state = (
            State.REFERRED if self.drawn.refers else State.CONFLICT if conflicts
            else State.OPEN if is_open or keeping else State.SETTLED)
        return Advice(
            self.case, self.knowledge, state, dict(facts), dict(self.facts.record), specification,
            self._docket(recommendation, specification), self._quantities(), shelf, judgement, recommendation.oils,
            recommendation.oil_ranks, self.advisor.designer.codes(facts, self.facts.record, specification, recommendation, incomplete=is_open),
            withheld=False, cautions=self._cautions(recommendation, judgement), referrals=tuple(self.drawn.refers),
            assumptions=assumed, keeping_open=keeping, open_questions=open_questions, conflicts=conflicts,
            at_limit=self._at_limit(recommendation, judgement), set_aside=tuple(self.facts.set_aside), trace=tuple(self.trace))

    def _new(self, found: Sequence[Conflict], known: Sequence[Conflict]) -> tuple[Conflict, ...]:
        """Conflicts that the plain demands did not show already."""
        told = {each.about for each in known}
        return tuple(each for each in found if each.about not in told and each.rules)

    def _disagreements(self) -> tuple[Conflict, ...]:
        names = disagreeing(self.facts.facts, self.knowledge)
        return tuple(Conflict(name, tuple(sorted({rule for rule, _ in self.drawn.sets.get(name, [])}))) for name in names)

    def _close(self, recommendation: Recommendation, shelf: Sequence[Ranked]) -> None:
        """The closing step sees the result and may only caution and refer."""
        record: dict[str, object] = dict(self.facts.record)
        record["recommended_kappa"] = VOID if recommendation.kappa is None else recommendation.kappa
        record["recommended_form"] = recommendation.form or VOID
        record["maker_verdict"] = self._maker_verdict(shelf)
        fits = any(each.verdict in {Verdict.FITS, Verdict.SECOND_BEST, Verdict.STILL_IN} for each in shelf)
        record["shelf_fits"] = 1.0 if fits else 0.0
        if self.facts.basis.keys() & {"maker_item"}:
            del record["maker_verdict"]
        self._fire(CLOSING, (), record)  # type: ignore[arg-type]  # coded values and VOID

    def _maker_verdict(self, shelf: Sequence[Ranked]) -> str:
        fact = self.facts.facts.get("maker_item")
        named = str(fact.value) if fact is not None else "none_named"
        ranked = next((each for each in shelf if each.item == named), None)
        if ranked is None:
            return "none_named" if named == "none_named" else "not_on_the_shelf"
        return Verdict.FITS.value if ranked.verdict is Verdict.STILL_IN else ranked.verdict.value

    def _docket(self, recommendation: Recommendation, specification: Specification) -> tuple[Line, ...]:
        lines = []
        for row in self.knowledge.docket:
            if row.section != "docket":
                continue
            if row.id in recommendation.lines:
                lines.append(recommendation.lines[row.id])
                continue
            about = tuple(demand for demand in specification.demands if demand.property in row.demands)
            waits = self.waiting.for_properties(frozenset(row.demands)) + tuple(self.facts.questions_behind(row.facts))
            lines.append(Line(row.id, row.title, demands=about, facts=row.facts, waits=tuple(dict.fromkeys(waits))))
        return tuple(lines)

    def _quantities(self) -> tuple[Line, ...]:
        lines = []
        for row in self.knowledge.docket:
            if row.section == "quantities":
                shown = holds(row.shown_if, self.facts.record)
                waits = tuple(sorted(self.facts.questions_behind(row.facts)))
                lines.append(Line(row.id, row.title, facts=row.facts, waits=waits, skipped=shown is not True))
        return tuple(lines)

    def _cautions(self, recommendation: Recommendation | None, judgement: Judgement | None) -> tuple[Warning, ...]:
        rules: dict[str, list[str]] = {}
        concerned: dict[str, list[str]] = {}
        general: set[str] = set()
        for instance, each in self.drawn.warns:
            for_, waits, void = with_limits(each.for_, self.facts.record)
            if for_ == ALWAYS:
                general.add(each.caution)
            elif waits or void or not (concerns := self._concerned(for_, recommendation, judgement)):
                continue
            else:
                concerned.setdefault(each.caution, []).extend(concerns)
            rules.setdefault(each.caution, []).append(instance.id)
        return tuple(
            Warning(name, tuple(dict.fromkeys(rules[name])), () if name in general else tuple(dict.fromkeys(concerned[name])))
            for name in self.knowledge.cautions if name in rules)

    def _concerned(self, for_: Condition, recommendation: Recommendation | None, judgement: Judgement | None) -> list[str]:
        """The recommended classes, and the products with no must against them, that meet the caution's `for`."""
        if recommendation is None or judgement is None:
            return []
        found: list[str] = []
        winners = sum(recommendation.winners.values(), [])
        for one, chosen in ((recommendation.oils, recommendation.oil_winners), (recommendation.choices, winners)):
            if one is not None:
                found += [one.catalogue.items[place].title for place in chosen if self._meeting(for_, one) >> place & 1]
        return found + [self.shelf.items[place].code for place in places(self._meeting(for_, judgement) & judgement.passing)]

    def _meeting(self, for_: Condition, judgement: Judgement) -> int:
        """The items that do not fail the condition and have at least one of the properties it names."""
        _, failing = judge(for_, judgement.columns, judgement.catalogue.everything)
        told = 0
        for name in mentions(for_):
            column = judgement.columns.get(name)
            told |= column.present if column else 0
        return told & ~failing

    def _at_limit(self, recommendation: Recommendation, judgement: Judgement) -> tuple[AtLimit, ...]:
        """Musts met with nothing to spare: by products that no must rules out, and by recommended classes."""
        found: list[AtLimit] = []
        for place, demand in enumerate(judgement.demands):
            if demand.must and self._is_measure(demand.property):
                items = places(at_limit(judgement, place, judgement.passing))
                found += [AtLimit("product", self.shelf.items[each].code, demand.rule) for each in items]
        recommended = {value for line in recommendation.lines.values() for value in line.values}
        for step in self.trace:
            for instance, outcome in zip(step.instances, step.outcomes, strict=True):
                if outcome is False and instance.binds and instance.row is not None and instance.row.id in recommended and self._missed_by_nothing(instance):
                    found.append(AtLimit("class", instance.row.id, instance.id))
        return tuple(dict.fromkeys(found))

    def _is_measure(self, name: str) -> bool:
        domain = self.advisor.property_domains[name]
        return domain.kind == "number" and not domain.places

    def _missed_by_nothing(self, instance: Instance) -> bool:
        if not any(isinstance(each, Asks) and each.level == 0 for each in instance.then):
            return False
        return any(
            isinstance(term, Bound) and term.sign in {">", "<"} and isinstance(term.limit, float) and self.facts.record.get(term.name) == term.limit
            for term in failures(instance.when, self.facts.record))

