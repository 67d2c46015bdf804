"""One interview: which question comes next, what an answer changes, and how to go back, put off, revise and undo."""

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path

from advisor.advice import Advice, Advisor, TooOpen
from advisor.answers import DONT_KNOW, Unsuitable, answer
from advisor.case import Answer, Case, Origin
from advisor.conditions import holds
from advisor.documents import Unwritable, to_yaml, write_text_safely
from advisor.documents.writing import Plain
from advisor.interview.keeper import Keeper
from advisor.interview.keeping import as_plain, document
from advisor.interview.typed import unbroken, writable
from advisor.interview.wording import rows_shown
from advisor.knowledge import Declaration

Clock = Callable[[], datetime]


@dataclass(frozen=True, slots=True)
class Change:
    """One step of the interview: a question and the answer that stood before (None: there was none)."""

    name: str
    before: Answer | None


class Session:
    """An interview about one case. Every change is advised upon and, with a keeper, saved at once.

    The answers alone decide the advice: the way that led to them does not matter.
    """

    def __init__(
        self,
        advisor: Advisor,
        keeper: Keeper | None = None,
        case: Case | None = None,
        *,
        history: Sequence[str] = (),
        notices: Sequence[str] = (),
        clock: Clock = datetime.now,
    ) -> None:
        self.advisor, self.knowledge, self.keeper, self.clock = advisor, advisor.knowledge, keeper, clock
        self.case = case or Case(advisor.knowledge.point_kind.id)
        self.history = list(history)
        self.notices = tuple(notices)
        self.trouble = ""
        self._changes = list(self._remembered())
        self._postponed: list[str] = []
        self._chosen: str | None = None
        self.variant = 0  # which variant is looked at; 0 is the whole
        self.advice = self.before = advisor.advise(self.case)

    # ---- questions in turn -------------------------------------------------------------------------------------

    @property
    def open(self) -> tuple[str, ...]:
        """The questions still to be asked, in the declared order."""
        return tuple(each.fact for each in self.advice.open_questions if each.fact not in self.case.answers)

    @property
    def question(self) -> Declaration | None:
        """The question in place: one that was chosen, else the first that is open and not put off."""
        name = self._chosen or self._next()
        return self.knowledge.facts[name] if name else None

    def _next(self) -> str | None:
        still = self.open
        fresh = [name for name in still if name not in self._postponed]
        again = [name for name in self._postponed if name in still]
        return next(iter((*fresh, *again)), None)

    @property
    def answered(self) -> tuple[str, ...]:
        """The answered questions in the order of asking, without those set aside."""
        return tuple(name for name in self.case.answers if name not in self.advice.set_aside)

    @property
    def may_be_asked(self) -> tuple[str, ...]:
        """Questions about this point that need no answer now: optional, filled in, or waiting for others."""
        return tuple(
            name
            for name, each in self.knowledge.facts.items()
            if each.question is not None
            and name not in self.case.answers
            and name not in self.open
            and holds(each.question.when, self.advice.record) is True
        )

    def fills(self, name: str) -> tuple[str, ...]:
        """The facts that this answer has filled in from a table."""
        return tuple(
            other
            for other, each in self.knowledge.facts.items()
            if each.filled is not None
            and name in dict(each.filled.by).values()
            and self.advice.facts[other].origin is Origin.LOOKED_UP
        )

    @property
    def finished(self) -> bool:
        """Whether nothing is left to ask, or a referral ends the interview."""
        return self.advice.withheld or not self.open

    @property
    def only_quantities_left(self) -> bool:
        """Whether all that decides the lubricant is known, so that the user may stop."""
        decides = {each.fact: each.decides for each in self.advice.open_questions}
        return not self.finished and all(decides[name] == "quantity" for name in self.open)

    # ---- changes -----------------------------------------------------------------------------------------------

    def answer(self, text: str) -> None:
        """Answer the question in place.

        Raises:
            Unsuitable: the text is no answer to it; nothing has changed.
        """
        declaration = self.question
        if declaration is None:
            raise Unsuitable("No question is open.")
        self._put(declaration.name, self.read(declaration, text))

    def read(self, declaration: Declaration, text: str) -> Answer:
        """What the text would answer; words for numbers may be written with spaces.

        Raises:
            Unsuitable: in one plain sentence.
        """
        word = "_".join(unbroken(text).casefold().split())
        return answer(declaration, word if word in declaration.domain.named else text)

    def dont_know(self) -> None:
        """Say that nobody knows the answer to the question in place."""
        if self.question is not None:
            self._put(self.question.name, Answer(None, DONT_KNOW))

    def undo(self) -> bool:
        """Take the last change back and open its question again; False if nothing is left to take back."""
        if not self._changes:
            return False
        last = self._changes.pop()
        case = self.case.without(last.name) if last.before is None else self.case.with_answer(last.name, last.before)
        self._become(case, f"undo {last.name}", chosen=last.name)
        return True

    def _put(self, name: str, given: Answer) -> None:
        before = self.case.answers.get(name)
        self._become(self.case.with_answer(name, given), f"{name}: {given.typed}")
        self._changes.append(Change(name, before))

    def _become(self, case: Case, what: str, chosen: str | None = None) -> None:
        """Take a case over, with its advice; where there is none nothing has changed."""
        try:
            advice = self.advisor.advise(case)
        except TooOpen as fault:
            raise Unsuitable(str(fault)) from None
        self.before, self.advice, self.case = self.advice, advice, case
        self.history.append(f"{self.clock():%Y-%m-%d %H:%M} {what}")
        self._postponed = [name for name in self._postponed if name in self.open]
        self._chosen = chosen
        self.variant = 0
        self.save()

    @property
    def shown(self) -> Advice:
        """The advice that is looked at: the whole over all that was left open, or that of one variant."""
        return self.advice.branches[self.variant - 1].advice if self.variant else self.advice

    def next_variant(self) -> None:
        """Look at the next variant; after the last one at the whole again."""
        self.variant = (self.variant + 1) % (len(self.advice.branches) + 1)

    # ---- moving about ------------------------------------------------------------------------------------------

    def back(self) -> None:
        """Open the question asked before the one in place."""
        asked = self.answered
        place = asked.index(self._chosen) if self._chosen in asked else len(asked)
        if place:
            self._chosen = asked[place - 1]

    def later(self) -> None:
        """From an answered question go on to the next one; put an open one off until the others are answered."""
        asked = self.answered
        if self._chosen in asked:
            place = asked.index(self._chosen) + 1
            self._chosen = asked[place] if place < len(asked) else None
        elif self.question is not None:
            self.postpone(self.question.name)

    def postpone(self, name: str) -> None:
        """Put an open question off: it comes again after the others."""
        self._postponed = [*(each for each in self._postponed if each != name), name]
        if self._chosen == name:
            self._chosen = None

    def revise(self, name: str) -> None:
        """Open one question: an answered one to change it, or an open one out of turn."""
        if name in self.case.answers or name in self.open or name in self.may_be_asked:
            self._chosen = name

    def go_on(self) -> None:
        """Leave a chosen question as it is and return to the first open one."""
        self._chosen = None

    # ---- what it does to the docket ----------------------------------------------------------------------------

    def helps_settle(self) -> tuple[str, ...]:
        """Titles of the docket rows that wait for the question in place, or would without its answer."""
        if self.question is None:
            return ()
        name = self.question.name
        advice = self.advice if name not in self.case.answers else self.advisor.advise(self.case.without(name))
        return tuple(line.title for line in (*advice.docket, *advice.quantities) if name in line.waits)

    def changed_rows(self) -> frozenset[str]:
        """The docket rows that read differently since the last change."""
        if self.advice.withheld or self.before.withheld:
            return frozenset()
        return frozenset(_differences(_texts(self.before), _texts(self.advice)))

    def settled_rows(self) -> tuple[str, ...]:
        """Titles of the rows that the last change settled."""
        waited = {line.row for line in self.before.docket if line.waits}
        return tuple(line.title for line in self.advice.docket if line.row in waited and not line.waits)

    # ---- keeping -----------------------------------------------------------------------------------------------

    def save(self) -> None:
        """Keep everything answered so far; trouble is told and does not stop the interview."""
        if self.keeper is None or not self.keeper.holds:
            return
        try:
            self.keeper.write(document(self.case, self.advice, self.history))
            self.trouble = ""
        except Unwritable as fault:
            self.trouble = f"Not saved. {fault}"

    def save_scenario(self, path: Path, title: str, guards: str) -> None:
        """Write the case as a draft scenario that expects its present state.

        Raises:
            Unwritable: with the reason and the mend; a file that exists already is never replaced.
        """
        expect: dict[str, Plain] = {"state": self.advice.state.value}
        if self.advice.withheld:
            expect["withheld"] = "yes"
        scenario: dict[str, Plain] = {
            "format": 1,
            "title": writable(title),
            "point_kind": self.case.point_kind,
            "guards": writable(guards),
            "status": "draft",
            "answers": as_plain(self.case, self.knowledge),
            "gaps": "open",
            "expect": expect,
        }
        write_text_safely(path, to_yaml(scenario), exclusive=True)

    def close(self) -> None:
        """Let others open the kept file."""
        if self.keeper is not None:
            self.keeper.release()

    def _remembered(self) -> Iterator[Change]:
        """The changes that the history tells, where it leads to the very answers of the case."""
        changes: list[Change] = []
        answers: dict[str, Answer] = {}
        for line in self.history:
            what = line.split(" ", 2)[-1]
            name, told, typed = what.partition(": ")
            if not told and what.startswith("undo ") and changes:
                last = changes.pop()
                answers.pop(last.name, None)
                if last.before is not None:
                    answers[last.name] = last.before
            elif told and name in self.knowledge.facts:
                changes.append(Change(name, answers.get(name)))
                try:
                    answers[name] = answer(self.knowledge.facts[name], typed, strict=False)
                except Unsuitable:
                    return
        given = self.case.answers
        if answers.keys() == given.keys() and all(each.says(given[name]) for name, each in answers.items()):
            self.case = Case(self.case.point_kind, self.case.title, answers)
            yield from changes


def _texts(advice: Advice) -> dict[str, str]:
    return {each.id: each.full for each in rows_shown(advice)}


def _differences(one: Mapping[str, str], other: Mapping[str, str]) -> list[str]:
    return [row for row in {**one, **other} if one.get(row) != other.get(row)]
