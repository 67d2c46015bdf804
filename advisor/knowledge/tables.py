"""Tables of the knowledge: columns with kinds and units, rows with blank cells, symmetric matrices."""

from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import replace

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Mark, Node, Problems, Scalar, Sequence, nearest
from advisor.knowledge.citations import Citations
from advisor.knowledge.model import Band, Row, Table
from advisor.knowledge.parsing import Mistyped, Scope, cell, value
from advisor.knowledge.reading import shaped
from advisor.knowledge.schema import DomainShape, TableShape

_ROW_EXTRAS = ("source", "note")


def read_tables(
    raw: Map[str, tuple[TableShape, Mapping]], citations: Citations, problems: Problems
) -> dict[str, Table]:
    """All tables, typed. `raw` pairs each shape with its tree."""
    keys = {name: _keys(shape, tree) for name, (shape, tree) in raw.items()}
    labels = {name: _labels(shape, tree, keys[name]) for name, (shape, tree) in raw.items()}
    tables: dict[str, Table] = {}
    for name, (shape, tree) in raw.items():
        read = _matrix if shape.matrix else _table
        tables[name] = read(name, shape, tree, labels, citations, problems)
    return tables


def choices_of(table: Table) -> dict[str, str]:
    """The ids in the key column of a table (the first column if none is the key) with their labels."""
    if table.matrix and table.values is not None:
        return {key: key for pair in table.matrix for key in pair}
    key = table.key or next(iter(table.columns), "")
    found: dict[str, str] = {}
    for row in table.rows:
        one = str(row.cells.get(key, row.id))
        found.setdefault(one, str(row.cells.get("title", one.replace("_", " "))))
    return found


def _entries(tree: Mapping) -> list[Mapping]:
    rows = tree.get("rows")
    return [row for row in rows if isinstance(row, Mapping)] if isinstance(rows, Sequence) else []


def _keys(shape: TableShape, tree: Mapping) -> list[str]:
    key = shape.key or next(iter(shape.columns or {}), "")
    return [str(row[key]) for row in _entries(tree) if isinstance(row.get(key), Scalar)]


def _labels(shape: TableShape, tree: Mapping, keys: list[str]) -> dict[str, str]:
    key = shape.key or next(iter(shape.columns or {}), "")
    titles = {str(row[key]): str(row["title"]) for row in _entries(tree) if key in row and "title" in row}
    return {one: titles.get(one, one.replace("_", " ")) for one in keys}


def column_domain(shape: DomainShape, node: Node, tables: Map[str, Map[str, str]], scope: Scope) -> Domain:
    """A domain as declared for a column, fact or property (choices of other tables resolved)."""
    choices: dict[str, str] = {}
    if shape.choices_of:
        if shape.choices_of not in tables:
            scope.problem(
                _mark(node, "choices_of"),
                f"'{shape.choices_of}' is no table",
                nearest(shape.choices_of, tables).strip(),
            )
        choices |= dict(tables.get(shape.choices_of, {}))
    choices |= _choices(shape, scope)
    if shape.kind == "yes_no":
        choices = {"no": "no", "yes": "yes"}
    low, high = shape.limits or (float("-inf"), float("inf"))
    places = tuple(shape.places or ())
    return Domain(
        shape.kind,
        shape.unit,
        low,
        high,
        None,
        choices,
        places,
        shape.named or {},
        open_choices=shape.kind == "choice" and not choices,
    )


def _choices(shape: DomainShape, scope: Scope) -> dict[str, str]:
    node = shape.choices
    if node is None:
        return {}
    if isinstance(node, Mapping):
        return {key: str(label) for key, label in node.items()}
    if isinstance(node, Sequence):
        found: dict[str, str] = {}
        for each in node:
            if str(each) in found:
                scope.problem(each.mark, f"'{each}' stands twice among the choices", "take one out")
            found[str(each)] = str(each).replace("_", " ")
        return found
    scope.problem(node.mark, "choices are a list, or a mapping of ids to labels")
    return {}


def _mark(node: Node, key: str) -> Mark:
    return node.key_marks[key] if isinstance(node, Mapping) and key in node.key_marks else node.mark


def _table(
    name: str,
    shape: TableShape,
    tree: Mapping,
    labels: Map[str, Map[str, str]],
    citations: Citations,
    problems: Problems,
) -> Table:
    scope = Scope(problems, {}, trail=("tables", name), what="column")
    columns: dict[str, Domain] = {}
    bands: set[str] = set()
    declared = tree.get("columns")
    for column, node in declared.items() if isinstance(declared, Mapping) else ():
        domain, band = _column(node, labels, scope.at("columns", column))
        columns[column] = domain
        if band:
            bands.add(column)
    if not columns:
        scope.problem(tree.mark, "the table has no columns", "declare them under 'columns:'")
    key = shape.key or ""
    if key and key not in columns:
        scope.problem(_mark(tree, "key"), f"the key '{key}' is no column", nearest(key, columns).strip())
    source = citations.read(shape.source, tree, scope)
    rows = tuple(_rows(tree, columns, frozenset(bands), key, citations, scope))
    return Table(name, shape.title, columns, frozenset(bands), rows, key, shape.policy or "unique", tree.mark, source)


