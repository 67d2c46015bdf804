"""A condition altered in one place: a limit moved, an operator turned, a choice or a term taken out."""

from collections.abc import Iterator
from dataclasses import replace

from advisor.conditions import ALWAYS, Bound, Condition, Either, Every, FactRef, Member, Ticked, Valueless
from advisor.conditions.terms import Term
from advisor.mutation.stepping import Stepper

Key = tuple[object, ...]
"""Where a condition is altered and how: the same for every row of a rule's table."""

_STRICT = {">": ">=", ">=": ">", "<": "<=", "<=": "<"}
_TURNED = {">": "<", ">=": "<=", "<": ">", "<=": ">=", "=": "!=", "!=": "="}


def altered(condition: Condition, stepper: Stepper, *, dropping: bool = True) -> Iterator[tuple[Key, Condition]]:
    """Every single alteration; with `dropping` also without each term."""
    if dropping and condition != ALWAYS and _is_unit(condition):
        yield ("dropped",), ALWAYS
    yield from _inner(condition, stepper, dropping=dropping)


def _inner(condition: Condition, stepper: Stepper, *, dropping: bool) -> Iterator[tuple[Key, Condition]]:
    if not isinstance(condition, Every | Either):
        yield from _term(condition, stepper)
        return
    for place, part in enumerate(condition.parts):
        before, after = condition.parts[:place], condition.parts[place + 1 :]
        if dropping and _is_unit(part) and not _is_unit(condition):
            yield (place, "dropped"), _joined(type(condition), (*before, *after))
        for key, changed in _inner(part, stepper, dropping=dropping):
            yield (place, *key), type(condition)((*before, changed, *after))


def _is_unit(condition: Condition) -> bool:
    """Whether a person wrote it as one term; `unless` adds to a term that it may be without a value."""
    if isinstance(condition, Either):
        return len(condition.parts) > 1 and all(isinstance(each, Valueless) for each in condition.parts[1:])
    return not isinstance(condition, Every)


def _joined(kind: type[Every] | type[Either], parts: tuple[Condition, ...]) -> Condition:
    return parts[0] if len(parts) == 1 else kind(parts)


def _term(term: Term, stepper: Stepper) -> Iterator[tuple[Key, Condition]]:
    if isinstance(term, Bound):
        yield from _bound(term, stepper)
    elif isinstance(term, Member):
        yield ("turned",), replace(term, wanted=not term.wanted)
        if len(term.among) > 1:
            for place, choice in enumerate(sorted(term.among, key=str)):
                yield ("without", place), Member(term.name, _less(term.among, choice), term.wanted)
    elif isinstance(term, Ticked):
        yield ("turned",), replace(term, wanted=not term.wanted)
        if len(term.among) > 1:
            for place, tick in enumerate(sorted(term.among)):
                yield ("without", place), replace(term, among=term.among - {tick})
    elif not isinstance(term, Valueless):
        yield ("turned",), replace(term, wanted=not term.wanted)


def _less(among: frozenset[str] | frozenset[float], choice: object) -> frozenset[str] | frozenset[float]:
    return frozenset(each for each in among if each != choice)  # type: ignore[return-value]  # of one kind, as among is


def _bound(term: Bound, stepper: Stepper) -> Iterator[tuple[Key, Condition]]:
    domain = stepper.domain(term.name)
    if term.sign in _STRICT and ((domain.kind == "number" and not domain.places) or isinstance(term.limit, FactRef)):
        yield ("edge",), replace(term, sign=_STRICT[term.sign])
    yield ("turned",), replace(term, sign=_TURNED[term.sign])
    if isinstance(term.limit, FactRef) or domain.kind == "yes_no":
        return
    for word, limit in stepper.beside(domain, term.limit):
        yield ("limit", word), replace(term, limit=limit)
