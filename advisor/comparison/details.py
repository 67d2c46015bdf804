"""What was edited, line by line: the cell or the key, what stood there and what stands there now."""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import fields, is_dataclass
from itertools import zip_longest
from math import isinf
from typing import TypeVar

from advisor.comparison.differences import alike_at_the_ends
from advisor.comparison.edits import NAMED, RULE, TABLE, WHOLE, Edit, differ, written
from advisor.conditions import Bound, Condition, Domain, Either, Every, FactRef, Member, Stated, Ticked, Valueless
from advisor.conditions.terms import names
from advisor.explanation.words import domain_of, say_condition, say_demand, say_value, title_of
from advisor.knowledge import Band, Citation, Instance, Knowledge, Row, Table
from advisor.knowledge.model import Asks, Conclusion, Product, Refers, Sets, Warns
from advisor.quantities import show
from advisor.specification import Demand

MOST_LINES = 6
_NEAR = 3
_LONG = 90
_CONDITION = Bound | Member | Ticked | Stated | Valueless | Every | Either

Line = tuple[str, str, str]
"""What was edited, what it said, and what it says now; empty where it said, or says, nothing."""

_Key = TypeVar("_Key")


def details(old: Knowledge, new: Knowledge, edit: Edit) -> list[Line]:
    """The lines of an edit; none where a thing is new or gone as a whole."""
    if edit.how != "changed":
        return []
    if edit.kind == RULE:
        return list(_rule(old, new, edit.name))
    before, after = _thing(old, edit), _thing(new, edit)
    if edit.kind == TABLE and isinstance(before, Table) and isinstance(after, Table):
        return list(_table(before, after, old, new))
    return list(_between("", before, after, (old, new)))


def shown(lines: list[Line]) -> list[str]:
    """The first of these lines in words, and how many more there are."""
    said = [f"{what}: {was or 'nothing'} -> {now or 'nothing'}" for what, was, now in lines[:MOST_LINES]]
    more = len(lines) - MOST_LINES
    return [*said, f"{more} more"] if more > 0 else said


def _thing(knowledge: Knowledge, edit: Edit) -> object:
    part = next((part for part, kind in NAMED.items() if kind == edit.kind), None)
    if part is not None:
        return getattr(knowledge, part).get(edit.name)
    return getattr(knowledge, next(part for part, kind in WHOLE.items() if kind == edit.kind))


def _rule(old: Knowledge, new: Knowledge, name: str) -> Iterator[Line]:
    was, now = old.rules[name], new.rules[name]
    for key in ("status", "step", "table"):
        if getattr(was, key) != getattr(now, key):
            yield key, getattr(was, key), getattr(now, key)
    rows = {each.id: each for each in written(old)[name]}
    for after in written(new)[name]:
        before = rows.get(after.id)
        if before is not None and not differ(before.row, after.row):
            yield from _instance(before, after, old, new)
    for key in ("title", "because", "limits", "source", "may_conflict"):
        yield from _between(key, getattr(was, key), getattr(now, key), (old, new))
    for key in ("fires", "silent"):
        yield from _values(key, getattr(was, key), getattr(now, key), (old, new))


def _instance(was: Instance, now: Instance, old: Knowledge, new: Knowledge) -> Iterator[Line]:
    where = f" ({now.row.id})" if now.row is not None else ""
    if was.when != now.when:
        yield _told(f"when{where}", _narrowed(was.when, now.when, old, new), names(was.when), names(now.when))
    gone = [each for each in was.then if each not in now.then]
    come = [each for each in now.then if each not in was.then]
    for before, after in zip_longest(gone, come):
        said = _say_conclusion(before, old), _say_conclusion(after, new)
        yield _told(f"then{where}", said, _named_in(before), _named_in(after))


def _told(what: str, said: tuple[str, str], was: Iterable[str], now: Iterable[str]) -> Line:
    """What differs; where it sounds the same, the names that are others."""
    gone, come = list(was), list(now)
    if said[0] != said[1] or gone == come:
        return what, *said
    return (
        what,
        ", ".join(each for each in gone if each not in come),
        ", ".join(each for each in come if each not in gone),
    )


def _named_in(conclusion: Conclusion | None) -> Iterator[str]:
    if isinstance(conclusion, Asks):
        yield from (*names(conclusion.test), *names(conclusion.for_))
    elif isinstance(conclusion, Sets):
        yield from (conclusion.name, *names(conclusion.for_))
    elif isinstance(conclusion, Warns):
        yield from names(conclusion.for_)


