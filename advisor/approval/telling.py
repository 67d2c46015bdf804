"""Tell what is to be signed: as text, as Markdown for a merge request, and as data."""

from collections.abc import Iterator, Sequence
from typing import Any

from advisor.approval.approving import Review
from advisor.approval.foreseeing import Foreseen, foreseen
from advisor.approval.groups import EDITED, GONE, KIND, NEW, RULE, Group
from advisor.approval.rewriting import WITHDRAWN
from advisor.replay import plain

_MOST = 6
"""So many lines of a group are shown."""
_HEADS = {
    RULE: "that name rule {about}",
    KIND: "of kind {about}",
    EDITED: "{about} was changed by hand since it was signed",
    NEW: "{about} is new and not signed",
    GONE: "{about} was signed and is gone",
}


def _count(number: int, what: str) -> str:
    return f"{number} {what}{'' if number == 1 else 's'}"


def _says(group: Group, told: Sequence[Foreseen]) -> str:
    head = _HEADS[group.kind].format(about=group.about)
    if group.kind not in {RULE, KIND}:
        return head
    counts = {
        "on safety": sum(item.safety for item in group.items),
        WITHDRAWN: sum(each.withdrawn for each in told),
        "to be changed by hand first": sum(each.by_hand for each in told),
    }
    said = ", ".join(f"{number} {what}" for what, number in counts.items() if number)
    apart = f" ({said})" if said else ""
    return f"{_count(len(group.items), 'difference')}{apart} in {_count(len(group.paths), 'scenario')}, {head}"


def _shown(told: Sequence[Foreseen]) -> Iterator[str]:
    """Some lines of what would be written; everything that is withdrawn or stands in the way is among them."""
    most = max(_MOST, sum(each.withdrawn or each.by_hand for each in told))
    yield from map(str, told[:most])
    if len(told) > most:
        yield f"{len(told) - most} more"


def as_text(review: Review) -> str:
    """The groups with the command that signs for each; empty where nothing is to be signed."""
    return "\n".join(_lines(review))


def _lines(review: Review) -> Iterator[str]:
    if not review.groups:
        return
    yield f"To be signed, on knowledge {review.knowledge}:"
    for group in review.groups:
        told = foreseen(group, review.standing)
        yield f"  {_says(group, told)}"
        yield from (f"      {each}" for each in _shown(told))
        if not any(each.by_hand for each in told):
            yield f"    gudgeon approve {group.name} --by NAME --because REASON"


def as_markdown(review: Review) -> str:
    """The groups as a list with boxes to tick."""
    if not review.groups:
        return ""
    lines = [f"### To be signed, on knowledge `{review.knowledge}`", ""]
    for group in review.groups:
        told = foreseen(group, review.standing)
        name = "" if any(each.by_hand for each in told) else f": `{group.name}`"
        lines += [f"- [ ] {_says(group, told)}{name}", *(f"  - {plain(each)}" for each in _shown(told))]
    return "\n".join(lines) + "\n"


def as_data(review: Review) -> list[dict[str, Any]]:
    """The groups for machines."""
    return [_group_data(group, foreseen(group, review.standing)) for group in review.groups]


def _group_data(group: Group, told: Sequence[Foreseen]) -> dict[str, Any]:
    return {
        "group": group.name,
        "kind": group.kind,
        "about": group.about,
        "differences": sum(1 for item in group.items if item.difference),
        "on_safety": sum(item.safety for item in group.items),
        "withdrawn": sum(each.withdrawn for each in told),
        "scenarios": list(group.paths),
        "changes": [str(each) for each in told],
    }
