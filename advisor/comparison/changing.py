"""Which scenarios an edition changes, what the change means, and which edits cause it."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from pathlib import Path

from advisor.advice import Advisor, TooOpen
from advisor.advice.advising import setters_of
from advisor.advice.branching import is_open
from advisor.advice.running import CLOSING
from advisor.answers import Saved, read_case
from advisor.bending import Bender
from advisor.comparison.edits import RULE, Edit, carried, sense, with_edits
from advisor.comparison.meaning import Meaning, Sense, differing, sense_of, worst
from advisor.conditions import Record, holds
from advisor.documents import Problems
from advisor.knowledge import Instance, Knowledge
from advisor.mutation import otherwise, plain, records

Said = Sense | str
"""What an advice says; or why there is none."""


@dataclass(frozen=True, slots=True)
class Changed:
    """A scenario that changes: what the change means, what differs, and the smallest set of edits that causes it."""

    name: str
    path: Path
    meaning: Meaning
    differences: Mapping[tuple[str, ...], tuple[str, str]]
    causes: tuple[Edit, ...]


@dataclass
class Editions:
    """Two bodies of knowledge, the edits between them, and an advisor for every mixture that was asked for."""

    old: Knowledge
    new: Knowledge
    edits: tuple[Edit, ...]
    advisors: dict[frozenset[Edit], Advisor | None] = field(default_factory=dict)

    def advisor(self, chosen: Iterable[Edit]) -> Advisor | None:
        """An advisor by the old knowledge with these edits made; nothing where they do not stand without others."""
        key = frozenset(chosen)
        if key not in self.advisors:
            whole = len(key) == len(self.edits)
            try:
                mixed = self.new if whole else with_edits(self.old, self.new, key)
                self.advisors[key] = plain(Advisor(mixed))
            except (LookupError, TypeError, ValueError):
                # An edit that names what another one declares cannot be made alone.
                self.advisors[key] = None
        return self.advisors[key]

    @cached_property
    def only_rules(self) -> bool:
        """Whether nothing but rules was edited, in a way that a look at the conditions tells what changes."""
        return (
            all(each.kind == RULE for each in self.edits)
            and setters_of(self.old) == setters_of(self.new)
            and all(_in_order(self.old, self.new, step) for step in self.old.instances)
        )


def _in_order(old: Knowledge, new: Knowledge, step: str) -> bool:
    """Whether the rules that both have stand in the same order."""
    before = [each.id for each in old.instances.get(step, ())]
    after = [each.id for each in new.instances.get(step, ())]
    return [each for each in before if each in after] == [each for each in after if each in before]


def changes(files: Iterable[Path], editions: Editions, problems: Problems) -> tuple[list[Changed], list[Saved]]:
    """The scenarios that change, and the cases that were replayed."""
    found: list[Changed] = []
    cases: list[Saved] = []
    for path in files:
        old = read_case(path, editions.old, Problems())
        # Where only rules were edited, a case reads the same by either edition.
        new = old if editions.only_rules else read_case(path, editions.new, Problems())
        if old is None and new is None:
            read_case(path, editions.new, problems)
            continue
        cases += [case for case in (new or old,) if case is not None]
        changed = _changed(path, old, new, editions)
        if changed is not None:
            found.append(changed)
    return found, cases


def _changed(path: Path, old: Saved | None, new: Saved | None, editions: Editions) -> Changed | None:
    if old is None or new is None:
        gone = ("cannot be read", "") if old is None else ("", "cannot be read")
        return Changed(path.stem, path, Meaning.SAFETY, {("case",): gone}, editions.edits)
    touching = _touching(old, editions)
    if not touching:
        return None
    before = _said(old, editions.advisor(()))
    after = _said(new, editions.advisor(editions.edits))
    if isinstance(before, str) or isinstance(after, str):
        if before == after:
            return None
        pair = tuple(each if isinstance(each, str) else "advice" for each in (before, after))
        return Changed(path.stem, path, Meaning.SAFETY, {("advice",): (pair[0], pair[1])}, tuple(touching))
    meaning = worst(before, after)
    if meaning is Meaning.SAME:
        return None
    causes = _causes(old, new, after, meaning, touching, editions)
    return Changed(path.stem, path, meaning, differing(before, after, meaning), causes)


def _said(saved: Saved, advisor: Advisor | None) -> Said:
    if advisor is None:
        return "no advice"
    try:
        return sense_of(advisor.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only))
    except TooOpen as fault:
        return str(fault)


def _touching(saved: Saved, editions: Editions) -> list[Edit]:
    """The edits that may concern a scenario: rules that see it otherwise or say other words on it, all other edits."""
    advisor = editions.advisor(())
    if not editions.only_rules or advisor is None:
        return list(editions.edits)
    touched = [each for edit in editions.edits for each in pairs(editions.old, editions.new, edit)]
    if is_open(saved.case, editions.old) or any(step == CLOSING for step, _, _ in touched):
        try:
            advice = advisor.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only)
        except TooOpen:
            return list(editions.edits)
        concerned = any(_concerns(was, now, seen) for step, was, now in touched for seen in records(advice, step))
    else:
        record = Bender(advisor).record(saved.case, assume_gaps=saved.assume_gaps)
        concerned = any(_concerns(was, now, record) for _, was, now in touched)
    # One rule that does otherwise may change the facts that later rules see, so then no edit is left out.
    return list(editions.edits) if concerned else []


def _concerns(was: Instance | None, now: Instance | None, record: Record) -> bool:
    """Whether an instance does otherwise on a record, or says the same in other words."""
    if otherwise(was, now, record):
        return True
    return was is not None and now is not None and holds(now.when, record) is True and sense(was) != sense(now)


def pairs(old: Knowledge, new: Knowledge, edit: Edit) -> list[tuple[str, Instance | None, Instance | None]]:
    """The instances that an edit touches, old beside new, by step."""
    rules = set(carried(old, new, edit))
    before = {each.id: (step, each) for step, found in old.instances.items() for each in found if each.rule.id in rules}
    after = {each.id: (step, each) for step, found in new.instances.items() for each in found if each.rule.id in rules}
    result: list[tuple[str, Instance | None, Instance | None]] = []
    for name in (*before, *(each for each in after if each not in before)):
        was, now = before.get(name), after.get(name)
        if was and now and was[0] != now[0]:
            result += [(was[0], was[1], None), (now[0], None, now[1])]
        else:
            result.append(((was or now)[0], was[1] if was else None, now[1] if now else None))  # type: ignore[index]  # one of them is there
    return result


def _causes(
    old: Saved, new: Saved, after: Sense, meaning: Meaning, touching: list[Edit], editions: Editions
) -> tuple[Edit, ...]:
    """The smallest set of edits (none of which can be left out) that has the effect of all."""
    if len(editions.edits) == 1:
        return editions.edits

    def enough(chosen: Iterable[Edit]) -> bool:
        advisor = editions.advisor(chosen)
        saved = new if advisor is not None and advisor.knowledge is editions.new else old
        try:
            said = _said(saved, advisor)
        except (LookupError, TypeError, ValueError):
            return False
        return not isinstance(said, str) and said[meaning] == after[meaning]

    for edit in touching:
        if enough([edit]):
            return (edit,)
    left = list(touching) if enough(touching) else list(editions.edits)
    for edit in list(left):
        rest = [each for each in left if each != edit]
        if enough(rest):
            left = rest
    return tuple(left)
