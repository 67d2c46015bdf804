"""Which scenario kills a mutant: whose advice then differs from its expectations in something that people read."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, field

from advisor.advice import Advice, Advisor, TooOpen
from advisor.conditions import Record, holds, waits_for
from advisor.explanation.seeing import record_at
from advisor.knowledge import Instance
from advisor.mutation.mutants import Mutant
from advisor.mutation.standing_in import by_mutant, plain
from advisor.replay import Played, Scenario, play


@dataclass(slots=True)
class Jury:
    """The scenarios as they are without any change, and what kills mutants of them."""

    advisor: Advisor
    played: Sequence[Played]
    killers: dict[str, list[int]] = field(default_factory=dict)

    def killer(self, mutant: Mutant) -> Scenario | None:
        """The first scenario found that differs anew; those that killed mutants of this rule are tried first."""
        before = self.advisor.knowledge.instances[mutant.step]
        advisor = by_mutant(self.advisor, mutant)
        known = self.killers.setdefault(mutant.rule, [])
        rest = [place for place in range(len(self.played)) if place not in known]
        for place in (*known, *rest):
            played = self.played[place]
            if touches(mutant, before, played.advice) and self._differs(played, advisor):
                self.killers[mutant.rule] = [place, *(each for each in known if each != place)]
                return played.scenario
        return None

    def _differs(self, played: Played, advisor: Advisor) -> bool:
        try:
            return bool(_read(play(played.scenario, advisor)) - _read(played))
        except TooOpen:
            return True


def assemble(scenarios: Iterable[Scenario], advisor: Advisor) -> Jury:
    """Replay the scenarios without any change."""
    twin = plain(advisor)
    return Jury(twin, [play(each, twin) for each in scenarios])


def _read(played: Played) -> set[str]:
    return {str(each) for each in played.differences if each.read}


def touches(mutant: Mutant, before: Sequence[Instance], advice: Advice) -> bool:
    """Whether a changed rule does otherwise on what this advice saw."""
    pairs = [(before[place], after) for place, after in mutant.changed.items()]
    return any(otherwise(was, now, record) for record in records(advice, mutant.step) for was, now in pairs)


def records(advice: Advice, step: str) -> Iterator[Record]:
    """What the rules of a step saw, once for every variant of the case."""
    for branch in advice.branches:
        for end in (branch.advice, branch.other_end):
            if end is not None:
                yield from records(end, step)
    if not advice.branches and any(each.step == step for each in advice.trace):
        yield record_at(advice, step)


def otherwise(was: Instance | None, now: Instance | None, record: Record) -> bool:
    """Whether one of two instances, either of which may be lacking, does other than the other on what it sees."""
    if was is None or now is None or was.then != now.then:
        return any(each is not None and holds(each.when, record) is not False for each in (was, now))
    before, after = holds(was.when, record), holds(now.when, record)
    return before is not after or (before is None and waits_for(was.when, record) != waits_for(now.when, record))
