"""The explanation in full: why, why not, how computed, what did not fire, what would change it, and the sources."""

from collections.abc import Iterable, Iterator
from itertools import groupby

from advisor.advice import Advice
from advisor.conditions import Bound, FactRef, Record, Valueless, failures
from advisor.conditions.terms import Term
from advisor.explanation.blocks import Grid, Node, Para, Section, Tree, leaf
from advisor.explanation.changes import Changes
from advisor.explanation.contrasts import WhyNot, of_class
from advisor.explanation.findings import miss_lines, working_lines
from advisor.explanation.first_screen import say_apart
from advisor.explanation.reasons import Reason, Why
from advisor.explanation.ruling import Rules, verdict_of
from advisor.explanation.seeing import hides, record_at, rules_seen
from advisor.explanation.words import OPERATORS, domain_of, say_value, say_wanted, title_of
from advisor.explanation.workings import HIDDEN, Premise, how_computed
from advisor.knowledge import Citation, Instance


def why_section(whys: list[Why]) -> Section:
    """Every row: the conclusion, its demands by rule, and the facts behind them; each fact is unfolded once."""
    told: set[str] = set()
    nodes = []
    for each in whys:
        groups: dict[str, list[Reason]] = {}
        for reason in each.reasons:
            groups.setdefault(reason.rule.rule, []).append(reason)
        under = [_by_rule(group, told) for group in groups.values()]
        under += [node for premise in each.premises for node in _premise(premise, told)]
        under += leaf(*(f"recommended, though {each}" for each in each.short), *each.notes)
        if each.waits:
            under.append(Node(f"waits for: {', '.join(each.waits)}"))
        nodes.append(Node(f"{each.title}: {each.conclusion}", tuple(under)))
    return Section("why", "Why", (Tree(tuple(nodes)),))


def _by_rule(reasons: list[Reason], told: set[str]) -> Node:
    """The demands of one written rule together."""
    rule = reasons[0].rule
    decides = (
        " It decides: without it another class would be recommended." if any(each.decides for each in reasons) else ""
    )
    because = list(dict.fromkeys(each.rule.because for each in reasons))
    under: list[Node] = []
    for each in reasons:
        reason = f". {each.rule.because}" if len(because) > 1 else ""
        under.append(Node(f"{each.demand}{_say_against(each)}{reason}"))
    if len(because) == 1:
        under.append(Node(f"because {because[0]}"))
    premises = {premise.fact: premise for each in reasons for premise in each.rule.premises}
    under += [node for premise in premises.values() for node in _premise(premise, told)]
    if rule.limits:
        under.append(Node(f"but: {rule.limits}"))
    under.append(Node(f"source: {'; '.join(rule.sources)}"))
    return Node(f"{rule.title} ({rule.rule}).{decides}", tuple(under))


def _say_against(reason: Reason) -> str:
    """The classes that the demand rules out or sets back, unless the demand itself names them."""
    if not reason.against or all(each in reason.demand for each in reason.against):
        return ""
    return f"; against: {'; '.join(reason.against)}"


def _premise(premise: Premise, told: set[str]) -> Iterator[Node]:
    """A fact with its origin; what stands behind it is told the first time only."""
    origin = premise.origin.value + (f" by {', '.join(premise.rules)}" if premise.rules else "")
    note = f"; {premise.note}" if premise.note else ""
    again = premise.fact in told and bool(premise.premises)
    told.add(premise.fact)
    if premise.working is not None and not again:
        origin += f": {premise.working.substituted}"
    under = () if again else tuple(node for each in premise.premises for node in _premise(each, told))
    yield Node(f"{premise.title} = {premise.value} ({origin}{note}{'; see above' if again else ''})", under)


def why_not_sections(advice: Advice, verdicts: list[WhyNot], rules: Rules) -> list[Section]:
    """Every class that is barred, then every product, with all that it misses."""
    nodes = []
    for line in advice.docket:
        row = next(each for each in advice.knowledge.docket if each.id == line.row)
        if not line.barred or not row.recommends:
            continue
        domain = advice.knowledge.properties[row.recommends].domain
        barred = [of_class(advice, line, domain.code(value), rules) for value in line.barred]
        nodes.append(Node(line.title, tuple(_barred(each) for each in barred)))
    classes = Section(
        "why_not_classes", "Why not: classes that are barred", (Tree(tuple(nodes)),) if nodes else (Para("None is."),)
    )
    missing = tuple(Node(f"{each.subject} {each.title}: {each.verdict}", leaf(*_missing(each))) for each in verdicts)
    more = len(advice.shelf) - len(verdicts)
    rest = (
        (Para(f"{more} more products fall short; gudgeon advise --json lists what each one misses."),) if more else ()
    )
    products = (Tree(missing), *rest) if missing else (Para("No product was judged."),)
    return [classes, Section("why_not_products", "Why not: products", products)]


def _barred(verdict: WhyNot) -> Node:
    musts = tuple(each for each in verdict.misses if each.level == 0)
    because = dict.fromkeys(each.rule.because for each in musts if each.rule.id != each.rule.rule)
    return Node(f"{verdict.title}: {verdict.verdict}", leaf(*miss_lines(musts), *because))


def _missing(verdict: WhyNot) -> list[str]:
    return miss_lines(verdict.misses) or ["misses nothing"]


