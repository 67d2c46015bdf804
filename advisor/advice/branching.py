"""What was left open, run once per value: forks, alternatives and ranges; and what their branches share."""

import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise, product

from advisor.advice.model import Advice, Branch, CautionGiven, Line, Ranked, State
from advisor.case import Answer, Case
from advisor.conditions import Value, holds
from advisor.designations import CodesFound
from advisor.knowledge import Fork, Knowledge
from advisor.quantities import show
from advisor.shelf import Verdict

MOST_FORKS = 2
MOST_BRANCHES = 6
MOST_POINTS = 200
"""Values of a range that are looked at; a finer step is found by halving between them."""

Run = Callable[[Case], Advice]


class TooOpen(ValueError):
    """Too much is left open at once; the message says what, and the mend."""


@dataclass(frozen=True, slots=True)
class _Open:
    """One thing left open, and the values it can take, each with its label."""

    fact: str
    options: tuple[tuple[str, Value], ...]


def advise_over(case: Case, knowledge: Knowledge, run: Run) -> Advice:
    """The advice for a case in which something may be left open.

    Raises:
        TooOpen: beyond two forks, six branches or one range.
    """
    open_things = [*_alternatives(case, knowledge), *_forks(case, knowledge)]
    spans = [name for name, answer in case.answers.items() if answer.span is not None]
    if len(spans) > 1 or len(open_things) + len(spans) > MOST_FORKS:
        names = ", ".join(knowledge.title(name) for name in (*(each.fact for each in open_things), *spans))
        raise TooOpen(f"Too much is left open at once ({names}). Leave open two things at most, one of them a range.")
    if math.prod(len(each.options) for each in open_things) > MOST_BRANCHES:
        raise TooOpen(f"That makes more than {MOST_BRANCHES} variants. Answer some of what is left open.")
    branches: list[Branch] = []
    for chosen in product(*(each.options for each in open_things)):
        settings = {each.fact: value for each, (_, value) in zip(open_things, chosen, strict=True)}
        label = "; ".join(text for text, _ in chosen)
        branch_case = _with(case, settings)
        if spans:
            branches += _stretches(branch_case, spans[0], knowledge, run, label, settings)
        else:
            branches.append(Branch(label, settings, run(branch_case)))
    if len(branches) == 1:
        return replace(branches[0].advice, case=case, held_over=branches[0].label)
    return _merged(case, tuple(branches))


def is_open(case: Case, knowledge: Knowledge) -> bool:
    """Whether the case has to be run more than once."""
    return any(answer.span or answer.alternatives for answer in case.answers.values()) or bool(
        _alternatives(case, knowledge) or _forks(case, knowledge)
    )


def _alternatives(case: Case, knowledge: Knowledge) -> list[_Open]:
    """Answers that name several values, and don't knows whose assumption is each of several."""
    found = []
    for name, answer in case.answers.items():
        fact = knowledge.facts[name]
        options = answer.alternatives
        unknown = answer.value is None and answer.span is None and not options
        if unknown and fact.assume is not None and fact.assume.each:
            options = fact.assume.each
        if options:
            label = fact.domain.label
            found.append(_Open(name, tuple((f"{fact.title}: {label(each)}", each) for each in options)))
    return found


def _forks(case: Case, knowledge: Knowledge) -> list[_Open]:
    """The declared forks whose condition holds on the answers."""
    record = {
        name: knowledge.facts[name].domain.code(answer.value)
        for name, answer in case.answers.items()
        if answer.value is not None
    }
    return [
        _Open(fork.fact, tuple((f"{fork.title}: {label}", _taken(fork, value, case)) for label, value in fork.branches))
        for fork in knowledge.forks.values()
        if holds(fork.when, record) and fork.fact in case.answers
    ]


def _taken(fork: Fork, value: Value, case: Case) -> Value:
    """The value of the fork's fact in a branch; for tick lists, the answered ticks without some."""
    answered = case.answers[fork.fact].value
    if isinstance(value, tuple) and isinstance(answered, tuple):
        return tuple(tick for tick in answered if tick not in value)
    return value


def _with(case: Case, settings: dict[str, Value]) -> Case:
    answers = dict(case.answers)
    for name, value in settings.items():
        answers[name] = Answer(value, answers[name].typed)
    return Case(case.point_kind, case.title, answers)


def _stretches(
    case: Case, name: str, knowledge: Knowledge, run: Run, label: str, settings: dict[str, Value]
) -> list[Branch]:
    """The range in stretches over which the result stays the same, told to the fact's declared step."""
    domain, title = knowledge.facts[name].domain, knowledge.facts[name].title
    span = case.answers[name].span
    assert span is not None  # noqa: S101 - only ranges are split
    step = domain.step.size if domain.step else 1.0
    known: dict[float, Advice] = {}

    def at(value: float) -> Advice:
        if value not in known:
            known[value] = run(_with(case, {name: value}))
        return known[value]

    found = []
    for low, high in _parts(span, step, lambda value: result_of(at(value))):
        text = f"{title} {show(low, domain.unit)}" + ("" if low == high else f" to {show(high, domain.unit)}")
        other = None if low == high else at(high)
        found.append(Branch("; ".join(filter(None, (label, text))), {**settings, name: low}, at(low), other))
    return found


