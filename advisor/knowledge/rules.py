"""Rules: conditions typed, rows expanded, conclusions resolved."""

import re
from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import dataclass, field, replace

from advisor.conditions import ALWAYS, Coded, Condition, Domain, Every, Value, alternatives, holds, negated
from advisor.conditions.terms import names as names_in
from advisor.documents import Mapping, Mark, Node
from advisor.knowledge.citations import Citations
from advisor.knowledge.lost import Space
from advisor.knowledge.matched import matched_columns
from advisor.knowledge.model import Asks, Band, Conclusion, Instance, Refers, Row, Rule, Sets, Table, Warns
from advisor.knowledge.parsing import condition, operand
from advisor.knowledge.reading import list_in, mapping_in
from advisor.knowledge.schema import ConclusionShape, RuleShape
from advisor.knowledge.values import Blank, Mistyped, Scope, value

MOST_BRANCHES = 40
PLACEHOLDER = re.compile(r"\{(row\.)?([A-Za-z_][A-Za-z0-9_]*)\}")


@dataclass(frozen=True, slots=True)
class Names:
    """Everything that a rule can name."""

    facts: Map[str, Domain]
    properties: Map[str, Domain]
    concluded: Map[str, Domain]
    voidable: frozenset[str]
    tables: Map[str, Table]
    cautions: frozenset[str]
    referrals: frozenset[str]
    no_facts: Map[str, str] = field(init=False)
    """What is said of a property that stands where a fact should."""
    no_properties: Map[str, str] = field(init=False)
    """What is said of a fact that stands where a property should."""

    def __post_init__(self) -> None:
        said = "a condition sees facts; properties belong in 'for' and demands"
        object.__setattr__(self, "no_facts", dict.fromkeys(self.properties, said))
        said = "that is a fact; a demand and 'for' speak of properties"
        object.__setattr__(self, "no_properties", dict.fromkeys(self.facts, said))


