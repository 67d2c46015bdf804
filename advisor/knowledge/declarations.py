"""Facts and properties as declared: their domains, questions, assumptions and what concludes them."""

from collections.abc import Mapping as Map
from dataclasses import dataclass, replace
from typing import TypeVar

from advisor.conditions import ALWAYS, Condition, Domain, FactRef, Step, Value
from advisor.documents import Mapping, Node, Scalar
from advisor.knowledge.bindings import Bindings
from advisor.knowledge.citations import Citations
from advisor.knowledge.folder import Placed
from advisor.knowledge.model import Assumption, Concluded, Declaration, FromItem, LookedUp, Property, Question
from advisor.knowledge.parsing import condition
from advisor.knowledge.reading import list_in, mapping_in
from advisor.knowledge.schema import AssumeShape, ConcludedShape, FactShape, PropertyShape
from advisor.knowledge.tables import column_domain
from advisor.knowledge.values import Mistyped, Scope, value

Declared = TypeVar("Declared", FactShape, PropertyShape)


def domains_of(
    raw: Map[str, Placed[Declared]], labels: Map[str, Map[str, str]], items: Map[str, str], ground: Scope
) -> dict[str, Domain]:
    """The domains of all facts, or of all properties; what is faulty here is told here and nowhere else."""
    found: dict[str, Domain] = {}
    for name, placed in raw.items():
        shape, scope = placed.shape, ground.at(name)
        before = len(scope.problems)
        domain = column_domain(shape, placed.tree, placed.parent.key_marks[name], labels, scope)
        if domain.kind == "item":
            domain = replace(domain, choices={**items, **domain.choices}, open_choices=scope.lost.may_have("items", ""))
        borrowed = shape.choices_of is None or shape.choices_of in labels
        sound = len(scope.problems) == before
        if sound and domain.kind in {"choice", "scale", "several"} and not domain.choices and borrowed:
            scope.problem(placed.tree["kind"].mark, f"a {domain.kind} needs its choices", "list them under 'choices:'")
        found[name] = replace(domain, step=_step(placed.tree, scope))
        if len(scope.problems) > before or not borrowed:
            scope.lost.lose("names", name)
    return found


def _step(tree: Mapping, scope: Scope) -> Step | None:
    node = tree.get("step")
    if node is None:
        return None
    if isinstance(node, Mapping) and len(node) == 1:
        kind, size = next(iter(node.items()))
        if kind == "places" and isinstance(size, Scalar) and str(size) == "yes":
            return Step("places")
        if kind in {"absolute", "ratio"}:
            return _sized(kind, size, scope)
    if isinstance(node, Scalar):
        return _sized("absolute", node, scope)
    scope.problem(node.mark, "this is no step", "write a number, {absolute: 10}, {ratio: 1.5} or {places: yes}")
    return None


def _sized(kind: str, node: Node, scope: Scope) -> Step | None:
    try:
        size = value(node, Domain("number"), scope)
    except Mistyped:
        return None
    if not isinstance(size, float) or size <= (1 if kind == "ratio" else 0):
        scope.problem(node.mark, "a step is above 0, a ratio above 1", "step: {ratio: 1.5}")
        return None
    return Step(kind, size)


