"""From conditions to the engine's rule sets: conjunctions of tests, dealt out so that no limit of the engine is met."""

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final, NamedTuple

from advisor.conditions import (
    Bound,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Stated,
    Ticked,
    Valueless,
    alternatives,
)
from advisor.inference.attributes import Attributes, Spelling, number, text
from advisor.inference.faults import TooManyBranches, UnfitCondition, Unsendable

MOST_BRANCHES: Final = 40
"""Per condition; more is a table that wants to be written as one."""

MOST_PENDING: Final = 60
"""Branches of a rule set that one record can leave pending together; the engine overruns at 65."""

MOST_IN_SET: Final = 120
"""Branches of a rule set altogether; the engine hangs or dies at some hundreds."""

MOST_ATTRIBUTES: Final = 200
"""Attributes per rule set; the engine refuses a record of 255."""

SENTINEL: Final = "zzz"
"""The rule that must fire in every case."""

PROBE: Final = '{"$gt":{"probe":0.5}}'
"""The first test of every rule, and the only one of the sentinel.

It keeps rules that only ask for absence from firing on the engine's own messages, and it fails where a number
is read with a decimal comma.
"""

HEAD: Final = '{"id":"c","sid":"1","probe":0.7'
RETRACTION: Final = '{"id":"c","sid":"1"}'
_SIGNS: Final = {"<": "$lt", "<=": "$lte", ">": "$gt", ">=": "$gte", "!=": "$neq"}


class Test(NamedTuple):
    """One test in the engine's words, and the attributes it looks at.

    Of the choosing tests on one attribute (it equals a text) no record passes two.
    """

    words: str
    attributes: tuple[int, ...]
    choosing: bool = False


Branch = tuple[Test, ...]
Branches = list[Branch]


@dataclass(frozen=True, slots=True)
class RuleSet:
    """What the engine builds one rule set from; `owners` leads from the names of its rules to conditions."""

    definition: str
    owners: Mapping[str, int]
    attributes: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class Compiled:
    """All rule sets of some conditions, how records are written for them, and what holds without looking."""

    rule_sets: tuple[RuleSet, ...]
    spellings: tuple[Spelling, ...]
    always: frozenset[int]


def compile_conditions(conditions: Sequence[Condition], domains: Mapping[str, Domain]) -> Compiled:
    """Bring the conditions into the engine's form; raises `UnfitCondition` with the position of the first unfit one."""
    attributes = Attributes(domains)
    always: set[int] = set()
    branches: list[tuple[int, Branch]] = []
    for index, condition in enumerate(conditions):
        own = _compiled(index, condition, domains, attributes)
        # A conjunction of nothing always holds, and the engine fires an empty one twice: it never gets to see it.
        if () in own:
            always.add(index)
        else:
            branches += [(index, branch) for branch in own]
    if attributes.clash():
        raise UnfitCondition(0, "its attributes cannot be told apart by the engine; split the step.")
    rule_sets = tuple(_rule_set(part.branches, part.attributes) for part in _dealt_out(branches))
    return Compiled(rule_sets, tuple(attributes.spellings), frozenset(always))


def _compiled(index: int, condition: Condition, domains: Mapping[str, Domain], attributes: Attributes) -> Branches:
    count = alternatives(condition)
    if count > MOST_BRANCHES:
        raise TooManyBranches(
            index,
            f"its alternatives multiply to {count} combinations, and {MOST_BRANCHES} is the most that one rule may "
            "have; write several rules, or a table.",
        )
    try:
        own = _Alternatives(domains, attributes).of(condition)
    except (_UnfitTermError, Unsendable) as unfit:
        raise UnfitCondition(index, str(unfit)) from None
    if any(len(_attributes(branch)) > MOST_ATTRIBUTES for branch in own):
        raise UnfitCondition(index, f"it looks at more than {MOST_ATTRIBUTES} values at once; write several rules.")
    return own


class _UnfitTermError(ValueError):
    """Why a term cannot be brought into the engine's form."""


