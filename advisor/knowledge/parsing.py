"""Typing of conditions by the declared kinds of the names in them."""

from collections.abc import Callable
from dataclasses import replace

from advisor.conditions import (
    ALWAYS,
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Member,
    Stated,
    Ticked,
    Value,
)
from advisor.documents import Mapping, Node, Scalar, Sequence, nearest
from advisor.knowledge.model import Band, Row, Table
from advisor.knowledge.values import Blank, Mistyped, Scope, value

_THRESHOLDS = {"above": ">", "at_least": ">=", "below": "<", "at_most": "<="}
_SIGNS = {**{sign: word for word, sign in _THRESHOLDS.items()}, "\u2265": "at_least", "\u2264": "at_most"}
_OPERATORS = (*_THRESHOLDS, "any_of", "none_of", "fact", "row")


def condition(node: Node, scope: Scope) -> Condition:
    """A condition tree; raises Mistyped with every fault recorded, or Blank for a row that does not apply."""
    if isinstance(node, Scalar) and str(node) == "always":
        return ALWAYS
    if not isinstance(node, Mapping):
        raise scope.fault(node, "a condition is written as 'name: test'", "for instance {water_exposure: wash}")
    if not node:
        raise scope.fault(node, "the condition is empty", "name what it asks, or write 'always'")
    return _all([lambda name=name, test=test: _entry(node, name, test, scope) for name, test in node.items()], Every)  # type: ignore[misc]


def _all(parts: list[Callable[[], Condition]], kind: type[Every] | type[Either]) -> Condition:
    """Parse all parts, so that all faults are told at once."""
    done: list[Condition] = []
    faulty = blank = False
    for part in parts:
        try:
            done.append(part())
        except Mistyped:
            faulty = True
        except Blank:
            blank = True
    if faulty:
        raise Mistyped
    if blank:
        raise Blank
    return done[0] if len(done) == 1 else kind(tuple(done))


def _entry(parent: Mapping, name: str, test: Node, scope: Scope) -> Condition:
    if name == "either":
        if not isinstance(test, Sequence) or len(test) == 0:
            raise scope.fault(test, "'either' holds a list of conditions", "either: [{a: 1}, {b: 2}]")
        return _all([lambda each=each: condition(each, scope) for each in test], Either)  # type: ignore[misc]
    domain = scope.domain(name, parent.key_marks[name])
    if domain.kind == "text":
        raise scope.fault(test, f"'{name}' is text, and no condition can be put on text", "use another name")
    return _test(name, test, domain, scope)


def _test(name: str, test: Node, domain: Domain, scope: Scope) -> Condition:
    if isinstance(test, Scalar) and str(test) in {"stated", "not_stated"} and scope.may_ask_stated:
        return Stated(name, str(test) == "stated")
    if isinstance(test, Mapping) and not {"fact", "row"} & set(test):
        unknown = [key for key in test if key not in _OPERATORS]
        for key in unknown:
            scope.problem(
                test.key_marks[key],
                f"'{key}' is no operator",
                f"write {_SIGNS[key]}"
                if key in _SIGNS
                else nearest(key, _OPERATORS).strip() or "known: " + ", ".join(_OPERATORS[:6]),
            )
        if unknown or not test:
            raise Mistyped if unknown else scope.fault(test, "a test is missing here", "{at_least: 1}")
        return _all(
            [
                lambda op=op, operand=operand: _operation(name, op, operand, domain, scope)  # type: ignore[misc]
                for op, operand in test.items()
            ],
            Every,
        )
    if isinstance(test, Sequence) and (test or domain.kind != "several"):
        raise scope.fault(test, "a list is no test", "write {any_of: [...]} or {none_of: [...]}")
    return _equals(name, operand(test, domain, scope), domain)


def _operation(name: str, op: str, node: Node, domain: Domain, scope: Scope) -> Condition:
    if op in _THRESHOLDS:
        if not domain.ordered:
            raise scope.fault(node, f"'{name}' has no order, so '{op}' means nothing", "use any_of or none_of")
        limit = operand(node, domain, scope)
        return Bound(name, _THRESHOLDS[op], limit)  # type: ignore[arg-type]  # ordered domains code to numbers
    if domain.kind == "number" and not domain.places:
        raise scope.fault(node, f"'{name}' is a number", "use above, at_least, below or at_most")
    if not isinstance(node, Sequence) or not len(node):
        raise scope.fault(node, f"'{op}' holds a list", f"{op}: [a, b]")
    single = replace(domain, kind="choice") if domain.kind == "several" else domain
    among: set[Coded] = set()
    faulty = False
    for entry in node:
        try:
            one = operand(entry, single, scope)
        except Mistyped:
            faulty = True
            continue
        if isinstance(one, FactRef):
            raise scope.fault(entry, "a fact cannot stand in a list", "use {name: {fact: x}}")
        among.add(one)
    if faulty:
        raise Mistyped
    wanted = op == "any_of"
    if domain.kind == "several":
        return Ticked(name, frozenset(map(str, among)), wanted)
    return Member(name, frozenset(among), wanted)  # type: ignore[arg-type]  # all of one kind by the domain


