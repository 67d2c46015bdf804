"""Search for a case in which a surviving mutant advises otherwise."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import islice, takewhile

from advisor.advice import Advisor, TooOpen
from advisor.advice.advising import setters_of
from advisor.bending import MOST_FIXES, Bender, answered, apart, possible, unmet, where
from advisor.boxes import Box, uncovered
from advisor.case import Case
from advisor.conditions import Record
from advisor.knowledge import Knowledge, Refers
from advisor.mutation.effects import Effects
from advisor.mutation.killing import Jury
from advisor.mutation.mutants import Mutant, pairs_of
from advisor.mutation.standing_in import Advised, advised, by_mutant, keeps_facts
from advisor.mutation.telling import Part, told
from advisor.replay import Scenario

MOST_BASES = 12
MOST_BOXES = 20
RECORDS_A_TRY = 10
REMEMBERED = 1000


@dataclass(frozen=True, slots=True)
class Found:
    """A case in which the mutant advises otherwise: a scenario with other answers, and what it would tell apart."""

    knowledge: Knowledge
    like: Scenario
    case: Case
    kept: Mapping[Part, str]
    lost: Mapping[Part, str]


@dataclass(frozen=True, slots=True)
class _Told:
    """A case by the knowledge as it is, and all that its advice tells."""

    advised: Advised
    parts: dict[Part, str]


class _Trial:
    """A mutant that is tried on cases."""

    def __init__(self, advisor: Advisor, mutant: Mutant, knowledge: Knowledge) -> None:
        self._advisor = advisor
        self.does = Effects(mutant, knowledge.instances[mutant.step])
        self._same_facts = keeps_facts(pairs_of(mutant, knowledge), knowledge)
        self._whole = self._same_facts or advisor.setters == setters_of(knowledge)

    def told(self, before: _Told) -> dict[Part, str]:
        """What the advice by the mutant tells.

        Raises:
            TooOpen: where too much is left open at once.
        """
        if self._whole and before.advised.run is not None and not self.does.on(before.advised.advice):
            return before.parts
        return told(before.advised.by(self._advisor, same_facts=self._same_facts))


@dataclass(slots=True)
class Search:
    """Looks for killing cases near the scenarios."""

    jury: Jury
    bender: Bender
    seen: dict[int, Record] = field(default_factory=dict)
    told_of: dict[object, _Told] = field(default_factory=dict)

    @property
    def advisor(self) -> Advisor:
        """The plain advisor that goes by the knowledge as it is."""
        return self.jury.advisor

    def region(self, mutant: Mutant) -> list[Box]:
        """Where the rules of the mutant do otherwise on what a case can show them; the advice may still be the same."""
        known = self.advisor.knowledge
        found: list[Box] = []
        for place, after in mutant.changed.items():
            was = known.instances[mutant.step][place]
            if after is None or after.then != was.then:
                found += where(was.when, known)
            else:
                found += [*apart(was.when, after.when, known), *apart(after.when, was.when, known)]
        ended = self._ended_before(mutant.step)
        return [piece for box in possible(found, known) for piece in uncovered(box, ended)]

    def _ended_before(self, step: str) -> list[Box]:
        """Where a referral that withholds ends the case at an earlier step, so that no rule of this one is asked."""
        known = self.advisor.knowledge
        found: list[Box] = []
        for earlier in takewhile(lambda each: each.id != step, known.steps):
            for each in known.instances.get(earlier.id, ()):
                if each.binds and any(isinstance(then, Refers) and then.withhold for then in each.then):
                    found += where(each.when, known)
        return found

    def find(self, mutant: Mutant, tries: int) -> tuple[Found | None, int]:
        """A case that kills, if these many tries find one, and how many were made."""
        trial = _Trial(by_mutant(self.advisor, mutant), mutant, self.advisor.knowledge)
        self.bender.left = tries * RECORDS_A_TRY
        count = 0
        for scenario, case in islice(self._cases(mutant, trial.does), tries):
            count += 1
            found = self._compared(scenario, case, trial)
            if found is not None:
                return found, count
        return None, count

    def _compared(self, scenario: Scenario, case: Case, trial: "_Trial") -> Found | None:
        try:
            before = self._told(scenario, case)
            after = trial.told(before)
        except TooOpen:
            return None
        if before.parts == after:
            return None
        kept = {part: text for part, text in before.parts.items() if after.get(part) != text}
        lost = {part: text for part, text in after.items() if before.parts.get(part) != text}
        return Found(self.advisor.knowledge, scenario, case, kept, lost)

    def _told(self, scenario: Scenario, case: Case) -> "_Told":
        """The advice by the knowledge as it is, and what it tells; the last ones are remembered."""
        key = _key(scenario, case)
        if key not in self.told_of:
            if len(self.told_of) >= REMEMBERED:
                self.told_of.clear()
            saved = scenario.saved
            found = advised(self.advisor, case, assume_gaps=saved.assume_gaps, only=saved.only)
            self.told_of[key] = _Told(found, told(found.advice))
        return self.told_of[key]

    def _cases(self, mutant: Mutant, does: Effects) -> Iterator[tuple[Scenario, Case]]:
        """Cases on which the mutant's rules do otherwise: scenarios bent into its region, then shaken a little."""
        region = self.region(mutant)
        told_of: set[object] = set()
        reached: list[tuple[Scenario, Case]] = []
        for scenario, case in self._bent_into(region):
            if (key := _key(scenario, case)) not in told_of and self._touched(does, scenario, case):
                told_of.add(key)
                reached.append((scenario, case))
                yield scenario, case
        for scenario, case in _in_turn([self._shaken(scenario, case) for scenario, case in reached]):
            if (key := _key(scenario, case)) not in told_of:
                told_of.add(key)
                yield scenario, case

    def _touched(self, does: Effects, scenario: Scenario, case: Case) -> bool:
        try:
            return does.touches(self._told(scenario, case).advised.advice)
        except TooOpen:
            return False

    def _bent_into(self, region: Sequence[Box]) -> Iterator[tuple[Scenario, Case]]:
        """Every box in turn, the scenarios that lack least of it first."""
        ways = []
        for box in region[:: max(1, len(region) // MOST_BOXES)]:
            near = sorted((len(unmet(box, self._record(place))), place) for place in range(len(self.jury.played)))
            chosen = [place for lacks, place in near if lacks <= MOST_FIXES][:MOST_BASES]
            ways.append(self._box_ways(box, chosen))
        yield from _in_turn(ways)

    def _box_ways(self, box: Box, places: Sequence[int]) -> Iterator[tuple[Scenario, Case]]:
        yield from _in_turn([self._ways(box, place) for place in places])

    def _ways(self, box: Box, place: int) -> Iterator[tuple[Scenario, Case]]:
        scenario = self.jury.played[place].scenario
        for case in self.bender.into(box, scenario.saved.case, assume_gaps=scenario.saved.assume_gaps):
            yield scenario, case

    def _record(self, place: int) -> Record:
        if place not in self.seen:
            advice = self.jury.played[place].advice
            self.seen[place] = advice.closing or advice.record
        return self.seen[place]

    def _shaken(self, scenario: Scenario, case: Case) -> Iterator[tuple[Scenario, Case]]:
        """The case with one other answer."""
        for question in case.answers:
            for value in self.bender.others(case, question):
                yield scenario, answered(case, question, value, self.advisor.knowledge)


def _key(scenario: Scenario, case: Case) -> object:
    return scenario.path, tuple((name, answer.value) for name, answer in case.answers.items())


def _in_turn(ways: Sequence[Iterator[tuple[Scenario, Case]]]) -> Iterator[tuple[Scenario, Case]]:
    """One from each in turn, until all are spent."""
    left = list(ways)
    while left:
        for way in list(left):
            try:
                yield next(way)
            except StopIteration:
                left.remove(way)