@dataclass(frozen=True, slots=True)
class _Alternatives:
    """Writes conditions as alternatives, each a conjunction of tests."""

    domains: Mapping[str, Domain]
    attributes: Attributes

    def of(self, condition: Condition) -> Branches:
        if isinstance(condition, Either):
            return list(dict.fromkeys(branch for part in condition.parts for branch in self.of(part)))
        if isinstance(condition, Every):
            return self._every(condition)
        if isinstance(condition, Bound):
            return self._bound(condition)
        if isinstance(condition, Member):
            return self._member(condition)
        if isinstance(condition, Ticked):
            return self._ticked(condition)
        return self._valueless(condition) if isinstance(condition, Valueless) else self._stated(condition)

    def _every(self, condition: Every) -> Branches:
        if alternatives(condition) == 0:
            return []
        product: Branches = [()]
        for part in condition.parts:
            written = self.of(part)
            product = [done + more for done in product for more in written]
        return list(dict.fromkeys(_choosing_first(branch) for branch in product))

    def _bound(self, term: Bound) -> Branches:
        seen = self._number(term.name)
        if not isinstance(term.limit, FactRef):
            return [(_compare(seen, term.sign, number(term.limit)),)]
        limit = self._number(term.limit.name)
        # Against an absent attribute the engine's answer is left to chance, so its presence is tested first.
        against = _compare(seen, term.sign, f'{{"$m":"a{limit}"}}', limit)
        return [(_present(limit), against)]

    def _member(self, term: Member) -> Branches:
        domain = self._domain(term.name)
        if domain.kind == "several":
            raise _UnfitTermError(f"{term.name} is a list of ticks, and a membership needs one choice.")
        seen = self.attributes.value(term.name)
        spell = number if domain.ordered else text
        spelled = sorted(spell(each) for each in term.among)
        if term.wanted:
            return [(_compare(seen, "=", each)._replace(choosing=not domain.ordered),) for each in spelled]
        return [tuple(_compare(seen, "!=", each) for each in spelled) or (_present(seen),)]

    def _ticked(self, term: Ticked) -> Branches:
        if self._domain(term.name).kind != "several":
            raise _UnfitTermError(f"{term.name} is no list of ticks.")
        ticks = [self.attributes.tick(term.name, choice) for choice in sorted(term.among)]
        if term.wanted:
            return [(_compare(tick, "=", "true"),) for tick in ticks]
        clear = tuple(_compare(tick, "=", "false") for tick in ticks)
        return [clear or (_present(self.attributes.answered(term.name)),)]

    def _stated(self, term: Stated) -> Branches:
        several = self._domain(term.name).kind == "several"
        seen = self.attributes.answered(term.name) if several else self.attributes.value(term.name)
        return [(_present(seen) if term.wanted else _absent(seen),)]

    def _valueless(self, term: Valueless) -> Branches:
        return [(_compare(self.attributes.void(term.name), "=", "true" if term.wanted else "false"),)]

    def _number(self, name: str) -> int:
        if not self._domain(name).ordered:
            raise _UnfitTermError(f"{name} is neither a number nor a place on a scale, and a threshold needs one.")
        return self.attributes.value(name)

    def _domain(self, name: str) -> Domain:
        if name not in self.domains:
            raise _UnfitTermError(f"{name} is not declared.")
        return self.domains[name]


def _compare(attribute: int, sign: str, constant: str, *others: int) -> Test:
    equal = f'{{"a{attribute}":{constant}}}'
    return Test(equal if sign == "=" else f'{{"{_SIGNS[sign]}":{equal}}}', (attribute, *others))


def _present(attribute: int) -> Test:
    return Test(f'{{"$ex":{{"a{attribute}":1}}}}', (attribute,))


def _absent(attribute: int) -> Test:
    return Test(f'{{"$nex":{{"a{attribute}":1}}}}', (attribute,))


def _attributes(branch: Branch) -> set[int]:
    return {attribute for test in branch for attribute in test.attributes}


def _choosing_first(branch: Branch) -> Branch:
    """The branch with its choosing tests in front, and every test said once.

    The engine walks the tests in order, so most branches end at a choice, and alternatives of a choice never wait
    together: `_Part` counts on that.
    """
    return tuple(sorted(dict.fromkeys(branch), key=lambda test: not test.choosing))


class _Part:
    """Branches that go into one rule set, and how many of them one record can leave pending."""

    def __init__(self) -> None:
        self.branches: list[tuple[int, Branch]] = []
        self.attributes: set[int] = set()
        self._open = 0
        self._chosen: dict[int, Counter[Test]] = {}

    def add(self, owner: int, branch: Branch) -> None:
        self.branches.append((owner, branch))
        self.attributes |= _attributes(branch)
        first = branch[0]
        if first.choosing:
            self._chosen.setdefault(first.attributes[0], Counter())[first] += 1
        else:
            self._open += 1

    def takes(self, branch: Branch) -> bool:
        """Whether there is surely room for one more."""
        pending = self._open + sum(max(counts.values()) for counts in self._chosen.values())
        room = pending < MOST_PENDING and len(self.branches) < MOST_IN_SET
        return room and len(self.attributes | _attributes(branch)) <= MOST_ATTRIBUTES


def _dealt_out(branches: list[tuple[int, Branch]]) -> list[_Part]:
    parts: list[_Part] = []
    for owner, branch in branches:
        if not parts or not parts[-1].takes(branch):
            parts.append(_Part())
        parts[-1].add(owner, branch)
    return parts


def _rule_set(branches: list[tuple[int, Branch]], attributes: set[int]) -> RuleSet:
    named = {f"{place:03}": owned for place, owned in enumerate(branches)}
    rules = [_rule(name, [test.words for test in branch]) for name, (_, branch) in named.items()]
    rules.append(_rule(SENTINEL, []))
    owners = {name: owner for name, (owner, _) in named.items()}
    return RuleSet("{" + ",".join(rules) + "}", owners, tuple(sorted(attributes)))


def _rule(name: str, tests: list[str]) -> str:
    return f'"{name}":{{"all":[{{"m":{{"$and":[{",".join([PROBE, *tests])}]}}}}]}}'
