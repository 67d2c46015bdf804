"""Faults of shape in plain words: what pydantic found becomes problems on the damaged line."""

import re
from collections.abc import Collection

from pydantic import ValidationError
from pydantic_core import ErrorDetails

from advisor.documents import Mapping, Mark, Node, Problem, Problems, locate, nearest
from advisor.knowledge.misplaced import (
    emptied,
    foreign_entries,
    misplaced_entries,
    moved_key,
    one_level_away,
    sunk_section,
    taken_out,
    told_already,
    where_it_belongs,
)
from advisor.knowledge.schema import Shape
from advisor.knowledge.shape_places import Loc, child_at, fields_of, path_to, shape_at, trail_to

MOST_ON_A_LINE = 2
"""Keys of an entry that a hint shows on one line."""
_OF_THE_KEY = {"extra_forbidden", "too_short", "too_long"}
"""The faults told at the key rather than at its value."""

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
    faulty = [tuple(error["loc"]) for error in errors]
    strange = {tuple(error["loc"]) for error in errors if error["type"] == "extra_forbidden"}
    sunk, taken = sunk_section(tree, shape, faulty), taken_out(tree, shape, faulty)
    foreign = [loc for loc in foreign_entries(strange) if not _is_within(loc, (*sunk, *taken))]
    if foreign:
        problems.add(misplaced_entries(tree, shape, foreign, strange))
    if sunk:
        problems.add(moved_key(tree, (), sunk[0]))
    missing = _missing_keys(errors, strange)
    moved = {before: at for at, before in taken.items()}
    moved |= {loc: at for loc, keys in missing.items() if (at := one_level_away(tree, shape, loc, keys))}
    passed = (*foreign, *sunk, *moved.values())
    _tell_each(tree, shape, [error for error in errors if not _is_within(error["loc"], passed)], strange, problems)
    for loc, at in moved.items():
        if not _is_within(loc, passed):
            problems.add(moved_key(tree, loc, at))
    for loc, keys in missing.items():
        at = moved.get(loc, ())
        lacking = [key for key in keys if not at or (key != at[-1] and child_at(tree, (*at, key)) is None)]
        if lacking and not _is_within(loc, passed):
            problems.add(_missing(tree, shape, loc, lacking))


def _is_within(loc: Loc, places: Collection[Loc]) -> bool:
    return any(loc[: len(place)] == place for place in places)


def _tell_each(
    tree: Node, shape: type[Shape], errors: list[ErrorDetails], strange: set[Loc], problems: Problems
) -> None:
    """Add a problem for each fault that is no missing key, once."""
    empty = emptied(tree, strange)
    told: set[tuple[Mark, str]] = set()
    for error in errors:
        loc = tuple(error["loc"])
        mark = locate(tree, loc, key=error["type"] in _OF_THE_KEY)
        message, hint = _words(tree, shape, error, loc)
        if error["type"] != "missing" and loc not in empty and (mark, message) not in told:
            told.add((mark, message))
            problems.add(Problem.at(mark, message, hint, trail_to(tree, loc)))


def _missing_keys(errors: list[ErrorDetails], strange: set[Loc]) -> dict[Loc, list[str]]:
    """The required keys that are not there, by what lacks them, but for those told by a strange key."""
    missing: dict[Loc, list[str]] = {}
    for error in errors:
        loc = tuple(error["loc"])
        if error["type"] == "missing" and not told_already(loc, strange):
            missing.setdefault(loc[:-1], []).append(str(loc[-1]))
    return missing


def _missing(tree: Node, shape: type[Shape], loc: Loc, keys: list[str]) -> Problem:
    """The problem of required keys that are not there, told where the first would stand, or by what lacks them."""
    mark = locate(tree, loc, key=True)
    named = " and ".join(f"'{key}'" for key in keys)
    return Problem.at(
        _would_stand(tree, shape, loc, keys[0]) or mark,
        f"{named} {'is' if len(keys) == 1 else 'are'} missing here",
        f"add '{keys[0]}:'" if len(keys) == 1 else "add each of them",
        trail_to(tree, loc),
    )


def _would_stand(tree: Node, shape: type[Shape], loc: Loc, key: str) -> Mark | None:
    """The place of the next key in the usual order, where the keys around it are in that order."""
    here, node = shape_at(shape, loc), list(path_to(tree, loc))[-1]
    order = list(fields_of(here)) if here else []
    if key not in order or not isinstance(node, Mapping):
        return None
    places = [order.index(each) for each in node if each in order]
    later = [place > order.index(key) for place in places]
    if len(places) < len(node) or places != sorted(places) or True not in later or later[0]:
        return None
    return node.key_marks[list(node)[later.index(True)]]


def _words(tree: Node, shape: type[Shape], error: ErrorDetails, loc: Loc) -> tuple[str, str]:
    kind, seen = error["type"], error["input"]
    if kind == "extra_forbidden":
        return f"'{loc[-1]}' is not known here", where_it_belongs(tree, shape, loc)
    if kind == "value_error":
        message, _, hint = str(error["msg"]).removeprefix("Value error, ").partition("; ")
        return message, hint
    if kind == "literal_error" and isinstance(seen, str):
        expected = re.findall(r"'([^']*)'", str(error["ctx"]["expected"]))
        return f"'{seen}' is not known here", nearest(seen, expected).strip() or f"known here: {', '.join(expected)}"
    if kind in _PLAIN:
        message, hint = _PLAIN[kind]
        return message.format(seen=seen), _as_written(shape, kind, loc) or hint
    return str(error["msg"]), ""


def _as_written(shape: type[Shape], kind: str, loc: Loc) -> str:
    """How a list, or an entry of one, is written on one line with the keys that each entry needs; else nothing."""
    is_list = kind == "list_type"
    if not is_list and not isinstance(loc[-1] if loc else "", int):
        return ""
    entry = shape_at(shape, (*loc, 0) if is_list else loc)
    keys = [each.alias or name for name, each in entry.model_fields.items() if each.is_required()] if entry else []
    if not 0 < len(keys) <= MOST_ON_A_LINE:
        return ""
    written = "{" + ", ".join(f"{key}: ..." for key in keys) + "}"
    return f"write [{written}]" if is_list else f"write {written}"
