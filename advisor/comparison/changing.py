"""Which scenarios an edition changes, what the change means, and which edits cause it."""

from collections import Counter
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from pathlib import Path

from advisor.advice import Advisor
from advisor.advice.advising import setters_of
from advisor.answers import Saved, point_kind_of, read_case
from advisor.bending import answers_of
from advisor.comparison.edits import RULE, Edit, carried, differ, with_edits
from advisor.comparison.meaning import Meaning, Sense, Words, differing, worst
from advisor.comparison.replays import Pair, RuleEdits, Said, say
from advisor.comparison.standing import names_of, stands
from advisor.documents import Problem, Problems
from advisor.knowledge import Knowledge
from advisor.mutation import by_rules, plain


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
            mixed = with_edits(self.old, self.new, key) if 0 < len(key) < len(self.edits) else None
            whole = self.new if key else self.old
            # An edit that names what another one declares cannot be made alone.
            made = whole if mixed is None else mixed if stands(mixed, self.declared) else None
            base = self.advisors.get(frozenset()) if self.only_rules else None
            if made is None:
                self.advisors[key] = None
            else:
                self.advisors[key] = by_rules(base, made) if base is not None else plain(Advisor(made))
        return self.advisors[key]

    @cached_property
    def only_one_has(self) -> frozenset[str]:
        """The products that only one of the shelves holds."""
        old, new = ({each.item for each in edition.shelf} for edition in (self.old, self.new))
        return frozenset(old ^ new)

    @cached_property
    def declared(self) -> frozenset[str]:
        """The names that either edition declares."""
        return names_of(self.old) | names_of(self.new)

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


@dataclass(frozen=True, slots=True)
class Replayed:
    """The scenarios that were replayed, those of them that change, and what is wrong with the files of others."""

    paths: tuple[Path, ...]
    changed: tuple[Changed, ...]
    problems: tuple[Problem, ...]
    judged: Mapping[tuple[str, str], int]
    """How often a product that only one edition has came to a verdict."""

    def with_more(self, other: "Replayed") -> "Replayed":
        """These and more."""
        problems = tuple(dict.fromkeys((*self.problems, *other.problems)))
        return Replayed(
            (*self.paths, *other.paths),
            (*self.changed, *other.changed),
            problems,
            Counter(self.judged) + Counter(other.judged),
        )


Found = tuple[Meaning, Mapping[tuple[str, ...], tuple[str, str]], tuple[Edit, ...]]
"""What a change means, what differs, and what causes it."""

Judged = tuple[tuple[str, str], ...]
"""Products that only one edition has, with their verdicts on one case."""


class Replays:
    """Scenarios by both editions."""

    def __init__(self, editions: Editions) -> None:
        self.editions = editions
        self.words = tuple(Words(each, editions.only_one_has) for each in (editions.old, editions.new))
        self.known: dict[object, tuple[Found | None, Judged]] = {}
        self._read: tuple[dict[Path, Saved], dict[Path, Saved]] = {}, {}
        self._words_of: dict[int, Words] = {}
        old, new = editions.advisor(()), editions.advisor(editions.edits)
        touched = [pair for edit in editions.edits for pair in pairs(editions.old, editions.new, edit)]
        self._rules = (
            RuleEdits(old, new, touched) if editions.only_rules and old is not None and new is not None else None
        )

    def replayed(self, files: Sequence[Path]) -> Replayed:
        """These scenarios by both editions; those about another kind of point are left out."""
        changed: list[Changed] = []
        paths: list[Path] = []
        judged = Counter[tuple[str, str]]()
        problems = Problems()
        for path in files:
            old, new = self._read_by_both(path)
            if old is not None or new is not None:
                paths.append(path)
                each, verdicts = _changed(path, old, new, self)
                changed += [each] if each is not None else []
                judged.update(verdicts)
            elif point_kind_of(path) == self.editions.new.point_kind.id:
                read_case(path, self.editions.new, problems)
        return Replayed(tuple(paths), tuple(changed), tuple(problems), judged)

    def _read_by_both(self, path: Path) -> tuple[Saved | None, Saved | None]:
        """The case as either edition reads it; where only rules were edited, that is the same."""
        old = read_case(path, self.editions.old, Problems(), self._read[0])
        same = self.editions.only_rules
        return old, old if same else read_case(path, self.editions.new, Problems(), self._read[1])

    def read_by(self, advisor: Advisor, old: Saved, new: Saved) -> Saved | None:
        """The case as a mixture of the editions reads it, where it understands it at all."""
        facts = advisor.knowledge.facts
        for saved, declared in ((old, self.editions.old.facts), (new, self.editions.new.facts)):
            if all(name in facts and not differ(facts[name], declared[name]) for name in saved.case.answers):
                return saved
        return read_case(old.path, advisor.knowledge, Problems())

    def words_of(self, knowledge: Knowledge) -> Words:
        """The words of an edition, or of a mixture of both; editions with other rules only have the same."""
        if self.editions.only_rules or knowledge is self.editions.old:
            return self.words[0]
        if knowledge is self.editions.new:
            return self.words[1]
        return self._words_of.setdefault(id(knowledge), Words(knowledge, self.editions.only_one_has))

    def why_unread(self, path: Path, knowledge: Knowledge) -> str:
        """What keeps an edition from reading a case."""
        problems = Problems()
        read_case(path, knowledge, problems)
        return "; ".join(each.message for each in problems)

    def said(self, old: Saved, new: Saved) -> tuple[Said, Said] | None:
        """What both editions say; nothing where no edit concerns the case."""
        if self._rules is not None:
            return self._rules.said(old)
        before, after = self.editions.advisor(()), self.editions.advisor(self.editions.edits)
        return say(old, before, self.words[0]), say(new, after, self.words[1])