def _parts(span: tuple[float, float], step: float, result: Callable[[float], object]) -> list[tuple[float, float]]:
    """Neighbouring stretches of equal result, each from its first to its last value on the step's grid.

    >>> _parts((70.0, 76.0), 1.0, lambda value: value > 73)
    [(70.0, 73.0), (74.0, 76.0)]
    """
    low, high = span
    count = max(1, math.ceil((high - low) / step - 1e-9))
    looked_at = sorted({round(count * place / min(count, MOST_POINTS)) for place in range(min(count, MOST_POINTS) + 1)})

    def value(place: int) -> float:
        return high if place == count else round(low + place * step, 9)

    def changes(before: int, after: int) -> list[int]:
        """The places between two where another result begins."""
        if result(value(before)) == result(value(after)):
            return []
        if after - before == 1:
            return [after]
        middle = (before + after) // 2
        return changes(before, middle) + changes(middle, after)

    starts = [0, *(place for before, after in pairwise(looked_at) for place in changes(before, after)), count + 1]
    return [(value(first), value(following - 1)) for first, following in pairwise(starts)]


def result_of(advice: Advice) -> object:
    """What a user reads as the result: state, classes, verdicts, codes, cautions, referrals, figures given."""
    return (
        advice.state,
        advice.withheld,
        tuple((line.row, line.values) for line in advice.docket),
        frozenset((each.item, each.verdict) for each in advice.shelf),
        advice.codes,
        tuple(each.caution for each in advice.cautions),
        tuple(each.to for each in advice.referrals),
        tuple((line.row, line.skipped) for line in advice.quantities),
    )


def _merged(case: Case, branches: tuple[Branch, ...]) -> Advice:
    """One advice over all branches: the worst state, what the classes share, every product's worst verdict."""
    ends = [end for branch in branches for end in (branch.advice, branch.other_end) if end is not None]
    referrals = _once((each for end in ends for each in end.referrals), lambda each: each.to + each.rule)
    if withheld := [end for end in ends if end.withheld]:
        return replace(withheld[0], case=case, referrals=referrals, cautions=_cautions(withheld))
    order = list(State)
    worst = min(ends, key=lambda each: order.index(each.state))
    return replace(
        worst,
        case=case,
        docket=tuple(_shared(rows) for rows in zip(*(each.docket for each in ends), strict=True)),
        quantities=tuple(_figures(each, ends) for each in worst.quantities),
        shelf=_worst_verdicts(ends),
        codes=_shared_codes(ends),
        cautions=_cautions(ends),
        referrals=referrals,
        assumptions=_once((each for end in ends for each in end.assumptions), str),
        keeping_open=_once((each for end in ends for each in end.keeping_open), str),
        open_questions=_once((each for end in ends for each in end.open_questions), lambda each: each.fact),
        conflicts=_once((each for end in ends for each in end.conflicts), str),
        at_limit=_once((each for end in ends for each in end.at_limit), str),
        branches=branches,
    )


def _shared(rows: Sequence[Line]) -> Line:
    """A docket row over all branches: the values that all of them recommend."""
    first = rows[0]
    shared = tuple(value for value in first.values if all(value in row.values for row in rows[1:]))
    differs = any(row.values != first.values for row in rows[1:])
    waits = tuple(dict.fromkeys(name for row in rows for name in row.waits))
    return replace(first, values=shared, differs=differs, waits=waits)


def _figures(line: Line, ends: Sequence[Advice]) -> Line:
    """A row of figures, marked where the branches do not agree on them."""
    seen = {(end.line(line.row).skipped, *(end.facts[name].value for name in line.facts)) for end in ends}
    return replace(line, differs=len(seen) > 1)


def _cautions(ends: Sequence[Advice]) -> tuple[CautionGiven, ...]:
    """Every caution once; one that is given for everything in any branch is given for everything."""
    given: dict[str, list[CautionGiven]] = {}
    for each in (each for end in ends for each in end.cautions):
        given.setdefault(each.caution, []).append(each)
    merged = []
    for caution, found in given.items():
        rules = dict.fromkeys(rule for each in found for rule in each.rules)
        concerns = dict.fromkeys(one for each in found for one in each.concerns)
        for_all = any(not each.concerns for each in found)
        merged.append(CautionGiven(caution, tuple(rules), () if for_all else tuple(concerns)))
    return tuple(merged)


def _worst_verdicts(ends: Sequence[Advice]) -> tuple[Ranked, ...]:
    order = list(Verdict)
    worst: dict[str, Ranked] = {}
    for end in ends:
        for each in end.shelf:
            known = worst.get(each.item)
            if known is None or (order.index(each.verdict), each.steps) > (order.index(known.verdict), known.steps):
                worst[each.item] = each
    return tuple(sorted(worst.values(), key=lambda each: (order.index(each.verdict), each.steps, each.item)))


def _shared_codes(ends: Sequence[Advice]) -> CodesFound:
    first = ends[0].codes
    if all(end.codes == first for end in ends):
        return first
    return CodesFound(din_none="it differs between the variants", iso_none="it differs between the variants")


def _once(found: Iterable, key: Callable) -> tuple:  # type: ignore[type-arg]  # any kind of entry, told apart by its key
    return tuple({key(each): each for each in reversed(list(found))}.values())[::-1]
