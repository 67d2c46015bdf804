"""What was left open, run once per value: the variants, the stretches of a range, and the advice over all of them."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

from advisor.advice.facts import Facts
from advisor.advice.left_open import (
    MOST_BRANCHES,
    TooOpen,
    Variant,
    is_asked,
    limits_on,
    open_ranges,
    standing_for,
    thresholds,
    variants_of,
    with_answers,
)
from advisor.advice.merging import merged
from advisor.advice.model import Advice, Branch, Course, Span
from advisor.advice.ranges import Grid, Walk, courses, said_at, stretches
from advisor.advice.readings import LEVELS
from advisor.advice.steadiness import Steadiness
from advisor.case import Answer, Case
from advisor.knowledge import Knowledge

__all__ = ["TooOpen", "advise_over"]

MOST_LOOKED_AT = 300
"""Values of a range that are looked at over all variants, before changes between them are found to the step."""
MOST_IN_ONE = 110
"""Values that are looked at in one variant; as many again may serve to find changes to the step."""

Run = Callable[[Case], Advice]
Labelled = tuple[str, Advice]


def advise_over(case: Case, knowledge: Knowledge, run: Run, *, assume_gaps: bool = False) -> Advice:
    """The advice for a case in which something may be left open.

    Raises:
        TooOpen: beyond two things left open, two ranges, or six variants.
    """
    ranges = open_ranges(case, knowledge, assume_gaps=assume_gaps)
    if len(ranges) > 1:
        titles = ", ".join(knowledge.title(name) for name in ranges)
        raise TooOpen(f"Too much is left open at once ({titles}). Leave open two things at most, one of them a range.")
    if ranges:
        return _Ranging(case, ranges[0], knowledge, run, assume_gaps).advice()
    variants = variants_of(case, knowledge, assume_gaps=assume_gaps)
    branches = tuple(Branch(each.label, each.settings, run(each.case), contested=each.forks) for each in variants)
    if len(branches) == 1:
        return replace(branches[0].advice, case=case)
    runs = [(each.label, each.advice) for each in branches]
    return merged(case, runs, blend=not any(each.forks for each in variants), branches=branches)


@dataclass(frozen=True, slots=True)
class _Strip:
    """One variant over a part of the range, from place to place; without places, where the range is not asked."""

    variant: Variant
    places: tuple[int, int] | None


class _Ranging:
    """One case over a range."""

    def __init__(self, case: Case, name: str, knowledge: Knowledge, run: Run, assume_gaps: bool) -> None:
        self.case, self.name, self.knowledge, self.run, self.assume_gaps = case, name, knowledge, run, assume_gaps
        fact, span = knowledge.facts[name], case.answers[name].span
        assert span is not None  # noqa: S101 - only ranges get here
        self.title, self.domain = fact.title, fact.domain
        self.steady = Steadiness(knowledge, name)
        self.grid = Grid(span[0], span[1], fact.domain.step.size if fact.domain.step else 1.0)

    def advice(self) -> Advice:
        """The advice over the whole range and all variants."""
        strips = self._strips()
        if len(strips) > MOST_BRANCHES:
            raise TooOpen(f"That makes more than {MOST_BRANCHES} variants. Answer some of what is left open.")
        branches: list[Branch] = []
        told: list[Course] = []
        runs: list[Labelled] = []
        walks = []
        for strip in strips:
            if strip.places is None:
                found = self.run(strip.variant.case)
                variant = strip.variant
                branches.append(Branch(variant.label, variant.settings, found, contested=variant.forks))
                runs.append((strip.variant.label, found))
                continue
            most = min(MOST_IN_ONE, MOST_LOOKED_AT // len(strips))
            walk = self._walked(strip, strip.places, most)
            parted = stretches(walk, MOST_BRANCHES // len(strips))
            for level in range(LEVELS + 1):
                walk.sharpen(walk.key_of(level), 2 * most)
            branches += [self._branch(strip.variant, walk, *each) for each in parted]
            told += courses(walk, walk.first, walk.last, self.grid.value, strip.variant.label)
            runs += self._labelled(strip.variant, walk, walk.first, walk.last)
            walks.append(walk)
        if len(branches) == 1:
            return replace(branches[0].advice, held_over=branches[0].label)
        blend = not any(each.variant.forks for each in strips)
        span = self._span(walks, 0, self.grid.last)
        return merged(self.case, runs, blend=blend, branches=tuple(branches), courses=tuple(told), span=span)

    # ---- what else is left open, value by value --------------------------------------------------------------------

    def _at(self, case: Case, place: int) -> Case:
        """The case with one value of the range."""
        typed = self.case.answers[self.name].typed
        return with_answers(case, {self.name: Answer(self.grid.value(place), typed)}, self.knowledge)

    def _variants(self, place: int) -> list[tuple[Variant, bool]]:
        """The variants at a value, and whether the range is asked in each."""
        found = variants_of(
            self._at(self.case, place), self.knowledge, assume_gaps=self.assume_gaps, beside=(self.title,)
        )
        return [(each, is_asked(each.case, self.name, self.knowledge, assume_gaps=self.assume_gaps)) for each in found]

    def _strips(self) -> list[_Strip]:
        """The variants, each over the values at which it arises: what is asked and contested may hang on the value."""
        facts = Facts(self._at(self.case, 0), self.knowledge, assume_gaps=self.assume_gaps)
        marks = {0, *self.grid.beside(thresholds(self.name, self.knowledge, facts))}
        found: dict[object, list[_Strip]] = {}
        for first, following in pairwise([*sorted(marks), self.grid.last + 1]):
            for variant, asked in self._variants(first):
                known = found.setdefault((variant.label, tuple(variant.settings.items()), asked), [])
                if not asked:
                    known[:] = [_Strip(variant, None)]
                elif known and (before := known[-1].places) is not None and before[1] == first - 1:
                    known[-1] = _Strip(known[-1].variant, (before[0], following - 1))
                else:
                    known.append(_Strip(variant, (first, following - 1)))
        return [strip for strips in found.values() for strip in strips]

    # ---- the values looked at --------------------------------------------------------------------------------------

    def _walked(self, strip: _Strip, places: tuple[int, int], most: int) -> Walk:
        """The values of a strip that were looked at, about so many."""
        walk = Walk(*places, lambda place: self.run(self._at(strip.variant.case, place)), self.steady)
        facts = Facts(self._at(strip.variant.case, places[0]), self.knowledge, assume_gaps=self.assume_gaps)
        conditions = [each.when for step in self.knowledge.instances.values() for each in step]
        marks = self.grid.beside(limits_on(standing_for(self.name, self.knowledge), conditions, facts))
        walk.look(marks, most)
        return walk

    def _branch(self, variant: Variant, walk: Walk, first: int, last: int) -> Branch:
        """The advice over one stretch."""
        low, high = self.grid.value(first), self.grid.value(last)
        label = "; ".join(filter(None, (variant.label, self._said(low, high))))
        found = merged(
            self.case,
            self._labelled(variant, walk, first, last),
            blend=True,
            courses=courses(walk, first, last, self.grid.value, variant.label),
            span=self._span([walk], first, last),
        )
        return Branch(label, {**variant.settings, self.name: low}, found, (low, high), variant.forks)

    def _labelled(self, variant: Variant, walk: Walk, first: int, last: int) -> list[Labelled]:
        """The runs of a stretch with their labels."""
        return [
            ("; ".join(filter(None, (variant.label, self._said(value, value)))), walk.at(place))
            for place in walk.places
            if first <= place <= last and (value := self.grid.value(place)) is not None
        ]

    def _said(self, low: float, high: float) -> str:
        ends = dict.fromkeys((said_at(low, self.domain), said_at(high, self.domain)))
        return f"{self.title} {' to '.join(ends)}"

    def _span(self, walks: Sequence[Walk], first: int, last: int) -> Span:
        """How closely a stretch was looked at: by the variant in which it was least."""
        counted = [sum(first <= place <= last for place in walk.places) for walk in walks]
        ends = [min(last, walk.last) - max(first, walk.first) + 1 for walk in walks]
        looked_at, values = min(zip(counted, ends, strict=True), key=lambda each: each[0] / each[1])
        return Span(
            self.name,
            self.grid.value(first),
            self.grid.value(last),
            looked_at,
            values,
            all(walk.surely for walk in walks),
        )
