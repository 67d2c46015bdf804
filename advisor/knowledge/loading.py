"""From a knowledge folder to knowledge: read, type, resolve, cross-check; every fault at once."""

from collections.abc import Iterable
from collections.abc import Mapping as Map
from dataclasses import replace
from pathlib import Path

from advisor.conditions import Domain
from advisor.documents import Faulty, Mapping, Problem, Problems
from advisor.knowledge.bindings import Bindings
from advisor.knowledge.citations import Citations, read_sources
from advisor.knowledge.crosschecks import CrossChecks, in_order
from advisor.knowledge.declarations import FactReader, domains_of, read_properties
from advisor.knowledge.files import (
    CautionsFile,
    DesignationsFile,
    DocketFile,
    ForksFile,
    SourcesFile,
    StepsFile,
    UsualOilsFile,
)
from advisor.knowledge.folder import Folder, fingerprint, read_folder
from advisor.knowledge.misspelt import told_where_misspelt
from advisor.knowledge.model import Computation, DocketRow, Fork, Instance, Knowledge, PointKind, Rule, Step, UsualOils
from advisor.knowledge.particulars import Cautions, Particulars
from advisor.knowledge.products import items_of, read_products
from advisor.knowledge.rules import Names, RuleReader
from advisor.knowledge.tables import choices_of, read_tables
from advisor.knowledge.values import Scope