def _narrowed(was: Condition, now: Condition, old: Knowledge, new: Knowledge) -> tuple[str, str]:
    """Two conditions in words, without the parts that both have."""
    for kind, joint in ((Every, " and "), (Either, " or ")):
        if isinstance(was, kind) and isinstance(now, kind):
            gone = tuple(each for each in was.parts if each not in now.parts)
            come = tuple(each for each in now.parts if each not in was.parts)
            if len(gone) == len(come) == 1:
                return _narrowed(gone[0], come[0], old, new)
            return _parts(gone, old, joint), _parts(come, new, joint)
    if isinstance(now, Every) and was in now.parts:
        return "", _parts(tuple(each for each in now.parts if each != was), new, " and ")
    if isinstance(was, Every) and now in was.parts:
        return _parts(tuple(each for each in was.parts if each != now), old, " and "), ""
    return say_condition(was, old), say_condition(now, new)


def _parts(parts: tuple[Condition, ...], knowledge: Knowledge, joint: str) -> str:
    return joint.join(say_condition(each, knowledge) for each in parts)


def _say_conclusion(conclusion: Conclusion | None, knowledge: Knowledge) -> str:
    if conclusion is None:
        return ""
    if isinstance(conclusion, Asks):
        return say_demand(
            Demand(conclusion.property, conclusion.test, conclusion.level, conclusion.for_, ""), knowledge
        )
    if isinstance(conclusion, Refers):
        return f"refer to {conclusion.to}{', which withholds the rest' if conclusion.withhold else ''}"
    for_ = "" if conclusion.for_ == Every() else f", where {say_condition(conclusion.for_, knowledge)}"
    if isinstance(conclusion, Warns):
        return f"caution {conclusion.caution}{for_}"
    return f"{title_of(conclusion.name, knowledge)}: {_say_set(conclusion, knowledge)}{for_}"


def _say_set(sets: Sets, knowledge: Knowledge) -> str:
    if isinstance(sets.value, FactRef):
        return title_of(sets.value.name, knowledge)
    return say_value(domain_of(sets.name, knowledge), sets.value)


def _table(was: Table, now: Table, old: Knowledge, new: Knowledge) -> Iterator[Line]:
    rows, rows_now = _rows(was), _rows(now)
    for name in _names(rows, rows_now):
        if name in rows and name in rows_now:
            yield from _row(name, (rows[name], was), (rows_now[name], now), (old, new))
        else:
            yield f"row {name}", "there" if name in rows else "", "there" if name in rows_now else ""
    for one, other in _names([*was.matrix], [*now.matrix]):
        before, after = (table.matrix.get((one, other)) for table in (was, now))
        if before != after:
            yield f"{one} with {other}", _cell(before, was.values), _cell(after, now.values)
    for key in ("title", "policy", "key", "columns", "bands", "values", "source"):
        yield from _between(key, getattr(was, key), getattr(now, key), (old, new))


def _rows(table: Table) -> dict[str, Row]:
    """The rows by name; of several with one name the second and later ones are counted."""
    found: dict[str, Row] = {}
    for row in table.rows:
        alike = sum(each.id == row.id for each in found.values())
        found[f"{row.id} ({alike + 1})" if alike else row.id] = row
    return found


def _row(
    name: str, was: tuple[Row, Table], now: tuple[Row, Table], editions: tuple[Knowledge, Knowledge]
) -> Iterator[Line]:
    (before, old), (after, new) = was, now
    for column in _names(before.cells, after.cells):
        one, other = before.cells.get(column), after.cells.get(column)
        if one != other:
            yield f"row {name}, {column}", _cell(one, old.columns.get(column)), _cell(other, new.columns.get(column))
    for key in ("source", "note"):
        yield from _between(f"row {name}, {key}", getattr(before, key), getattr(after, key), editions)


def _cell(cell: object, domain: Domain | None) -> str:
    if cell is None:
        return ""
    if isinstance(cell, Band):
        return f"{show(cell.low, '')} to below {show(cell.high, '')}"
    return say_value(domain, cell) if domain is not None and isinstance(cell, float | str | tuple) else _leaf(cell)


