"""What one rule demands of everything that is recommended, read from a scenario and compared with an advice."""

from advisor.advice import Advice
from advisor.conditions import Domain
from advisor.documents import Mapping, Node, Scalar, Sequence
from advisor.explanation.falling import falling
from advisor.explanation.words import LEVELS, say_test
from advisor.explanation.written_demands import Told
from advisor.knowledge import Knowledge, Mistyped, condition
from advisor.replay import reasons
from advisor.replay.checking import Checker
from advisor.replay.differing import Difference
from advisor.replay.expectations import DemandedBy

_LEVELS = {"1": 1, "2": 2, "3": 3, "4": 4}
_HINT = 'Write it as the rule does: [{should: {nlgi: {any_of: ["1"]}}, level: 2}], or none'


def read_demanded(name: Scalar, node: Node, checker: Checker) -> DemandedBy:
    """The demands of a rule, written as rules write them; `none` where it demands nothing."""
    rule = checker.known(name, checker.knowledge.rules, "rule")
    if isinstance(node, Scalar) and str(node) == "none":
        return DemandedBy(node.mark, rule, frozenset())
    if not isinstance(node, Sequence) or not node:
        raise checker.problem(node.mark, "the demands of a rule are a list", _HINT, name)
    return DemandedBy(node.mark, rule, frozenset(_demand(each, name, checker) for each in node))


def _demand(node: Node, name: Scalar, checker: Checker) -> Told:
    if not isinstance(node, Mapping) or len({"must", "should"} & set(node)) != 1:
        raise checker.problem(node.mark, "a demand is a must or a should", _HINT, name)
    checker.only_keys(node, "must", "should", "level")
    strength = "must" if "must" in node else "should"
    level = 0
    if strength == "should":
        if "level" not in node:
            raise checker.problem(node.mark, "the level of a should is missing", _HINT, name)
        level = _LEVELS[checker.word(node["level"], _LEVELS, "level")]
    test = node[strength]
    if not isinstance(test, Mapping) or len(test) != 1:
        raise checker.problem(test.mark, "a demand names one property", _HINT, name)
    scope = checker.scope(name)
    for about, mark in test.key_marks.items():
        checker.known(Scalar(about, mark), checker.knowledge.properties, "property")
    names: dict[str, Domain] = {about: checker.knowledge.properties[about].domain for about in test}
    scope = type(scope)(scope.problems, names, trail=scope.trail, what="property")
    try:
        return next(iter(test)), condition(test, scope), level
    except TypeError:
        raise Mistyped from None


def demanded(expected: DemandedBy, advice: Advice) -> Difference | None:
    """Whether the rule demands exactly this of everything that is recommended."""
    found = told_by(expected.rule, advice)
    if found == expected.demands:
        return None
    return Difference(
        "demanded_by",
        expected.rule,
        _words(expected.demands, advice.knowledge),
        "withheld" if advice.withheld else _words(found, advice.knowledge),
        reasons.of_rule(advice, expected.rule),
        expected.mark,
    )


def told_by(rule: str, advice: Advice) -> frozenset[Told]:
    """The demands of a written rule that fall on every combination of what is recommended."""
    names = {each.property for each in advice.specification.demands if reasons.named((each.rule,), rule)}
    found: set[Told] = set()
    for name in names if not advice.withheld else ():
        kept = [
            {(each.property, each.test, each.level) for each in demands if reasons.named((each.rule,), rule)}
            for demands in falling(advice, name)
        ]
        found |= set.intersection(*kept)
    return frozenset(found)


def _words(demands: frozenset[Told], knowledge: Knowledge) -> str:
    return "; ".join(sorted(f"{LEVELS[level]}: {say_test(test, knowledge)}" for _, test, level in demands)) or "nothing"
