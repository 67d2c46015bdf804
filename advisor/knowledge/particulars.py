"""The small files: cautions, the docket, the usual oils, the designations."""

from collections.abc import Iterator
from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import dataclass

from advisor.conditions import ALWAYS, Condition, Domain, Value
from advisor.documents import Mapping, Mark, Node, Scalar, closest, locate
from advisor.knowledge.citations import Citations
from advisor.knowledge.files import CautionsFile, DesignationsFile, DocketFile, ForksFile, UsualOilsFile
from advisor.knowledge.model import Caution, DocketRow, Fork, Procedure, Table, UsualOils
from advisor.knowledge.parsing import condition
from advisor.knowledge.reading import list_in, mapping_in
from advisor.knowledge.schema import CautionShape, DocketRowShape, ForkBranchShape, ReferralShape
from advisor.knowledge.values import Mistyped, Scope, value

Cautions = tuple[dict[str, Caution], dict[str, Caution], dict[str, Procedure]]
_COLUMNS = ("letter", "letters", "upper", "lower", "water_test", "rating_to", "environment", "rust")


@dataclass(frozen=True, slots=True)
class Particulars:
    """Reads the small files once facts, properties and tables are known."""

    facts: Map[str, Domain]
    properties: Map[str, Domain]
    tables: Map[str, Table]
    citations: Citations
    ground: Scope

    def cautions(self, shape: CautionsFile, tree: Mapping) -> Cautions:
        """Cautions, referrals, and the steps of each way of changing over."""
        return (
            self._warnings(shape.cautions, mapping_in(tree, "cautions"), "cautions"),
            self._warnings(shape.referrals, mapping_in(tree, "referrals"), "referrals"),
            self._procedures(shape, mapping_in(tree, "change_over"), tree.key_marks.get("change_over", tree.mark)),
        )

    def _warnings(self, shapes: Map[str, CautionShape], parent: Mapping, part: str) -> dict[str, Caution]:
        scope = self.ground.over({}, part)
        return {
            name: Caution(
                name,
                shape.text,
                self.citations.read(shape.source, mapping_in(parent, name), scope.at(name)),
                shape.to if isinstance(shape, ReferralShape) else "",
                shape.standing,
            )
            for name, shape in shapes.items()
        }

    def _procedures(self, shape: CautionsFile, parent: Mapping, mark: Mark) -> dict[str, Procedure]:
        """The steps of each way of changing over; each choice has its own."""
        scope = self.ground.over({}, "change_over")
        sound = "change_over" in self.properties and not scope.lost.has("names", "change_over")
        choices = self.properties["change_over"].choices if sound else dict.fromkeys(shape.change_over, "")
        strange = [name for name in shape.change_over if name not in choices]
        for name in strange:
            message = f"'{name}' is no choice of the property change_over"
            scope.unknown(parent.key_marks[name], "names", name, message, choices, "rename it")
        for choice in choices:
            if choice not in shape.change_over and not closest(choice, strange):
                message = f"there are no steps for the change-over '{choice}'"
                scope.unknown(mark, "procedures", choice, message, (), f"add '{choice}:' with its steps")
        for name, each in shape.change_over.items():
            self._leads_somewhere(mapping_in(parent, name), each.leads_to, shape, scope.at(name))
        return {
            name: Procedure(
                name,
                each.title,
                tuple(each.steps),
                tuple(each.leads_to),
                self.citations.read(each.source, mapping_in(parent, name), scope.at(name)),
            )
            for name, each in shape.change_over.items()
        }

    @staticmethod
    def _leads_somewhere(node: Mapping, led_to: list[str], shape: CautionsFile, scope: Scope) -> None:
        """Report the procedures that steps lead to and that are not there."""
        for place, each in enumerate(led_to):
            if each not in shape.change_over:
                mark = locate(node, ("leads_to", place))
                message = f"there are no steps for the change-over '{each}'"
                scope.unknown(mark, "procedures", each, message, shape.change_over, "name one that is there")

    def forks(self, shape: ForksFile, tree: Mapping) -> dict[str, Fork]:
        """The contested points."""
        found: dict[str, Fork] = {}
        for name, each in shape.forks.items():
            node = mapping_in(mapping_in(tree, "forks"), name)
            scope = self.ground.over(self.facts, "forks", name)
            if not self._known(node["fact"], self.facts, "fact", scope):
                continue
            with suppress(Mistyped):
                branches = tuple(
                    (branch.label, self._branch(branch, mapping_in(at), self.facts[each.fact], scope))
                    for branch, at in zip(each.branches, list_in(node, "branches"), strict=True)
                )
                when = condition(node["when"], scope.at("when"))
                source = self.citations.read(each.source, node, scope)
                found[name] = Fork(name, each.title, when, each.fact, branches, each.because, source)
        return found

    def _branch(self, shape: ForkBranchShape, node: Mapping, domain: Domain, scope: Scope) -> Value:
        """The value of a branch: for tick lists the ticks that it leaves out."""
        several = domain.kind == "several"
        wanted = "without" if several else "value"
        if (shape.value is None) is not several or (shape.without is None) is several:
            raise scope.fault(node, f"a branch of this fact has '{wanted}'", f"{wanted}: ...")
        return value(node[wanted], domain, scope.at(wanted))

    def docket(self, shape: DocketFile, tree: Mapping) -> tuple[DocketRow, ...]:
        """The rows of the docket, then those of the quantities."""
        return tuple(
            self._docket_row(row, mapping_in(node), section)
            for key, shapes, section in (("rows", shape.rows, "docket"), ("quantities", shape.quantities, "quantities"))
            for row, node in zip(shapes, list_in(tree, key), strict=True)
        )

    def _docket_row(self, shape: DocketRowShape, node: Mapping, section: str) -> DocketRow:
        scope = self.ground.over(self.facts, "rows", f"'{shape.id}'")
        shown: Condition = ALWAYS
        properties = [node["recommends"]] if "recommends" in node else list_in(node, "demands")
        for each in properties:
            self._known(each, self.properties, "property", scope)
        for each in list_in(node, "facts"):
            self._known(each, self.facts, "fact", scope)
        if "shown_if" in node:
            with suppress(Mistyped):
                shown = condition(node["shown_if"], scope.at("shown_if"))
        return DocketRow(
            shape.id,
            shape.title,
            shape.recommends or "",
            tuple(shape.demands or ()),
            tuple(shape.facts or ()),
            shown,
            section,
        )

    def usual_oils(self, shape: UsualOilsFile, tree: Mapping) -> UsualOils:
        """How the usual oils are made."""
        made, node = shape.usual_oils, mapping_in(tree, "usual_oils")
        scope = self.ground.over(self.properties, "usual_oils", what="property")
        self.citations.read(made.source, node, scope)
        self._known(node["family"], self.properties, "property", scope)
        self._columns(node, ("from", "to", "index"), scope)
        ordinary: Condition = ALWAYS
        with suppress(Mistyped):
            ordinary = condition(node["ordinary"], scope.at("ordinary"))
        return UsualOils(made.table, made.family, made.low, made.high, made.index, ordinary)

    def designations(self, shape: DesignationsFile, tree: Mapping) -> Mapping:
        """The two standards as written, once everything that they name is known."""
        written = mapping_in(tree, "designations")
        for standard, model in (("din", shape.designations.din), ("iso", shape.designations.iso)):
            node, scope = mapping_in(written, standard), self.ground.over(self.facts, "designations", standard)
            self.citations.read(model.source, node, scope)
            for key in ("need", "cold", "water", "water_test"):
                if isinstance(node.get(key), Scalar):
                    self._known(node[key], self.facts, "fact", scope.at(key))
            for key in ("nlgi", "water_rating"):
                if key in node:
                    self._known(node[key], self.properties, "property", scope.at(key))
            for part in _parts(node):
                self._columns(part, _COLUMNS, scope)
                self._values(part, scope)
            if "none_when" in node:
                with suppress(Mistyped):
                    condition(node["none_when"], scope.at("none_when"))
        return written

    def _values(self, node: Mapping, scope: Scope) -> None:
        """The property of a letter, and the values for which it stands."""
        if "property" not in node or not self._known(node["property"], self.properties, "property", scope):
            return
        for each in list_in(node, "values"):
            with suppress(Mistyped):
                value(each, self.properties[str(node["property"])], scope)

    def _columns(self, node: Mapping, keys: tuple[str, ...], scope: Scope) -> None:
        """The table that a part names, and its columns."""
        name = node.get("table")
        table = self.tables.get(str(name))
        if table is None:
            if name is not None:
                scope.unknown(name.mark, "tables", str(name), f"'{name}' is no table", self.tables, "see tables/")
            return
        for key in keys:
            if key in node and str(node[key]) not in table.columns:
                message = f"'{node[key]}' is no column of table {table.id}"
                scope.unknown(
                    node[key].mark, "tables", table.id, message, table.columns, f"it has {', '.join(table.columns)}"
                )

    def _known(self, node: Node, names: Map[str, Domain], what: str, scope: Scope) -> bool:
        if str(node) in names and not scope.lost.has("names", str(node)):
            return True
        scope.unknown(node.mark, "names", str(node), f"'{node}' is no {what}", names, "declare it")
        return False


def _parts(node: Mapping) -> Iterator[Mapping]:
    """The mappings within a standard, at any depth."""
    for key, child in node.items():
        if isinstance(child, Mapping) and key != "none_when":
            yield child
            yield from _parts(child)
