"""What a mutant changes on one advice: the conclusions that come or go, before anything follows from them."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

from advisor.advice import Advice
from advisor.conditions import Record, waits_for
from advisor.explanation.seeing import record_at
from advisor.inference.judging import judge_of
from advisor.knowledge import Instance, Warns
from advisor.knowledge.model import Conclusion
from advisor.mutation.mutants import Mutant


@dataclass(frozen=True, slots=True)
class Drawn:
    """What an instance concludes, or could conclude once the facts that it waits for are known."""

    then: tuple[Conclusion, ...] = ()
    waits: frozenset[str] = frozenset()


_NOTHING = Drawn()
Effect = tuple[tuple[int, Drawn, Drawn], ...]
"""Where the changed instances stand that do otherwise, what each concluded, and what it concludes now.

Of two mutants with the same effect on a case the advice is the same, but for the words of its trace.
"""


class Effects:
    """Finds the effects of one mutant, its conditions made ready once."""

    def __init__(self, mutant: Mutant, before: Sequence[Instance]) -> None:
        self._step = mutant.step
        self._pairs = [(place, draws(before[place]), draws(after)) for place, after in mutant.changed.items()]

    def on(self, advice: Advice) -> Effect:
        """What the mutant does otherwise on the first thing that an advice saw; without open answers that is all."""
        record = next(records(advice, self._step), None)
        if record is None:
            return ()
        pairs = ((place, was(record), now(record)) for place, was, now in self._pairs)
        return tuple(each for each in pairs if each[1] != each[2])

    def touches(self, advice: Advice) -> bool:
        """Whether a changed rule does otherwise on anything that an advice saw."""
        return any(was(record) != now(record) for record in records(advice, self._step) for _, was, now in self._pairs)


def draws(instance: Instance | None) -> Callable[[Record], Drawn]:
    """Tells what an instance, which may be lacking, concludes on what it sees."""
    if instance is None:
        return lambda _: _NOTHING
    when, judge, fired = instance.when, judge_of(instance.when), Drawn(instance.then)

    def drawn(record: Record) -> Drawn:
        outcome = judge(record)
        if outcome is None:
            return Drawn(fired.then, frozenset(waits_for(when, record)))
        return fired if outcome else _NOTHING

    return drawn


def only_cautions(effect: Effect) -> frozenset[str] | None:
    """The cautions that alone come or go; nothing where something else does, or waits.

    Cautions are drawn last, and no other part of an advice on settled answers looks at them.
    """
    found: set[str] = set()
    for _, was, now in effect:
        if was.waits or now.waits:
            return None
        for each in set(was.then) ^ set(now.then):
            if not isinstance(each, Warns):
                return None
            found.add(each.caution)
    return frozenset(found)


def records(advice: Advice, step: str) -> Iterator[Record]:
    """What the rules of a step saw, once for every variant of the case."""
    for run in advice.single:
        if any(each.step == step for each in run.trace):
            yield record_at(run, step)
