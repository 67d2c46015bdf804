"""The regions of the input space in which an edited rule does otherwise, outside any scenario, each with a witness."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import islice

from advisor.answers import Saved
from advisor.bending import Bender, apart, domains_seen, unmet, where
from advisor.boxes import Box, uncovered
from advisor.case import Case
from advisor.comparison.changing import Editions, pairs
from advisor.comparison.edits import Edit
from advisor.comparison.standing import suits, unknown
from advisor.conditions import ALWAYS, Coded, Every, Record, holds
from advisor.conditions.terms import Void
from advisor.inference import StepRules
from advisor.knowledge import CLOSING_FACTS, Instance, Knowledge

RECORDS_EACH = 60
MOST_CASES = 6
MOST_NEAR = 80
_FIRES, _SILENT = "fires now", "no longer fires"


@dataclass(frozen=True, slots=True)
class Witness:
    """A record of the region on which both engines find the difference; a whole case where answers lead there."""

    record: Record
    like: str = ""
    answers: Mapping[str, str] | None = None


@dataclass(frozen=True, slots=True)
class Region:
    """A box of what a step sees, in which an instance of an edited rule does otherwise."""

    edit: Edit
    step: str
    instance: str
    how: str
    box: Box
    witness: Witness
    knowledge: Knowledge
    """The edition by whose words it is told."""


@dataclass(frozen=True, slots=True)
class LeftOut:
    """An instance of an edited rule whose two conditions no edition understands both, and what stands in the way."""

    instance: str
    names: tuple[str, ...]


def regions(editions: Editions, cases: Sequence[Saved]) -> list[Region]:
    """Every region of every edited rule, and of every rule over an edited table."""
    found: list[Region] = []
    bender = _bender(editions)
    near = cases[:: max(1, len(cases) // MOST_NEAR)] if bender is not None else []
    seen = [(saved, bender.record(saved.case, assume_gaps=saved.assume_gaps)) for saved in near if bender is not None]
    for edit in editions.edits:
        left = MOST_CASES
        for step, was, now in pairs(editions.old, editions.new, edit):
            by = edition_for(was, now, editions)
            if by is None:
                continue
            for how, box in differing_boxes(was, now, by):
                witness = confirmed(box, was, now, by)
                if left and bender is not None and by is editions.new:
                    left -= 1
                    witness = _whole(witness, box, seen, bender, (was, now))
                found.append(Region(edit, step, (now or was).id, how, box, witness, by))  # type: ignore[union-attr]  # one is there
    return found


def edition_for(was: Instance | None, now: Instance | None, editions: Editions) -> Knowledge | None:
    """The edition that declares everything that both conditions read, the new one first; nothing where none does."""
    conditions = [each.when for each in (was, now) if each is not None]
    both = (editions.new, editions.old)
    return next((each for each in both if all(suits(condition, each) for condition in conditions)), None)


def left_out(editions: Editions) -> tuple[LeftOut, ...]:
    """What no region is looked for in, because a name went between the editions."""
    found: dict[str, LeftOut] = {}
    for edit in editions.edits:
        for _, was, now in pairs(editions.old, editions.new, edit):
            if was is not None and now is not None and edition_for(was, now, editions) is None:
                lost = (*unknown(was.when, editions.new), *unknown(now.when, editions.old))
                found[now.id] = LeftOut(now.id, tuple(dict.fromkeys(lost)))
    return tuple(found.values())


def _bender(editions: Editions) -> Bender | None:
    advisor = editions.advisor(editions.edits)
    return Bender(advisor) if advisor is not None else None


def differing_boxes(was: Instance | None, now: Instance | None, knowledge: Knowledge) -> Iterator[tuple[str, Box]]:
    """Disjoint boxes in which one instance does other than the other, and what it does there."""
    before, after = _binding(was), _binding(now)
    same = before is not None and after is not None and before.then == after.then
    told: list[Box] = []
    for how, boxes in (
        (_SILENT, _only(before, after, knowledge)),
        (_FIRES, _only(after, before, knowledge)),
        ("concludes otherwise", [] if same else _both(before, after, knowledge)),
    ):
        for box in boxes:
            for piece in uncovered(box, told):
                yield how, piece
            told.append(box)


def _binding(instance: Instance | None) -> Instance | None:
    """The instance where its conclusions count."""
    return instance if instance is not None and instance.binds else None


def _only(one: Instance | None, other: Instance | None, knowledge: Knowledge) -> list[Box]:
    if one is None:
        return []
    return where(one.when, knowledge) if other is None else apart(one.when, other.when, knowledge)


def _both(one: Instance | None, other: Instance | None, knowledge: Knowledge) -> list[Box]:
    return [] if one is None or other is None else where(Every((one.when, other.when)), knowledge)


def confirmed(box: Box, was: Instance | None, now: Instance | None, knowledge: Knowledge) -> Witness:
    """The witness of a box, judged by the engine and plainly, which must agree that the instances differ on it.

    Raises:
        AssertionError: where they do not, so that a region is wrong: a fault of ours.
    """
    record = {name: value for name, value in box.witness().items() if value is not None}
    if not differs_on(record, was, now, domains_seen(knowledge)):
        raise AssertionError(f"no difference at {record}")
    return Witness(record)


def differs_on(record: Record, was: Instance | None, now: Instance | None, domains: Mapping[str, object]) -> bool:
    """Whether two instances do otherwise on a record, by both engines."""
    pair = [_binding(each) for each in (was, now)]
    rules = StepRules([each.when if each else ALWAYS for each in pair], domains)  # type: ignore[arg-type]  # domains by name
    outcomes = rules.judge(record)
    rules.close()
    fired = [each.then if each is not None and outcome else None for each, outcome in zip(pair, outcomes, strict=True)]
    return fired[0] != fired[1]


def _whole(
    witness: Witness,
    box: Box,
    seen: Sequence[tuple[Saved, Record]],
    bender: Bender,
    pair: tuple[Instance | None, Instance | None],
) -> Witness:
    """A whole case that leads into the box, if the nearest scenarios can be bent there."""
    if any(name in CLOSING_FACTS for name in box.names):
        return witness
    near = sorted(seen, key=lambda each: len(unmet(box, each[1])))
    for saved, _ in near[:2]:
        bender.left = RECORDS_EACH
        for case in islice(bender.into(box, saved.case, assume_gaps=saved.assume_gaps), 2):
            record = bender.record(case, assume_gaps=saved.assume_gaps)
            if _outcome(pair[0], record) != _outcome(pair[1], record):
                return Witness(_named(record, box), saved.path.stem, _changed(saved.case, case))
    return witness


def _outcome(instance: Instance | None, record: Record) -> object:
    binding = _binding(instance)
    return binding.then if binding is not None and holds(binding.when, record) else None


def _named(record: Record, box: Box) -> dict[str, Coded | Void]:
    return {name: record[name] for name in sorted(box.names) if name in record}


def _changed(before: Case, after: Case) -> dict[str, str]:
    return {name: answer.typed for name, answer in after.answers.items() if before.answers.get(name) != answer}
