"""Rules: conditions typed, rows expanded, conclusions resolved."""

import re
from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import dataclass, replace

from advisor.conditions import ALWAYS, Condition, Domain, Every, Value, branches, holds, negated
from advisor.documents import Mapping, Node, Problems, Sequence, nearest
from advisor.knowledge.citations import Citations
from advisor.knowledge.model import Asks, Band, Conclusion, Instance, Refers, Row, Rule, Sets, Table, Warns
from advisor.knowledge.parsing import Blank, Mistyped, Scope, condition, operand, value
from advisor.knowledge.schema import ConclusionShape, RuleShape

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


@dataclass(frozen=True, slots=True)
class RuleReader:
    """Reads the written rules of one step into instances."""

    names: Names
    citations: Citations
    problems: Problems

    def read(self, shape: RuleShape, tree: Mapping, step: str, point_kind: str) -> tuple[Rule, tuple[Instance, ...]]:
        """One written rule and its instances, one per row that applies."""
        scope = Scope(
            self.problems,
            self.names.facts,
            self.names.facts,
            trail=("rules", f"'{shape.id}'"),
            hints=dict.fromkeys(
                self.names.properties, "a condition sees facts; properties belong in 'for' and in demands"
            ),
        )
        table = self._table(shape, tree, scope)
        rule = self._rule(shape, tree, step, point_kind, table, scope)
        rows: list[Row | None] = [None]
        if table is not None:
            rows = [row for row in table.rows if self._where(tree, table, row, scope)]
            if not rows:
                scope.problem(tree.mark, "no row of the table meets 'where', so the rule can never fire")
        instances = []
        faulty = False
        for row in rows:
            try:
                instances.append(self._instance(rule, tree, shape, table, row, scope))
            except Mistyped:
                faulty = True
            except Blank:
                continue
        if not faulty:
            self._examples(rule, tree, instances, scope)
        return rule, tuple(instances)

    def _table(self, shape: RuleShape, tree: Mapping, scope: Scope) -> Table | None:
        if shape.each_row_of is None:
            if "where" in tree:
                scope.problem(tree.key_marks["where"], "'where' chooses rows and needs 'each_row_of'")
            return None
        table = self.names.tables.get(shape.each_row_of)
        if table is None or table.matrix:
            scope.problem(
                tree["each_row_of"].mark,
                f"'{shape.each_row_of}' is no table with rows",
                nearest(shape.each_row_of, self.names.tables).strip(),
            )
            return None
        return table

    def _rule(
        self, shape: RuleShape, tree: Mapping, step: str, point_kind: str, table: Table | None, scope: Scope
    ) -> Rule:
        self._placeholders(shape.because, tree, table, scope)
        conflicts = shape.may_conflict or []
        conflicts = conflicts if isinstance(conflicts, list) else [conflicts]
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
            {each.rule: each.because for each in conflicts},
            self._example(tree, "fires", scope),
            self._example(tree, "silent", scope),
            tree.mark,
        )

    def _placeholders(self, because: str, tree: Mapping, table: Table | None, scope: Scope) -> None:
        for of_row, name in PLACEHOLDER.findall(because):
            known: Map[str, object] = (table.columns if table else {}) if of_row else self.names.facts
            if name not in known:
                scope.problem(
                    tree["because"].mark,
                    f"'{{{of_row}{name}}}' stands for no {'column' if of_row else 'fact'}",
                    nearest(name, known).strip(),
                )
        rest = PLACEHOLDER.sub("", because)
        if "{" in rest or "}" in rest:
            scope.problem(tree["because"].mark, "a brace without a name in it", "write {fact} or {row.column}")

    def _example(self, tree: Mapping, key: str, scope: Scope) -> dict[str, Value]:
        node = tree.get(key)
        if node is None:
            return {}
        if not isinstance(node, Mapping):
            scope.problem(node.mark, "an example is written {fact: value}")
            return {}
        found: dict[str, Value] = {}
        for name, child in node.items():
            with suppress(Mistyped):
                found[name] = value(child, scope.domain(name, node.key_marks[name]), scope.at(key))
        return found

    def _where(self, tree: Mapping, table: Table, row: Row, scope: Scope) -> bool:
        if "where" not in tree:
            return True
        columns = {name: domain for name, domain in table.columns.items() if name not in table.bands}
        try:
            chosen = condition(
                tree["where"], Scope(self.problems, columns, trail=(*scope.trail, "where"), what="column")
            )
        except Mistyped:
            return False
        record = {
            name: columns[name].code(cell)
            for name, cell in row.cells.items()
            if name in columns and not isinstance(cell, Band)
        }
        return holds(chosen, record) is True

    def _instance(
        self, rule: Rule, tree: Mapping, shape: RuleShape, table: Table | None, row: Row | None, scope: Scope
    ) -> Instance:
        here = replace(scope, table=table, row=row)
        faulty = False
        when: Condition = ALWAYS
        try:
            when = self._when(tree, here)
        except Mistyped:
            faulty = True
        then: list[Conclusion] = []
        nodes = tree["then"]
        for part, node in zip(shape.then, nodes if isinstance(nodes, Sequence) else (), strict=True):
            try:
                then.append(self._conclusion(part, node, here.at("then")))
            except Mistyped:
                faulty = True
        if faulty:
            raise Mistyped
        return Instance(f"{rule.id}/{row.id}" if row else rule.id, rule, row, when, tuple(then))

    def _when(self, tree: Mapping, scope: Scope) -> Condition:
        when = condition(tree["when"], scope.at("when"))
        if "unless" in tree:
            when = Every((when, negated(condition(tree["unless"], scope.at("unless")), self.names.voidable)))
        if len(branches(when)) > MOST_BRANCHES:
            raise scope.fault(
                tree["when"],
                f"the condition has more than {MOST_BRANCHES} alternatives when written out",
                "split the rule in two",
            )
        return when

    def _conclusion(self, shape: ConclusionShape, node: Node, scope: Scope) -> Conclusion:
        assert isinstance(node, Mapping)  # noqa: S101 - by the shape
        verbs = [verb for verb in ("must", "should", "set", "caution", "refer") if verb in node]
        if len(verbs) != 1:
            raise scope.fault(
                node,
                "a conclusion has exactly one of must, should, set, caution and refer",
                f"this one has {' and '.join(verbs) or 'none'}",
            )
        verb = verbs[0]
        if (verb == "should") != (shape.level is not None):
            raise scope.fault(node, "a should has a level from 1 (strong) to 4 (taste); nothing else has one")
        if shape.withhold and verb != "refer":
            raise scope.fault(node["withhold"], "'withhold' goes with 'refer'")
        for_ = self._for(node, scope)
        if verb in {"must", "should"}:
            return self._asks(node[verb], shape.level or 0, for_, scope)
        if verb == "set":
            return self._sets(node["set"], for_, scope)
        known = self.names.cautions if verb == "caution" else self.names.referrals
        name = str(node[verb])
        if name not in known:
            raise scope.fault(
                node[verb],
                f"'{name}' is no {verb.replace('refer', 'referral')} of cautions.yaml",
                nearest(name, known).strip(),
            )
        if verb == "caution":
            return Warns(name, for_)
        if for_ is not ALWAYS:
            raise scope.fault(node["for"], "a referral is for the whole case", "take 'for' out, or use a caution")
        return Refers(name, shape.withhold)

    def _property_scope(self, scope: Scope) -> Scope:
        return replace(
            scope,
            names=self.names.properties,
            what="property",
            may_ask_stated=True,
            hints=dict.fromkeys(self.names.facts, "that is a fact; a demand and 'for' speak of properties"),
        )

    def _for(self, node: Mapping, scope: Scope) -> Condition:
        return condition(node["for"], self._property_scope(scope).at("for")) if "for" in node else ALWAYS

    def _asks(self, node: Node, level: int, for_: Condition, scope: Scope) -> Asks:
        here = replace(self._property_scope(scope).at("must" if level == 0 else "should"), may_ask_stated=False)
        if not isinstance(node, Mapping) or len(node) != 1 or "either" in node:
            raise scope.fault(node, "a demand names one property", "write several demands, or use 'for'")
        test = condition(node, here)
        return Asks(next(iter(node)), test, level, for_)

    def _sets(self, node: Node, for_: Condition, scope: Scope) -> Sets:
        if not isinstance(node, Mapping) or len(node) != 1:
            raise scope.fault(node, "'set' names one fact or property", "set: {name: value}")
        name, child = next(iter(node.items()))
        here = replace(scope, names=self.names.concluded, what="concluded fact or property").at("set")
        domain = here.domain(name, node.key_marks[name])
        if for_ is not ALWAYS and name in self.names.facts:
            raise scope.fault(
                node, f"'{name}' is a fact: it cannot differ from lubricant to lubricant", "take 'for' out"
            )
        return Sets(name, operand(child, domain, here), for_)

    def _examples(self, rule: Rule, tree: Mapping, instances: list[Instance], scope: Scope) -> None:
        always = all(instance.when == ALWAYS for instance in instances)
        if always and "silent" in tree:
            scope.problem(tree.key_marks["silent"], "a rule that always holds has no silent example")
        if always:
            return
        if "silent" not in tree or "fires" not in tree:
            scope.problem(
                tree.mark, "a rule with a condition needs two examples", "add 'fires:' and 'silent:' with facts"
            )
            return
        for key, facts, wanted in (("fires", rule.fires, True), ("silent", rule.silent, False)):
            record = {name: self.names.facts[name].code(each) for name, each in facts.items()}
            outcomes = [holds(instance.when, record) for instance in instances]
            good = any(outcomes) if wanted else not any(outcome is None or outcome for outcome in outcomes)
            if not good:
                seen = "holds" if any(outcomes) else "is undecided" if None in outcomes else "fails"
                scope.problem(
                    tree[key].mark,
                    f"with this example the condition {seen}",
                    "it should fire" if wanted else "it should fail: give every fact that the condition names",
                )