def computed_section(advice: Advice) -> Section:
    """Every computed fact: equation, numbers put in, result, source, warnings."""
    nodes = []
    unprinted = {name for line in advice.quantities if line.skipped for name in line.facts}
    for step in advice.trace:
        for name in step.computed:
            if hides(advice, name) or name in unprinted:
                continue
            working = how_computed(advice, name)
            nodes.append(Node(f"{working.title} = {working.result}", leaf(*working_lines(working))))
    return Section("computed", "How computed", (Tree(tuple(nodes)),) if nodes else (Para("Nothing was computed."),))


def not_fired_section(advice: Advice) -> Section:
    """The rules that did not fire, by written rule, with what they saw against what they wanted."""
    nodes = []
    for step in advice.knowledge.steps:
        under = []
        seen = [
            (instance, outcome)
            for name, instance, outcome in rules_seen(advice)
            if name == step.id and outcome is not True
        ]
        for _, group in groupby(seen, lambda each: each[0].rule.id):
            under.append(_not_fired(advice, step.id, list(group)))
        if under:
            nodes.append(Node(step.title, tuple(under)))
    return Section("not_fired", "Rules that did not fire", (Tree(tuple(nodes)),) if nodes else (Para("All fired."),))


def _not_fired(advice: Advice, step: str, seen: list[tuple[Instance, bool | None]]) -> Node:
    rule = seen[0][0].rule
    failed = [instance for instance, outcome in seen if outcome is False]
    undecided = [verdict_of(advice, step, instance, outcome) for instance, outcome in seen if outcome is None]
    said = list(_grouped(advice, step, failed))
    said += [f"undecided, waits for {', '.join(waits)}" for waits in dict.fromkeys(each.waits for each in undecided)]
    draft = "" if rule.status == "agreed" else ", a draft that binds nothing"
    return Node(f"{rule.title} ({rule.id}{draft}): {'; '.join(said)}")


def _grouped(advice: Advice, step: str, failed: list[Instance]) -> Iterator[str]:
    """What failed, said once for all rows of a table: `saw 120 °C, needs above 130 °C (a, b) or 140 °C (c)`."""
    record = record_at(advice, step)
    found: dict[str, dict[str, list[str]]] = {}
    for instance in failed:
        for term in dict.fromkeys(each for each in failures(instance.when, record) if not isinstance(each, Valueless)):
            head, wanted = _failed(advice, term, record)
            row = instance.row.id if instance.row is not None and isinstance(term, Bound) else ""
            found.setdefault(head, {}).setdefault(wanted, []).append(row)
    for head, limits in found.items():
        said = [f"{wanted}{_say_rows(rows)}" for wanted, rows in limits.items()]
        yield f"{head} {'; '.join(said) if any(',' in each for each in said) else ', '.join(said)}".strip()


def _say_rows(rows: list[str]) -> str:
    named = list(dict.fromkeys(row for row in rows if row))
    return f" ({', '.join(named)})" if named else ""


def _failed(advice: Advice, term: Term, record: Record) -> tuple[str, str]:
    """What was seen, and what was wanted; the sign stands with what was seen, so that limits can follow one another."""
    knowledge, title = advice.knowledge, title_of(term.name, advice.knowledge)
    if hides(advice, term.name):
        return f"{title}: {HIDDEN}", ""
    domain = domain_of(term.name, knowledge)
    head = f"{title} is {say_value(domain, record.get(term.name))}, needs"
    if isinstance(term, Bound) and not isinstance(term.limit, FactRef) and term.sign not in {"=", "!="}:
        return f"{head} {OPERATORS[term.sign]}", say_value(domain, term.limit)
    return head, say_wanted(term, knowledge, record)


def changes_section(changes: Changes) -> Section:
    """What would change the advice."""
    nodes = [
        Node(
            f"Open: {each.title}, which decides the {each.decides}. {each.ask}",
            leaf(*(f"waits for it: {name}" for name in each.waiting)),
        )
        for each in changes.open
    ]
    for assumed in changes.assumed:
        rows = f"another answer might change: {', '.join(assumed.rows)}" if assumed.rows else "no row depends on it now"
        nodes.append(
            Node(
                f"Assumed: {assumed.title} = {assumed.value}. {assumed.because}",
                leaf(rows, f"source: {'; '.join(assumed.sources)}"),
            )
        )
    nodes += [Node(f"Exactly at its limit: {each}") for each in changes.at_limit]
    for near in changes.near:
        turning = f"these rules turn ({near.limit}): {', '.join(near.rules)}"
        nodes.append(Node(f"{near.title} is {near.value}, {say_apart(near)} {turning}"))
    nodes += [Node(f"Answered, but not asked here and set aside: {each}") for each in changes.set_aside]
    return Section(
        "changes", "What would change it", (Tree(tuple(nodes)),) if nodes else (Para("Nothing that is known."),)
    )


def sources_section(advice: Advice) -> Section:
    """The sources of the rules that fired, and how surely each was read."""
    cited: dict[str, set[str]] = {}
    for _, instance, outcome in (each for run in advice.single for each in rules_seen(run)):
        if outcome is True:
            for each in _cited(instance):
                cited.setdefault(each.id, set()).add(each.checked)
    rows = []
    for name, source in advice.knowledge.sources.items():
        if name in cited:
            title = ", ".join(each for each in (source.title, source.publisher, source.year) if each)
            rows.append((title, source.kind, source.checked))
    return Section("sources", "Sources", (Grid(("Source", "Kind", "Checked"), tuple(rows)),))


def _cited(instance: Instance) -> Iterable[Citation]:
    return (*instance.rule.source, *(instance.row.source if instance.row is not None else ()))
