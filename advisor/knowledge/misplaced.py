"""Keys, entries and sections that stand in the wrong place: most often it is their indentation that is wrong."""

from collections import Counter
from collections.abc import Collection, Iterator
from itertools import pairwise
from typing import get_origin

from advisor.documents import Mapping, Node, Problem, Scalar, Sequence, locate, nearest
from advisor.knowledge.schema import Shape
from advisor.knowledge.shape_places import Loc, child_at, entry_shape, fields_of, shape_at, shape_of, trail_to

_FEW = 3
"""More strange keys than these in one mapping are one fault."""


def foreign_entries(strange: set[Loc]) -> list[Loc]:
    """The entries with so many strange keys that it is the entry that stands in the wrong place."""
    entries = Counter(loc[:-1] for loc in strange)
    return sorted((loc for loc, keys in entries.items() if loc and keys > _FEW), key=str)


def misplaced_entries(tree: Node, shape: type[Shape], foreign: list[Loc], strange: set[Loc]) -> Problem:
    """One problem for all of them; the hint names the section whose heading may be missing above."""
    first = min(foreign, key=lambda loc: locate(tree, loc).line)
    keys = [str(loc[-1]) for loc in strange if loc[:-1] == first]
    suits = [
        name
        for name, annotation in fields_of(shape).items()
        if (inner := entry_shape(annotation)) is not None and set(keys) <= set(fields_of(inner))
    ]
    more = f", nor do the {len(foreign) - 1} after it" if len(foreign) > 1 else ""
    message = f"this entry with {', '.join(sorted(keys)[:3])} and more does not belong here{more}"
    hint = f"is the line '{suits[0]}:' missing above?" if suits else "check the indentation, and the lines above"
    return Problem.at(locate(tree, first), message, hint, trail_to(tree, first))


def sunk_section(tree: Node, shape: type[Shape], faulty: Collection[Loc]) -> list[Loc]:
    """The heading of a section that stands among the entries of another one, and the entries after it."""
    for name, section in tree.items() if isinstance(tree, Mapping) else ():
        names = list(section) if isinstance(section, Mapping) and get_origin(fields_of(shape).get(name)) is dict else []
        for place, entry in enumerate(names):
            if entry in fields_of(shape) and entry not in tree and _is_faulty((name, entry), faulty):
                return [(name, each) for each in names[place:]]
    return []


def taken_out(tree: Node, shape: type[Shape], faulty: Collection[Loc]) -> dict[Loc, Loc]:
    """The keys that stand among the entries of a section although they belong to the entry before, which is given."""
    found: dict[Loc, Loc] = {}
    for name, section in tree.items() if isinstance(tree, Mapping) else ():
        entries = section if isinstance(section, Mapping) else Mapping()
        for before, entry in pairwise(entries):
            own, inner = shape_at(shape, (name, entry)), entries[before]
            belongs = own is not None and entry in fields_of(own) and isinstance(inner, Mapping) and entry not in inner
            if belongs and _is_faulty((name, entry), faulty):
                found[name, entry] = (name, before)
    return found


def one_level_away(tree: Node, shape: type[Shape], loc: Loc, keys: list[str]) -> Loc | None:
    """Where one of the keys stands in the mapping around or in one within, if it does not belong there."""
    here = child_at(tree, loc)
    near = [loc[:-1], *((*loc, str(each)) for each in here)] if loc and isinstance(here, Mapping) else []
    for each in near:
        node, known = child_at(tree, each), shape_at(shape, each)
        for key in keys:
            if isinstance(node, Mapping) and key in node and not (known and key in fields_of(known)):
                return (*each, key)
    return None


def _is_faulty(loc: Loc, faulty: Collection[Loc]) -> bool:
    return any(each[: len(loc)] == loc for each in faulty)


def moved_key(tree: Node, loc: Loc, stray: Loc) -> Problem:
    """The problem of a key that stands one level away from where it belongs."""
    message = f"'{stray[-1]}' stands in the wrong place"
    hint = f"it belongs to the keys that begin in line {locate(tree, loc).line}: is its indentation wrong?"
    return Problem.at(locate(tree, stray, key=True), message, hint, trail_to(tree, loc))


def told_already(loc: Loc, strange: set[Loc]) -> bool:
    """Whether a missing key is told already: by a strange key beside it, or by its standing one level away."""
    *where, key = loc
    beside = [str(other[-1]) for other in strange if list(other[:-1]) == where]
    return bool(nearest(str(key), beside)) or any(
        other[-1] == key and abs(len(other) - len(loc)) in {1, 2} and _shared(other[:-1], tuple(where))
        for other in strange
    )


def _shared(one: Loc, other: Loc) -> bool:
    shorter, longer = sorted((one, other), key=len)
    return longer[: len(shorter)] == shorter


def emptied(tree: Node, strange: set[Loc]) -> list[Loc]:
    """The keys without a value of which the next line holds a strange key, to which it should belong."""
    places = [(locate(tree, loc, key=True), loc) for loc in _keys(tree, ())]
    return [
        above
        for (_, above), (_, below) in pairwise(sorted(places))
        if below in strange and isinstance(empty := child_at(tree, above), Scalar) and not empty and not empty.quoted
    ]


def _keys(node: Node, loc: Loc) -> Iterator[Loc]:
    """Where every key of a tree stands."""
    children = node.items() if isinstance(node, Mapping) else enumerate(node) if isinstance(node, Sequence) else ()
    for part, child in children:
        if isinstance(node, Mapping):
            yield (*loc, part)
        yield from _keys(child, (*loc, part))


def where_it_belongs(tree: Node, shape: type[Shape], loc: Loc) -> str:
    """The hint for a key that is not known where it stands."""
    key = str(loc[-1])
    here = shape_at(shape, loc[:-1])
    for cut in (2, 3):
        above = shape_at(shape, loc[:-cut])
        if above is not None and key in fields_of(above) and len(loc) > cut:
            line = locate(tree, loc[:-cut]).line
            return f"it belongs one level up, to the keys that begin in line {line}: is its indentation wrong?"
    for empty in emptied(tree, {loc}):
        return f"it belongs under '{empty[-1]}' in line {locate(tree, empty, key=True).line}: is its indentation wrong?"
    for name, annotation in fields_of(here).items() if here else ():
        inner, node = shape_of(annotation), child_at(tree, (*loc[:-1], name))
        if inner is not None and key in fields_of(inner) and node is not None:
            line = locate(tree, (*loc[:-1], name), key=True).line
            return f"it belongs under '{name}' in line {line}: is its indentation wrong?"
    near = nearest(key, fields_of(here)) if here else ""
    return near.strip() or "take it out, or move it to where it belongs"
