"""Read what a scenario expects: every name and value is checked against the knowledge, every fault told at once."""

from collections.abc import Callable, Iterable
from dataclasses import dataclass, field, replace

from advisor.advice import State
from advisor.answers import Saved
from advisor.conditions import Domain, Value
from advisor.designations import Designer, NoCode
from advisor.documents import Mapping, Mark, Node, Problem, Problems, Scalar, Sequence, as_number, as_yes_no, nearest
from advisor.knowledge import Knowledge, Mistyped, Scope, condition, value
from advisor.replay.expectations import (
    INTERVAL_ROW,
    AsksAtLeast,
    AsksFor,
    Assumes,
    Bars,
    CautionIs,
    CodeServes,
    ConflictBetween,
    Expectation,
    FactIs,
    FactWithin,
    FillIs,
    IntervalIs,
    KeepsFrom,
    LeavesOpen,
    ProductIs,
    Recommends,
    ReferralIs,
    RuleIs,
    StateIs,
    WithheldIs,
    fill_row,
)
from advisor.shelf import Verdict

_ANY = ("", "any")
_NEEDS_A_RULE = {Verdict.FALLS_SHORT, Verdict.UNPROVEN}


def read_expectations(saved: Saved, knowledge: Knowledge, problems: Problems) -> tuple[Expectation, ...]:
    """Everything that a scenario expects; a scenario that expects nothing is a fault too."""
    reader = _Reader(saved, knowledge, problems)
    tree = saved.tree.get("expect")
    if not isinstance(tree, Mapping) or not tree:
        reader.problem(saved.tree.mark if tree is None else tree.mark, "nothing is expected of this case",
                       "expect: {state: settled}")
        return ()
    for key, node in tree.items():
        read = reader.readers.get(key)
        if read is None:
            reader.problem(tree.key_marks[key], f"'{key}' is nothing that can be expected",
                           nearest(key, reader.readers) or f"known: {', '.join(reader.readers)}")
            continue
        reader.key = key
        try:
            reader.found += read(node)
        except Mistyped:
            continue
    return tuple(reader.found)


