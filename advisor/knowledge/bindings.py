"""Formulas and look-ups bound to facts and properties."""

from collections.abc import Mapping as Map
from dataclasses import dataclass, replace

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Node, Problems, Scalar, Sequence, as_number, nearest
from advisor.formulas import FORMULAS
from advisor.knowledge.model import Formed, LookedUp, Table, WorstOf
from advisor.knowledge.parsing import Mistyped, Scope, value
from advisor.knowledge.schema import ComputationShape, LookUpShape, PropertyShape


@dataclass(frozen=True, slots=True)
class Bindings:
    """Reads bindings against the known tables, facts and properties."""

    tables: Map[str, Table]
    facts: dict[str, Domain]
    properties: Map[str, Domain]
    problems: Problems

    def of_computation(
        self, shape: ComputationShape, tree: Mapping, scope: Scope
    ) -> tuple[Formed | LookedUp | None, Domain]:
        """What computes a fact, and the domain that follows from it."""
        if (shape.formula is None) == (shape.looked_up is None):
            scope.problem(tree.mark, "a computed fact has either a formula or a look-up")
            return None, Domain("number")
        if shape.formula is not None:
            domain = self._formula_domain(shape.formula, tree, scope)
            if shape.limits:
                domain = replace(domain, low=shape.limits[0], high=shape.limits[1])
            return self._formed(shape.formula, tree, scope), domain
        node = tree["looked_up"]
        assert shape.looked_up is not None  # noqa: S101 - one of the two is there
        domain = self._column(shape.looked_up)
        return self._looked_up(shape.looked_up, node, domain, scope), domain

    def of_property(
        self, shape: PropertyShape, tree: Mapping, domain: Domain, scope: Scope
    ) -> Formed | LookedUp | WorstOf | None:
        """What computes a property, if anything does."""
        ways = [way for way in ("formula", "looked_up", "worst_of", "concluded") if getattr(shape, way) is not None]
        if len(ways) > 1:
            scope.problem(tree.mark, f"a property is found in one way, not by {' and '.join(ways)}")
        if shape.formula is not None:
            self._formula_domain(shape.formula, tree, scope)
            return self._formed(shape.formula, tree, scope)
        if shape.looked_up is not None:
            return self._looked_up(shape.looked_up, tree["looked_up"], domain, scope)
        if shape.worst_of is not None:
            nodes = tree["worst_of"]
            assert isinstance(nodes, Sequence)  # noqa: S101 - by the shape
            parts = [
                self._looked_up(part.looked_up, node["looked_up"], domain, scope)
                for part, node in zip(shape.worst_of, nodes, strict=True)
                if isinstance(node, Mapping)
            ]
            return WorstOf(tuple(part for part in parts if part is not None))
        return None

    def _formula_domain(self, name: str, tree: Mapping, scope: Scope) -> Domain:
        formula = FORMULAS.get(name)
        if formula is None:
            scope.problem(
                tree["formula"].mark,
                f"'{name}' is no formula",
                nearest(name, FORMULAS).strip() or "gudgeon compute lists them",
            )
            return Domain("number")
        return Domain("number", self._unit(name, tree))

    def _unit(self, name: str, tree: Mapping) -> str:
        """The unit of the result; some formulas hold in any unit and take that of an input."""
        formula, node = FORMULAS[name], tree.get("in")
        if not formula.unit_follows or not isinstance(node, Mapping):
            return formula.result_unit
        named = (str(node.get(each.name, "")) for each in formula.inputs)
        units = [domain.unit for each in named if (domain := self.facts.get(each) or self.properties.get(each))]
        return next((unit for unit in units if unit), "")

    def _formed(self, name: str, tree: Mapping, scope: Scope) -> Formed | None:
        formula = FORMULAS.get(name)
        node = tree.get("in")
        if formula is None:
            return None
        if not isinstance(node, Mapping):
            scope.problem(tree.mark, f"formula {name} needs its inputs", "in: {input: fact or number}")
            return None
        wanted = {each.name: each for each in formula.inputs}
        for key in node:
            if key not in wanted:
                scope.problem(
                    node.key_marks[key],
                    f"'{key}' is no input of {name}",
                    nearest(key, wanted).strip() or "its inputs: " + ", ".join(wanted),
                )
        for key in wanted:
            if key not in node:
                scope.problem(node.mark, f"input '{key}' of {name} is missing", f"add '{key}: fact or number'")
        inputs: dict[str, str | float] = {}
        for key, child in node.items():
            if key in wanted:
                self._input(key, child, wanted[key].unit, inputs, scope)
        return Formed(name, inputs) if len(inputs) == len(wanted) else None

    def _input(self, key: str, node: Node, unit: str, inputs: dict[str, str | float], scope: Scope) -> None:
        if not isinstance(node, Scalar):
            scope.problem(node.mark, "an input is the name of a fact or property, or a number")
            return
        name = str(node)
        domain = self.facts.get(name) or self.properties.get(name)
        if domain is None:
            try:
                inputs[key] = as_number(node)
            except ValueError:
                scope.problem(
                    node.mark,
                    f"'{name}' is neither a number nor a known fact or property",
                    nearest(name, [*self.facts, *self.properties]).strip(),
                )
            return
        if domain.kind != "number":
            scope.problem(node.mark, f"'{name}' is {domain.kind}, and a formula needs a number")
        elif unit and domain.unit and unit != domain.unit:
            scope.problem(node.mark, f"'{name}' is in {domain.unit}, and input '{key}' is in {unit}")
        inputs[key] = name

    def _column(self, shape: LookUpShape) -> Domain:
        table = self.tables.get(shape.table)
        if table is None:
            return Domain("choice", open_choices=True)
        if table.matrix and table.values is not None:
            return table.values
        domain = table.columns.get(shape.column or "")
        return domain if domain is not None else Domain("choice", open_choices=True)

    def _looked_up(self, shape: LookUpShape, node: Node, domain: Domain, scope: Scope) -> LookedUp | None:
        scope = scope.at("looked_up")
        table = self.tables.get(shape.table)
        assert isinstance(node, Mapping)  # noqa: S101 - by the shape
        if table is None:
            scope.problem(node["table"].mark, f"'{shape.table}' is no table", nearest(shape.table, self.tables).strip())
            return None
        by = self._by(table, node, scope)
        column = shape.column or ""
        if not table.matrix and column not in table.columns:
            at = node["column"].mark if "column" in node else node.mark
            scope.problem(
                at,
                f"'{column}' is no column of table {table.id}" if column else "the column to be read is missing",
                nearest(column, table.columns).strip(),
            )
            return None
        otherwise = self._otherwise(node, domain, scope)
        return LookedUp(shape.table, by, column, shape.combine or "", otherwise) if by else None

    def _otherwise(self, node: Mapping, domain: Domain, scope: Scope) -> Value | None:
        if "otherwise" not in node:
            return None
        try:
            loose = replace(domain, open_choices=True) if domain.kind == "choice" else domain
            return value(node["otherwise"], loose, scope)
        except Mistyped:
            return None

    def _by(self, table: Table, node: Mapping, scope: Scope) -> tuple[tuple[str, str], ...]:
        by = node["by"]
        if table.matrix:
            if not isinstance(by, Sequence) or len(by) != 2:
                scope.problem(by.mark, "a matrix is looked up by two names", "by: [one, other]")
                return ()
            pairs = [("left", by[0]), ("right", by[1])]
        elif isinstance(by, Mapping) and by:
            pairs = list(by.items())
        else:
            scope.problem(by.mark, "'by' pairs columns of the table with facts or properties", "by: {column: fact}")
            return ()
        return tuple((column, str(name)) for column, name in pairs if self._pair(table, column, name, by, scope))

    def _pair(self, table: Table, column: str, name: Node, by: Node, scope: Scope) -> bool:
        if column not in table.columns:
            at = by.key_marks[column] if isinstance(by, Mapping) else by.mark
            scope.problem(at, f"'{column}' is no column of table {table.id}", nearest(column, table.columns).strip())
            return False
        if str(name) not in self.facts and str(name) not in self.properties:
            scope.problem(
                name.mark,
                f"'{name}' is no fact or property",
                nearest(str(name), [*self.facts, *self.properties]).strip(),
            )
            return False
        return True