def _changed(path: Path, old: Saved | None, new: Saved | None, both: Replays) -> tuple[Changed | None, Judged]:
    if old is None or new is None:
        editions = both.editions
        why = f"is not understood: {both.why_unread(path, editions.old if old is None else editions.new)}"
        gone = (why, "is understood") if old is None else ("is understood", why)
        return Changed(path.stem, path, Meaning.SAFETY, {("case",): gone}, editions.edits), ()
    key = _key(old), _key(new)
    if key not in both.known:
        both.known[key] = _found(old, new, both)
    found, judged = both.known[key]
    return Changed(path.stem, path, *found) if found is not None else None, judged


def _key(saved: Saved) -> object:
    """What the advice on a scenario depends on; several scenarios may ask about one case."""
    return saved.assume_gaps, saved.only, answers_of(saved.case)


def _found(old: Saved, new: Saved, both: Replays) -> tuple[Found | None, Judged]:
    # One rule that does otherwise may change the facts that later rules see: no edit is left out beforehand.
    said = both.said(old, new)
    if said is None:
        return None, ()
    before, after = said
    judged = tuple(each for side in said if not isinstance(side, str) for each in side.judged())
    if isinstance(before, str) or isinstance(after, str):
        if before == after:
            return None, judged
        pair = tuple(each if isinstance(each, str) else "advice" for each in (before, after))
        return (Meaning.SAFETY, {("advice",): (pair[0], pair[1])}, both.editions.edits), judged
    meaning = worst(before, after)
    if meaning is Meaning.SAME:
        return None, judged
    return (meaning, differing(before, after, meaning), _causes(old, new, after, meaning, both)), judged


def pairs(old: Knowledge, new: Knowledge, edit: Edit) -> list[Pair]:
    """The instances that an edit touches, old beside new, by step."""
    rules = set(carried(old, new, edit))
    before = {each.id: (step, each) for step, found in old.instances.items() for each in found if each.rule.id in rules}
    after = {each.id: (step, each) for step, found in new.instances.items() for each in found if each.rule.id in rules}
    result: list[Pair] = []
    for name in (*before, *(each for each in after if each not in before)):
        was, now = before.get(name), after.get(name)
        if was and now and was[0] != now[0]:
            result += [(was[0], was[1], None), (now[0], None, now[1])]
        else:
            result.append(((was or now)[0], was[1] if was else None, now[1] if now else None))  # type: ignore[index]  # one of them is there
    return result


def _causes(old: Saved, new: Saved, after: Sense, meaning: Meaning, both: Replays) -> tuple[Edit, ...]:
    """The smallest set of edits (none of which can be left out) that has the effect of all."""
    editions = both.editions
    if len(editions.edits) == 1:
        return editions.edits

    def enough(chosen: Iterable[Edit]) -> bool:
        advisor = editions.advisor(chosen)
        saved = both.read_by(advisor, old, new) if advisor is not None else None
        if advisor is None or saved is None:
            return False
        said = say(saved, advisor, both.words_of(advisor.knowledge))
        return not isinstance(said, str) and said[meaning] == after[meaning]

    for edit in editions.edits:
        if enough([edit]):
            return (edit,)
    left = list(editions.edits)
    for edit in list(left):
        rest = [each for each in left if each != edit]
        if enough(rest):
            left = rest
    return tuple(left)
