"""What a case leaves open: alternatives, don't knows that stand for several, contested points, a range."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from advisor.advice.facts import Facts
from advisor.answers import DONT_KNOW
from advisor.case import Answer, Case, Origin
from advisor.conditions import Bound, Condition, FactRef, Value, holds, leaves
from advisor.knowledge import Declaration, Knowledge
from advisor.quantities import show

MOST_FORKS = 2
MOST_BRANCHES = 6


class TooOpen(ValueError):
    """Too much is left open at once; the message says what, and the mend."""


@dataclass(frozen=True, slots=True)
class Variant:
    """A case with everything settled that was left open but a range.

    `opened` names what was left open, `forks` the contested points among it.
    """

    case: Case
    label: str = ""
    settings: Mapping[str, Value] = field(default_factory=dict)
    opened: tuple[str, ...] = ()
    forks: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class _Open:
    """One thing left open, and the answers that settle it, each with its label; `fork` is its contested point."""

    fact: str
    title: str
    options: tuple[tuple[str, Answer], ...]
    fork: str = ""


def is_open(case: Case, facts: Facts, knowledge: Knowledge) -> bool:
    """Whether the case may have to be run more than once; `facts` are those that are asked."""
    if any(answer.left_open for answer in case.answers.values()):
        return True
    return next(_still_open(Variant(case), facts, knowledge), None) is not None


def open_ranges(case: Case, knowledge: Knowledge, *, assume_gaps: bool) -> list[str]:
    """The questions that are answered with a range and may be asked."""
    ranges = [name for name, answer in case.answers.items() if answer.span is not None]
    if not ranges:
        return []
    set_aside = Facts(case, knowledge, assume_gaps=assume_gaps).set_aside
    return [name for name in ranges if name not in set_aside]


def is_asked(case: Case, name: str, knowledge: Knowledge, *, assume_gaps: bool) -> bool:
    """Whether the answer to this question counts in the case."""
    return name not in Facts(case, knowledge, assume_gaps=assume_gaps).set_aside


def variants_of(case: Case, knowledge: Knowledge, *, assume_gaps: bool, beside: tuple[str, ...] = ()) -> list[Variant]:
    """Every way to settle what is left open; one alone where nothing is. What a variant does not ask stays out of it.

    `beside` are the titles of what is left open beside it.

    Raises:
        TooOpen: beyond two things left open, or six variants.
    """

    def still(variant: Variant) -> _Open | None:
        facts = Facts(variant.case, knowledge, assume_gaps=assume_gaps)
        return next(_still_open(variant, facts, knowledge), None)

    def settled(variant: Variant) -> Iterator[Variant]:
        found = still(variant)
        if found is None:
            yield variant
            return
        for label, answer in found.options:
            yield from settled(_with_option(variant, found, label, answer, knowledge))

    deepest = Variant(case)
    while found := still(deepest):
        deepest = _with_option(deepest, found, *found.options[0], knowledge)
    _refuse((*deepest.opened, *beside))
    variants: list[Variant] = []
    for each in settled(Variant(case)):
        _refuse((*each.opened, *beside))
        variants.append(each)
        if len(variants) > MOST_BRANCHES:
            raise TooOpen(f"That makes more than {MOST_BRANCHES} variants. Answer some of what is left open.")
    return variants


def _refuse(opened: tuple[str, ...]) -> None:
    """Refuse more than two things left open."""
    if len(opened) > MOST_FORKS:
        named = ", ".join(opened)
        raise TooOpen(f"Too much is left open at once ({named}). Leave open two things at most, one of them a range.")


def _still_open(variant: Variant, facts: Facts, knowledge: Knowledge) -> Iterator[_Open]:
    """What the case still leaves open, in the order of asking; contested points come last."""
    chosen = set(variant.settings) - {knowledge.forks[each].fact for each in variant.forks}
    for name, answer in _answered(variant, facts, knowledge):
        fact = knowledge.facts[name]
        options = answer.alternatives if name in facts.basis and facts.basis[name] == frozenset({name}) else ()
        several = fact.assume.each if fact.assume is not None and facts.facts[name].origin is Origin.ASSUMED else ()
        if name not in chosen and (options or several):
            answers = [Answer(each, answer.typed) for each in options]
            answers += [Answer(each, DONT_KNOW, assumed=True) for each in several]
            yield _Open(name, fact.title, tuple((_label(fact, each), each) for each in answers))
    for fork in knowledge.forks.values():
        answered = variant.case.answers.get(fork.fact)
        if fork.id in variant.forks or fork.fact in chosen or answered is None or answered.value is None:
            continue
        if facts.facts[fork.fact].origin is Origin.ANSWERED and holds(fork.when, facts.record):
            sides = tuple((f"{fork.title}: {label}", _taken(value, answered)) for label, value in fork.branches)
            yield _Open(fork.fact, fork.title, sides, fork.id)


def _label(fact: Declaration, answer: Answer) -> str:
    assert answer.value is not None  # noqa: S101 - options have values
    said = show(answer.value, fact.domain.unit) if isinstance(answer.value, float) else fact.domain.label(answer.value)
    return f"{fact.title}: {said}"


def _answered(variant: Variant, facts: Facts, knowledge: Knowledge) -> Iterator[tuple[str, Answer]]:
    """The answers that count, and a don't know for each question whose assumption stands in."""
    for name, declared in knowledge.facts.items():
        if declared.question is None or name in facts.set_aside:
            continue
        answer = variant.case.answers.get(name)
        if answer is not None or facts.facts[name].origin is Origin.ASSUMED:
            yield name, answer or Answer(None, DONT_KNOW)