@dataclass(frozen=True, slots=True)
class RuleReader:
    """Reads the written rules of one step into instances."""

    names: Names
    citations: Citations
    ground: Scope

    def read(self, shape: RuleShape, tree: Mapping, step: str, point_kind: str) -> tuple[Rule, tuple[Instance, ...]]:
        """One written rule and its instances, one per row that applies."""
        ground = replace(self.ground, facts=self.names.facts, hints=self.names.no_facts)
        scope = ground.over(self.names.facts, "rules", f"'{shape.id}'")
        before = len(scope.problems)
        table = self._table(shape, tree, scope)
        rule = self._rule(shape, tree, step, point_kind, table, scope)
        if shape.each_row_of is not None and table is None:
            return rule, ()
        instances: list[Instance] = []
        sound = not (table and scope.lost.has("rows", table.id))
        try:
            rows = self._rows(tree, table, scope)
        except Mistyped:
            rows = list(table.rows) if table else []
        for row in rows:
            try:
                instances.append(self._instance(rule, tree, shape, table, row, scope))
            except Mistyped:
                sound = False
            except Blank:
                continue
        if sound and len(scope.problems) == before:
            self._examples(rule, tree, instances, scope)
        return rule, tuple(instances)

    def _rows(self, tree: Mapping, table: Table | None, scope: Scope) -> list[Row | None]:
        """The rows for which the rule speaks; one None for a rule without a table."""
        if table is None:
            return [None]
        if "where" not in tree:
            return list(table.rows)
        columns = {name: domain for name, domain in table.columns.items() if name not in table.bands}
        here = Scope(scope.problems, columns, trail=(*scope.trail, "where"), what="column")
        chosen = condition(tree["where"], here)
        rows: list[Row | None] = [row for row in table.rows if holds(chosen, _record(row, columns)) is True]
        if not rows and not scope.lost.has("rows", table.id):
            message = f"no row of {table.id} meets this, so the rule can never fire"
            raise here.fault(tree["where"], message, "check it against the rows")
        return rows

    def _table(self, shape: RuleShape, tree: Mapping, scope: Scope) -> Table | None:
        if shape.each_row_of is None:
            if "where" in tree:
                scope.problem(tree.key_marks["where"], "'where' chooses rows and needs 'each_row_of'", "name the table")
            return None
        table = self.names.tables.get(shape.each_row_of)
        if table is None or table.matrix:
            message = f"'{shape.each_row_of}' is no table with rows"
            known = [name for name, each in self.names.tables.items() if not each.matrix]
            scope.unknown(tree["each_row_of"].mark, "tables", shape.each_row_of, message, known, "see tables/")
            return None
        return table

    def _rule(
        self, shape: RuleShape, tree: Mapping, step: str, point_kind: str, table: Table | None, scope: Scope
    ) -> Rule:
        self._placeholders(shape.because, tree, table, scope)
        return Rule(
            shape.id,
            shape.title,
            shape.status,
            step,
            point_kind,
            shape.because,
            shape.limits,
            self.citations.read(shape.source, tree, scope),
            table.id if table else "",
            {each.rule: each.because for each in shape.may_conflict},
            self._example(tree, "fires", scope),
            self._example(tree, "silent", scope),
            tree.mark,
            matched_columns(tree) if table else (),
        )

    def _placeholders(self, because: str, tree: Mapping, table: Table | None, scope: Scope) -> None:
        for of_row, name in PLACEHOLDER.findall(because):
            known: Map[str, object] = (table.columns if table else {}) if of_row else self.names.facts
            if name not in known and not (of_row and table is None and "each_row_of" in tree):
                message = f"'{{{of_row}{name}}}' stands for no {'column' if of_row else 'fact'}"
                scope.unknown(tree["because"].mark, "tables" if of_row else "names", name, message, known, "declare it")
        rest = PLACEHOLDER.sub("", because)
        if "{" in rest or "}" in rest:
            scope.problem(tree["because"].mark, "a brace without a name in it", "write {fact} or {row.column}")

    def _example(self, tree: Mapping, key: str, scope: Scope) -> dict[str, Value]:
        node = tree.get(key)
        if node is None:
            return {}
        if not isinstance(node, Mapping):
            scope.problem(node.mark, "an example is written {fact: value}", "name each fact that the condition names")
            return {}
        found, here = dict[str, Value](), scope.at(key)
        for name, child in node.items():
            with suppress(Mistyped):
                found[name] = value(child, scope.domain(name, node.key_marks[name]), here)
        return found

    def _instance(
        self, rule: Rule, tree: Mapping, shape: RuleShape, table: Table | None, row: Row | None, scope: Scope
    ) -> Instance:
        here = replace(scope, table=table, row=row) if row else scope
        faulty = False
        when: Condition = ALWAYS
        try:
            when = self._when(tree, here)
        except Mistyped:
            faulty = True
        then: list[Conclusion] = []
        for part, node in zip(shape.then, list_in(tree, "then"), strict=True):
            try:
                then.append(self._conclusion(part, mapping_in(node), here.at("then")))
            except Mistyped:
                faulty = True
        if faulty:
            raise Mistyped
        return Instance(f"{rule.id}/{row.id}" if row else rule.id, rule, row, when, tuple(then))

    def _when(self, tree: Mapping, scope: Scope) -> Condition:
        when = condition(tree["when"], scope.at("when"))
        if "unless" in tree:
            when = Every((when, negated(condition(tree["unless"], scope.at("unless")), self.names.voidable)))
        if alternatives(when) > MOST_BRANCHES:
            raise scope.fault(
                tree["when"],
                f"the condition has more than {MOST_BRANCHES} alternatives when written out",
                "split the rule in two",
            )
        return when

    def _conclusion(self, shape: ConclusionShape, node: Mapping, scope: Scope) -> Conclusion:
        verbs = [verb for verb in ("must", "should", "set", "caution", "refer") if verb in node]
        if len(verbs) != 1:
            raise scope.fault(
                node,
                "a conclusion has exactly one of must, should, set, caution and refer",
                f"this one has {' and '.join(verbs) or 'none'}",
            )
        verb = verbs[0]
        if (verb == "should") != (shape.level is not None):
            at = node.get("level", node)
            hint = "add 'level: 3'" if verb == "should" else "take 'level' out"
            raise scope.fault(at, "a should has a level from 1 (strong) to 4 (taste); nothing else has one", hint)
        if shape.withhold and verb != "refer":
            raise scope.fault(node["withhold"], "'withhold' goes with 'refer'", "take it out")
        for_ = self._for(node, scope)
        if verb in {"must", "should"}:
            return self._asks(node[verb], shape.level or 0, for_, scope)
        if verb == "set":
            return self._sets(node["set"], for_, scope)
        if verb == "caution":
            return Warns(self._known(node[verb], self.names.cautions, "cautions", scope), for_)
        if for_ is not ALWAYS:
            raise scope.fault(node["for"], "a referral is for the whole case", "take 'for' out, or use a caution")
        return Refers(self._known(node[verb], self.names.referrals, "referrals", scope), shape.withhold)

    def _known(self, node: Node, known: frozenset[str], space: Space, scope: Scope) -> str:
        name = str(node)
        if name not in known:
            message = f"'{name}' stands nowhere under '{space}' in cautions.yaml"
            raise scope.unknown(node.mark, space, name, message, known, f"add it under '{space}'")
        return name

    def _for(self, node: Mapping, scope: Scope) -> Condition:
        if "for" not in node:
            return ALWAYS
        here = scope.of(self.names.properties, "property", self.names.no_properties, stated=True)
        return condition(node["for"], here.at("for"))

    def _asks(self, node: Node, level: int, for_: Condition, scope: Scope) -> Asks:
        here = scope.of(self.names.properties, "property", self.names.no_properties)
        here = here.at("must" if level == 0 else "should")
        if not isinstance(node, Mapping) or len(node) != 1 or "either" in node:
            raise scope.fault(node, "a demand names one property", "write several demands, or use 'for'")
        test = condition(node, here)
        return Asks(next(iter(node)), test, level, for_)

    def _sets(self, node: Node, for_: Condition, scope: Scope) -> Sets:
        if not isinstance(node, Mapping) or len(node) != 1:
            raise scope.fault(node, "'set' names one fact or property", "set: {name: value}")
        name, child = next(iter(node.items()))
        here = scope.of(self.names.concluded, "concluded fact or property", scope.hints).at("set")
        domain = here.domain(name, node.key_marks[name])
        if for_ is not ALWAYS and name in self.names.facts:
            raise scope.fault(
                node, f"'{name}' is a fact: it cannot differ from lubricant to lubricant", "take 'for' out"
            )
        return Sets(name, operand(child, domain, here), for_)

    def _examples(self, rule: Rule, tree: Mapping, instances: list[Instance], scope: Scope) -> None:
        always = all(instance.when == ALWAYS for instance in instances)
        if always and "silent" in tree:
            scope.problem(
                tree.key_marks["silent"], "a rule that always holds has no silent example", "take 'silent' out"
            )
        if always:
            return
        lacking = [key for key in ("fires", "silent") if key not in tree]
        if lacking:
            hint = " and ".join(f"'{key}:'" for key in lacking)
            scope.problem(tree.mark, "a rule with a condition needs two examples", f"add {hint} with facts")
            return
        named = {name for instance in instances for name in names_in(instance.when)}
        for key, facts, wanted in (("fires", rule.fires, True), ("silent", rule.silent, False)):
            record = {name: self.names.facts[name].code(each) for name, each in facts.items()}
            outcomes = [holds(instance.when, record) for instance in instances]
            good = any(outcomes) if wanted else not any(outcome is None or outcome for outcome in outcomes)
            if not good:
                seen = "holds" if any(outcomes) else "is undecided" if None in outcomes else "fails"
                self._contradicted(tree, key, seen, [name for name in facts if name not in named], scope)

    def _contradicted(self, tree: Mapping, key: str, seen: str, beyond: list[str], scope: Scope) -> None:
        """Tell that condition and example contradict: at the condition, if the example goes beyond what it names."""
        should, when, example = "hold" if key == "fires" else "fail", _lacking(tree), tree[key].mark
        if beyond and seen != "is undecided":
            message = f"the condition {seen} with the example '{key}' in line {example.line}, and should {should}"
            scope.problem(when, message, f"it does not name '{beyond[0]}', as the example does; is that missing here?")
        else:
            facts = f"give every fact that the condition names, or mend the condition in line {when.line}"
            scope.problem(example, f"with this example the condition {seen}", f"it should {should}: {facts}")


def _lacking(tree: Mapping) -> Mark:
    """Where a condition may lack something: an 'either' with one alternative left, else the condition itself."""
    when = tree["when"]
    if isinstance(when, Mapping) and len(list_in(when, "either")) == 1:
        return when.key_marks["either"]
    return tree.key_marks["when"]


def _record(row: Row, columns: Map[str, Domain]) -> dict[str, Coded]:
    """The cells of a row as conditions see them."""
    return {
        name: columns[name].code(cell)
        for name, cell in row.cells.items()
        if name in columns and not isinstance(cell, Band)
    }
