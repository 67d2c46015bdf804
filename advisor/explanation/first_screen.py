"""What a reader sees first: the state with its reasons, what weakens the advice, and the reasons that decide."""

from collections.abc import Iterator

from advisor.advice import Advice, State
from advisor.conditions import Value
from advisor.explanation.blocks import GLYPHS, Block, Node, Para, Section, Tree, leaf
from advisor.explanation.changes import Changes, Near
from advisor.explanation.clearances import least_clearances
from advisor.explanation.reasons import Reason, Why
from advisor.explanation.ruling import Rules
from advisor.explanation.seeing import rules_seen, run_assuming
from advisor.explanation.words import listed, say_fact, say_margin, say_test, say_value, title_of

MOST_REASONS = 5
_SHOWN_NEAR = 3
_MEANING = {
    State.SETTLED: "nothing decisive is missing, and no demands clash",
    State.OPEN: "answers that matter are missing",
    State.CONFLICT: "demands that cannot be had together",
    State.REFERRED: "a specialist must decide",
}


def state_section(advice: Advice, rules: Rules) -> Section:
    """The state with all its reasons, worst first."""
    state = advice.state
    blocks: list[Block] = [Para(f"{GLYPHS[state.value]} {state.value}: {_MEANING[state]}.", strong=True)]
    nodes = [*_referrals(advice, rules), *_conflicts(advice, rules), *_open(advice)]
    if nodes:
        blocks.append(Tree(tuple(nodes)))
    if advice.withheld:
        blocks.append(Para("Nothing is recommended here, and no product or grade is named.", strong=True))
    elif not advice.fits:
        blocks.append(Para("No product on the shelf fits; what each one lacks stands below.", strong=True))
    return Section("state", "State", tuple(blocks))


def _referrals(advice: Advice, rules: Rules) -> Iterator[Node]:
    for each in advice.referrals:
        referral = advice.knowledge.referrals[each.to]
        rule = rules.reason(each.rule)
        yield Node(f"Refer to {referral.to}: {rule.because} ({rule.id})", leaf(referral.text, *_saw(rule.saw)))


def _saw(saw: tuple[str, ...]) -> list[str]:
    return [f"seen: {'; '.join(saw)}"] if saw else []


def _conflicts(advice: Advice, rules: Rules) -> Iterator[Node]:
    for each in advice.conflicts:
        about = each.about if each.about == "usual oils" else title_of(each.about, advice.knowledge)
        lines = [f"{rule.title} ({rule.id}): {rule.because}" for rule in map(rules.reason, each.rules)]
        head = (
            f"Conflict about {about}: these {len(lines)} rules together leave nothing. "
            "One of them must give, and a person decides which."
        )
        yield Node(head, leaf(*lines))


def _open(advice: Advice) -> Iterator[Node]:
    deciding = [each for each in advice.open_questions if each.decides == "lubricant"]
    if deciding:
        titles = [title_of(each.fact, advice.knowledge) for each in deciding]
        yield Node(f"Waiting for: {listed(titles, 'and')}.")
    for name in advice.keeping_open:
        yield Node(
            f"{title_of(name, advice.knowledge)} was assumed, and that keeps the case open: "
            f"{run_assuming(advice, name).facts[name].note}"
        )


def caution_section(advice: Advice, changes: Changes) -> Section:
    """Everything that weakens the advice: assumed, guessed, unsourced, exactly at a limit, or close to one."""
    nodes = [
        Node(f"Assumed: {each.title} is {each.value}. {each.because}", leaf(*_reach(each.rows)))
        for each in changes.assumed
    ]
    nodes += [Node(_overridden(advice, name, value)) for name, value in advice.overridden.items()]
    estimates = [title_of(fact.name, advice.knowledge) for fact in advice.facts.values() if fact.note == "an estimate"]
    if estimates:
        nodes.append(Node(f"Estimated, not measured: {listed(estimates, 'and')}."))
    nodes += [Node(f"Exactly at its limit: {each}.") for each in changes.at_limit]
    nodes += [
        Node(f"Close: {each.title} is {each.value}, {say_apart(each)} {_rules(each.rules)} ({each.limit}).")
        for each in [near for near in changes.near if near.fact not in advice.spread][:_SHOWN_NEAR]
    ]
    nodes += _best_clearance(advice)
    nodes.append(Node(_how_sourced(advice)))
    return Section("weak", "Before you trust this", (Tree(tuple(nodes)),))


