"""Tables of the knowledge: columns with kinds and units, rows with blank cells, symmetric matrices."""

from collections.abc import Mapping as Map
from contextlib import suppress

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Mark, Node, Scalar, Sequence, closest
from advisor.knowledge.citations import Citations
from advisor.knowledge.claims import ColumnShape, check_claims, keep_claims
from advisor.knowledge.folder import Placed
from advisor.knowledge.matrix import Unusable, read_matrix
from advisor.knowledge.model import Band, Row, Table
from advisor.knowledge.reading import list_in, mapping_in, shaped
from advisor.knowledge.schema import DomainShape, TableShape
from advisor.knowledge.values import Mistyped, Scope, cell

_ROW_EXTRAS = ("source", "note")


def read_tables(raw: Map[str, Placed[TableShape]], citations: Citations, ground: Scope) -> dict[str, Table]:
    """All tables, typed; what uses a table that is damaged as a whole is not told again."""
    labels = {name: _labels(placed.shape, placed.tree) for name, placed in raw.items()}
    ground.lost.lose_all("choices", (name for name, placed in raw.items() if _nameless(placed.shape, placed.tree)))
    tables: dict[str, Table] = {}
    for name, placed in raw.items():
        before = len(ground.problems)
        scope = ground.over({}, "tables", name, what="column")
        read = read_matrix if placed.shape.matrix else _table
        try:
            tables[name] = read(name, placed, labels, citations, scope)
        except Unusable:
            ground.lost.lose("tables", name)
        if len(ground.problems) > before:
            ground.lost.lose("rows", name)
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


def _labels(shape: TableShape, tree: Mapping) -> dict[str, str]:
    """The ids of a table before it is typed, for columns that take their choices from another table."""
    key = shape.key or next(iter(shape.columns or {}), "")
    rows = [row for row in list_in(tree, "rows") if isinstance(row, Mapping) and isinstance(row.get(key), Scalar)]
    return {str(row[key]): str(row.get("title", str(row[key]).replace("_", " "))) for row in rows}


def _nameless(shape: TableShape, tree: Mapping) -> bool:
    """Whether a row has lost its id, so that not all the choices are known."""
    rows, key = list_in(tree, "rows"), shape.key
    return any(not isinstance(row, Mapping) or (key and not isinstance(row.get(key), Scalar)) for row in rows)


def column_domain(
    shape: DomainShape, node: Node, mark: Mark, tables: Map[str, Map[str, str]], scope: Scope
) -> Domain:
    """A domain as declared for a column, fact or property at the mark (choices of other tables resolved)."""
    if shape.kind == "number" and "unit" not in shape.model_fields_set:
        scope.problem(mark, "a number has a unit, and it is missing here", "add 'unit:', and \"\" where there is none")
    choices: dict[str, str] = {}
    if shape.choices_of:
        if shape.choices_of not in tables:
            scope.unknown(
                mapping_in(node)["choices_of"].mark,
                "tables",
                shape.choices_of,
                f"'{shape.choices_of}' is no table",
                tables,
            )
        choices |= dict(tables.get(shape.choices_of, {}))
    choices |= _choices(shape, scope)
    if shape.kind == "yes_no":
        choices = {"no": "no", "yes": "yes"}
    low, high = shape.limits or (float("-inf"), float("inf"))
    if low > high:
        scope.problem(mapping_in(node)["limits"].mark, "the lower limit lies above the upper", "limits: [low, high]")
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
        open_choices=shape.kind == "choice"
        and (not choices or scope.lost.has("choices", shape.choices_of or "")),
    )


def _choices(shape: DomainShape, scope: Scope) -> dict[str, str]:
    node = shape.choices
    if node is None:
        return {}
    if isinstance(node, Mapping):
        for key, label in node.items():
            if not isinstance(label, Scalar):
                scope.problem(label.mark, f"the label of '{key}' is text", f"{key}: what people read")
        return {key: str(label) for key, label in node.items()}
    if isinstance(node, Sequence):
        found: dict[str, str] = {}
        for each in node:
            if not isinstance(each, Scalar):
                scope.problem(each.mark, "a choice is one word", "choices: [a, b]")
            if str(each) in found:
                scope.problem(each.mark, f"'{each}' stands twice among the choices", "take one out")
            found[str(each)] = str(each).replace("_", " ")
        return found
    scope.problem(node.mark, "choices are a list, or a mapping of ids to labels", "choices: [a, b]")
    return {}