def _taken(value: Value, answered: Answer) -> Answer:
    """The answer to a contested fact on one side; for tick lists, the answered ticks without some."""
    if isinstance(value, tuple) and isinstance(answered.value, tuple):
        value = tuple(tick for tick in answered.value if tick not in value)
    return Answer(value, answered.typed)


def _with_option(variant: Variant, still: _Open, label: str, answer: Answer, knowledge: Knowledge) -> Variant:
    assert answer.value is not None  # noqa: S101 - options have values
    return Variant(
        with_answers(variant.case, {still.fact: answer}, knowledge),
        "; ".join(filter(None, (variant.label, label))),
        {**variant.settings, still.fact: answer.value},
        (*variant.opened, still.title),
        (*variant.forks, still.fork) if still.fork else variant.forks,
    )


def with_answers(case: Case, answers: Mapping[str, Answer], knowledge: Knowledge) -> Case:
    """The case with these answers, in the order of asking where one is new."""
    merged = {**case.answers, **answers}
    if len(merged) > len(case.answers):
        merged = {name: merged[name] for name in knowledge.facts if name in merged}
    return Case(case.point_kind, case.title, merged)


def thresholds(name: str, knowledge: Knowledge, facts: Facts) -> set[float]:
    """The values of a number at which what is asked, or contested, may change."""
    conditions = [fork.when for fork in knowledge.forks.values()]
    conditions += [each.question.when for each in knowledge.facts.values() if each.question is not None]
    return limits_on(standing_for(name, knowledge), conditions, facts)


def standing_for(name: str, knowledge: Knowledge) -> frozenset[str]:
    """The fact, and the facts that take its value where their own question is not asked."""
    found = {name}
    for each in knowledge.facts.values():
        if isinstance(each.unasked, FactRef) and each.unasked.name in found:
            found.add(each.name)
    return frozenset(found)


def limits_on(names: frozenset[str], conditions: list[Condition], facts: Facts) -> set[float]:
    """The limits that these conditions put on these facts."""
    found: set[float] = set()
    for term in (term for each in conditions for term in leaves(each)):
        if isinstance(term, Bound) and term.name in names:
            limit = facts.record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
            if isinstance(limit, float):
                found.add(limit)
    return found
