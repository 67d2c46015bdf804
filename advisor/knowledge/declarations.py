"""Facts and properties as declared: their domains, questions, assumptions and what concludes them."""

from collections.abc import Mapping as Map
from dataclasses import dataclass, replace

from advisor.conditions import ALWAYS, Condition, Domain, FactRef, Step, Value
from advisor.documents import Mapping, Node, Problems, Scalar, nearest
from advisor.knowledge.bindings import Bindings
from advisor.knowledge.citations import Citations
from advisor.knowledge.model import Assumption, Concluded, Declaration, FromItem, Property, Question
from advisor.knowledge.parsing import Mistyped, Scope, condition, value
from advisor.knowledge.schema import AssumeShape, ConcludedShape, FactShape, PropertyShape
from advisor.knowledge.tables import column_domain


@dataclass(frozen=True, slots=True)
class Declared:
    """A shape with its tree and the place of its key."""

    shape: FactShape | PropertyShape
    tree: Mapping
    parent: Mapping


def domains_of(
    raw: Map[str, Declared], labels: Map[str, Map[str, str]], items: Map[str, str], problems: Problems, where: str
) -> dict[str, Domain]:
    """The domains of all facts, or of all properties."""
    found: dict[str, Domain] = {}
    for name, declared in raw.items():
        scope = Scope(problems, {}, trail=(where, name))
        domain = column_domain(declared.shape, declared.tree, labels, scope)
        if domain.kind == "item":
            domain = replace(domain, choices={**items, **domain.choices}, open_choices=False)
        if domain.kind in {"choice", "scale", "several"} and not domain.choices:
            scope.problem(declared.tree.mark, f"a {domain.kind} needs its choices", "list them under 'choices:'")
        found[name] = replace(domain, step=_step(declared, scope))
    return found


def _step(declared: Declared, scope: Scope) -> Step | None:
    node = declared.tree.get("step")
    if node is None:
        return None
    if isinstance(node, Mapping) and len(node) == 1:
        kind, size = next(iter(node.items()))
        if kind == "places":
            return Step("places")
        if kind in {"absolute", "ratio"}:
            return _sized(kind, size, scope)
    if isinstance(node, Scalar):
        return _sized("absolute", node, scope)
    scope.problem(node.mark, "a step is a number, {absolute: 10}, {ratio: 1.5} or {places: yes}")
    return None


def _sized(kind: str, node: Node, scope: Scope) -> Step | None:
    try:
        size = value(node, Domain("number"), scope)
    except Mistyped:
        return None
    if not isinstance(size, float) or size <= (1 if kind == "ratio" else 0):
        scope.problem(node.mark, "a step is above 0, a ratio above 1")
        return None
    return Step(kind, size)


