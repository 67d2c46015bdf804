"""A comparison as text, as Markdown for a merge request, and as data for JSON."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import Any

from advisor.boxes import Among, Box, Lacking, Side, Stretch, Ticks
from advisor.comparison.changing import Changed
from advisor.comparison.edits import RULE, TABLE, Edit
from advisor.comparison.meaning import Meaning
from advisor.comparison.regions import Region, Witness
from advisor.conditions import Domain
from advisor.documents import Problem
from advisor.explanation.words import domain_of, say_value, title_of
from advisor.knowledge import Knowledge

FORMAT = 1
MOST_SHOWN = 5


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
    yield from (f"{bullet}{each}" for each in comparison.edits)
    for causes, changed in comparison.groups():
        yield ""
        yield f"{heading}Changed by {_listed(causes)}"
        for each in changed:
            yield f"{bullet}{code}{each.name}{code}: {each.meaning}"
            yield from (f"  {bullet}{line}" for line in _shown(_difference_lines(each)))
    yield from _region_lines(comparison, heading, bullet)


def _listed(causes: Iterable[Edit]) -> str:
    words = [str(each) for each in causes]
    more = f" and {len(words) - MOST_SHOWN} more" if len(words) > MOST_SHOWN else ""
    return ", ".join(words[:MOST_SHOWN]) + more


def _shown(lines: list[str]) -> list[str]:
    rest = len(lines) - MOST_SHOWN
    return [*lines[:MOST_SHOWN], f"and {rest} more"] if rest > 0 else lines


def _difference_lines(changed: Changed) -> list[str]:
    return [
        f"{' '.join(part[:2])}: {was or 'nothing'} -> {now or 'nothing'}"
        for part, (was, now) in changed.differences.items()
    ]


def _region_lines(comparison: Comparison, heading: str, bullet: str) -> Iterator[str]:
    for edit in comparison.edits:
        own = [each for each in comparison.regions if each.edit == edit]
        if not own:
            if edit.kind in {RULE, TABLE}:
                yield ""
                yield f"{heading}{edit}: no rule does otherwise on anything that its step sees"
            continue
        yield ""
        yield f"{heading}Where {edit.name} does otherwise: {len(own)} region{'s' if len(own) > 1 else ''}"
        for each in own[:MOST_SHOWN]:
            yield f"{bullet}{each.instance} {each.how} where {say_box(each.box, comparison.new)}"
            yield f"  {bullet}{_say_witness(each.witness, comparison.new)}"
        if len(own) > MOST_SHOWN:
            yield f"{bullet}and {len(own) - MOST_SHOWN} more"


def _say_witness(witness: Witness, knowledge: Knowledge) -> str:
    seen = ", ".join(
        f"{title_of(name, knowledge)} {say_value(domain_of(name, knowledge), value)}"
        for name, value in witness.record.items()
    )
    if witness.answers is None:
        return f"record: {seen or 'anything'}"
    answers = ", ".join(f"{name}: {text}" for name, text in witness.answers.items())
    return f"whole case: like {witness.like}{f' with {answers}' if answers else ''}; there {seen}"


def say_box(box: Box, knowledge: Knowledge) -> str:
    """A region in words."""
    words = []
    for key, side in box.sides.items():
        if isinstance(key, tuple):
            order = " or ".join(sorted(map(str, side.values))) if isinstance(side, Among) else ""
            words.append(f"{title_of(key[0], knowledge)} {order} {title_of(key[1], knowledge)}")
        else:
            words.append(f"{title_of(key, knowledge)} {_say_side(side, key, knowledge)}")
    return ", ".join(words) or "always"


def _say_side(side: Side, name: str, knowledge: Knowledge) -> str:
    domain = domain_of(name, knowledge)
    if isinstance(side, Lacking):
        return "without a value"
    if isinstance(side, Ticks):
        parts = [f"with {domain.label(tuple(sorted(side.set)))}"] if side.set else []
        parts += [f"without {domain.label(tuple(sorted(side.clear)))}"] if side.clear else []
        return " and ".join(parts) or "with a value"
    if isinstance(side, Among):
        values = sorted(side.values, key=str)
        return f"{'' if side.wanted else 'other than '}{' or '.join(say_value(domain, each) for each in values)}"
    return _say_stretch(side, domain)


def _say_stretch(side: Stretch, domain: Domain) -> str:
    if side.low == side.high:
        return f"exactly {say_value(domain, side.low)}"
    parts = []
    if side.low > domain.low or side.low_open:
        parts.append(f"{'above' if side.low_open else 'at least'} {say_value(domain, side.low)}")
    if side.high < domain.high or side.high_open:
        parts.append(f"{'below' if side.high_open else 'at most'} {say_value(domain, side.high)}")
    return " and ".join(parts) or "with a value"


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


def as_data(comparison: Comparison) -> dict[str, Any]:
    """The comparison for JSON."""
    return {
        "format": FORMAT,
        "old": comparison.old.fingerprint,
        "new": comparison.new.fingerprint,
        "point_kind": comparison.new.point_kind.id,
        "edits": [_edit_data(each) for each in comparison.edits],
        "replayed": comparison.replayed,
        "groups": [
            {
                "causes": [_edit_data(each) for each in causes],
                "scenarios": [
                    {
                        "file": str(each.path),
                        "meaning": str(each.meaning),
                        "differences": [
                            {"part": list(part), "old": was, "new": now}
                            for part, (was, now) in each.differences.items()
                        ],
                    }
                    for each in changed
                ],
            }
            for causes, changed in comparison.groups()
        ],
        "regions": [
            {
                "edit": _edit_data(each.edit),
                "step": each.step,
                "instance": each.instance,
                "how": each.how,
                "where": say_box(each.box, comparison.new),
                "witness": {
                    "kind": "record" if each.witness.answers is None else "whole case",
                    "record": {name: _plain(value) for name, value in each.witness.record.items()},
                    "like": each.witness.like,
                    "answers": dict(each.witness.answers or {}),
                },
            }
            for each in comparison.regions
        ],
    }


def _edit_data(edit: Edit) -> dict[str, str]:
    return {"kind": edit.kind, "name": edit.name, "how": edit.how}


def _plain(value: object) -> object:
    return sorted(value) if isinstance(value, frozenset) else value if isinstance(value, float | str) else None