@dataclass(slots=True)
class _Reader:
    """Reads one `expect`; `key` is the part being read, `found` what it gave."""

    saved: Saved
    knowledge: Knowledge
    problems: Problems
    key: str = ""
    found: list[Expectation] = field(default_factory=list)

    @property
    def readers(self) -> dict[str, Callable[[Node], list[Expectation]]]:
        """How each part is read."""
        know = self.knowledge
        asked = {name for name, each in know.facts.items() if each.question is not None}
        return {
            "state": lambda node: [StateIs(node.mark, State(self._word(node, list(State), "state")))],
            "withheld": lambda node: [WithheldIs(node.mark, self._yes_no(node))],
            "facts": lambda node: self._each(node, self._fact),
            "recommended": lambda node: self._each(node, self._recommended),
            "must_not": lambda node: self._each(node, self._must_not),
            "barred": lambda node: self._each(node, self._barred),
            "demands": lambda node: self._each(node, self._demand),
            "codes": lambda node: self._each(node, self._code),
            "cautions": lambda node: self._names(node, know.cautions, "caution", lambda at, name: CautionIs(at, name, True)),
            "no_cautions": lambda node: self._names(node, know.cautions, "caution", lambda at, name: CautionIs(at, name, False)),
            "referrals": lambda node: self._names(node, know.referrals, "referral", lambda at, name: ReferralIs(at, name, True)),
            "no_referrals": lambda node: self._names(node, know.referrals, "referral", lambda at, name: ReferralIs(at, name, False)),
            "products": lambda node: self._each(node, self._product),
            "open_questions": lambda node: self._names(node, asked, "question", LeavesOpen),
            "assumptions": lambda node: self._names(node, asked, "question", Assumes),
            "conflicts": lambda node: [ConflictBetween(node.mark, tuple(self._rule(each) for each in self._list(node)))],
            "interval": self._interval,
            "fill": lambda node: self._each(node, self._fill),
            "rules_fired": lambda node: [RuleIs(each.mark, self._rule(each), fires=True) for each in self._list(node)],
            "rules_silent": lambda node: [RuleIs(each.mark, self._rule(each), fires=False) for each in self._list(node)],
        }

    def problem(self, mark: Mark, message: str, hint: str = "", *trail: str) -> Mistyped:
        """Note a fault."""
        within = ("expect", *([self.key] if self.key else []), *trail)
        self.problems.add(Problem(mark.file, mark.line, mark.column, within, message, hint.strip()))
        return Mistyped()

    def _each(self, node: Node, read: Callable[[Scalar, Node], Iterable[Expectation]]) -> list[Expectation]:
        """Read every entry of a mapping; a faulty one keeps none of the others from being read."""
        if not isinstance(node, Mapping) or not node:
            raise self.problem(node.mark, f"'{self.key}' is written 'name: what is expected'")
        found: list[Expectation] = []
        for name, child in node.items():
            try:
                found += read(Scalar(name, node.key_marks[name]), child)
            except Mistyped:
                continue
        return found

    def _list(self, node: Node) -> list[Scalar]:
        if not isinstance(node, Sequence) or not node:
            raise self.problem(node.mark, f"'{self.key}' is a list with at least one entry", f"{self.key}: [a, b]")
        for each in node:
            if not isinstance(each, Scalar):
                raise self.problem(each.mark, "a plain value is expected in this list")
        return [each for each in node if isinstance(each, Scalar)]

    def _names(self, node: Node, known: Iterable[str], what: str, make: Callable[[Mark, str], Expectation]) -> list[Expectation]:
        found: list[Expectation] = []
        for each in self._list(node):
            try:
                found.append(make(each.mark, self._known(each, known, what)))
            except Mistyped:
                continue
        return found

    def _known(self, word: Scalar, known: Iterable[str], what: str) -> str:
        names = list(known)
        if str(word) not in names:
            raise self.problem(word.mark, f"'{word}' is no {what} that is known here", nearest(word, names))
        return str(word)

    def _word(self, node: Node, known: Iterable[str], what: str) -> str:
        names = [str(each) for each in known]
        if not isinstance(node, Scalar) or str(node) not in names:
            seen = f"'{node}'" if isinstance(node, Scalar) else "this"
            raise self.problem(node.mark, f"{seen} is no {what}", f"use one of {', '.join(names)}")
        return str(node)

    def _yes_no(self, node: Node) -> bool:
        try:
            return as_yes_no(node)  # type: ignore[arg-type]  # anything but a text is refused below
        except (ValueError, AttributeError, TypeError):
            raise self.problem(node.mark, "yes or no is expected here") from None

    def _number(self, node: Node) -> float:
        if not isinstance(node, Scalar):
            raise self.problem(node.mark, "a number is expected here")
        try:
            return as_number(node)
        except ValueError as fault:
            message, _, hint = str(fault).partition("; ")
            raise self.problem(node.mark, message, hint) from None

    def _rule(self, word: Node) -> str:
        ids = {*self.knowledge.rules, *(each.id for step in self.knowledge.instances.values() for each in step)}
        if not isinstance(word, Scalar):
            raise self.problem(word.mark, "a rule is expected here")
        return self._known(word, sorted(ids), "rule")

    def _scope(self, *trail: str) -> Scope:
        return Scope(self.problems, {}, trail=("expect", self.key, *trail), what="property")

    def _domain(self, name: Scalar) -> Domain:
        """The domain of a property."""
        if str(name) not in self.knowledge.properties:
            known = self.knowledge.properties
            rows = {row.id: row.recommends for row in self.knowledge.docket if row.recommends}
            hint = f"write {rows[name]}, the property that the row shows" if str(name) in rows else nearest(name, known)
            raise self.problem(name.mark, f"'{name}' is no property that is known here", hint)
        return self.knowledge.properties[str(name)].domain

    def _recommendable(self, name: Scalar) -> Domain:
        """The domain of a property that the docket recommends."""
        domain = self._domain(name)
        shown = [row.recommends for row in self.knowledge.docket if row.recommends]
        if str(name) not in shown:
            raise self.problem(name.mark, f"no row of the docket recommends '{name}'", f"known: {', '.join(shown)}")
        return domain

    def _values(self, node: Node, domain: Domain, *trail: str) -> tuple[Value, ...]:
        if not isinstance(node, Sequence) or not node:
            raise self.problem(node.mark, "a list with at least one value is expected here", "[a, b]", *trail)
        found: list[Value] = []
        faulty = False
        for each in node:
            try:
                found.append(value(each, replace(domain, kind="choice") if domain.kind == "several" else domain, self._scope(*trail)))
            except Mistyped:
                faulty = True
        if faulty:
            raise Mistyped
        return tuple(found)

    def _only_keys(self, node: Mapping, *known: str) -> None:
        faults = [self.problem(node.key_marks[key], f"'{key}' is not known here", nearest(key, known) or f"known: {', '.join(known)}")
                  for key in node if key not in known]
        if faults:
            raise faults[0]

    def _fact(self, name: Scalar, node: Node) -> list[Expectation]:
        known = self.knowledge.facts.keys() | self.knowledge.computations.keys()
        domain = self.knowledge.domain(self._known(name, sorted(known), "fact"))
        if isinstance(node, Scalar) and str(node) == "void":
            return [FactIs(node.mark, name, None)]
        if not isinstance(node, Mapping):
            return [FactIs(node.mark, name, value(node, domain, self._scope(name)))]
        if domain.kind != "number":
            raise self.problem(node.mark, f"'{name}' is no number: it has one value or another", "", name)
        self._only_keys(node, *(("about", "within") if "about" in node else ("from", "to")))
        if "about" in node:
            return [self._about(name, node)]
        low, high = self._ends(node)
        return [FactWithin(node.mark, name, low, high)]

    def _about(self, name: Scalar, node: Mapping) -> FactWithin:
        about, within = self._number(node["about"]), node.get("within")
        if not isinstance(within, Scalar):
            raise self.problem(node.mark, "'about' needs 'within'", "{about: 0.15, within: 0.01} or {about: 0.15, within: 2 %}", name)
        text = within.strip()
        share = text.removesuffix("%").strip() if text.endswith("%") else ""
        apart = self._number(Scalar(share or text, within.mark)) * (abs(about) / 100 if share else 1)
        if apart <= 0:
            raise self.problem(within.mark, "'within' is more than nothing", "leave it out and write the value alone", name)
        return FactWithin(node.mark, name, about - apart, about + apart)

    def _ends(self, node: Mapping) -> tuple[float, float]:
        if set(node) != {"from", "to"}:
            raise self.problem(node.mark, "both ends are expected here", "{from: 1, to: 2}")
        low, high = self._number(node["from"]), self._number(node["to"])
        if low > high:
            raise self.problem(node["to"].mark, f"'to' ({high:g}) lies below 'from' ({low:g})", "change the two about")
        return low, high

    def _recommended(self, name: Scalar, node: Node) -> list[Expectation]:
        domain = self._recommendable(name)
        if not isinstance(node, Mapping):
            return [Recommends(node.mark, name, self._values(node, domain, name))]
        self._only_keys(node, "expected", "accept")
        if "expected" not in node:
            raise self.problem(node.mark, "'expected' is missing", "{expected: [a], accept: [b]}", name)
        accept = self._values(node["accept"], domain, name) if "accept" in node else ()
        return [Recommends(node.mark, name, self._values(node["expected"], domain, name), accept)]

    def _must_not(self, name: Scalar, node: Node) -> list[Expectation]:
        return [KeepsFrom(node.mark, name, self._values(node, self._recommendable(name), name))]

    def _barred(self, name: Scalar, node: Node) -> list[Expectation]:
        domain = self._domain(name)
        if not isinstance(node, Mapping) or not node:
            raise self.problem(node.mark, "what is barred is written 'value: rule'", f"{name}: {{some_value: some_rule}}", name)
        found: list[Expectation] = []
        for key, rule in node.items():
            try:
                barred = value(Scalar(key, node.key_marks[key]), domain, self._scope(name))
                found.append(Bars(rule.mark, name, barred, "" if str(rule) in _ANY else self._rule(rule)))
            except Mistyped:
                continue
        return found

    def _demand(self, name: Scalar, node: Node) -> list[Expectation]:
        domain = self._domain(name)
        text = str(node) if isinstance(node, Scalar) else ""
        strength, _, wanted = text.partition(" ")
        if text in {"unwanted", "allowed"}:
            if not {"none", "no"} & set(domain.choices):
                raise self.problem(node.mark, f"'{text}' is for properties with a choice 'none' or 'no'", "write a test, such as {at_least: 3}", name)
            return [AsksFor(node.mark, name, "unwanted" if text == "unwanted" else "allowed", None)]
        if strength in {"must", "should"}:
            if not domain.choices and not domain.places:
                raise self.problem(node.mark, f"'{name}' is a number", "write a test, such as {at_least: 130}", name)
            asked = value(Scalar(wanted.strip(), node.mark), domain, self._scope(name))
            return [AsksFor(node.mark, name, "must" if strength == "must" else "should", asked)]
        if domain.kind in {"several", "text", "item"}:
            raise self.problem(node.mark, f"no test can be put on '{name}'", "", name)
        whole = Mapping(node.mark)
        whole[str(name)] = node
        whole.key_marks[str(name)] = name.mark
        test = condition(whole, Scope(self.problems, {str(name): domain}, trail=("expect", self.key, name), what="property"))
        return [AsksAtLeast(node.mark, name, test, _as_written(node))]

    def _code(self, name: Scalar, node: Node) -> list[Expectation]:
        standard = self._known(name, ("din", "iso"), "standard")
        text = self._text(node)
        if text != "none":
            designer = Designer(self.knowledge)
            try:
                _ = designer.read_din(text) if standard == "din" else designer.read_iso(text)
            except NoCode as fault:
                raise self.problem(node.mark, str(fault), "", name) from None
        return [CodeServes(node.mark, "din" if standard == "din" else "iso", None if text == "none" else text)]

    def _text(self, node: Node) -> str:
        if not isinstance(node, Scalar):
            raise self.problem(node.mark, "a plain value is expected here")
        return str(node).strip()

    def _product(self, name: Scalar, node: Node) -> list[Expectation]:
        item = self._known(name, [each.item for each in self.knowledge.shelf], "product of the shelf")
        if self.saved.only is not None and item not in self.saved.only:
            raise self.problem(name.mark, f"the shelf of this scenario leaves {item} out", "add it to 'shelf'")
        word, by, rule = self._text(node).partition(" by ")
        verdict = Verdict(self._word(Scalar(word, node.mark), list(Verdict), "verdict"))
        if by and verdict not in _NEEDS_A_RULE:
            raise self.problem(node.mark, f"no rule makes a product '{word}'", "only falls_short and unproven go with 'by'", name)
        return [ProductIs(node.mark, item, verdict, self._rule(Scalar(rule.strip(), node.mark)) if by else "")]

    def _row(self, mark: Mark, row: str) -> None:
        rows = [each.id for each in self.knowledge.docket]
        if row not in rows:
            raise self.problem(mark, f"the docket has no row '{row}'", nearest(row, rows))

    def _interval(self, node: Node) -> list[Expectation]:
        self._row(node.mark, INTERVAL_ROW)
        if isinstance(node, Scalar) and str(node) == "none":
            return [IntervalIs(node.mark, None)]
        if not isinstance(node, Mapping):
            raise self.problem(node.mark, "an interval is expected from .. to, or none", "{from: 5900, to: 7200}")
        self._only_keys(node, "from", "to")
        return [IntervalIs(node.mark, self._ends(node))]

    def _fill(self, name: Scalar, node: Node) -> list[Expectation]:
        self._row(name.mark, fill_row(name))
        numbers = [self._number(each) for each in self._list(node)]
        if len(numbers) != 2:
            raise self.problem(node.mark, "a fill has two ends, in percent", f"{name}: [30, 40]")
        return [FillIs(node.mark, name, numbers[0], numbers[1])]


def _as_written(node: Node) -> str:
    """A node on one line, as the scenario has it."""
    if isinstance(node, Mapping):
        return ", ".join(f"{key.replace('_', ' ')} {_as_written(each)}" for key, each in node.items())
    return " or ".join(_as_written(each) for each in node) if isinstance(node, Sequence) else str(node)
