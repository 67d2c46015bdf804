"""Search for a case in which a surviving mutant advises otherwise."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import islice

from advisor.advice import Advice, Advisor, TooOpen
from advisor.bending import MOST_FIXES, Bender, answered, apart, possible, unmet, where
from advisor.boxes import Box
from advisor.case import Case
from advisor.conditions import Record
from advisor.knowledge import Knowledge
from advisor.mutation.killing import Jury, touches
from advisor.mutation.mutants import Mutant
from advisor.mutation.standing_in import by_mutant
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


@dataclass(slots=True)
class Search:
    """Looks for killing cases near the scenarios."""

    jury: Jury
    bender: Bender
    seen: dict[int, Record] = field(default_factory=dict)
    told_of: dict[object, tuple[Advice, dict[Part, str]]] = field(default_factory=dict)

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
        return possible(found, known)

    def find(self, mutant: Mutant, tries: int) -> tuple[Found | None, int]:
        """A case that kills, if these many tries find one, and how many were made."""
        twin = by_mutant(self.advisor, mutant)
        self.bender.left = tries * RECORDS_A_TRY
        count = 0
        for scenario, case in islice(self._cases(mutant), tries):
            count += 1
            found = self._compared(scenario, case, twin)
            if found is not None:
                return found, count
        return None, count

    def _compared(self, scenario: Scenario, case: Case, twin: Advisor) -> Found | None:
        saved = scenario.saved
        try:
            _, before = self._advised(scenario, case)
            after = told(twin.advise(case, assume_gaps=saved.assume_gaps, only=saved.only))
        except TooOpen:
            return None
        if before == after:
            return None
        kept = {part: text for part, text in before.items() if after.get(part) != text}
        lost = {part: text for part, text in after.items() if before.get(part) != text}
        return Found(self.advisor.knowledge, scenario, case, kept, lost)

    def _advised(self, scenario: Scenario, case: Case) -> tuple[Advice, dict[Part, str]]:
        """The advice by the knowledge as it is, and what it tells; the last ones are remembered."""
        key = _key(scenario, case)
        if key not in self.told_of:
            if len(self.told_of) >= REMEMBERED:
                self.told_of.clear()
            saved = scenario.saved
            advice = self.advisor.advise(case, assume_gaps=saved.assume_gaps, only=saved.only)
            self.told_of[key] = advice, told(advice)
        return self.told_of[key]

    def _cases(self, mutant: Mutant) -> Iterator[tuple[Scenario, Case]]:
        """Cases on which the mutant's rules do otherwise: scenarios bent into its region, then shaken a little."""
        region = self.region(mutant)
        told_of: set[object] = set()
        reached: list[tuple[Scenario, Case]] = []
        for scenario, case in self._bent_into(region):
            if (key := _key(scenario, case)) not in told_of and self._touched(mutant, scenario, case):
                told_of.add(key)
                reached.append((scenario, case))
                yield scenario, case
        for scenario, case in _in_turn([self._shaken(scenario, case) for scenario, case in reached]):
            if (key := _key(scenario, case)) not in told_of:
                told_of.add(key)
                yield scenario, case

    def _touched(self, mutant: Mutant, scenario: Scenario, case: Case) -> bool:
        try:
            advice, _ = self._advised(scenario, case)
        except TooOpen:
            return False
        return touches(mutant, self.advisor.knowledge.instances[mutant.step], advice)

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
