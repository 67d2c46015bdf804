"""A comparison as text, and as Markdown for a merge request."""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from advisor.comparison.changing import Changed
from advisor.comparison.details import details, shown
from advisor.comparison.differences import alike
from advisor.comparison.edits import RULE, TABLE, Edit, carried
from advisor.comparison.meaning import Meaning
from advisor.comparison.regions import LeftOut, Region
from advisor.comparison.saying import say_box, say_witness
from advisor.documents import Problem
from advisor.knowledge import Knowledge

MOST_SHOWN = 5


@dataclass(frozen=True, slots=True)
class Shelved:
    """A product that only one edition has, and in how many scenarios it comes to each verdict."""

    item: str
    new: bool
    verdicts: Mapping[str, int]

    def __str__(self) -> str:
        counts = [f"{verdict.replace('_', ' ')} in {count}" for verdict, count in self.verdicts.items()]
        if counts:
            counts[0] += f" scenario{'s' * (next(iter(self.verdicts.values())) != 1)}"
        was = "is new" if self.new else "is gone"
        return f"{self.item} {was}: {', '.join(counts) or 'no scenario judges it'}"


@dataclass(frozen=True, slots=True)
class Comparison:
    """What was edited between two editions, which scenarios change, and where else the edited rules do otherwise."""

    old: Knowledge
    new: Knowledge
    edits: tuple[Edit, ...]
    replayed: int
    changed: tuple[Changed, ...]
    regions: tuple[Region, ...]
    problems: tuple[Problem, ...]
    left_out: tuple[LeftOut, ...] = ()
    shelved: tuple[Shelved, ...] = ()

    def groups(self) -> list[tuple[tuple[Edit, ...], list[Changed]]]:
        """The changed scenarios by the edits that cause them, the worst group first."""
        found: dict[tuple[Edit, ...], list[Changed]] = {}
        for each in sorted(self.changed, key=lambda each: (_rank(each), each.name)):
            found.setdefault(each.causes, []).append(each)
        return sorted(found.items(), key=lambda item: (_rank(item[1][0]), -len(item[1]), item[0]))


def _rank(changed: Changed) -> int:
    return list(Meaning).index(changed.meaning)


def as_text(comparison: Comparison) -> str:
    """The edits, the changed scenarios by edit, and the regions."""
    return "\n".join(_lines(comparison, heading="", bullet="  ", code=""))


def as_markdown(comparison: Comparison) -> str:
    """The same for a merge request."""
    return "\n".join(_lines(comparison, heading="### ", bullet="- ", code="`"))


def _lines(comparison: Comparison, heading: str, bullet: str, code: str) -> Iterator[str]:
    yield f"{heading}{summary(comparison)}"
    if not comparison.edits:
        return
    yield ""
    yield f"{heading}Edited"
    for each in comparison.edits:
        yield f"{bullet}{each}"
        yield from (f"  {bullet}{line}" for line in shown(details(comparison.old, comparison.new, each)))
    yield from _shelf_lines(comparison, bullet)
    for causes, changed in comparison.groups():
        yield ""
        yield f"{heading}Changed by {_listed(causes)}"
        for same in alike(changed):
            first = f"{code}{same.names}{code}" if len(same.changed) == 1 else same.names
            yield f"{bullet}{first}: {same.changed[0].meaning}"
            yield from (f"  {bullet}{line}" for line in _first(same.lines))
    yield from _region_lines(comparison, heading, bullet)
    if comparison.left_out:
        yield ""
        yield say_left_out(comparison)


def _shelf_lines(comparison: Comparison, bullet: str) -> Iterator[str]:
    if comparison.shelved:
        yield ""
        yield from (f"{bullet}{each}" for each in comparison.shelved)


def _listed(causes: Iterable[Edit]) -> str:
    return _few([str(each) for each in causes])


def _first(lines: Sequence[str]) -> list[str]:
    rest = len(lines) - MOST_SHOWN
    return [*lines[:MOST_SHOWN], *([f"and {rest} more"] if rest > 0 else [])]


def say_left_out(comparison: Comparison) -> str:
    """What no region was looked for in, in one sentence."""
    names = list(dict.fromkeys(name for each in comparison.left_out for name in each.names))
    rules = [each.instance for each in comparison.left_out]
    return (
        f"No regions were looked for in {_few(rules)}: only one edition has {_few(names)}, "
        "or has it with the values that are asked for."
    )


def _few(words: list[str]) -> str:
    more = f" and {len(words) - MOST_SHOWN} more" if len(words) > MOST_SHOWN else ""
    return ", ".join(words[:MOST_SHOWN]) + more


def _region_lines(comparison: Comparison, heading: str, bullet: str) -> Iterator[str]:
    lost = {each.instance.partition("/")[0] for each in comparison.left_out}
    for edit in comparison.edits:
        own = [each for each in comparison.regions if each.edit == edit]
        if not own:
            if edit.kind in {RULE, TABLE} and not lost.intersection(carried(comparison.old, comparison.new, edit)):
                yield ""
                yield f"{heading}{edit}: no rule does otherwise on anything that its step sees"
            continue
        yield ""
        yield f"{heading}Where {edit.name} does otherwise: {len(own)} region{'s' if len(own) > 1 else ''}"
        for each in own[:MOST_SHOWN]:
            yield f"{bullet}{each.instance} {each.how} where {say_box(each.box, each.knowledge)}"
            yield f"  {bullet}{say_witness(each.witness, each.knowledge)}"
        if len(own) > MOST_SHOWN:
            yield f"{bullet}and {len(own) - MOST_SHOWN} more"


def summary(comparison: Comparison) -> str:
    """The counts in one sentence."""
    if not comparison.edits:
        return f"Nothing was edited; fingerprint {comparison.new.fingerprint}."
    counts = [
        f"{count} {meaning}"
        for meaning in Meaning
        if (count := sum(each.meaning is meaning for each in comparison.changed))
    ]
    edited = len(comparison.edits)
    return (
        f"{comparison.old.fingerprint} -> {comparison.new.fingerprint}: {edited} edit{'s' if edited > 1 else ''}; "
        f"{len(comparison.changed)} of {comparison.replayed} scenarios change ({', '.join(counts) or 'none'})."
    )
