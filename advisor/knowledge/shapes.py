"""Faults of shape in plain words: what pydantic found becomes problems on the damaged line."""

import re
from collections import Counter
from collections.abc import Iterator
from types import UnionType
from typing import Annotated, Any, Union, get_args, get_origin

from pydantic import ValidationError
from pydantic_core import ErrorDetails

from advisor.documents import Mapping, Mark, Node, Problem, Problems, Sequence, locate, nearest
from advisor.knowledge.schema import Shape

Loc = tuple[str | int, ...]
_FEW = 3
"""More strange keys than these in one mapping are one fault."""


_PLAIN = {
    "literal_error": ("one value is expected here, not a list or a mapping", "write the value alone"),
    "string_pattern_mismatch": (
        "'{seen}' is no id",
        "use small letters, digits and underscores, beginning with a letter",
    ),
    "model_type": ("a mapping (key: value) is expected here", "indent the lines below it, each as 'key: value'"),
    "dict_type": ("a mapping (key: value) is expected here", "indent the lines below it, each as 'key: value'"),
    "list_type": ("a list is expected here", "begin each entry with '- ', or write [a, b]"),
    "too_short": ("more entries are expected here", "add what is missing"),
    "too_long": ("fewer entries are expected here", "take out what is too much"),
    "greater_than_equal": ("{seen} is too small here", "a level is 1 (strong) to 4 (taste)"),
    "less_than_equal": ("{seen} is too large here", "a level is 1 (strong) to 4 (taste)"),
}


def tell(tree: Node, shape: type[Shape], fault: ValidationError, problems: Problems) -> None:
    """Add a problem for each independent fault."""
    errors = fault.errors()
    strange = {tuple(error["loc"]) for error in errors if error["type"] == "extra_forbidden"}
    foreign = _foreign(strange)
    if foreign:
        problems.add(_misplaced(tree, shape, foreign, strange))
    missing: dict[Loc, list[str]] = {}
    told: set[tuple[Mark, str]] = set()
    for error in errors:
        loc = tuple(error["loc"])
        if any(loc[: len(each)] == each for each in foreign):
            continue
        if error["type"] == "missing":
            if not _meant(loc, strange):
                missing.setdefault(loc[:-1], []).append(str(loc[-1]))
            continue
        mark = locate(tree, loc, key=error["type"] == "extra_forbidden")
        message, hint = _words(tree, shape, error, loc)
        if (mark, message) not in told:
            told.add((mark, message))
            problems.add(Problem.at(mark, message, hint, _trail(tree, loc)))
    for loc, keys in missing.items():
        problems.add(_missing(tree, shape, loc, keys))


def _foreign(strange: set[Loc]) -> list[Loc]:
    """The entries with so many strange keys that it is the entry that stands in the wrong place."""
    entries = Counter(loc[:-1] for loc in strange)
    return sorted((loc for loc, keys in entries.items() if loc and keys > _FEW), key=str)


def _misplaced(tree: Node, shape: type[Shape], foreign: list[Loc], strange: set[Loc]) -> Problem:
    """One problem for all of them; the hint names the section whose heading may be missing above."""
    first = min(foreign, key=lambda loc: locate(tree, loc).line)
    keys = [str(loc[-1]) for loc in strange if loc[:-1] == first]
    suits = [
        name
        for name, annotation in _fields(shape).items()
        if (inner := _entry_shape(annotation)) is not None and set(keys) <= set(_fields(inner))
    ]
    more = f", nor do the {len(foreign) - 1} after it" if len(foreign) > 1 else ""
    message = f"this entry with {', '.join(sorted(keys)[:3])} and more does not belong here{more}"
    hint = f"is the line '{suits[0]}:' missing above?" if suits else "check the indentation, and the lines above"
    return Problem.at(locate(tree, first), message, hint, _trail(tree, first))


def _meant(loc: Loc, strange: set[Loc]) -> bool:
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


def _missing(tree: Node, shape: type[Shape], loc: Loc, keys: list[str]) -> Problem:
    """The problem of required keys that are not there, told where the first would stand.

    A key that stands one level away is told at its place.
    """
    mark = locate(tree, loc)
    trail = _trail(tree, loc)
    if len(keys) == 1 and (stray := _one_level_away(tree, loc, keys[0])):
        hint = f"it belongs to the keys that begin in line {mark.line}: is its indentation wrong?"
        return Problem.at(stray, f"'{keys[0]}' stands in the wrong place", hint, trail)
    named = " and ".join(f"'{key}'" for key in keys)
    return Problem.at(
        _would_stand(tree, shape, loc, keys[0]) or mark,
        f"{named} {'is' if len(keys) == 1 else 'are'} missing here",
        f"add '{keys[0]}:'" if len(keys) == 1 else "add each of them",
        trail,
    )


def _would_stand(tree: Node, shape: type[Shape], loc: Loc, key: str) -> Mark | None:
    """The place of the next key in the usual order."""
    here, node = _shape_at(shape, loc), list(_path(tree, loc))[-1]
    order = list(_fields(here)) if here else []
    after = order[order.index(key) + 1 :] if key in order else []
    return next((node.key_marks[each] for each in after if isinstance(node, Mapping) and each in node), None)


