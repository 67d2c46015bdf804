"""Search for a case in which a surviving mutant advises otherwise."""

from collections.abc import Container, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import islice

from advisor.advice import Advice, Advisor, TooOpen
from advisor.bending import Bender, answered
from advisor.boxes import Among, Box, Side, Stretch, Ticks, boxes_of
from advisor.boxes.sides import a_value, whole
from advisor.case import Case
from advisor.conditions import Coded, Condition, Domain, Every, Record, Value, negated
from advisor.conditions.terms import Void
from advisor.knowledge import CLOSING_FACTS, Knowledge
from advisor.mutation.killing import Jury, touches
from advisor.mutation.mutants import Mutant
from advisor.mutation.standing_in import by_mutant
from advisor.mutation.telling import Part, told
from advisor.replay import Scenario

MOST_FIXES = 4
MOST_BASES = 12
MOST_BOXES = 20
RECORDS_A_TRY = 10
REMEMBERED = 1000
_TRIED = (0.1, 0.5, 2.0, 10.0)


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
    left: int = 0

    @property
    def advisor(self) -> Advisor:
        """The plain advisor that goes by the knowledge as it is."""
        return self.jury.advisor

    def domains(self) -> Mapping[str, Domain]:
        """The domains of everything that conditions see."""
        known = self.advisor.knowledge
        return {**CLOSING_FACTS, **{name: known.domain(name) for name in (*known.facts, *known.computations)}}

    def voidable(self) -> frozenset[str]:
        """What may have no value for good."""
        known = self.advisor.knowledge
        concluded = (name for name, each in known.facts.items() if each.concluded)
        return frozenset({*known.computations, *concluded, *CLOSING_FACTS})

    def region(self, mutant: Mutant) -> list[Box]:
        """Where the rules of the mutant do otherwise: on what their step sees, not yet on what is advised."""
        known = self.advisor.knowledge
        found: list[Box] = []
        for place, after in mutant.changed.items():
            was = known.instances[mutant.step][place]
            if after is None or after.then != was.then:
                found += boxes_of(was.when, self.domains(), self.voidable())
            else:
                found += apart(was.when, after.when, self.domains(), self.voidable())
                found += apart(after.when, was.when, self.domains(), self.voidable())
        return found

    def find(self, mutant: Mutant, tries: int) -> tuple[Found | None, int]:
        """A case that kills, if these many tries find one, and how many were made."""
        twin = by_mutant(self.advisor, mutant)
        self.left = tries * RECORDS_A_TRY
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
            near = sorted((len(_unmet(box, self._record(place))), place) for place in range(len(self.jury.played)))
            chosen = [place for lacks, place in near if lacks <= MOST_FIXES][:MOST_BASES]
            ways.append(self._box_ways(box, chosen))
        yield from _in_turn(ways)

    def _box_ways(self, box: Box, places: Sequence[int]) -> Iterator[tuple[Scenario, Case]]:
        yield from _in_turn([self._ways(box, place) for place in places])

    def _ways(self, box: Box, place: int) -> Iterator[tuple[Scenario, Case]]:
        scenario = self.jury.played[place].scenario
        for case in self._fixed(box, scenario.saved.case, scenario.saved.assume_gaps, MOST_FIXES):
            yield scenario, case

    def _record(self, place: int) -> Record:
        if place not in self.seen:
            advice = self.jury.played[place].advice
            self.seen[place] = advice.closing or advice.record
        return self.seen[place]

    def _fixed(self, box: Box, case: Case, assume_gaps: bool, left: int) -> Iterator[Case]:
        """The case with answers changed, fact after fact, until it lies in the box."""
        self.left -= 1
        record = self.bender.record(case, assume_gaps=assume_gaps)
        unmet = [name for name in _unmet(box, record) if name not in CLOSING_FACTS]
        if not unmet:
            yield case
            return
        if not left or self.left < 0:
            return
        name = unmet[0]
        for wanted in _wanted(box.sides[name], record.get(name), self.domains()[name]):
            for bent in islice(self._bent(case, name, wanted, assume_gaps), 6):
                yield from self._fixed(box, bent, assume_gaps, left - 1)

    def _bent(self, case: Case, name: str, wanted: Coded, assume_gaps: bool) -> Iterator[Case]:
        numeric = isinstance(wanted, float) and self.domains()[name].kind == "number"
        if name in self.bender.behind(name) or numeric:
            yield from self.bender.bent(case, name, wanted, assume_gaps=assume_gaps)
            return
        for question in self.bender.behind(name):
            if question != name:
                for value in self._others(case, question):
                    self.left -= 1
                    bent = answered(case, question, value, self.advisor.knowledge)
                    if self.bender.record(bent, assume_gaps=assume_gaps).get(name) == wanted:
                        yield bent

    def _others(self, case: Case, question: str) -> Iterator[Value]:
        """Other answers to a question than the one given."""
        domain = self.advisor.knowledge.domain(question)
        given = case.answers.get(question)
        value = given.value if given is not None else None
        if domain.kind == "several":
            ticked = value if isinstance(value, tuple) else ()
            for tick in domain.choices:
                chosen = set(ticked) ^ {tick}
                yield tuple(each for each in domain.choices if each in chosen)
        elif domain.kind == "number" and isinstance(value, float):
            size = domain.step.size if domain.step else 0.0
            near = [value - 10 * size, value + 10 * size, *(value * share for share in _TRIED)]
            yield from (round(each, 6) for each in near if domain.low <= each <= domain.high and each != value)
        else:
            yield from (choice for choice in domain.choices if choice != value)

    def _shaken(self, scenario: Scenario, case: Case) -> Iterator[tuple[Scenario, Case]]:
        """The case with one other answer."""
        for question in case.answers:
            for value in self._others(case, question):
                yield scenario, answered(case, question, value, self.advisor.knowledge)


