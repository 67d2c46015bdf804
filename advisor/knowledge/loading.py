"""From a knowledge folder to knowledge: read, type, resolve, cross-check; every fault at once."""

from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import replace
from pathlib import Path

from advisor.conditions import ALWAYS, Condition, Domain, Value
from advisor.documents import Faulty, Mapping, Problem, Problems, nearest
from advisor.documents import Sequence as Listed
from advisor.knowledge.bindings import Bindings
from advisor.knowledge.citations import Citations, read_sources
from advisor.knowledge.crosschecks import cross_check, ordered
from advisor.knowledge.declarations import Declared, FactReader, domains_of, read_properties
from advisor.knowledge.folder import Folder, fingerprint, read_folder
from advisor.knowledge.model import (
    Caution,
    Citation,
    Computation,
    DocketRow,
    Instance,
    Knowledge,
    PointKind,
    Procedure,
    Product,
    Rule,
    Step,
    UsualOils,
)
from advisor.knowledge.parsing import Mistyped, Scope, condition, value
from advisor.knowledge.rules import Names, RuleReader
from advisor.knowledge.schema import (
    CautionsFile,
    CitationShape,
    DesignationsFile,
    DocketFile,
    DocketRowShape,
    SourcesFile,
    StepsFile,
    UsualOilsFile,
)
from advisor.knowledge.tables import choices_of, read_tables

CLOSING_FACTS: Map[str, Domain] = {
    "recommended_kappa": Domain("number"),
    "recommended_form": Domain("choice", choices={"grease": "grease", "oil": "oil"}),
    "maker_verdict": Domain(
        "choice",
        choices={
            name: name.replace("_", " ")
            for name in ("none_named", "not_on_the_shelf", "fits", "second_best", "falls_short", "unproven")
        },
    ),
    "shelf_fits": Domain("yes_no", choices={"no": "no", "yes": "yes"}),
}


def load(root: Path, point_kind: str = "rolling_bearing", shelf: Path | None = None) -> Knowledge:
    """The knowledge of a folder.

    Raises:
        Faulty: with every problem found, each with file, line and column.
    """
    problems = Problems()
    knowledge = examine(root, point_kind, shelf, problems)
    problems.raise_if_any()
    if knowledge is None:
        raise Faulty((Problem(str(root), 1, 1, (), "the knowledge could not be read", ""),))
    return knowledge


def examine(root: Path, point_kind: str, shelf: Path | None, problems: Problems) -> Knowledge | None:
    """Read a folder and collect every problem; no knowledge where the structure itself is damaged."""
    folder = read_folder(root, point_kind, shelf, problems)
    if folder.kinds and point_kind not in folder.kinds:
        problems.add(
            Problem(
                str(root / "point_kinds.yaml"),
                1,
                1,
                (),
                f"'{point_kind}' is no kind of point here",
                nearest(point_kind, folder.kinds).strip(),
            )
        )
    needed = {
        "sources.yaml",
        "steps.yaml",
        "properties.yaml",
        "cautions.yaml",
        "docket.yaml",
        "usual_oils.yaml",
        "designations.yaml",
    }
    if not needed <= set(folder.files) or folder.shelf is None or point_kind not in folder.kinds:
        return None
    return _Loader(folder, point_kind, problems).knowledge()


