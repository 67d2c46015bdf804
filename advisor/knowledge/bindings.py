"""Formulas and look-ups bound to facts and properties."""

from collections.abc import Iterator
from collections.abc import Mapping as Map
from dataclasses import dataclass, replace

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Mark, Node, Scalar, Sequence, as_number, nearest
from advisor.formulas import FORMULAS
from advisor.formulas.formula import Formula
from advisor.knowledge.model import Band, Formed, LookedUp, Table, WorstOf
from advisor.knowledge.reading import list_in, mapping_in
from advisor.knowledge.schema import ComputationShape, LookUpShape, PropertyShape
from advisor.knowledge.values import Mistyped, Scope, value

_ANY = Domain("choice", open_choices=True)


@dataclass(frozen=True, slots=True)
class Bindings:
    """Reads bindings against the known tables, facts and properties."""

    tables: Map[str, Table]
    facts: Map[str, Domain]
    properties: Map[str, Domain]

    def of_computation(
        self, shape: ComputationShape, tree: Mapping, scope: Scope
    ) -> tuple[Formed | LookedUp | None, Domain]:
        """What computes a fact, and the domain that follows from it."""
        facts_only = replace(self, properties={})
        if shape.formula is not None and shape.looked_up is None:
            formed, domain = facts_only.formed(shape.formula, tree, tree.mark, scope)
            if shape.limits:
                domain = replace(domain, low=shape.limits[0], high=shape.limits[1])
            return formed, domain
        if shape.looked_up is not None and shape.formula is None:
            domain = self._column(shape.looked_up)
            return facts_only.looked_up(shape.looked_up, mapping_in(tree, "looked_up"), domain, scope), domain
        scope.problem(tree.mark, "a computed fact has either a formula or a look-up", "formula: ..., or looked_up: ...")
        return None, Domain("number")

    def of_property(
        self, shape: PropertyShape, tree: Mapping, mark: Mark, domain: Domain, scope: Scope
    ) -> Formed | LookedUp | WorstOf | None:
        """What computes a property, if anything does."""
        ways = [way for way in ("formula", "looked_up", "worst_of", "concluded") if getattr(shape, way) is not None]
        if len(ways) > 1:
            scope.problem(
                tree.key_marks[ways[-1]], f"a property is found in one way, not by {' and '.join(ways)}", "keep one"
            )
        if shape.formula is not None:
            formed, found = self.formed(shape.formula, tree, mark, scope)
            if formed is not None and (domain.kind != "number" or (found.unit and found.unit != domain.unit)):
                scope.problem(tree["formula"].mark, f"{shape.formula} gives a number in {found.unit or 'no unit'}")
            return formed
        if shape.looked_up is not None:
            return self._reads(shape.looked_up, tree, tree, domain, scope)
        if shape.worst_of is not None:
            pairs = zip(shape.worst_of, list_in(tree, "worst_of"), strict=True)
            parts = [self._reads(part.looked_up, node, tree, domain, scope) for part, node in pairs]
            return WorstOf(tuple(part for part in parts if part is not None))
        return None

    def formed(self, name: str, tree: Mapping, mark: Mark, scope: Scope) -> tuple[Formed | None, Domain]:
        """A formula with its inputs, and the domain of its result; what it is for stands at the mark."""
        formula, node = FORMULAS.get(name), tree.get("in")
        if formula is None:
            hint = nearest(name, FORMULAS).strip() or "'gudgeon compute' lists them"
            scope.problem(tree["formula"].mark, f"'{name}' is no formula", hint)
            return None, Domain("number")
        domain = Domain("number", self._unit(formula, mapping_in(node)))
        if not isinstance(node, Mapping):
            at = node.mark if node is not None else mark
            scope.problem(at, f"formula {name} needs its inputs", "in: {input: fact or number}")
            return None, domain
        wanted = {each.name: each for each in formula.inputs}
        strange = [key for key in node if key not in wanted]
        for key in strange:
            hint = nearest(key, wanted).strip() or "its inputs: " + ", ".join(wanted)
            scope.problem(node.key_marks[key], f"'{key}' is no input of {name}", hint)
        for key in wanted:
            if key not in node and not nearest(key, strange):
                scope.problem(node.mark, f"input '{key}' of {name} is missing", f"add '{key}: fact or number'")
        inputs: dict[str, str | float] = {}
        for key, child in node.items():
            if key in wanted:
                self._input(key, child, wanted[key].unit, inputs, scope)
        return (Formed(name, inputs) if len(inputs) == len(wanted) else None), domain

    def _unit(self, formula: Formula, inputs: Mapping) -> str:
        """The unit of the result; some formulas hold in any unit and take that of an input."""
        if not formula.unit_follows:
            return formula.result_unit
        named = (str(inputs.get(each.name, "")) for each in formula.inputs)
        units = [domain.unit for each in named if (domain := self.facts.get(each) or self.properties.get(each))]
        return next((unit for unit in units if unit), "")

    def _input(self, key: str, node: Node, unit: str, inputs: dict[str, str | float], scope: Scope) -> None:
        if not isinstance(node, Scalar):
            scope.problem(node.mark, "an input is the name of a fact or property, or a number", f"{key}: t_eff_c")
            return
        name = str(node)
        domain = self.facts.get(name) or self.properties.get(name)
        if domain is None or scope.lost.has("names", name):
            try:
                inputs[key] = as_number(node)
            except ValueError:
                known = "fact or property" if self.properties else "fact"
                message = f"'{name}' is neither a number nor a known {known}"
                scope.unknown(node.mark, "names", name, message, [*self.facts, *self.properties])
        elif domain.kind != "number":
            scope.problem(node.mark, f"'{name}' is {domain.kind}, and a formula needs a number", "name a number")
        elif unit and domain.unit and unit != domain.unit:
            message = f"'{name}' is in {domain.unit}, and input '{key}' is in {unit}"
            scope.problem(node.mark, message, "both need the same unit")
        else:
            inputs[key] = name

    def _column(self, shape: LookUpShape) -> Domain:
        table = self.tables.get(shape.table)
        if table is None:
            return _ANY
        if table.matrix and table.values is not None:
            return table.values
        return table.columns.get(shape.column or "", _ANY)

    def looked_up(self, shape: LookUpShape, node: Mapping, domain: Domain, scope: Scope) -> LookedUp | None:
        """A look-up, with its table, key columns and column resolved."""
        scope = scope.at("looked_up")
        table = self.tables.get(shape.table)
        if table is None:
            scope.unknown(
                node["table"].mark, "tables", shape.table, f"'{shape.table}' is no table", self.tables, "see tables/"
            )
            return None
        by = self._by(table, node["by"], scope)
        column = shape.column or ""
        if not table.matrix and column not in table.columns:
            at = node["column"].mark if "column" in node else node.mark
            message = f"'{column}' is no column of table {table.id}" if column else "the column to be read is missing"
            scope.stranger(at, column, message, table.columns, f"it has {', '.join(table.columns)}")
            return None
        otherwise = self._otherwise(node, domain, scope)
        return LookedUp(shape.table, by, column, shape.combine or "", otherwise) if by else None

    def _reads(
        self, shape: LookUpShape, node: Node, owner: Mapping, domain: Domain, scope: Scope
    ) -> LookedUp | None:
        """The look-up of a property; every value that it can find must be one that the property may have."""
        how = self.looked_up(shape, mapping_in(node, "looked_up"), domain, scope)
        name, declared = scope.trail[-1], bool(self._column(shape).choices)
        for row, found in self._found(how) if how else ():
            if not domain.accepts(found):
                at, message = row, f"'{found}' is read from here for {name}, which cannot be that"
                if declared:
                    at = owner.key_marks.get("choices", row)
                    message = f"'{found}' is a choice in table {shape.table}, from which {name} is read, and not here"
                scope.stranger(at, str(found), message, domain.choices, "check both declarations")
        return how

    def _found(self, how: LookedUp) -> Iterator[tuple[Mark, Value]]:
        table = self.tables[how.table]
        if table.values is not None:
            yield from ((table.mark, each) for each in table.values.choices)
        for row in table.rows:
            cell = row.cells.get(how.column)
            if cell is not None and not isinstance(cell, Band):
                yield row.mark, cell

    def _otherwise(self, node: Mapping, domain: Domain, scope: Scope) -> Value | None:
        if "otherwise" not in node:
            return None
        try:
            loose = replace(domain, open_choices=True) if domain.kind == "choice" else domain
            return value(node["otherwise"], loose, scope)
        except Mistyped:
            return None

    def _by(self, table: Table, by: Node, scope: Scope) -> tuple[tuple[str, str], ...]:
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
        good = [self._pair(table, column, name, by, scope) for column, name in pairs]
        return tuple((column, str(name)) for column, name in pairs) if all(good) else ()

    def _pair(self, table: Table, column: str, name: Node, by: Node, scope: Scope) -> bool:
        if column not in table.columns:
            at = by.key_marks[column] if isinstance(by, Mapping) else by.mark
            hint = f"it has {', '.join(table.columns)}"
            scope.stranger(at, column, f"'{column}' is no column of table {table.id}", table.columns, hint)
            return False
        domain = self.facts.get(str(name)) or self.properties.get(str(name))
        if not isinstance(name, Scalar) or domain is None or scope.lost.has("names", str(name)):
            known = "fact or property" if self.properties else "fact"
            names = [*self.facts, *self.properties]
            scope.unknown(name.mark, "names", str(name), f"'{name}' is no {known}", names, "declare it")
            return False
        key = table.columns[column]
        if (key.kind == "number") != (domain.kind == "number") or key.unit != domain.unit:
            message = f"'{name}' ({domain.kind} {domain.unit}".rstrip() + f") cannot be looked up in column '{column}'"
            scope.problem(name.mark, message, "both need the same kind and unit")
            return False
        return True