MOST_ALIKE = 4
_VERDICT = Domain(
    "choice",
    choices={
        name: name.replace("_", " ")
        for name in ("none_named", "not_on_the_shelf", "fits", "second_best", "falls_short", "unproven")
    },
)
CLOSING_FACTS: Map[str, Domain] = {
    "recommended_kappa": Domain("number"),
    "recommended_form": Domain("choice", choices={"grease": "grease", "oil": "oil"}),
    "maker_verdict": _VERDICT,
    "incumbent_verdict": _VERDICT,
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
    """Read a folder and collect every problem; no knowledge where there is any.

    A damaged declaration is told where it stands; that other parts cannot find it is not told again.
    """
    found = Problems()
    folder = read_folder(root, point_kind, shelf, found)
    knowledge = _Loader(folder, point_kind).knowledge() if folder is not None else None
    known = set(problems)
    told = told_where_misspelt(found, folder.trees if folder is not None else ())
    problems.extend(problem for problem in _thinned(told) if problem not in known)
    return None if found.errors else knowledge


def _thinned(problems: Iterable[Problem]) -> list[Problem]:
    """The problems; of many that say the same, as after the loss of a declaration, the first few."""
    alike: dict[str, list[Problem]] = {}
    for problem in problems:
        alike.setdefault(problem.message, []).append(problem)
    kept: list[Problem] = []
    for same in alike.values():
        kept += same[:MOST_ALIKE]
        if len(same) > MOST_ALIKE:
            more = f"{len(same) - MOST_ALIKE} more places say the same"
            kept[-1] = replace(kept[-1], hint=f"{more}. {kept[-1].hint}")
    return kept


class _Loader:
    """Resolves the names of one folder; each part is read once the parts it names are known."""

    def __init__(self, folder: Folder, point_kind: str) -> None:
        self.folder, self.point_kind = folder, point_kind
        self.ground = Scope(folder.problems, {}, lost=folder.lost)
        sources = folder.kept("sources.yaml", SourcesFile)
        self.citations = Citations(read_sources(sources[0].sources if sources else {}))
        self.tables = read_tables(folder.tables, self.citations, self.ground)
        labels = {name: choices_of(table) for name, table in self.tables.items()}
        items = items_of(folder.shelf[1] if folder.shelf else None)
        facts = domains_of(folder.facts, labels, items, self.ground.over({}, "facts"))
        properties = domains_of(folder.properties, labels, items, self.ground.over({}, "properties"))
        self._both_kinds(facts, properties)
        self.bindings = Bindings(self.tables, {**facts, **self._computed(facts, properties)}, properties)
        self.computations = self._computations()
        self.facts = FactReader(facts, properties, self.bindings, self.citations, self.ground).read(folder.facts)
        self.properties = read_properties(folder.properties, self.bindings, self.citations, self.ground)

    def _both_kinds(self, facts: Map[str, Domain], properties: Map[str, Domain]) -> None:
        for name in set(facts) & set(properties):
            mark = self.folder.properties[name].parent.key_marks[name]
            message = f"'{name}' is a fact already, and a name is one or the other"
            self.ground.over({}, "properties", name).problem(mark, message, "rename one of them")

    def _computed(self, facts: Map[str, Domain], properties: Map[str, Domain]) -> dict[str, Domain]:
        """The domains of computed facts, which follow from formulas and tables through chains: repeat until settled."""
        found: dict[str, Domain] = {}
        for placed in self.folder.computations:
            name = placed.shape.fact
            if name in facts or name in properties or name in found:
                self.ground.over({}, "computations", f"'{name}'").problem(
                    placed.tree["fact"].mark, f"'{name}' is declared twice", "give each its own id"
                )
            found.setdefault(name, Domain("number"))
        quiet = replace(self.ground, problems=Problems())
        for _ in self.folder.computations:
            before = dict(found)
            for placed in self.folder.computations:
                bindings = Bindings(self.tables, {**facts, **found}, properties)
                _, found[placed.shape.fact] = bindings.of_computation(placed.shape, placed.tree, quiet)
            if before == found:
                break
        for placed in self.folder.computations:
            bindings = Bindings(self.tables, {**facts, **found}, properties)
            how, _ = bindings.of_computation(placed.shape, placed.tree, quiet)
            if how is None:
                self.folder.lost.lose("names", placed.shape.fact)
        return found

    def _computations(self) -> dict[str, Computation]:
        found: dict[str, Computation] = {}
        for placed in self.folder.computations:
            shape, tree = placed.shape, placed.tree
            scope = self.ground.over({}, "computations", f"'{shape.fact}'")
            how, domain = self.bindings.of_computation(shape, tree, scope)
            source = self.citations.read(shape.source, tree, scope)
            if how is not None:
                found.setdefault(
                    shape.fact, Computation(shape.fact, shape.title, domain, how, placed.step, tree.mark, source)
                )
        return in_order(found, self._computation_trees(), self.ground)

    def _computation_trees(self) -> dict[str, Mapping]:
        return {placed.shape.fact: placed.tree for placed in reversed(self.folder.computations)}

    def knowledge(self) -> Knowledge | None:
        """Everything resolved and cross-checked; nothing where a whole file is missing."""
        folder, steps, small = self.folder, self.folder.kept("steps.yaml", StepsFile), self._small_files()
        rules, instances = self._rules()
        shelf = folder.shelf[1] if folder.shelf else None
        products = read_products(shelf, self._stored(), self.properties, self.ground)
        if small is None or steps is None or folder.shelf is None or self.point_kind not in folder.kinds:
            return None
        cautions, docket, oils, designations = small
        knowledge = Knowledge(
            PointKind(self.point_kind, folder.kinds[self.point_kind].title),
            self.citations.sources,
            tuple(Step(name, step.title, step.purpose) for name, step in steps[0].steps.items()),
            self.facts,
            self.computations,
            self.properties,
            self.tables,
            rules,
            instances,
            *cautions,
            docket,
            oils,
            designations,
            folder.shelf[0].shelf,
            products,
            fingerprint(folder.root),
            self._forks(),
        )
        trees = {placed.shape.id: placed.tree for placed in reversed(folder.rules)}
        CrossChecks(knowledge, trees, self._computation_trees(), self.ground).check()
        return knowledge

    def _stored(self) -> dict[str, Domain]:
        """The properties that a sheet states, going by their declarations."""
        return {
            name: self.bindings.properties[name]
            for name, placed in self.folder.properties.items()
            if not {"formula", "looked_up", "worst_of", "concluded"} & set(placed.tree)
        }

    def _small_files(self) -> tuple[Cautions, tuple[DocketRow, ...], UsualOils, Mapping] | None:
        """What the small files say; nothing where one of them could not be read."""
        kept, ground = self.folder.kept, replace(self.ground, facts=self.bindings.facts)
        part = Particulars(self.bindings.facts, self.bindings.properties, self.tables, self.citations, ground)
        cautions = part.cautions(*read) if (read := kept("cautions.yaml", CautionsFile)) else None
        docket = part.docket(*found) if (found := kept("docket.yaml", DocketFile)) else None
        oils = part.usual_oils(*made) if (made := kept("usual_oils.yaml", UsualOilsFile)) else None
        codes = part.designations(*written) if (written := kept("designations.yaml", DesignationsFile)) else None
        return (
            None
            if cautions is None or docket is None or oils is None or codes is None
            else (cautions, docket, oils, codes)
        )

    def _forks(self) -> dict[str, Fork]:
        kept, ground = self.folder.kept("forks.yaml", ForksFile), replace(self.ground, facts=self.bindings.facts)
        part = Particulars(self.bindings.facts, self.bindings.properties, self.tables, self.citations, ground)
        return part.forks(*kept) if kept else {}

    def _rules(self) -> tuple[dict[str, Rule], dict[str, tuple[Instance, ...]]]:
        rules: dict[str, Rule] = {}
        instances: dict[str, tuple[Instance, ...]] = {}
        names = self._names()
        closing = replace(
            names,
            facts={**names.facts, **CLOSING_FACTS},
            concluded={},
            voidable=names.voidable | frozenset(CLOSING_FACTS),
        )
        for placed in self.folder.rules:
            name, step = placed.shape.id, placed.step
            if name in rules:
                mark = rules[name].mark
                message = f"the id '{name}' is taken by the rule in line {mark.line} of {mark.file}"
                self.ground.over({}, "rules").problem(placed.tree["id"].mark, message, "ids are never used twice")
                continue
            reader = RuleReader(closing if step == "closing" else names, self.citations, self.ground)
            rules[name], made = reader.read(placed.shape, placed.tree, step, placed.point_kind)
            if placed.shape.status != "retired":
                instances[step] = instances.get(step, ()) + made
        return rules, instances

    def _names(self) -> Names:
        """Everything that a rule can name."""
        concluded = {name: each.domain for name, each in self.facts.items() if each.concluded}
        concluded |= {name: each.domain for name, each in self.properties.items() if each.concluded}
        kept = self.folder.kept("cautions.yaml", CautionsFile)
        return Names(
            self.bindings.facts,
            self.bindings.properties,
            concluded,
            frozenset({*self.computations, *concluded}),
            self.tables,
            frozenset(kept[0].cautions if kept else ()),
            frozenset(kept[0].referrals if kept else ()),
        )
