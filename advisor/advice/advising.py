"""The path of one case: answers, facts step by step, rules, specification, docket, shelf, closing, advice."""

from collections.abc import Sequence
from dataclasses import replace

from advisor.advice.branching import advise_over
from advisor.advice.closing import cautions, closing_record, musts_at_limit
from advisor.advice.left_open import is_open
from advisor.advice.model import Advice, Line, State
from advisor.advice.recommending import Recommendation, Recommender
from advisor.advice.running import CLOSING, Run
from advisor.case import Case
from advisor.conditions import holds
from advisor.designations import CodesFound, Designer
from advisor.inference import StepRules
from advisor.knowledge import CLOSING_FACTS, Knowledge, Property, Sets
from advisor.shelf import Catalogue, Item, choices, facts_read, products, usual_oils
from advisor.specification import Conflict, Specification, combine, mentions

_WITHHELD = "withheld: see the referral"


class Advisor:
    """Gives advice from one body of knowledge. Use one per thread: the rules engine belongs to its thread."""

    def __init__(self, knowledge: Knowledge) -> None:
        self.knowledge = knowledge
        domains = {name: knowledge.domain(name) for name in (*knowledge.facts, *knowledge.computations)}
        self.rules = {
            step.id: StepRules(
                [instance.when for instance in knowledge.instances.get(step.id, ())],
                {**domains, **CLOSING_FACTS} if step.id == CLOSING else domains,
            )
            for step in knowledge.steps
        }
        self.setters = setters_of(knowledge)
        self.read_by = {
            name: read for name, prop in knowledge.properties.items() if (read := facts_read(prop, knowledge))
        }
        self.oils = usual_oils(knowledge)
        self.designer = Designer(knowledge)
        self.always_needed = frozenset(
            {row.recommends for row in knowledge.docket if row.recommends}
            | mentions(knowledge.usual_oils.ordinary)
            | {"kappa"}
        )
        self._shelves: dict[frozenset[str] | None, Catalogue] = {}
        self._choices: dict[str, Catalogue] = {}

    def shelf(self, only: frozenset[str] | None = None) -> Catalogue:
        """The shelf, or a part of it, as a catalogue made once."""
        if only not in self._shelves:
            self._shelves[only] = products(self.knowledge, only)
        return self._shelves[only]

    def recommender(self, incumbent: str) -> Recommender:
        """The docket's candidates, the product in use among them where it is on the shelf."""
        if incumbent not in self._choices:
            own = [Item(each.item, each.title, each.values) for each in self.knowledge.shelf if each.item == incumbent]
            self._choices[incumbent] = choices(self.knowledge, own[0] if own else None)
        catalogue = self._choices[incumbent]
        return Recommender(self.knowledge, self.oils, catalogue, catalogue.place.get(incumbent))

    def advise(self, case: Case, *, assume_gaps: bool = False, only: frozenset[str] | None = None) -> Advice:
        """The advice for a case.

        `assume_gaps` treats every question without an answer as a don't know; `only` keeps to these products.
        What the case leaves open (forks, alternatives, a range) is run once per value, into branches.

        Raises:
            TooOpen: where too much is left open at once.
        """

        def run_once(case: Case) -> Advice:
            return self.advice_of(self.run(case, assume_gaps=assume_gaps), only)

        run = self.run_if_settled(case, assume_gaps=assume_gaps)
        if run is None:
            return advise_over(case, self.knowledge, run_once, assume_gaps=assume_gaps)
        return self.advice_of(run, only)

    def run_if_settled(self, case: Case, *, assume_gaps: bool = False) -> Run | None:
        """The run of a case; none where the case leaves something open and may have to be run more than once."""
        run = Run(self.knowledge, self.rules, self.setters, case, assume_gaps=assume_gaps)
        if is_open(case, run.facts, self.knowledge):
            return None
        run.steps()
        return run

    def run(self, case: Case, *, assume_gaps: bool = False) -> Run:
        """A case led through all steps but the closing one."""
        run = Run(self.knowledge, self.rules, self.setters, case, assume_gaps=assume_gaps)
        run.steps()
        return run

    def advice_of(self, run: Run, only: frozenset[str] | None = None) -> Advice:
        """The advice that a run comes to."""
        found = self._withheld(run) if run.withheld else self._complete(run, self.shelf(only))
        if not run.assume_gaps and only is None:
            return found
        return replace(found, assume_gaps=run.assume_gaps, only=only)

    def _withheld(self, run: Run) -> Advice:
        """A referral that hides products and grades: nothing is specified, nothing is judged."""
        assumed, keeping = run.assumptions()
        return Advice(
            case=run.case,
            knowledge=self.knowledge,
            state=State.REFERRED,
            facts=run.facts.facts,
            record=run.facts.record,
            specification=Specification(),
            docket=(),
            quantities=(),
            shelf=(),
            judgement=None,
            oils=None,
            choices=None,
            oil_ranks={},
            codes=CodesFound(din_none=_WITHHELD, iso_none=_WITHHELD),
            withheld=True,
            cautions=cautions(run, None, None),
            referrals=tuple(run.drawn.refers),
            assumptions=assumed,
            keeping_open=keeping,
            open_questions=(),
            conflicts=(),
            at_limit=(),
            set_aside=tuple(run.facts.set_aside),
            trace=tuple(run.trace),
            closing={},
            kappa=None,
            overridden=run.facts.overridden,
        )

    def _complete(self, run: Run, catalogue: Catalogue) -> Advice:
        facts, record = run.facts.facts, run.facts.record
        domains = {name: prop.domain for name, prop in self.knowledge.properties.items()}
        specification = combine(run.demands(), domains)
        raises = run.raises()
        run.note_waiting(self.read_by)
        needed = catalogue.looked_at(specification.demands, raises, self.always_needed)
        incumbent = str(facts["incumbent"].value) if "incumbent" in facts else ""
        found = self.recommender(incumbent).recommend(specification, run.judgements, raises, run.waiting, needed)
        judgement = run.judgements.of(catalogue, specification.demands, domains, raises, needed=needed)
        closing = closing_record(run, found, judgement)
        run.fire(CLOSING, (), closing)
        questions = run.open_questions(self.read_by)
        is_open = any(each.decides == "lubricant" for each in questions)
        assumed, keeping = run.assumptions()
        conflicts = _conflicts(specification, found, run)
        return Advice(
            case=run.case,
            knowledge=self.knowledge,
            state=_state(run, conflicts, is_open=is_open or bool(keeping)),
            facts=facts,
            record=record,
            specification=specification,
            docket=self._docket(run, found, specification),
            quantities=self._quantities(run),
            shelf=judgement.ranking(is_open=is_open),
            judgement=judgement,
            oils=found.oils,
            choices=found.choices,
            oil_ranks=found.oil_ranks,
            codes=self.designer.codes(
                facts, record, specification, found, lacking=_lacking(is_open=is_open, conflicts=conflicts)
            ),
            withheld=False,
            cautions=cautions(run, found, judgement),
            referrals=tuple(run.drawn.refers),
            assumptions=assumed,
            keeping_open=keeping,
            open_questions=questions,
            conflicts=conflicts,
            at_limit=musts_at_limit(run, found, judgement),
            set_aside=tuple(run.facts.set_aside),
            trace=tuple(run.trace),
            closing=closing,
            kappa=found.kappa,
            overridden=run.facts.overridden,
        )

    def _docket(self, run: Run, found: Recommendation, specification: Specification) -> tuple[Line, ...]:
        lines = []
        for row in self.knowledge.docket:
            if row.section != "docket":
                continue
            if row.id in found.lines:
                lines.append(found.lines[row.id])
                continue
            asked = [name for name in row.demands if _may_have(self.knowledge.properties[name], found.form)]
            if row.demands and not asked:
                lines.append(Line(row.id, row.title, skipped=True))
                continue
            about = tuple(demand for demand in specification.demands if demand.property in asked)
            waits = (
                *run.waiting.for_properties(frozenset(row.demands)),
                *sorted(run.facts.questions_behind(row.facts)),
            )
            lines.append(Line(row.id, row.title, demands=about, facts=row.facts, waits=tuple(dict.fromkeys(waits))))
        return tuple(lines)

    def _quantities(self, run: Run) -> tuple[Line, ...]:
        return tuple(
            Line(
                row.id,
                row.title,
                facts=row.facts,
                waits=tuple(sorted(run.facts.questions_behind(row.facts))),
                skipped=holds(row.shown_if, run.facts.record) is not True,
            )
            for row in self.knowledge.docket
            if row.section == "quantities"
        )


