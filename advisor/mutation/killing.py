"""Which scenario kills a mutant: whose advice then differs from its expectations in something that people read."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, field
from itertools import islice

from advisor.advice import Advice, Advisor, TooOpen
from advisor.conditions import Record, holds, waits_for
from advisor.explanation.seeing import record_at
from advisor.knowledge import Instance
from advisor.mutation.mutants import Mutant
from advisor.mutation.standing_in import by_mutant, plain
from advisor.replay import Played, Scenario, play

MOST_TRIED = 120
_NAMING = ("rule", "caution", "to", "property", "name")
_CONCLUDING = ("caution", "to", "property", "name")


@dataclass(slots=True)
class Jury:
    """The scenarios as they are without any change, and what kills mutants of them."""

    advisor: Advisor
    played: Sequence[Played]
    speaks_of: Sequence[frozenset[str]]
    killers: dict[str, list[int]] = field(default_factory=dict)

    def killer(self, mutant: Mutant) -> Scenario | None:
        """The first scenario found that differs anew, among those that the change touches.

        Those that killed mutants of this rule are tried first, then those that expect something of what it speaks of;
        after `MOST_TRIED` the mutant counts as not killed, so that the score can only be too low.
        """
        before = self.advisor.knowledge.instances[mutant.step]
        advisor = by_mutant(self.advisor, mutant)
        known = self.killers.setdefault(mutant.rule, [])
        touched = (
            place for place in self._in_order(mutant, known) if touches(mutant, before, self.played[place].advice)
        )
        for place in islice(touched, MOST_TRIED):
            if self._differs(self.played[place], advisor):
                self.killers[mutant.rule] = [place, *(each for each in known if each != place)]
                return self.played[place].scenario
        return None

    def _in_order(self, mutant: Mutant, known: list[int]) -> list[int]:
        """The scenarios, the likeliest to kill first."""
        names = names_in(mutant, self.advisor.knowledge.instances[mutant.step])
        rest = [place for place in range(len(self.played)) if place not in known]
        rest.sort(key=lambda place: -len(names & self.speaks_of[place]))
        return [*known, *rest]

    def _differs(self, played: Played, advisor: Advisor) -> bool:
        try:
            return bool(_read(play(played.scenario, advisor)) - _read(played))
        except TooOpen:
            return True


def assemble(scenarios: Iterable[Scenario], advisor: Advisor) -> Jury:
    """Replay the scenarios without any change."""
    twin = plain(advisor)
    played = [play(each, twin) for each in scenarios]
    return Jury(twin, played, [_expected_of(each.scenario) for each in played])


def _expected_of(scenario: Scenario) -> frozenset[str]:
    """The rules, cautions, properties and facts that a scenario expects something of."""
    told = (getattr(each, name, None) for each in scenario.expectations for name in _NAMING)
    return frozenset(each for each in told if isinstance(each, str))


def names_in(mutant: Mutant, before: Sequence[Instance]) -> frozenset[str]:
    """The mutant's rule, and what its conclusions speak of."""
    found = {mutant.rule}
    for place, after in mutant.changed.items():
        for instance in (before[place], after):
            for each in instance.then if instance is not None else ():
                found |= {str(name) for key in _CONCLUDING if (name := getattr(each, key, None)) is not None}
    return frozenset(found)


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
