"""Read what a scenario expects: every name and value is checked against the knowledge, every fault told at once."""

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from typing import cast

from advisor.advice import State
from advisor.answers import Saved
from advisor.conditions import Domain, Value
from advisor.designations import Designer, NoCode
from advisor.documents import Mapping, Node, Problems, Scalar, Sequence, nearest
from advisor.explanation.falling import nothing
from advisor.knowledge import Knowledge, Mistyped, condition, value
from advisor.replay.checking import Checker
from advisor.replay.demanded import read_demanded
from advisor.replay.expectations import (
    ASKING,
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
    Strength,
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
        reader.problem(
            saved.tree.mark if tree is None else tree.mark,
            "nothing is expected of this case",
            "Write at least expect: {state: settled}",
        )
        return ()
    for key, node in tree.items():
        read = reader.readers.get(key)
        reader.key = key if read is not None else ""
        if read is None:
            reader.problem(
                tree.key_marks[key],
                f"'{key}' is nothing that can be expected",
                nearest(key, reader.readers) or f"Known: {', '.join(reader.readers)}",
            )
            continue
        try:
            reader.found += read(node)
        except Mistyped:
            continue
    return tuple(reader.found)


@dataclass(slots=True)
class _Reader(Checker):
    """Reads one `expect`; `found` is what it gave so far."""

    found: list[Expectation] = field(default_factory=list)

    @property
    def readers(self) -> dict[str, Callable[[Node], list[Expectation]]]:
        """How each part is read."""
        know = self.knowledge
        asked = {name for name, each in know.facts.items() if each.question is not None}
        return {
            "state": lambda node: [StateIs(node.mark, State(self.word(node, list(State), "state")))],
            "withheld": lambda node: [WithheldIs(node.mark, self.yes_no(node))],
            "facts": lambda node: self.each(node, self._fact),
            "recommended": lambda node: self.each(node, self._recommended),
            "must_not": lambda node: self.each(node, self._must_not),
            "barred": lambda node: self.each(node, self._barred),
            "demands": lambda node: self.each(node, self._demand),
            "demanded_by": lambda node: self.each(node, lambda name, each: [read_demanded(name, each, self)]),
            "codes": lambda node: self.each(node, self._code),
            "cautions": lambda node: self.names(
                node, know.cautions, "caution", lambda at, name: CautionIs(at, name, given=True)
            ),
            "no_cautions": lambda node: self.names(
                node, know.cautions, "caution", lambda at, name: CautionIs(at, name, given=False)
            ),
            "referrals": lambda node: self.names(
                node, know.referrals, "referral", lambda at, name: ReferralIs(at, name, given=True)
            ),
            "no_referrals": lambda node: self.names(
                node, know.referrals, "referral", lambda at, name: ReferralIs(at, name, given=False)
            ),
            "products": lambda node: self.each(node, self._product),
            "open_questions": lambda node: self.names(node, asked, "question", LeavesOpen),
            "assumptions": lambda node: self.names(node, asked, "question", Assumes),
            "conflicts": lambda node: [
                ConflictBetween(node.mark, tuple(self.rule(each) for each in self.listed(node)))
            ],
            "interval": self._interval,
            "fill": lambda node: self.each(node, self._fill),
            "rules_fired": lambda node: [RuleIs(each.mark, self.rule(each), fires=True) for each in self.listed(node)],
            "rules_silent": lambda node: [
                RuleIs(each.mark, self.rule(each), fires=False) for each in self.listed(node)
            ],
        }

    def _domain(self, name: Scalar) -> Domain:
        """The domain of a property."""
        if str(name) not in self.knowledge.properties:
            known = self.knowledge.properties
            rows = {row.id: row.recommends for row in self.knowledge.docket if row.recommends}
            hint = f"Write {rows[name]}, the property that the row shows" if str(name) in rows else nearest(name, known)
            raise self.problem(name.mark, f"'{name}' is no property that is known here", hint)
        return self.knowledge.properties[str(name)].domain

    def _recommendable(self, name: Scalar) -> Domain:
        """The domain of a property that the docket recommends."""
        domain = self._domain(name)
        shown = [row.recommends for row in self.knowledge.docket if row.recommends]
        if str(name) not in shown:
            raise self.problem(name.mark, f"no row of the docket recommends '{name}'", f"Known: {', '.join(shown)}")
        return domain

    def _values(self, node: Node, domain: Domain, *trail: str) -> tuple[Value, ...]:
        if not isinstance(node, Sequence) or not node:
            raise self.problem(node.mark, "a list with at least one value is expected here", "Write [a, b]", *trail)
        single = replace(domain, kind="choice") if domain.kind == "several" else domain
        found: list[Value] = []
        faulty = False
        for each in node:
            try:
                found.append(value(each, single, self.scope(*trail)))
            except Mistyped:
                faulty = True
        if faulty:
            raise Mistyped
        return tuple(found)

    def _fact(self, name: Scalar, node: Node) -> list[Expectation]:
        known = self.knowledge.facts.keys() | self.knowledge.computations.keys()
        domain = self.knowledge.domain(self.known(name, sorted(known), "fact"))
        if isinstance(node, Scalar) and str(node) == "void":
            return [FactIs(node.mark, name, None)]
        if not isinstance(node, Mapping):
            return [FactIs(node.mark, name, value(node, domain, self.scope(name)))]
        if domain.kind != "number":
            raise self.problem(node.mark, f"'{name}' is no number: it has one value or another", "", name)
        self.only_keys(node, *(("about", "within") if "about" in node else ("from", "to")))
        if "about" in node:
            return [self._about(name, node)]
        low, high = self.ends(node)
        return [FactWithin(node.mark, name, low, high)]

    def _about(self, name: Scalar, node: Mapping) -> FactWithin:
        about, within = self.number(node["about"]), node.get("within")
        if not isinstance(within, Scalar):
            raise self.problem(
                node.mark,
                "'about' needs 'within'",
                "Write {about: 0.15, within: 0.01} or {about: 0.15, within: 2 %}",
                name,
            )
        text = within.strip()
        share = text.removesuffix("%").strip() if text.endswith("%") else ""
        apart = self.number(Scalar(share or text, within.mark)) * (abs(about) / 100 if share else 1)
        if apart <= 0:
            raise self.problem(
                within.mark, "'within' must be more than nothing", "Leave it out and write the value alone", name
            )
        return FactWithin(node.mark, name, about - apart, about + apart)

    def _recommended(self, name: Scalar, node: Node) -> list[Expectation]:
        domain = self._recommendable(name)
        if not isinstance(node, Mapping):
            return [Recommends(node.mark, name, self._values(node, domain, name))]
        self.only_keys(node, "expected", "accept")
        if "expected" not in node:
            raise self.problem(node.mark, "'expected' is missing", "Write {expected: [a], accept: [b]}", name)
        accept = self._values(node["accept"], domain, name) if "accept" in node else ()
        return [Recommends(node.mark, name, self._values(node["expected"], domain, name), accept)]

    def _must_not(self, name: Scalar, node: Node) -> list[Expectation]:
        return [KeepsFrom(node.mark, name, self._values(node, self._recommendable(name), name))]

    def _barred(self, name: Scalar, node: Node) -> list[Expectation]:
        domain = self._domain(name)
        if not isinstance(node, Mapping) or not node:
            raise self.problem(
                node.mark, "what is barred is written 'value: rule'", f"Write {name}: {{some_value: some_rule}}", name
            )
        found: list[Expectation] = []
        for key, rule in node.items():
            try:
                barred = value(Scalar(key, node.key_marks[key]), domain, self.scope(name))
                found.append(Bars(rule.mark, name, barred, "" if str(rule) in _ANY else self.rule(rule)))
            except Mistyped:
                continue
        return found

    def _demand(self, name: Scalar, node: Node) -> list[Expectation]:
        domain = self._domain(name)
        text = str(node) if isinstance(node, Scalar) else ""
        strength, _, wanted = text.partition(" ")
        if text in {"unwanted", "allowed"}:
            if not nothing(domain):
                hint = "Write a test, such as {at_least: 3}"
                raise self.problem(node.mark, f"'{text}' is for properties with a choice 'none' or 'no'", hint, name)
            return [AsksFor(node.mark, name, "unwanted" if text == "unwanted" else "allowed", None)]
        if strength not in ASKING:
            return [self._test(name, "must", node, domain)]
        how = cast(Strength, strength)
        operator, _, limit = wanted.strip().partition(" ")
        if limit or not (domain.choices or domain.places):
            whole = Mapping(node.mark)
            whole[operator] = Scalar(limit.strip(), node.mark)
            whole.key_marks[operator] = node.mark
            if not limit:
                raise self.problem(
                    node.mark, f"'{name}' is a number", f"Write a test, such as {how} at_least 130", name
                )
            return [self._test(name, how, whole, domain)]
        asked = value(Scalar(wanted.strip(), node.mark), domain, self.scope(name))
        return [AsksFor(node.mark, name, how, asked)]

    def _test(self, name: Scalar, strength: Strength, node: Node, domain: Domain) -> AsksAtLeast:
        if domain.kind in {"several", "text", "item"}:
            raise self.problem(node.mark, f"no test can be put on '{name}'", "", name)
        whole = Mapping(node.mark)
        whole[str(name)] = node
        whole.key_marks[str(name)] = name.mark
        test = condition(whole, replace(self.scope(name), names={str(name): domain}))
        return AsksAtLeast(node.mark, name, strength, test, _as_written(node))

    def _code(self, name: Scalar, node: Node) -> list[Expectation]:
        standard = self.known(name, ("din", "iso"), "standard")
        text = self.text(node)
        if text != "none":
            designer = Designer(self.knowledge)
            try:
                _ = designer.read_din(text) if standard == "din" else designer.read_iso(text)
            except NoCode as fault:
                raise self.problem(node.mark, str(fault), "", name) from None
        return [CodeServes(node.mark, "din" if standard == "din" else "iso", None if text == "none" else text)]

    def _product(self, name: Scalar, node: Node) -> list[Expectation]:
        item = self.known(name, [each.item for each in self.knowledge.shelf], "product of the shelf")
        if self.saved.only is not None and item not in self.saved.only:
            raise self.problem(name.mark, f"the shelf of this scenario leaves {item} out", "Add it to 'shelf'")
        word, by, rule = self.text(node).partition(" by ")
        verdict = Verdict(self.word(Scalar(word, node.mark), list(Verdict), "verdict"))
        if by and verdict not in _NEEDS_A_RULE:
            raise self.problem(
                node.mark, f"no rule makes a product '{word}'", "Only falls_short and unproven go with 'by'", name
            )
        return [ProductIs(node.mark, item, verdict, self.rule(Scalar(rule.strip(), node.mark)) if by else "")]

    def _interval(self, node: Node) -> list[Expectation]:
        self.row(node.mark, INTERVAL_ROW)
        if isinstance(node, Scalar) and str(node) == "none":
            return [IntervalIs(node.mark, None)]
        if not isinstance(node, Mapping):
            raise self.problem(node.mark, "an interval is expected from .. to, or none", "Write {from: 5900, to: 7200}")
        self.only_keys(node, "from", "to")
        return [IntervalIs(node.mark, self.ends(node))]

    def _fill(self, name: Scalar, node: Node) -> list[Expectation]:
        self.row(name.mark, fill_row(name))
        numbers = [self.number(each) for each in self.listed(node)]
        if len(numbers) != 2:
            raise self.problem(node.mark, "a fill has two ends, in percent", f"Write {name}: [30, 40]")
        return [FillIs(node.mark, name, numbers[0], numbers[1])]


def _as_written(node: Node) -> str:
    """A node on one line, as the scenario has it."""
    if isinstance(node, Mapping):
        return ", ".join(f"{key.replace('_', ' ')} {_as_written(each)}" for key, each in node.items())
    return " or ".join(_as_written(each) for each in node) if isinstance(node, Sequence) else str(node)