def _overridden(advice: Advice, name: str, value: Value) -> str:
    """An own answer that goes before what a table says: one of the two may be a slip."""
    declaration = advice.knowledge.facts[name]
    own = say_fact(advice.facts[name], advice.knowledge)
    table = say_value(declaration.domain, declaration.domain.code(value))
    return f"Your own {declaration.title}, {own}, goes before the {table} of the designation: is one of them a slip?"


def _reach(rows: tuple[str, ...]) -> list[str]:
    return [f"another answer might change: {', '.join(rows)}"] if rows else []


def _rules(rules: tuple[str, ...]) -> str:
    more = len(rules) - 1
    return f"{rules[0]} and {more} more turn" if more else f"{rules[0]} turns"


def say_apart(near: Near) -> str:
    """How far the limit is."""
    return "exactly where" if near.exact else f"{near.margin} from where"


def _best_clearance(advice: Advice) -> Iterator[Node]:
    """The smallest margin of the best product."""
    judgement = advice.judgement
    if judgement is None or not advice.fits:
        return
    best = advice.shelf[0]
    clear = least_clearances(judgement, [best.place]).get(best.place)
    if clear is not None:
        demand = judgement.demands[clear.demand]
        domain = judgement.domains[demand.property]
        said, seen = say_test(demand.test, advice.knowledge), say_value(domain, clear.seen)
        spare = say_margin(clear.margin, domain)
        told = f"; told for {advice.told_for}" if advice.told_for else ""
        yield Node(f"Smallest margin of {best.item}: {said}, it has {seen}, {spare} to spare ({clear.rule}{told}).")


def _how_sourced(advice: Advice) -> str:
    seen = (each for run in advice.single for each in rules_seen(run))
    fired = {each.rule.id: each.rule for _, each, outcome in seen if outcome is True and each.binds}
    weak = [name for name, rule in fired.items() if not any(cited.checked == "yes" for cited in rule.source)]
    if not weak:
        return f"Each of the {len(fired)} rules that fired cites a text that was read."
    rest = "rest on common practice or memory; no text that states them was read."
    return f"{len(weak)} of the {len(fired)} rules that fired {rest}"


def decisive_section(whys: list[Why]) -> Section:
    """At most five reasons, those that decide first, one for each rule: with data, rule, source and what limits it."""
    chosen: dict[str, tuple[tuple[bool, int, int], str, Reason]] = {}
    for row, each in enumerate(whys):
        for turn, reason in enumerate(each.reasons):
            weighed = bool(reason.against)
            rank = (not (reason.decides and weighed), turn if weighed else len(whys), row)
            head = f"{each.title}: {each.conclusion}" if weighed else reason.demand
            known = chosen.get(reason.rule.rule)
            if known is None or rank < known[0]:
                chosen[reason.rule.rule] = (rank, head, reason)
    ordered = sorted(chosen.values(), key=lambda each: each[0])
    nodes = tuple(_decisive(head, reason) for _, head, reason in ordered[:MOST_REASONS])
    more = sum(reason.decides for _, _, reason in ordered[MOST_REASONS:])
    rest = (Para(f"{more} more rules that decide stand under Why."),) if more else ()
    return Section(
        "decisive", "What decides", (Tree(nodes, numbered=True), *rest) if nodes else (Para("Nothing yet."),)
    )


def _decisive(head: str, reason: Reason) -> Node:
    rule = reason.rule
    under = [reason.demand, *_saw(rule.saw), f"source: {'; '.join(rule.sources)}"]
    if reason.against:
        under.insert(1, f"against: {'; '.join(reason.against)}")
    if rule.limits:
        under.append(f"but: {rule.limits}")
    return Node(f"{head}. {rule.because} ({rule.id})", leaf(*under))