def _values(
    what: str, was: Mapping[str, object], now: Mapping[str, object], editions: tuple[Knowledge, Knowledge]
) -> Iterator[Line]:
    """Values of facts or properties, by name."""
    for name in _names(was, now):
        if was.get(name) != now.get(name):
            yield f"{what}, {name}", _value(name, was, editions[0]), _value(name, now, editions[1])


def _value(name: str, values: Mapping[str, object], knowledge: Knowledge) -> str:
    return _cell(values[name], domain_of(name, knowledge)) if name in values else ""


def _between(what: str, was: object, now: object, editions: tuple[Knowledge, Knowledge]) -> Iterator[Line]:
    """The lines between two pieces of knowledge of any kind, key by key."""
    if not differ(was, now):
        return
    if isinstance(was, _CONDITION) and isinstance(now, _CONDITION):
        yield what, *_narrowed(was, now, *editions)
    elif isinstance(was, Product) and isinstance(now, Product):
        yield from _values(what, was.values, now.values, editions)
        yield from _between(f"{what}, title", was.title, now.title, editions)
    elif is_dataclass(was) and type(was) is type(now) and not isinstance(was, FactRef | Citation):
        for each in (each.name for each in fields(was) if each.compare and each.name != "mark"):
            yield from _between(_below(what, each), getattr(was, each), getattr(now, each), editions)
    elif (pair := (_named(was), _named(now))) != (None, None) and None not in pair:
        before, after = pair
        yield from _all_named(what, before or {}, after or {}, editions)
    elif isinstance(was, tuple | frozenset) and isinstance(now, tuple | frozenset) and set(was) != set(now):
        gone, come = ([each for each in one if each not in other] for one, other in ((was, now), (now, was)))
        yield what, _leaf(tuple(gone)), _leaf(tuple(come))
    else:
        yield what, *_apart(_leaf(was), _leaf(now))


def _all_named(
    what: str, was: Mapping[str, object], now: Mapping[str, object], editions: tuple[Knowledge, Knowledge]
) -> Iterator[Line]:
    for name in _names(was, now):
        if name in was and name in now:
            yield from _between(_below(what, name), was[name], now[name], editions)
        else:
            yield _below(what, name), _leaf(was.get(name)), _leaf(now.get(name))
    if list(was) != list(now) and set(was) == set(now):
        yield _below(what, "order"), ", ".join(was), ", ".join(now)


def _named(thing: object) -> dict[str, object] | None:
    """Parts by their names: of a mapping, or of a list of things that have one."""
    if isinstance(thing, Mapping):
        return {str(key): value for key, value in thing.items()}
    if not isinstance(thing, tuple):
        return None
    ids = [getattr(each, "item", None) or getattr(each, "id", None) for each in thing]
    return {str(name): each for name, each in zip(ids, thing, strict=True)} if all(ids) else None


def _names(was: Iterable[_Key], now: Iterable[_Key]) -> list[_Key]:
    return list(dict.fromkeys((*was, *now)))


def _below(what: str, name: str) -> str:
    return f"{what}, {name}" if what else name


def _leaf(thing: object) -> str:
    """A value of any kind, short."""
    if thing is None or thing == ():
        return ""
    if isinstance(thing, bool):
        return "yes" if thing else "no"
    if isinstance(thing, float | int):
        return "no limit" if isinf(thing) else show(float(thing), "")
    if isinstance(thing, Citation):
        return f"{thing.id} {thing.where} ({thing.checked})".replace("  ", " ")
    if isinstance(thing, FactRef):
        return thing.name
    if isinstance(thing, frozenset | tuple | list):
        return ", ".join(_leaf(each) for each in (sorted(thing) if isinstance(thing, frozenset) else thing))
    name = getattr(thing, "title", None) or getattr(thing, "id", None)
    return str(name or "stated") if is_dataclass(thing) or isinstance(thing, Mapping) else str(thing)


def _apart(was: str, now: str) -> tuple[str, str]:
    """Two texts; of long ones the words that differ, with a few around them."""
    if max(len(was), len(now)) <= _LONG or not was or not now:
        return was, now
    one, other = was.split(), now.split()
    head, tail = alike_at_the_ends(one, other)
    begin, end = max(0, head - _NEAR), max(0, tail - _NEAR)
    return _cut(one, begin, end), _cut(other, begin, end)


def _cut(words: list[str], begin: int, end: int) -> str:
    return f"{'... ' if begin else ''}{' '.join(words[begin : len(words) - end])}{' ...' if end else ''}"
