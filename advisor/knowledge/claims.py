"""What a table claims of its columns: that every row has a cell there, that one figure never lies above another."""

from collections.abc import Mapping as Map
from collections.abc import Sequence

from advisor.conditions import Domain
from advisor.documents import Mapping, closest
from advisor.knowledge.kinds import Id, YesNo
from advisor.knowledge.model import Row
from advisor.knowledge.reading import list_in, mapping_in
from advisor.knowledge.schema import DomainShape
from advisor.knowledge.values import Scope


class ColumnShape(DomainShape):
    """A column of a table."""

    needed: YesNo = False
    at_most: Id | None = None


def check_claims(tree: Mapping, claims: Map[str, ColumnShape], columns: Map[str, Domain], scope: Scope) -> None:
    """Tell a column that is to be compared with what it cannot be compared with."""
    for column, claim in claims.items():
        other = claim.at_most
        if other is None:
            continue
        mark, here = mapping_in(mapping_in(tree, "columns"), column)["at_most"].mark, scope.at("columns", column)
        if other not in columns:
            here.stranger(mark, other, f"'{other}' is no column of this table", columns, "name another column")
        elif other in claims and {claim.kind, claims[other].kind} != {"number"}:
            here.problem(mark, "'at_most' compares two columns of numbers", "take it out, or name another column")
        elif other in claims and claim.unit != claims[other].unit:
            units = [each.unit or "no unit" for each in (claim, claims[other])]
            message = f"'{column}' is in {units[0]}, and '{other}' is in {units[1]}"
            here.problem(mark, message, "both need the same unit")


def keep_claims(tree: Mapping, rows: Sequence[Row], claims: Map[str, ColumnShape], scope: Scope) -> None:
    """Tell the rows that do not keep what the columns claim."""
    nodes = [node for node in list_in(tree, "rows") if isinstance(node, Mapping)]
    for row, node in zip(rows, nodes, strict=True):
        strange = [key for key in node if key not in claims]
        for column, claim in claims.items():
            if claim.needed and column not in node and not closest(column, strange):
                message = f"row '{row.id}' has no {column}, which every row needs"
                scope.problem(node.mark, message, f"add '{column}:' to the row")
            low, high = row.cells.get(column), row.cells.get(claim.at_most or "")
            if isinstance(low, float | int) and isinstance(high, float | int) and low > high:
                message = f"{column} is {low:g}, which lies above {claim.at_most}, {high:g}"
                scope.problem(node[column].mark, message, f"mend one of the two in row '{row.id}'")
