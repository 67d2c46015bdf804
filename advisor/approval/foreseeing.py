"""What signing for a group would write, told before anybody signs."""

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from advisor.approval.former import changes_by_hand
from advisor.approval.groups import EDITED, Group
from advisor.approval.rewriting import WITHDRAWN, rewritten
from advisor.approval.standing import Standing
from advisor.mishaps import Refusal


@dataclass(frozen=True, slots=True)
class Foreseen:
    """One line of what would be written: `withdrawn` where an expectation goes, `by_hand` where signing is refused."""

    path: str
    words: str
    safety: bool = False
    withdrawn: bool = False
    by_hand: bool = False

    def __str__(self) -> str:
        return f"{self.path}: {self.words}"


def foreseen(group: Group, standing: Standing) -> tuple[Foreseen, ...]:
    """What would be written: first what cannot be signed, then what is withdrawn, then what bears on safety."""
    if group.kind == EDITED:
        told = changes_by_hand(standing.root, group.about, standing.edited[group.about])
        return tuple(Foreseen(group.about, each) for each in told)
    found = [each for path in group.paths for each in _of_scenario(standing.root / path, path, group)]
    return tuple(sorted(found, key=lambda each: (not each.by_hand, not each.withdrawn, not each.safety)))


def _of_scenario(file: Path, path: str, group: Group) -> Iterator[Foreseen]:
    items = [each for each in group.items if each.path == path]
    chosen = [each.difference for each in items if each.difference]
    played = next((each.played for each in items if each.played), None)
    if played is None or not chosen:
        return
    try:
        _, words = rewritten(file.read_bytes().decode("utf-8"), played, chosen)
    except Refusal as fault:
        why = f"cannot be signed yet. {fault}".removesuffix(" Nothing was written.")
        yield Foreseen(path, why, any(each.safety for each in items), by_hand=True)
        return
    for item, said in zip(items, words, strict=True):
        yield Foreseen(path, said, item.safety, withdrawn=f", {WITHDRAWN}, seen " in said)
