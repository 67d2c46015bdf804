"""Groups of what is to be signed: differences by the rule that most of them name, and scenarios changed by hand."""

import hashlib
import json
import re
from collections import Counter
from collections.abc import Iterable, Iterator, Set
from dataclasses import dataclass
from pathlib import Path

from advisor.approval.safety import on_safety
from advisor.approval.standing import Standing
from advisor.replay import Difference, Outcome, Played

_WORD = re.compile(r"[a-z][a-z0-9_]*")
RULE, KIND, EDITED, NEW, GONE = "rule", "kind", "edited", "new", "gone"


@dataclass(frozen=True, slots=True)
class Item:
    """One difference, in its scenario; by hand changed scenarios have none."""

    path: str
    played: Played | None = None
    difference: Difference | None = None
    safety: bool = False
    """Whether people could come to harm by it."""


@dataclass(frozen=True, slots=True)
class Group:
    """What is signed together; its name holds for this knowledge, these scenarios and this log only."""

    kind: str
    about: str
    items: tuple[Item, ...]
    digest: str

    @property
    def name(self) -> str:
        """What the reviewer types."""
        about = self.about if self.kind in {RULE, KIND} else f"{self.kind}/{Path(self.about).stem}"
        return f"{about}@{self.digest}"

    @property
    def paths(self) -> tuple[str, ...]:
        """The scenarios it touches."""
        return tuple(dict.fromkeys(item.path for item in self.items))


def groups(outcome: Outcome, standing: Standing, rules: Set[str], knowledge: str) -> tuple[Group, ...]:
    """Everything that is to be signed: what bears on safety first, then the group with the most differences."""
    items = [
        Item(_within(played.scenario.path, standing.root), played, difference, on_safety(difference, played))
        for played in outcome.differing
        for difference in played.differences
    ]
    by_cause = sorted(
        _by_cause(items, rules), key=lambda each: (not any(item.safety for item in each[2]), -len(each[2]))
    )
    by_hand = [
        *((EDITED, path, (Item(path),)) for path in standing.edited),
        *((NEW, path, (Item(path),)) for path in standing.new),
        *((GONE, path, (Item(path),)) for path in standing.gone),
    ]
    return tuple(
        Group(kind, about, found, _digest(kind, about, found, standing, knowledge))
        for kind, about, found in [*by_cause, *by_hand]
    )


def _within(path: Path, root: Path) -> str:
    return path.absolute().relative_to(root.absolute()).as_posix()


def _by_cause(items: list[Item], rules: Set[str]) -> Iterator[tuple[str, str, tuple[Item, ...]]]:
    """The rule that most differences name takes them all; so does the next, until only kinds are left."""
    rest = [(item, _named(item, rules)) for item in items]
    while any(named for _, named in rest):
        counts = Counter(rule for _, named in rest for rule in named)
        rule = min(counts, key=lambda each: (-counts[each], each))
        yield RULE, rule, tuple(item for item, named in rest if rule in named)
        rest = [(item, named) for item, named in rest if rule not in named]
    for kind in dict.fromkeys(item.difference.kind for item, _ in rest if item.difference):
        yield KIND, kind, tuple(item for item, _ in rest if item.difference and item.difference.kind == kind)


def _named(item: Item, rules: Set[str]) -> frozenset[str]:
    """The rules that the reasons of a difference name, and what is expected and seen of them."""
    if item.difference is None:
        return frozenset()
    words: Iterable[str] = (*item.difference.because, item.difference.expected, item.difference.got)
    return frozenset(word for text in words for word in _WORD.findall(text) if word in rules)


def _digest(kind: str, about: str, items: tuple[Item, ...], standing: Standing, knowledge: str) -> str:
    said = [
        (item.path, standing.prints.get(item.path, ""), *(_words(item.difference) if item.difference else ()))
        for item in items
    ]
    head = standing.log.head if standing.log else ""
    return hashlib.sha256(json.dumps([kind, about, knowledge, head, said]).encode()).hexdigest()[:10]


def _words(difference: Difference) -> tuple[str, ...]:
    mark = difference.mark
    return str(mark.line), difference.kind, difference.what, str(difference.expected), str(difference.got)
