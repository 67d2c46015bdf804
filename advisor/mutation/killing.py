"""Which scenario kills a mutant: whose advice then differs from its expectations in something that people read."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from itertools import chain, islice

from advisor.advice import Advice, Advisor, TooOpen
from advisor.bending import answers_of
from advisor.conditions.terms import names
from advisor.knowledge import Asks, Instance
from advisor.mutation.effects import Effect, Effects, only_cautions
from advisor.mutation.mutants import Mutant, pairs_of
from advisor.mutation.standing_in import Advised, advised, by_mutant, keeps_facts, plain
from advisor.replay import Difference, Played, Scenario, differences
from advisor.replay.expectations import CautionIs, ProductIs

MOST_TRIED = 200
_NAMING = ("rule", "caution", "to", "property", "name")
_CONCLUDING = ("caution", "to", "property", "name")
_PRODUCTS = "the products"


@dataclass(slots=True)
class Jury:
    """The scenarios as they are without any change, and what kills mutants of them.

    Scenarios on one case are told apart by what they expect only; `alike` leads from each to its case.
    """

    advisor: Advisor
    played: Sequence[Played]
    speaks_of: Sequence[frozenset[str]]
    cases: Sequence[Advised]
    alike: Sequence[int]
    killers: dict[str, list[int]] = field(default_factory=dict)
    noticed: dict[tuple[int, str, Effect], bool] = field(default_factory=dict)

    def killer(self, mutant: Mutant) -> Scenario | None:
        """The first scenario found that differs anew, among those that the change touches.

        Those that killed mutants of this rule are tried first, then those that expect something of what it speaks of;
        after `MOST_TRIED` the mutant counts as not killed, so that the score can only be too low.
        """
        known = self.killers.setdefault(mutant.rule, [])
        trial = _Trial(self, mutant)
        likely = (place for place in self._in_order(mutant, known) if trial.may_kill(place))
        seen = (place for place in known if trial.noticed_before(place))
        for place in chain(seen, islice(likely, MOST_TRIED)):
            if trial.differs(place):
                known[:] = [place, *(each for each in known if each != place)]
                return self.played[place].scenario
        return None

    def _in_order(self, mutant: Mutant, known: list[int]) -> list[int]:
        """The scenarios, the likeliest to kill first; of equals those last that are run once per variant."""
        about = names_in(mutant, self.advisor.knowledge.instances[mutant.step])
        rest = [place for place in range(len(self.played)) if place not in known]
        rest.sort(key=lambda place: (-len(about & self.speaks_of[place]), len(self.played[place].advice.runs)))
        return [*known, *rest]


class _Trial:
    """One mutant before the jury: what it does on every case, looked up where that was seen of another."""

    def __init__(self, jury: Jury, mutant: Mutant) -> None:
        self._jury, self._mutant = jury, mutant
        self._does = Effects(mutant, jury.advisor.knowledge.instances[mutant.step])
        self._same_facts = keeps_facts(pairs_of(mutant, jury.advisor.knowledge), jury.advisor.knowledge)
        # A fact that no rule concludes any more is there from the first step on, and shows where a case ends early.
        self._whole = self._same_facts or self._by_mutant.setters == jury.advisor.setters
        self._effects: dict[int, Effect] = {}
        self._said: dict[int, Advice | None] = {}

    @cached_property
    def _by_mutant(self) -> Advisor:
        return by_mutant(self._jury.advisor, self._mutant)

    def may_kill(self, place: int) -> bool:
        """Whether the change touches the scenario in something that it could expect."""
        played = self._jury.played[place]
        if not self._is_told_by_effect(place):
            return self._does.touches(played.advice)
        found = self._effect(place)
        cautions = only_cautions(found) if found else frozenset()
        if cautions is None:
            return True
        return any(isinstance(each, CautionIs) and each.caution in cautions for each in played.scenario.expectations)

    def noticed_before(self, place: int) -> bool:
        """Whether the scenario noticed another mutant with the same effect."""
        key = self._key(place)
        return key is not None and self._jury.noticed.get(key, False)

    def differs(self, place: int) -> bool:
        """Whether the advice by the mutant differs anew."""
        key = self._key(place)
        if key is None:
            return self._differs(place)
        if key not in self._jury.noticed:
            self._jury.noticed[key] = self._differs(place)
        return self._jury.noticed[key]

    def _key(self, place: int) -> tuple[int, str, Effect] | None:
        """What the outcome depends on, where the effect tells it."""
        if not self._is_told_by_effect(place):
            return None
        return place, self._mutant.step, self._effect(place)

    def _is_told_by_effect(self, place: int) -> bool:
        """Whether nothing but the effect decides what the advice becomes: not so where a case is run several times."""
        return self._whole and self._jury.cases[self._jury.alike[place]].run is not None

    def _effect(self, place: int) -> Effect:
        case = self._jury.alike[place]
        if case not in self._effects:
            self._effects[case] = self._does.on(self._jury.played[place].advice)
        return self._effects[case]

    def _differs(self, place: int) -> bool:
        played, case = self._jury.played[place], self._jury.alike[place]
        if case not in self._said:
            self._said[case] = self._advice(self._jury.cases[case])
        advice = self._said[case]
        if advice is None:
            return True
        return bool(_read(differences(advice, played.scenario.expectations)) - _read(played.differences))

    def _advice(self, case: Advised) -> Advice | None:
        """The advice by the mutant; none where too much is left open."""
        try:
            return case.by(self._by_mutant, same_facts=self._same_facts)
        except TooOpen:
            return None


def assemble(scenarios: Iterable[Scenario], advisor: Advisor) -> Jury:
    """Replay the scenarios without any change, each case once."""
    twin = plain(advisor)
    numbers: dict[object, int] = {}
    cases: list[Advised] = []
    played: list[Played] = []
    alike: list[int] = []
    for scenario in scenarios:
        saved = scenario.saved
        number = numbers.setdefault((saved.assume_gaps, saved.only, answers_of(saved.case)), len(cases))
        if number == len(cases):
            cases.append(advised(twin, saved.case, assume_gaps=saved.assume_gaps, only=saved.only))
        advice = cases[number].advice
        played.append(Played(scenario, advice, differences(advice, scenario.expectations)))
        alike.append(number)
    return Jury(twin, played, [_expected_of(each.scenario) for each in played], cases, alike)


def _expected_of(scenario: Scenario) -> frozenset[str]:
    """The rules, cautions, properties and facts that a scenario expects something of, and whether of products too."""
    told = [getattr(each, name, None) for each in scenario.expectations for name in _NAMING]
    told += [_PRODUCTS for each in scenario.expectations if isinstance(each, ProductIs)]
    return frozenset(each for each in told if isinstance(each, str))


def names_in(mutant: Mutant, before: Sequence[Instance]) -> frozenset[str]:
    """The mutant's rule, the facts that it looks at, what its conclusions speak of; products where it demands."""
    found = {mutant.rule}
    for place, after in mutant.changed.items():
        for instance in (before[place], after):
            if instance is not None:
                found |= set(names(instance.when))
            for each in instance.then if instance is not None else ():
                found |= {str(name) for key in _CONCLUDING if (name := getattr(each, key, None)) is not None}
                found |= {_PRODUCTS} if isinstance(each, Asks) else set()
    return frozenset(found)


def _read(found: Iterable[Difference]) -> set[str]:
    return {str(each) for each in found if each.read}
