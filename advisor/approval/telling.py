"""Tell what is to be signed: as text, as Markdown for a merge request, and as data."""

from collections.abc import Iterator
from typing import Any

from advisor.approval.approving import Review
from advisor.approval.groups import EDITED, GONE, KIND, NEW, RULE, Group

_HEADS = {
    RULE: "named by rule {about}",
    KIND: "of kind {about}",
    EDITED: "{about} was changed by hand since it was signed",
    NEW: "{about} is new and not signed",
    GONE: "{about} was signed and is gone",
}


def _count(number: int, what: str) -> str:
    return f"{number} {what}{'' if number == 1 else 's'}"


def _says(group: Group) -> str:
    head = _HEADS[group.kind].format(about=group.about)
    if group.kind not in {RULE, KIND}:
        return head
    grave = sum(item.safety for item in group.items)
    safety = f" ({grave} on safety)" if grave else ""
    return f"{_count(len(group.items), 'difference')}{safety} in {_count(len(group.paths), 'scenario')}, {head}"


def as_text(review: Review) -> str:
    """The groups with the command that signs for each; empty where nothing is to be signed."""
    return "\n".join(_lines(review))


def _lines(review: Review) -> Iterator[str]:
    if not review.groups:
        return
    yield f"To be signed, on knowledge {review.knowledge}:"
    for group in review.groups:
        yield f"  {_says(group)}"
        yield f"    gudgeon approve {group.name} --by NAME --because REASON"


def as_markdown(review: Review) -> str:
    """The groups as a list with boxes to tick."""
    if not review.groups:
        return ""
    lines = [f"### To be signed, on knowledge `{review.knowledge}`", ""]
    lines += [f"- [ ] {_says(group)}: `{group.name}`" for group in review.groups]
    return "\n".join(lines) + "\n"


def as_data(review: Review) -> list[dict[str, Any]]:
    """The groups for machines."""
    return [
        {
            "group": group.name,
            "kind": group.kind,
            "about": group.about,
            "differences": sum(1 for item in group.items if item.difference),
            "on_safety": sum(item.safety for item in group.items),
            "scenarios": list(group.paths),
        }
        for group in review.groups
    ]