def _table(
    name: str, placed: Placed[TableShape], labels: Map[str, Map[str, str]], citations: Citations, scope: Scope
) -> Table:
    shape, tree = placed.shape, placed.tree
    before = len(scope.problems)
    columns: dict[str, Domain] = {}
    bands: set[str] = set()
    claims: dict[str, ColumnShape] = {}
    for column, node in mapping_in(tree, "columns").items():
        mark = mapping_in(tree, "columns").key_marks[column]
        shape_read, columns[column] = _column(node, mark, labels, scope.at("columns", column))
        if _is_band(node):
            bands.add(column)
        if shape_read:
            claims[column] = shape_read
    if not columns:
        scope.problem(placed.parent.key_marks[name], "the table has no columns", "declare them under 'columns:'")
    key = shape.key or ""
    if key and key not in columns:
        scope.stranger(tree["key"].mark, key, f"the key '{key}' is no column", columns)
    check_claims(tree, claims, columns, scope)
    if not isinstance(tree.get("rows"), Sequence):
        scope.problem(tree["rows"].mark, "rows are a list of mappings", "- {column: value, ...}")
    if len(scope.problems) > before or any(each not in labels for each in _borrowed(tree)):
        raise Unusable
    _undeclared(tree, columns, scope)
    source = citations.read(shape.source, tree, scope)
    rows = tuple(_rows(tree, columns, frozenset(bands), key, citations, scope))
    keep_claims(tree, rows, claims, scope)
    return Table(name, shape.title, columns, frozenset(bands), rows, key, shape.policy or "unique", tree.mark, source)


def _borrowed(tree: Mapping) -> list[str]:
    """The tables from which columns take their choices."""
    columns = mapping_in(tree, "columns")
    return [str(table) for column in columns if (table := mapping_in(columns, column).get("choices_of")) is not None]


def _is_band(node: Node) -> bool:
    return str(mapping_in(node).get("kind", "")) == "band"


def _column(
    node: Node, mark: Mark, labels: Map[str, Map[str, str]], scope: Scope
) -> tuple[ColumnShape | None, Domain]:
    if not isinstance(node, Mapping):
        scope.problem(mark, "a column is declared by its kind, as a mapping", "write {kind: number, unit: mm}")
        return None, Domain("choice", open_choices=True)
    node = _as_number(node) if _is_band(node) else node
    shape = shaped(node, ColumnShape, scope.problems)
    if shape is None:
        return None, Domain("choice", open_choices=True)
    return shape, column_domain(shape, node, mark, labels, scope)


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
    found: list[Row] = []
    seen: dict[str, int] = {}
    nameless = False
    for place, node in enumerate(list_in(tree, "rows")):
        if not isinstance(node, Mapping) or (key and not isinstance(node.get(key), Scalar)):
            needs = f"a row of this table begins with its {key}" if key else "a row is written {column: value, ...}"
            scope.problem(node.mark, needs, f"{{{key or 'column'}: ..., ...}}")
            nameless = True
            continue
        cells = _cells(node, columns, bands, scope)
        row_id = str(cells.get(key) or _row_id(cells, columns, place))
        if key and row_id in seen:
            scope.problem(node.mark, f"'{row_id}' has a row already, in line {seen[row_id]}", "give each key one row")
        seen.setdefault(row_id, node.mark.line)
        source = citations.read_tree(node.get("source"), scope)
        found.append(Row(row_id, cells, node.mark, source, str(node.get("note", ""))))
    if nameless:
        raise Unusable
    return found


def _cells(node: Mapping, columns: Map[str, Domain], bands: frozenset[str], scope: Scope) -> dict[str, Value | Band]:
    cells: dict[str, Value | Band] = {}
    for name, child in node.items():
        if name in columns:
            with suppress(Mistyped):
                cells[name] = cell(child, columns[name], scope, band=name in bands)
    return cells


def _undeclared(tree: Mapping, columns: Map[str, Domain], scope: Scope) -> None:
    """Tell the cells that stand in no column; where several rows have them, it is the column that is missing."""
    found: dict[str, list[Mark]] = {}
    for node in list_in(tree, "rows"):
        for name, mark in node.key_marks.items() if isinstance(node, Mapping) else ():
            if name not in columns and name not in _ROW_EXTRAS:
                found.setdefault(name, []).append(mark)
    filled = {name for node in list_in(tree, "rows") if isinstance(node, Mapping) for name in node}
    for name, marks in found.items():
        if len(marks) == 1:
            hint = "declare it under 'columns:'"
            scope.stranger(marks[0], name, f"'{name}' is no column of this table", columns, hint)
        else:
            near = closest(name, [column for column in columns if column not in filled])
            at = mapping_in(tree, "columns").key_marks[near] if near else tree.key_marks["columns"]
            message = f"'{name}' is declared nowhere, and {len(marks)} rows have it, the first in line {marks[0].line}"
            scope.problem(at, message, f"Did you mean '{near}'?" if near else f"add '{name}: {{kind: ...}}'")
    if any(len(marks) > 1 for marks in found.values()):
        raise Unusable


def _row_id(cells: Map[str, Value | Band], columns: Map[str, Domain], place: int) -> str:
    texts = [str(cells[name]) for name in columns if isinstance(cells.get(name), str)]
    return "-".join(texts[:2]) or (
        next((f"{each:g}" for each in cells.values() if isinstance(each, float)), None) or f"row_{place + 1}"
    )
