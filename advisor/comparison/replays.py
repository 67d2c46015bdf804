"""What both editions say of a case, where an edit concerns it at all."""

from collections.abc import Sequence

from advisor.advice import Advice, Advisor, TooOpen
from advisor.advice.running import CLOSING, Run
from advisor.answers import Saved
from advisor.comparison.edits import sense
from advisor.comparison.meaning import Sense, Words
from advisor.conditions import Record
from advisor.knowledge import Instance
from advisor.mutation import draws, keeps_facts, records
from advisor.mutation.effects import Drawn

Said = Sense | str
"""What an advice says; or why there is none."""

Pair = tuple[str, Instance | None, Instance | None]
"""A step, and an instance of it as it was and as it is; one of them may be lacking."""


def say(saved: Saved, advisor: Advisor | None, words: Words) -> Said:
    """What an edition, if it stands at all, says of a case."""
    if advisor is None:
        return "no advice"
    try:
        return Sense(advisor.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only), words)
    except TooOpen as fault:
        return str(fault)


class RuleEdits:
    """Editions that differ in nothing but rules: what a case shows the edited ones tells whether they concern it."""

    def __init__(self, old: Advisor, new: Advisor, pairs: Sequence[Pair]) -> None:
        self._old, self._new = old, new
        self._words = Words(old.knowledge), Words(new.knowledge)
        self._same_facts = keeps_facts([(was, now) for _, was, now in pairs], old.knowledge)
        self._edited = [_Edited(*pair) for pair in pairs]
        self._closing = any(step == CLOSING for step, _, _ in pairs)

    def said(self, saved: Saved) -> tuple[Said, Said] | None:
        """What both say; nothing where no edited rule does or says otherwise."""
        run = self._old.run_if_settled(saved.case, assume_gaps=saved.assume_gaps)
        return self._of_several(saved) if run is None else self._of_one(saved, run)

    def _of_several(self, saved: Saved) -> tuple[Said, Said] | None:
        """A case that is run once for each way to settle what it leaves open."""
        try:
            before = self._old.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only)
        except TooOpen as fault:
            return str(fault), say(saved, self._new, self._words[1])
        # Between the values of a range that were looked at, an edited rule may do otherwise unseen.
        if not self._concerns(before) and not any(each.span for each in saved.case.answers.values()):
            return None
        return Sense(before, self._words[0]), say(saved, self._new, self._words[1])

    def _of_one(self, saved: Saved, run: Run) -> tuple[Said, Said] | None:
        if not self._may_concern(run):
            return None
        before = self._old.advice_of(run, saved.only)
        if self._closing and not self._concerns(before):
            return None
        if not self._same_facts:
            return Sense(before, self._words[0]), say(saved, self._new, self._words[1])
        after = self._new.advice_of(run.again(self._new.knowledge, self._new.rules), saved.only)
        return Sense(before, self._words[0]), Sense(after, self._words[1])

    def _may_concern(self, run: Run) -> bool:
        """Whether an edited rule does otherwise on what a case shows it; the closing step sees more, and may yet."""
        record, steps = run.facts.record, {each.step for each in run.trace}
        return any(
            each.concerned(record) if each.step in steps else each.step == CLOSING and each.may_yet(record)
            for each in self._edited
        )

    def _concerns(self, advice: Advice) -> bool:
        return any(each.concerned(record) for each in self._edited for record in records(advice, each.step))


class _Edited:
    """An instance as it was and as it is."""

    def __init__(self, step: str, was: Instance | None, now: Instance | None) -> None:
        self.step = step
        self._before, self._after = draws(was), draws(now)
        self._other_words = was is not None and now is not None and sense(was) != sense(now)

    def concerned(self, record: Record) -> bool:
        """Whether it does otherwise on what it sees, or says the same in other words."""
        drawn = self._after(record)
        return self._before(record) != drawn or (self._other_words and drawn != Drawn())

    def may_yet(self, record: Record) -> bool:
        """Whether it may be concerned once it sees more than this."""
        return self.concerned(record) or bool(self._before(record).waits or self._after(record).waits)