@dataclass(frozen=True, slots=True)
class FactReader:
    """Reads the declarations of facts once all domains are known."""

    domains: Map[str, Domain]
    properties: Map[str, Domain]
    bindings: Bindings
    citations: Citations
    ground: Scope

    def read(self, raw: Map[str, Placed[FactShape]]) -> dict[str, Declaration]:
        """All facts in the order of asking."""
        found: dict[str, Declaration] = {}
        asked: dict[str, Domain] = {}
        for name, placed in raw.items():
            found[name] = self._one(name, placed, asked)
            if found[name].question:
                asked[name] = self.domains[name]
        return found

    def _one(self, name: str, placed: Placed[FactShape], asked: Map[str, Domain]) -> Declaration:
        shape, tree, mark = placed.shape, placed.tree, placed.parent.key_marks[name]
        domain = self.domains[name]
        scope = self.ground.over(asked, "facts", name, what="fact asked earlier")
        kinds = [kind for kind in ("question", "concluded", "tunable") if getattr(shape, kind) is not None]
        if len(kinds) != 1:
            scope.problem(
                mark,
                "a fact has exactly one of question, concluded and tunable",
                f"this one has {' and '.join(kinds) or 'none'}",
            )
            scope.lost.lose("names", name)
        self.citations.read(shape.source, tree, scope)
        question = self._question(shape, tree, scope)
        if scope.lost.has("names", name):
            return Declaration(name, shape.title, domain, mark, question)
        return Declaration(
            name,
            shape.title,
            domain,
            mark,
            question,
            assume=self._assumption(shape.assume, tree.get("assume"), domain, scope.at("assume")),
            unasked=self._unasked(shape, tree, domain, asked, scope.at("unasked")),
            filled=self._filled(shape, tree, domain, asked, scope.at("filled")),
            concluded=concluded(name, shape.concluded, tree.get("concluded"), domain, scope.at("concluded")),
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
        key = next((each for each in ("when", "optional") if isinstance(node, Mapping) and each in node), None)
        if key is not None and isinstance(node, Mapping) and "unasked" not in tree:
            message = f"a question with '{key}' needs the value that stands where it is not asked"
            scope.problem(node.key_marks[key], message, "add 'unasked:' to the fact")
        asked = shape.question
        return Question(asked.ask, asked.help, asked.section, asked.decides, when, asked.optional)

    def _filled(
        self, shape: FactShape, tree: Mapping, domain: Domain, asked: Map[str, Domain], scope: Scope
    ) -> LookedUp | None:
        """The look-up that fills the answer in, where a fact asked earlier allows."""
        if shape.filled is None:
            return None
        earlier = Bindings(self.bindings.tables, asked, {})
        return earlier.looked_up(shape.filled, mapping_in(tree, "filled"), domain, scope)

    def _assumption(
        self, shape: AssumeShape | None, node: Node | None, domain: Domain, scope: Scope
    ) -> Assumption | None:
        if shape is None or not isinstance(node, Mapping):
            return None
        if ("value" in node) is ("each" in node):
            scope.problem(node.mark, "an assumption is one value, or each of several", "value: ..., or each: [...]")
            return None
        try:
            each = tuple(value(one, domain, scope.at("each")) for one in list_in(node, "each"))
            assumed = each[0] if each else value(node["value"], domain, scope)
        except Mistyped:
            return None
        source = self.citations.read(shape.source, node, scope)
        return Assumption(assumed, shape.because, source, shape.state == "open", each)

    def _unasked(
        self, shape: FactShape, tree: Mapping, domain: Domain, asked: Map[str, Domain], scope: Scope
    ) -> Value | FactRef | FromItem | None:
        node = tree.get("unasked")
        if node is None:
            return None
        if shape.question is None or (shape.question.when is None and not shape.question.optional):
            message = "'unasked' stands only beside a question with 'when', or an optional one"
            scope.problem(tree.key_marks["unasked"], message, "take it out")
        try:
            if isinstance(node, Mapping) and "fact" in node:
                name = str(node["fact"])
                if name not in asked:
                    message = f"'{name}' is no fact asked earlier"
                    raise scope.unknown(node["fact"].mark, "names", name, message, asked)
                return FactRef(name)
            if isinstance(node, Mapping) and "item" in node:
                return self._from_item(node, domain, asked, scope)
            return value(node, domain, scope)
        except Mistyped:
            return None

    def _from_item(self, node: Mapping, domain: Domain, asked: Map[str, Domain], scope: Scope) -> FromItem:
        name, wanted = str(node.get("item")), str(node.get("property", ""))
        if name not in asked or asked[name].kind != "item":
            message = f"'{name}' is no fact of kind item asked earlier"
            raise scope.unknown(node["item"].mark, "names", name, message, asked)
        if wanted not in self.properties:
            at = node["property"].mark if "property" in node else node.mark
            message = f"'{wanted}' is no property"
            raise scope.unknown(at, "names", wanted, message, self.properties, "property: thickener")
        if "otherwise" not in node:
            raise scope.fault(
                node, "'otherwise' is missing: what stands where the sheet does not say", "otherwise: not_known"
            )
        return FromItem(name, wanted, value(node["otherwise"], domain, scope))


def concluded(
    name: str, shape: ConcludedShape | None, node: Node | None, domain: Domain, scope: Scope
) -> Concluded | None:
    """What a concluded fact or property starts from; one of which that is not known is lost."""
    if shape is None or not isinstance(node, Mapping):
        return None
    if shape.combine != "one" and not domain.ordered:
        message = "only numbers, scales and yes/no have a highest and a lowest"
        scope.problem(node["combine"].mark, message, "use combine: one")
    try:
        return Concluded(value(node["otherwise"], domain, scope), shape.combine)
    except Mistyped:
        scope.lost.lose("names", name)
        return None


def read_properties(
    raw: Map[str, Placed[PropertyShape]], bindings: Bindings, citations: Citations, ground: Scope
) -> dict[str, Property]:
    """All properties."""
    found: dict[str, Property] = {}
    for name, placed in raw.items():
        shape, tree, domain = placed.shape, placed.tree, bindings.properties[name]
        mark = placed.parent.key_marks[name]
        scope = ground.over(bindings.properties, "properties", name, what="property")
        citations.read(shape.source, tree, scope)
        sound = not scope.lost.has("names", name)
        found[name] = Property(
            name,
            shape.title,
            domain,
            mark,
            shape.of or "",
            shape.test,
            shape.hidden,
            bindings.of_property(shape, tree, mark, domain, scope) if sound else None,
            concluded(name, shape.concluded, tree.get("concluded"), domain, scope.at("concluded")) if sound else None,
            _same_item(shape, tree, bindings.facts, scope.at("same")),
        )
    return found


def _same_item(shape: PropertyShape, tree: Mapping, facts: Map[str, Domain], scope: Scope) -> str:
    """The fact that names the product in use."""
    if shape.same is None:
        return ""
    name, mark = shape.same.item, mapping_in(tree, "same")["item"].mark
    items = [fact for fact, domain in facts.items() if domain.kind == "item"]
    if name not in items:
        scope.unknown(mark, "names", name, f"'{name}' is no fact of kind item", items)
    return name