@dataclass(frozen=True, slots=True)
class FactReader:
    """Reads the declarations of facts once all domains are known."""

    domains: Map[str, Domain]
    properties: Map[str, Domain]
    citations: Citations
    problems: Problems

    def read(self, raw: Map[str, Declared]) -> dict[str, Declaration]:
        """All facts in the order of asking."""
        found: dict[str, Declaration] = {}
        asked: dict[str, Domain] = {}
        for name, declared in raw.items():
            found[name] = self._one(name, declared, asked)
            if found[name].question:
                asked[name] = self.domains[name]
        return found

    def _one(self, name: str, declared: Declared, asked: Map[str, Domain]) -> Declaration:
        shape, tree = declared.shape, declared.tree
        assert isinstance(shape, FactShape)  # noqa: S101 - only facts are read here
        domain = self.domains[name]
        scope = Scope(self.problems, asked, trail=("facts", name), what="fact asked earlier")
        kinds = [kind for kind in ("question", "concluded", "tunable") if getattr(shape, kind) is not None]
        if len(kinds) != 1:
            scope.problem(
                declared.parent.key_marks[name],
                "a fact has exactly one of question, concluded and tunable",
                f"this one has {' and '.join(kinds) or 'none'}",
            )
        self.citations.read(shape.source, tree, scope)
        return Declaration(
            name,
            shape.title,
            domain,
            declared.parent.key_marks[name],
            question=self._question(shape, tree, scope),
            assume=self._assumption(shape.assume, tree.get("assume"), domain, scope.at("assume")),
            unasked=self._unasked(shape, tree, domain, asked, scope),
            concluded=concluded(shape.concluded, tree.get("concluded"), domain, scope),
            tunable=self._assumption(shape.tunable, tree.get("tunable"), domain, scope.at("tunable")),
        )

    def _question(self, shape: FactShape, tree: Mapping, scope: Scope) -> Question | None:
        if shape.question is None:
            return None
        when: Condition = ALWAYS
        node = tree["question"]
        if isinstance(node, Mapping) and "when" in node:
            try:
                when = condition(node["when"], scope.at("question", "when"))
            except Mistyped:
                when = ALWAYS
            if "unasked" not in tree:
                scope.problem(
                    node.key_marks["when"],
                    "a question with 'when' needs the value that stands where it is not asked",
                    "add 'unasked:' to the fact",
                )
        return Question(shape.question.ask, shape.question.help, shape.question.section, shape.question.decides, when)

    def _assumption(
        self, shape: AssumeShape | None, node: Node | None, domain: Domain, scope: Scope
    ) -> Assumption | None:
        if shape is None or not isinstance(node, Mapping):
            return None
        try:
            assumed = value(node["value"], domain, scope)
        except Mistyped:
            return None
        return Assumption(assumed, shape.because, self.citations.read(shape.source, node, scope), shape.state == "open")

    def _unasked(
        self, shape: FactShape, tree: Mapping, domain: Domain, asked: Map[str, Domain], scope: Scope
    ) -> Value | FactRef | FromItem | None:
        node = tree.get("unasked")
        if node is None:
            return None
        if shape.question is None or shape.question.when is None:
            scope.problem(tree.key_marks["unasked"], "'unasked' stands only beside a question with 'when'")
        try:
            if isinstance(node, Mapping) and "fact" in node:
                name = str(node["fact"])
                if name not in asked:
                    raise scope.fault(node["fact"], f"'{name}' is no fact asked earlier", nearest(name, asked).strip())
                return FactRef(name)
            if isinstance(node, Mapping) and "item" in node:
                return self._from_item(node, domain, asked, scope)
            return value(node, domain, scope)
        except Mistyped:
            return None

    def _from_item(self, node: Mapping, domain: Domain, asked: Map[str, Domain], scope: Scope) -> FromItem:
        name, wanted = str(node.get("item")), str(node.get("property", ""))
        if name not in asked or asked[name].kind != "item":
            raise scope.fault(node, f"'{name}' is no fact of kind item asked earlier")
        if wanted not in self.properties:
            raise scope.fault(node, f"'{wanted}' is no property", nearest(wanted, self.properties).strip())
        if "otherwise" not in node:
            raise scope.fault(node, "'otherwise' is missing: what stands where the sheet does not say")
        return FromItem(name, wanted, value(node["otherwise"], domain, scope))


def concluded(shape: ConcludedShape | None, node: Node | None, domain: Domain, scope: Scope) -> Concluded | None:
    """What a concluded fact or property starts from."""
    if shape is None or not isinstance(node, Mapping):
        return None
    if shape.combine != "one" and not domain.ordered:
        scope.problem(node.mark, "only numbers, scales and yes/no have a highest and a lowest", "use combine: one")
    try:
        return Concluded(value(node["otherwise"], domain, scope.at("concluded")), shape.combine)
    except Mistyped:
        return None


def read_properties(
    raw: Map[str, Declared], domains: Map[str, Domain], bindings: Bindings, citations: Citations, problems: Problems
) -> dict[str, Property]:
    """All properties."""
    found: dict[str, Property] = {}
    for name, declared in raw.items():
        shape, tree = declared.shape, declared.tree
        assert isinstance(shape, PropertyShape)  # noqa: S101 - only properties are read here
        scope = Scope(problems, domains, trail=("properties", name), what="property")
        citations.read(shape.source, tree, scope)
        found[name] = Property(
            name,
            shape.title,
            domains[name],
            declared.parent.key_marks[name],
            shape.of or "",
            shape.test,
            shape.hidden,
            bindings.of_property(shape, tree, domains[name], scope),
            concluded(shape.concluded, tree.get("concluded"), domains[name], scope),
            shape.same.item if shape.same else "",
        )
    return found