class _Loader:
    """Resolves the names of one folder; each part is read once the parts it names are known."""

    def __init__(self, folder: Folder, point_kind: str, problems: Problems) -> None:
        self.folder, self.point_kind, self.problems = folder, point_kind, problems
        sources = folder.files["sources.yaml"][0]
        assert isinstance(sources, SourcesFile)  # noqa: S101 - by the file's shape
        self.citations = Citations(read_sources(sources.sources), problems)
        self.tables = read_tables(folder.tables, self.citations, problems)
        labels = {name: choices_of(table) for name, table in self.tables.items()}
        items = self._items()
        facts = {name: Declared(placed.shape, placed.tree, placed.parent) for name, placed in folder.facts.items()}
        properties = {
            name: Declared(placed.shape, placed.tree, placed.parent) for name, placed in folder.properties.items()
        }
        self.fact_domains = domains_of(facts, labels, items, problems, "facts")
        self.property_domains = domains_of(properties, labels, items, problems, "properties")
        self._both_kinds()
        self.bindings = Bindings(self.tables, self.fact_domains, self.property_domains, problems)
        self.computations = self._computations()
        self.facts = FactReader(self.fact_domains, self.property_domains, self.citations, problems).read(facts)
        self.properties = read_properties(properties, self.property_domains, self.bindings, self.citations, problems)

    def _items(self) -> dict[str, str]:
        shelf = self.folder.shelf
        nodes = shelf[1].get("products") if shelf else None
        return (
            {
                str(node["item"]): f"{node['item']} {node.get('title', '')}".strip()
                for node in nodes
                if isinstance(node, Mapping) and "item" in node
            }
            if isinstance(nodes, Listed)
            else {}
        )

    def _both_kinds(self) -> None:
        for name in set(self.fact_domains) & set(self.property_domains):
            mark = self.folder.properties[name].parent.key_marks[name]
            self.problems.add(
                Problem(
                    mark.file,
                    mark.line,
                    mark.column,
                    ("properties", name),
                    f"'{name}' is a fact already, and a name is one or the other",
                    "rename one of them",
                )
            )

    def _computations(self) -> dict[str, Computation]:
        """All computed facts; their domains are known only once their formulas and tables are."""
        for placed in self.folder.computations:
            scope = Scope(self.problems, {}, trail=("computations", f"'{placed.shape.fact}'"))
            if placed.shape.fact in self.fact_domains:
                scope.problem(
                    placed.tree["fact"].mark, f"'{placed.shape.fact}' is declared twice", "give each its own id"
                )
            self.fact_domains[placed.shape.fact] = Domain("number")
        self._infer_domains()
        found: dict[str, Computation] = {}
        for placed in self.folder.computations:
            shape, tree = placed.shape, placed.tree
            scope = Scope(self.problems, {}, trail=("computations", f"'{shape.fact}'"))
            how, domain = self.bindings.of_computation(shape, tree, scope)
            if how is not None:
                found[shape.fact] = Computation(
                    shape.fact,
                    shape.title,
                    domain,
                    how,
                    placed.where.split(" ")[0],
                    tree.mark,
                    self.citations.read(shape.source, tree, scope),
                )
        return ordered(found, self.problems)

    def _infer_domains(self) -> None:
        """Units follow through chains of computations: repeat until nothing changes any more."""
        quiet = Bindings(self.tables, self.fact_domains, self.property_domains, Problems())
        for _ in self.folder.computations:
            before = dict(self.fact_domains)
            for placed in self.folder.computations:
                _, domain = quiet.of_computation(placed.shape, placed.tree, Scope(Problems(), {}))
                self.fact_domains[placed.shape.fact] = domain
            if before == self.fact_domains:
                return

    def knowledge(self) -> Knowledge:
        """Everything resolved and cross-checked."""
        cautions = self.folder.files["cautions.yaml"][0]
        steps = self.folder.files["steps.yaml"][0]
        designations = self.folder.files["designations.yaml"][0]
        assert isinstance(cautions, CautionsFile)  # noqa: S101 - by the file's shape
        assert isinstance(steps, StepsFile)  # noqa: S101 - by the file's shape
        assert isinstance(designations, DesignationsFile)  # noqa: S101 - by the file's shape
        rules, instances = self._rules(cautions)
        knowledge = Knowledge(
            PointKind(self.point_kind, self.folder.kinds[self.point_kind].title),
            self.citations.sources,
            tuple(Step(name, step.title, step.purpose) for name, step in steps.steps.items()),
            self.facts,
            self.computations,
            self.properties,
            self.tables,
            rules,
            instances,
            self._cautions("cautions"),
            self._cautions("referrals"),
            self._procedures(),
            self._docket(),
            self._usual_oils(),
            designations.designations,
            self.folder.shelf[0].shelf if self.folder.shelf else "",
            tuple(self._products()),
            fingerprint(self.folder.root),
        )
        cross_check(knowledge, self.problems)
        return knowledge

    def _rules(self, cautions: CautionsFile) -> tuple[dict[str, Rule], dict[str, tuple[Instance, ...]]]:
        concluded = {name: each.domain for name, each in self.facts.items() if each.concluded}
        concluded |= {name: each.domain for name, each in self.properties.items() if each.concluded}
        names = Names(
            self.fact_domains,
            self.property_domains,
            concluded,
            frozenset({*self.computations, *concluded}),
            self.tables,
            frozenset(cautions.cautions),
            frozenset(cautions.referrals),
        )
        closing = replace(
            names,
            facts={**self.fact_domains, **CLOSING_FACTS},
            concluded={},
            voidable=names.voidable | frozenset(CLOSING_FACTS),
        )
        rules: dict[str, Rule] = {}
        instances: dict[str, tuple[Instance, ...]] = {}
        for placed in self.folder.rules:
            step, _, kind = placed.where.partition(" ")
            reader = RuleReader(closing if step == "closing" else names, self.citations, self.problems)
            if placed.shape.id in rules:
                mark = placed.tree["id"].mark
                self.problems.add(
                    Problem(
                        mark.file,
                        mark.line,
                        mark.column,
                        ("rules",),
                        f"the id '{placed.shape.id}' is taken by the rule in line "
                        f"{rules[placed.shape.id].mark.line} of {rules[placed.shape.id].mark.file}",
                        "ids are never used twice",
                    )
                )
                continue
            rule, made = reader.read(placed.shape, placed.tree, step, kind)
            rules[rule.id] = rule
            if rule.status != "retired":
                instances[step] = instances.get(step, ()) + made
        return rules, instances

    def _cautions(self, part: str) -> dict[str, Caution]:
        file, tree = self.folder.files["cautions.yaml"]
        parent = tree.get(part)
        return {
            name: Caution(name, shape.text, self._cited(parent, name, shape.source), getattr(shape, "to", ""))
            for name, shape in getattr(file, part).items()
        }

    def _cited(self, parent: object, name: str, shapes: list[CitationShape]) -> tuple[Citation, ...]:
        node = parent[name] if isinstance(parent, Mapping) else None
        scope = Scope(self.problems, {}, trail=("cautions", name))
        return self.citations.read(shapes, node, scope) if node is not None else ()

    def _procedures(self) -> dict[str, Procedure]:
        file, tree = self.folder.files["cautions.yaml"]
        assert isinstance(file, CautionsFile)  # noqa: S101 - by the file's shape
        parent = tree.get("change_over")
        return {
            name: Procedure(name, shape.title, tuple(shape.steps), self._cited(parent, name, shape.source))
            for name, shape in file.change_over.items()
        }

    def _docket(self) -> tuple[DocketRow, ...]:
        file, tree = self.folder.files["docket.yaml"]
        assert isinstance(file, DocketFile)  # noqa: S101 - by the file's shape
        found: list[DocketRow] = []
        for key, shapes, section in (("rows", file.rows, "docket"), ("quantities", file.quantities, "quantities")):
            nodes = tree.get(key)
            for shape, node in zip(shapes, nodes if isinstance(nodes, Listed) else (), strict=True):
                if isinstance(node, Mapping):
                    found.append(self._docket_row(shape, node, section))
        return tuple(found)

    def _docket_row(self, shape: DocketRowShape, node: Mapping, section: str) -> DocketRow:
        scope = Scope(self.problems, self.fact_domains, self.fact_domains, trail=("rows", f"'{shape.id}'"))
        shown: Condition = ALWAYS
        named = [shape.recommends] if shape.recommends else shape.demands or []
        for name in named:
            if name not in self.property_domains:
                scope.problem(node.mark, f"'{name}' is no property", nearest(name, self.property_domains).strip())
        for name in shape.facts or []:
            if name not in self.fact_domains:
                scope.problem(node.mark, f"'{name}' is no fact", nearest(name, self.fact_domains).strip())
        if shape.shown_if is not None:
            try:
                shown = condition(node["shown_if"], scope.at("shown_if"))
            except Mistyped:
                shown = ALWAYS
        return DocketRow(
            shape.id,
            shape.title,
            shape.recommends or "",
            tuple(shape.demands or ()),
            tuple(shape.facts or ()),
            shown,
            section,
        )

    def _usual_oils(self) -> UsualOils:
        file, tree = self.folder.files["usual_oils.yaml"]
        assert isinstance(file, UsualOilsFile)  # noqa: S101 - by the file's shape
        shape, node = file.usual_oils, tree["usual_oils"]
        scope = Scope(self.problems, self.property_domains, self.fact_domains, trail=("usual_oils",), what="property")
        table = self.tables.get(shape.table)
        if table is None:
            scope.problem(node.mark, f"'{shape.table}' is no table", nearest(shape.table, self.tables).strip())
        for column in (shape.low, shape.high, shape.index):
            if table is not None and column not in table.columns:
                scope.problem(
                    node.mark, f"'{column}' is no column of table {shape.table}", nearest(column, table.columns).strip()
                )
        try:
            ordinary = condition(shape.ordinary, scope.at("ordinary"))
        except Mistyped:
            ordinary = ALWAYS
        return UsualOils(shape.table, shape.family, shape.low, shape.high, shape.index, ordinary)

    def _products(self) -> list[Product]:
        nodes = self.folder.shelf[1].get("products") if self.folder.shelf else None
        found: list[Product] = []
        seen: set[str] = set()
        for node in nodes if isinstance(nodes, Listed) else ():
            product = self._product(node)
            if product is None:
                continue
            if product.item in seen:
                self.problems.add(
                    Problem(
                        product.mark.file,
                        product.mark.line,
                        product.mark.column,
                        (f"'{product.item}'",),
                        f"item '{product.item}' stands twice on the shelf",
                        "give each product its own item code",
                    )
                )
            seen.add(product.item)
            found.append(product)
        return found

    def _product(self, node: object) -> Product | None:
        if not isinstance(node, Mapping) or "item" not in node:
            mark = getattr(node, "mark", None)
            if mark is not None:
                self.problems.add(
                    Problem(
                        mark.file, mark.line, mark.column, ("products",), "a product needs an item code", "item: GR-101"
                    )
                )
            return None
        item = str(node["item"])
        stored = {name: each.domain for name, each in self.properties.items() if each.stored}
        scope = Scope(
            self.problems,
            stored,
            trail=("products", f"'{item}'"),
            what="property stored on a sheet",
            hints={name: "it is computed or looked up, not stated" for name in self.properties if name not in stored},
        )
        values: dict[str, Value] = {}
        for name, child in node.items():
            if name in {"item", "title", "note"}:
                continue
            with suppress(Mistyped):
                values[name] = value(child, scope.domain(name, node.key_marks[name]), scope.at(name))
        return Product(item, str(node.get("title", item)), values, node.mark)