def _equals(name: str, operand: Coded | FactRef, domain: Domain) -> Condition:
    if domain.kind == "several":
        if isinstance(operand, frozenset) and not operand:
            return Ticked(name, frozenset(domain.choices), wanted=False)
        return Ticked(name, operand if isinstance(operand, frozenset) else frozenset({str(operand)}))
    if domain.ordered:
        return Bound(name, "=", operand)  # type: ignore[arg-type]  # ordered domains code to numbers
    if isinstance(operand, FactRef):
        raise TypeError("equality with a fact is for numbers and scales")
    return Member(name, frozenset({operand}))  # type: ignore[arg-type]  # a choice


def operand(node: Node, domain: Domain, scope: Scope) -> Coded | FactRef:
    """A constant, `{fact: x}` or `{row: column}`, coded for the domain."""
    if isinstance(node, Mapping):
        if len(node) != 1 or not {"fact", "row"} & set(node):
            raise scope.fault(node, "a value, {fact: x} or {row: column} is expected here", "write one of them")
        kind, name = next(iter(node.items()))
        if not isinstance(name, Scalar):
            raise scope.fault(name, "a name is expected here", "{fact: t_eff_c}")
        return _fact(name, domain, scope) if kind == "fact" else domain.code(_cell(name, domain, scope))
    return domain.code(value(node, domain, scope))


def _fact(node: Scalar, domain: Domain, scope: Scope) -> FactRef:
    name = str(node)
    if name not in scope.facts or scope.lost.has("names", name):
        raise scope.unknown(node.mark, "names", name, f"'{name}' is no fact", scope.facts)
    other = scope.facts[name]
    same = domain.kind == other.kind and (
        domain.unit == other.unit if domain.kind == "number" else list(domain.choices) == list(other.choices)
    )
    if not domain.ordered or not same:
        raise scope.fault(
            node,
            f"'{name}' ({_kind(other)}) cannot stand for a limit here ({_kind(domain)})",
            "both sides need the same kind and unit",
        )
    return FactRef(name)


def _kind(domain: Domain) -> str:
    return f"{domain.kind} in {domain.unit}" if domain.unit else domain.kind


def _cell(node: Scalar, domain: Domain, scope: Scope) -> Value:
    name = str(node)
    if scope.table is None or scope.row is None:
        raise scope.fault(node, "{row: ...} needs 'each_row_of'", "name the table with each_row_of")
    if name not in scope.table.columns:
        message, hint = f"'{name}' is no column of table {scope.table.id}", f"it has {', '.join(scope.table.columns)}"
        raise scope.stranger(node.mark, name, message, scope.table.columns, hint)
    column = scope.table.columns[name]
    if domain.kind == "number" and (column.kind != "number" or column.unit != domain.unit):
        raise scope.fault(
            node,
            f"column '{name}' ({_kind(column)}) does not suit ({_kind(domain)})",
            "both sides need the same kind and unit",
        )
    cell = scope.row.cells.get(name)
    if cell is None:
        raise Blank
    if isinstance(cell, Band):
        raise scope.fault(node, f"column '{name}' holds bands, not values", "name another column")
    if domain.kind != "number" and not domain.accepts(cell):
        raise _unsuitable(node, cell, domain, scope.table, scope.row, scope)
    return cell


def _unsuitable(node: Scalar, cell: Value, domain: Domain, table: Table, row: Row, scope: Scope) -> Mistyped:
    """Tell a cell that is none of the choices where a rule reads it: at its row, if the cells of other rows suit."""
    cells = [each.cells[str(node)] for each in table.rows if str(node) in each.cells]
    if any(not isinstance(each, Band) and domain.accepts(each) for each in cells):
        message = f"'{cell}' is not one of the choices in line {node.mark.line} of {node.mark.file}, where it is read"
        return scope.stranger(row.mark, str(cell), message, domain.choices, "check both declarations")
    if any(problem.mark == node.mark for problem in scope.problems):
        return Mistyped()
    message = f"'{cell}' in row '{row.id}' (line {row.mark.line}) is not one of the choices here"
    return scope.stranger(node.mark, str(cell), message, domain.choices, "check both declarations")