def setters_of(knowledge: Knowledge) -> dict[str, list[str]]:
    """For each step, the concluded facts that are complete after it: it is the last with a rule that sets them."""
    last: dict[str, str] = {}
    for step in knowledge.steps:
        for instance in knowledge.instances.get(step.id, ()):
            last.update({each.name: step.id for each in instance.then if isinstance(each, Sets)})
    found: dict[str, list[str]] = {}
    for name, declaration in knowledge.facts.items():
        if declaration.concluded is not None:
            found.setdefault(last.get(name, knowledge.steps[0].id), []).append(name)
    return found


def _may_have(prop: Property, form: str) -> bool:
    """Whether what is recommended may have the property: it is of the recommended form, or none is settled yet."""
    return not form or prop.of in {"", form}


def _conflicts(specification: Specification, found: Recommendation, run: Run) -> tuple[Conflict, ...]:
    """Empty intersections, no usual oil or no choice left, and facts on which rules disagree."""
    told = {each.about for each in specification.conflicts}
    more = tuple(each for each in found.conflicts if each.about not in told and each.rules)
    return (*specification.conflicts, *more, *run.disagreements())


def _lacking(*, is_open: bool, conflicts: Sequence[Conflict]) -> str:
    """Why no codes can be given yet; empty where they can."""
    if is_open:
        return "answers are missing"
    return "the demands cannot be had together" if conflicts else ""


def _state(run: Run, conflicts: Sequence[Conflict], *, is_open: bool) -> State:
    if run.drawn.refers:
        return State.REFERRED
    if conflicts:
        return State.CONFLICT
    return State.OPEN if is_open else State.SETTLED
