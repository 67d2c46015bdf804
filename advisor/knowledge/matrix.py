"""Symmetric matrices: one half is written, every pair has its cell."""

from collections.abc import Mapping as Map

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Mark, Scalar, Sequence
from advisor.knowledge.citations import Citations
from advisor.knowledge.folder import Placed
from advisor.knowledge.model import Table
from advisor.knowledge.reading import mapping_in
from advisor.knowledge.schema import TableShape
from advisor.knowledge.values import Mistyped, Scope, value


class Unusable(Exception):
    """Nothing can be looked up in a table; why was told."""


def read_matrix(
    name: str, placed: Placed[TableShape], labels: Map[str, Map[str, str]], citations: Citations, scope: Scope
) -> Table:
    """A matrix; raises Unusable where its sides or its values are not known."""
    shape, tree = placed.shape, placed.tree
    mark = placed.parent.key_marks[name]
    sides, kinds = _listed(tree, "of", mark, labels, scope), _listed(tree, "values", mark, labels, scope)
    if not isinstance(tree["rows"], Mapping):
        scope.problem(tree["rows"].mark, "the rows of a matrix are a mapping", "rows: {a: {a: C, b: T}, b: {b: C}}")
    if not sides or not kinds or not isinstance(tree["rows"], Mapping):
        raise Unusable
    values = Domain("choice", choices=kinds)
    before = len(scope.problems)
    cells = _cells(mapping_in(tree, "rows"), sides, values, scope)
    if len(scope.problems) == before:
        _complete(tree, cells, sides, scope)
    side = Domain("choice", choices=sides)
    return Table(
        name,
        shape.title,
        {"left": side, "right": side},
        frozenset(),
        (),
        "",
        "unique",
        tree.mark,
        citations.read(shape.source, tree, scope),
        cells,
        values,
    )


def _cells(rows: Mapping, sides: Map[str, str], values: Domain, scope: Scope) -> dict[tuple[str, str], Value]:
    found: dict[tuple[str, str], Value] = {}
    for left, row in rows.items():
        _known_side(left, rows, sides, scope)
        if not isinstance(row, Mapping):
            scope.problem(row.mark, "a row of a matrix is written {column: value, ...}", f"{left}: {{...}}")
            continue
        for right, node in row.items():
            _known_side(right, row, sides, scope)
            if (left, right) in found:
                scope.problem(
                    row.key_marks[right], f"{left} x {right} is given twice", "the matrix is symmetric: give one half"
                )
                continue
            try:
                cell = value(node, values, scope)
            except Mistyped:
                cell = next(iter(values.choices))
            found[left, right] = found[right, left] = cell
    return found


def _complete(tree: Mapping, cells: Map[tuple[str, str], Value], sides: Map[str, str], scope: Scope) -> None:
    """Tell, once for each row, the pairs that have no cell."""
    rows, order = mapping_in(tree, "rows"), list(sides)
    for place, left in enumerate(order):
        blank = [right for right in order[place:] if (left, right) not in cells]
        if blank:
            at = next((each for each in order[place:] if each in rows), None)
            mark = rows.key_marks[at] if at else tree.key_marks["rows"]
            pairs = ", ".join(f"{left} x {right}" for right in blank[:3])
            more = f" and {len(blank) - 3} more" if len(blank) > 3 else ""
            scope.problem(mark, f"the matrix has no cell for {pairs}{more}", "every pair needs its value")


def _known_side(name: str, parent: Mapping, sides: Map[str, str], scope: Scope) -> None:
    if name not in sides:
        scope.stranger(parent.key_marks[name], name, f"'{name}' is no row or column of this matrix", sides)


def _listed(tree: Mapping, key: str, mark: Mark, labels: Map[str, Map[str, str]], scope: Scope) -> dict[str, str]:
    """The ids that 'of' or 'values' lists; empty where they cannot be known."""
    within = mapping_in(tree, key)
    choices, table = within.get("choices"), within.get("choices_of")
    if isinstance(choices, Sequence) and choices and all(isinstance(each, Scalar) for each in choices):
        return {str(each): str(each) for each in choices}
    if isinstance(choices, Mapping) and choices:
        return {each: str(label) for each, label in choices.items()}
    if isinstance(table, Scalar):
        if str(table) not in labels:
            scope.unknown(table.mark, "tables", str(table), f"'{table}' is no table", labels)
        return dict(labels.get(str(table), {}))
    mark = tree[key].mark if key in tree else mark
    scope.problem(mark, f"a matrix lists its ids under '{key}'", f"{key}: {{choices: [a, b]}}")
    return {}