def _column(node: Node, labels: Map[str, Map[str, str]], scope: Scope) -> tuple[Domain, bool]:
    band = isinstance(node, Mapping) and str(node.get("kind", "")) == "band"
    if band and isinstance(node, Mapping):
        node = _as_number(node)
    shape = shaped(node, DomainShape, scope.problems)
    if shape is None:
        return Domain("choice", open_choices=True), False
    return column_domain(shape, node, labels, scope), band


def _as_number(node: Mapping) -> Mapping:
    """A band column holds stretches of a number: its domain is that of the number."""
    number = Mapping(node.mark)
    number.update(node)
    number["kind"] = Scalar("number", node["kind"].mark)
    number.key_marks.update(node.key_marks)
    return number


def _rows(
    tree: Mapping, columns: Map[str, Domain], bands: frozenset[str], key: str, citations: Citations, scope: Scope
) -> list[Row]:
    nodes = tree.get("rows")
    if not isinstance(nodes, Sequence):
        scope.problem(tree.mark, "rows are a list of mappings", "- {column: value, ...}")
        return []
    found: list[Row] = []
    seen: dict[str, int] = {}
    for place, node in enumerate(nodes):
        if not isinstance(node, Mapping):
            scope.problem(node.mark, "a row is written {column: value, ...}")
            continue
        cells = _cells(node, columns, bands, scope)
        row_id = str(cells.get(key) or _row_id(cells, columns, place))
        if key and row_id in seen:
            scope.problem(node.mark, f"'{row_id}' has a row already, in line {seen[row_id]}", "give each key one row")
        seen.setdefault(row_id, node.mark.line)
        source = citations.read_tree(node.get("source"), scope)
        found.append(Row(row_id, cells, node.mark, source, str(node.get("note", ""))))
    return found


def _cells(node: Mapping, columns: Map[str, Domain], bands: frozenset[str], scope: Scope) -> dict[str, Value | Band]:
    cells: dict[str, Value | Band] = {}
    for name, child in node.items():
        if name in _ROW_EXTRAS:
            continue
        if name not in columns:
            scope.problem(
                node.key_marks[name],
                f"'{name}' is no column of this table",
                nearest(name, columns).strip() or "declare it under 'columns:'",
            )
            continue
        with suppress(Mistyped):
            cells[name] = cell(child, columns[name], scope, band=name in bands)
    return cells


def _row_id(cells: Map[str, Value | Band], columns: Map[str, Domain], place: int) -> str:
    texts = [str(cells[name]) for name in columns if isinstance(cells.get(name), str)]
    return "-".join(texts[:2]) or (
        next((f"{each:g}" for each in cells.values() if isinstance(each, float)), None) or f"row_{place + 1}"
    )


def _matrix(
    name: str,
    shape: TableShape,
    tree: Mapping,
    labels: Map[str, Map[str, str]],
    citations: Citations,
    problems: Problems,
) -> Table:
    scope = Scope(problems, {}, trail=("tables", name))
    ids = _listed(tree.get("of"), labels, scope)
    kinds = _listed(tree.get("values"), labels, scope)
    values = Domain("choice", choices=kinds)
    matrix: dict[tuple[str, str], Value] = {}
    rows = tree.get("rows")
    for left, node in rows.items() if isinstance(rows, Mapping) else ():
        _known_side(left, rows, ids, scope)
        for right, child in node.items() if isinstance(node, Mapping) else ():
            _known_side(right, node, ids, scope)
            if (left, right) in matrix:
                scope.problem(child.mark, f"{left} x {right} is given twice", "the matrix is symmetric: give one half")
                continue
            with suppress(Mistyped):
                matrix[left, right] = matrix[right, left] = value(child, values, scope)
    key_domain = Domain("choice", choices=ids)
    return Table(
        name,
        shape.title,
        {"left": key_domain, "right": key_domain},
        frozenset(),
        (),
        "",
        "unique",
        tree.mark,
        citations.read(shape.source, tree, scope),
        matrix,
        replace(values, kind="choice"),
    )


def _known_side(name: str, parent: Node | None, ids: Map[str, str], scope: Scope) -> None:
    if name not in ids and isinstance(parent, Mapping):
        scope.problem(
            parent.key_marks[name], f"'{name}' is no row or column of this matrix", nearest(name, ids).strip()
        )


def _listed(node: Node | None, labels: Map[str, Map[str, str]], scope: Scope) -> dict[str, str]:
    if isinstance(node, Mapping):
        choices = node.get("choices")
        if isinstance(choices, Sequence):
            return {str(each): str(each) for each in choices}
        if isinstance(choices, Mapping):
            return {key: str(label) for key, label in choices.items()}
        if isinstance(node.get("choices_of"), Scalar):
            return dict(labels.get(str(node["choices_of"]), {}))
    if node is not None:
        scope.problem(node.mark, "{choices: [...]} is expected here")
    return {}
