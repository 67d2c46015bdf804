"""What was edited between two editions, and the knowledge with only some of the edits made."""

from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass, fields, is_dataclass, replace
from functools import cache

from advisor.documents import Mark
from advisor.knowledge import Instance, Knowledge

RULE, TABLE = "rule", "table"
NAMED = {
    "facts": "fact",
    "computations": "computation",
    "properties": "property",
    "tables": TABLE,
    "cautions": "caution",
    "referrals": "referral",
    "procedures": "procedure",
    "forks": "fork",
    "sources": "source",
}
WHOLE = {
    "steps": "the steps",
    "docket": "the docket",
    "usual_oils": "the usual oils",
    "designations": "the designations",
    "shelf": "the shelf",
}


@dataclass(frozen=True, slots=True, order=True)
class Edit:
    """One thing that was edited: its kind, its name, and whether it was added, removed or changed."""

    kind: str
    name: str
    how: str

    def __str__(self) -> str:
        return f"{self.kind} {self.name} {self.how}" if self.kind != self.name else f"{self.name} {self.how}"


def sense(thing: object) -> object:
    """A piece of knowledge as it can be compared: without the places in files."""
    parts = _parts(type(thing))  # type: ignore[arg-type]  # every class can be hashed
    if parts is not None:
        return (type(thing).__name__, *[sense(getattr(thing, name)) for name in parts])
    if isinstance(thing, str | float | frozenset | bool | None):
        return thing
    if isinstance(thing, list | tuple):
        return tuple(map(sense, thing))
    if isinstance(thing, Mapping):
        return tuple((str(key), sense(value)) for key, value in thing.items())
    return thing


@cache
def _parts(kind: type) -> tuple[str, ...] | None:
    """The fields of a dataclass that count; nothing for anything else."""
    if kind is Mark:
        return ()
    return tuple(each.name for each in fields(kind) if each.compare) if is_dataclass(kind) else None


def edits(old: Knowledge, new: Knowledge) -> tuple[Edit, ...]:
    """Everything that was edited: rules first."""
    found = list(_rule_edits(old, new))
    for part, kind in NAMED.items():
        before, after = getattr(old, part), getattr(new, part)
        found += [Edit(kind, name, how) for name, how in _between(before, after, differ)]
    for part, kind in WHOLE.items():
        if differ(getattr(old, part), getattr(new, part)):
            found.append(Edit(kind, kind, "changed"))
    return tuple(found)


def differ(one: object, other: object) -> bool:
    """Whether two pieces mean something else; most of them are the same but for places in files, and soon told so."""
    if one is other or type(one) is not type(other):
        return one is not other and sense(one) != sense(other)
    parts = _parts(type(one))  # type: ignore[arg-type]  # every class can be hashed
    if parts is not None:
        return any(differ(getattr(one, name), getattr(other, name)) for name in parts)
    if isinstance(one, tuple | list) and isinstance(other, tuple | list):
        return len(one) != len(other) or any(map(differ, one, other))
    if isinstance(one, Mapping) and isinstance(other, Mapping):
        return list(one) != list(other) or any(map(differ, one.values(), other.values()))
    return one != other


def _between(
    before: Mapping[str, object], after: Mapping[str, object], differs: Callable[[object, object], bool]
) -> Iterator[tuple[str, str]]:
    for name in (*before, *(each for each in after if each not in before)):
        if name not in after:
            yield name, "removed"
        elif name not in before:
            yield name, "added"
        elif differs(before[name], after[name]):
            yield name, "changed"


def written(knowledge: Knowledge) -> dict[str, tuple[Instance, ...]]:
    """The instances of every written rule; a retired one has none."""
    found: dict[str, list[Instance]] = {name: [] for name in knowledge.rules}
    for instances in knowledge.instances.values():
        for each in instances:
            found[each.rule.id].append(each)
    return {name: tuple(each) for name, each in found.items()}


def _rule_edits(old: Knowledge, new: Knowledge) -> Iterator[Edit]:
    """Rules that were edited themselves; what only follows from a table is that table's edit."""
    before, after = written(old), written(new)

    def differs(one: object, other: object) -> bool:
        name = _rule_of(one) or _rule_of(other)
        if name is None or differ(old.rules[name], new.rules[name]):
            return name is not None
        rows = {each.id: each for each in before[name]}
        same_row = [(rows[each.id], each) for each in after[name] if each.id in rows]
        return any(_means(was) != _means(now) for was, now in same_row if not differ(was.row, now.row))

    whole = {name: (name, each) for name, each in before.items()}
    whole_after = {name: (name, each) for name, each in after.items()}
    for name, how in _between(whole, whole_after, differs):
        yield Edit(RULE, name, how)


def _rule_of(pair: object) -> str | None:
    return str(pair[0]) if isinstance(pair, tuple) else None


def _means(instance: Instance) -> object:
    return instance.when, instance.then


def carried(old: Knowledge, new: Knowledge, edit: Edit) -> tuple[str, ...]:
    """The written rules that an edit touches: itself, or those that go over the rows of an edited table."""
    if edit.kind == RULE:
        return (edit.name,)
    if edit.kind == TABLE:
        rules = {**old.rules, **new.rules}
        return tuple(name for name, rule in rules.items() if rule.table == edit.name)
    return ()


def with_edits(old: Knowledge, new: Knowledge, chosen: Iterable[Edit]) -> Knowledge:
    """The old knowledge with only these edits made."""
    picked = frozenset(chosen)
    named = {(each.kind, each.name) for each in picked}
    rules = {name for each in picked for name in carried(old, new, each)}
    changes: dict[str, object] = {
        part: _merged(getattr(old, part), getattr(new, part), {name for k, name in named if k == kind})
        for part, kind in NAMED.items()
    }
    changes |= {part: getattr(new, part) for part, kind in WHOLE.items() if (kind, kind) in named}
    changes["rules"] = _merged(old.rules, new.rules, rules)
    changes["instances"] = _instances(old, new, rules)
    return replace(old, **changes)  # type: ignore[arg-type]  # each part is put in for its like


def _merged(old: Mapping[str, object], new: Mapping[str, object], taken: set[str]) -> dict[str, object]:
    """The old parts, those of these names taken from the new; in the order of the new where that is known."""
    order = [*(name for name in new if name in old or name in taken), *(name for name in old if name not in new)]
    found: dict[str, object] = {}
    for name in order:
        source = new if name in taken else old
        if name in source:
            found[name] = source[name]
    return found


def _instances(old: Knowledge, new: Knowledge, taken: set[str]) -> dict[str, tuple[Instance, ...]]:
    found: dict[str, tuple[Instance, ...]] = {}
    for step in dict.fromkeys((*old.instances, *new.instances)):
        kept = {name: each for name, each in _by_rule(old, step).items() if name not in taken}
        put_in = {name: each for name, each in _by_rule(new, step).items() if name in taken}
        parts = _merged({**kept, **put_in}, _by_rule(new, step), set())
        found[step] = tuple(each for part in parts.values() for each in _all_of(part))
    return found


def _all_of(part: object) -> Iterator[Instance]:
    assert isinstance(part, tuple)  # noqa: S101 - made just above
    yield from part


def _by_rule(knowledge: Knowledge, step: str) -> dict[str, tuple[Instance, ...]]:
    found: dict[str, tuple[Instance, ...]] = {}
    for each in knowledge.instances.get(step, ()):
        found[each.rule.id] = (*found.get(each.rule.id, ()), each)
    return found