def apart(
    one: Condition, other: Condition, domains: Mapping[str, Domain], voidable: Container[str]
) -> list[Box]:
    """Where the one condition holds and the other fails."""
    return boxes_of(Every((one, negated(other, voidable))), domains, voidable)


def _unmet(box: Box, record: Record) -> list[str]:
    """The facts that keep a record out of the box."""
    return [name for name, side in box.sides.items() if isinstance(name, str) and not _on(side, record.get(name))]


def _on(side: Side, seen: Coded | Void | None) -> bool:
    if seen is None or isinstance(seen, Void):
        return seen is not None and not isinstance(side, Stretch | Among | Ticks)
    if isinstance(side, Stretch):
        return isinstance(seen, float) and side.has(seen)
    if isinstance(side, Among):
        return (seen in side.values) is side.wanted
    return isinstance(side, Ticks) and isinstance(seen, frozenset) and side.set <= seen and not side.clear & seen


def _wanted(side: Side, seen: Coded | Void | None, domain: Domain) -> Iterator[Coded]:
    """Values on the side, likely ones first."""
    if isinstance(side, Ticks):
        ticked = seen if isinstance(seen, frozenset) else frozenset()
        yield (ticked | side.set) - side.clear
    elif isinstance(side, Among):
        declared = whole(domain)
        some = [each for each in declared.values if isinstance(declared, Among)] if isinstance(declared, Among) else []
        yield from sorted((each for each in some if (each in side.values) is side.wanted), key=str)
        if domain.open_choices:
            yield from (choice for choice in domain.choices if (choice in side.values) is side.wanted)
    elif isinstance(side, Stretch):
        ends = ((side.low, side.low_open), (side.high, side.high_open))
        yield from (end for end, is_open in ends if not is_open and domain.low < end < domain.high)
        middle = a_value(side, domain)
        if isinstance(middle, float):
            yield middle


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