def _one_level_away(tree: Node, loc: Loc, key: str) -> Mark | None:
    path = list(_path(tree, loc))
    here = path[-1]
    near = [*path[-2:-1], *(here.values() if isinstance(here, Mapping) else ())]
    for node in near:
        if isinstance(node, Mapping) and key in node:
            return node.key_marks[key]
    return None


def _words(tree: Node, shape: type[Shape], error: ErrorDetails, loc: Loc) -> tuple[str, str]:
    kind, seen = error["type"], error["input"]
    if kind == "extra_forbidden":
        return f"'{loc[-1]}' is not known here", _where_it_belongs(tree, shape, loc)
    if kind == "value_error":
        message, _, hint = str(error["msg"]).removeprefix("Value error, ").partition("; ")
        return message, hint
    if kind == "literal_error" and isinstance(seen, str):
        expected = re.findall(r"'([^']*)'", str(error["ctx"]["expected"]))
        return f"'{seen}' is not known here", nearest(seen, expected).strip() or f"known here: {', '.join(expected)}"
    if kind in _PLAIN:
        message, hint = _PLAIN[kind]
        return message.format(seen=seen), hint
    return str(error["msg"]), ""


def _where_it_belongs(tree: Node, shape: type[Shape], loc: Loc) -> str:
    """The hint for a key that is not known where it stands."""
    key = str(loc[-1])
    here = _shape_at(shape, loc[:-1])
    for cut in (2, 3):
        above = _shape_at(shape, loc[:-cut])
        if above is not None and key in _fields(above) and len(loc) > cut:
            line = locate(tree, loc[:-cut]).line
            return f"it belongs one level up, to the keys that begin in line {line}: is its indentation wrong?"
    for name, annotation in _fields(here).items() if here else ():
        inner, node = _shape_of(annotation), _child(tree, (*loc[:-1], name))
        if inner is not None and key in _fields(inner) and node is not None:
            line = locate(tree, (*loc[:-1], name), key=True).line
            return f"it belongs under '{name}' in line {line}: is its indentation wrong?"
    near = nearest(key, _fields(here)) if here else ""
    return near.strip() or "take it out, or move it to where it belongs"


def _fields(shape: type[Shape]) -> dict[str, Any]:
    return {field.alias or name: field.annotation for name, field in shape.model_fields.items()}


def _shape_at(shape: type[Shape], loc: Loc) -> type[Shape] | None:
    """The shape that the schema gives to the node at a place."""
    annotation: Any = shape
    for part in loc:
        annotation = next(_steps_into(annotation, part), None)
    return annotation if isinstance(annotation, type) and issubclass(annotation, Shape) else _plain(annotation)


def _plain(annotation: Any) -> type[Shape] | None:
    """The shape in an annotation that is no list and no dict of shapes."""
    if get_origin(annotation) in {list, dict}:
        return None
    return _shape_of(annotation)


def _steps_into(annotation: Any, part: str | int) -> Iterator[Any]:
    origin, inner = get_origin(annotation), get_args(annotation)
    if origin is Annotated:
        yield from _steps_into(inner[0], part)
    elif origin in {Union, UnionType}:
        for each in inner:
            yield from _steps_into(each, part)
    elif (origin is dict and isinstance(part, str)) or (origin is list and isinstance(part, int)):
        yield inner[-1]
    elif isinstance(annotation, type) and issubclass(annotation, Shape) and part in _fields(annotation):
        yield _fields(annotation)[str(part)]


def _entry_shape(annotation: Any) -> type[Shape] | None:
    """The shape of the entries of a section."""
    inner = get_args(annotation)
    return _shape_of(inner[-1]) if get_origin(annotation) in {list, dict} else None


def _shape_of(annotation: Any) -> type[Shape] | None:
    """The shape in an annotation, or the one of its entries."""
    if isinstance(annotation, type):
        return annotation if issubclass(annotation, Shape) else None
    if get_origin(annotation) is dict:
        return None
    return next((found for each in get_args(annotation) if (found := _shape_of(each)) is not None), None)


def _child(tree: Node, loc: Loc) -> Node | None:
    path = list(_path(tree, loc))
    return path[-1] if len(path) == len(loc) + 1 else None


def _path(tree: Node, loc: Loc) -> Iterator[Node]:
    """The nodes from the root to the place, as far as there are any."""
    yield tree
    node = tree
    for part in loc:
        if isinstance(node, Mapping) and str(part) in node:
            node = node[str(part)]
        elif isinstance(node, Sequence) and isinstance(part, int) and part < len(node):
            node = node[part]
        else:
            return
        yield node


def _trail(tree: Node, loc: Loc) -> tuple[str, ...]:
    """The way to the fault by ids rather than by numbers."""
    nodes = list(_path(tree, loc))[1:]
    return tuple(
        _name_of(node, part) if isinstance(part, int) else str(part) for part, node in zip(loc, nodes, strict=False)
    )


def _name_of(node: Node, place: int) -> str:
    if isinstance(node, Mapping):
        for key in ("id", "fact", "item"):
            if isinstance(node.get(key), str):
                return f"'{node[key]}'"
        if node:
            return next(iter(node))
    return f"entry {place + 1}"
