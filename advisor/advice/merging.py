"""Several advices on one case put together: what all of them say, and how far their figures lie apart."""

from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace

from advisor.advice.model import Advice, Branch, CautionGiven, Course, Line, Span, Spread, State
from advisor.case import Case, Fact
from advisor.conditions import Bound, Condition, Value
from advisor.designations import CodesFound, Designer, din_serves, iso_serves
from advisor.shelf import Ranked, Verdict
from advisor.specification import Demand

KAPPA = "recommended_kappa"
"""The name under which the spread tells the recommended kappa; it is no fact."""
_DIFFERS = "it differs between the variants"


def merged(
    case: Case,
    runs: Sequence[tuple[str, Advice]],
    *,
    blend: bool,
    branches: tuple[Branch, ...] = (),
    courses: tuple[Course, ...] = (),
    span: Span | None = None,
) -> Advice:
    """One advice over all runs (each with its label): the worst state, what the classes share, the worst verdicts.

    `blend`: one code may be given that serves in every run; else codes that differ are not given.
    """
    every = [each for _, each in runs]
    referrals = _once((each for run in every for each in run.referrals), lambda each: each.to + each.rule)
    if withheld := [each for each in every if each.withheld]:
        return replace(withheld[0], case=case, referrals=referrals, cautions=_cautions(withheld))
    order = list(State)
    told, worst = min(runs, key=lambda each: order.index(each[1].state))
    return replace(
        worst,
        case=case,
        docket=tuple(_shared(rows) for rows in zip(*(each.docket for each in every), strict=True)),
        quantities=tuple(_figures(rows, every) for rows in zip(*(each.quantities for each in every), strict=True)),
        shelf=_worst_verdicts(every),
        codes=_shared_codes(every, blend=blend),
        cautions=_cautions(every),
        referrals=referrals,
        assumptions=_once((each for run in every for each in run.assumptions), str),
        keeping_open=_once((each for run in every for each in run.keeping_open), str),
        open_questions=_once((each for run in every for each in run.open_questions), lambda each: each.fact),
        conflicts=_once((each for run in every for each in run.conflicts), str),
        at_limit=tuple(each for each in worst.at_limit if all(each in run.at_limit for run in every)),
        set_aside=tuple(name for name in worst.set_aside if all(name in each.set_aside for each in every)),
        overridden={name: value for run in every for name, value in run.overridden.items()},
        branches=branches,
        told_for=told,
        runs=tuple(runs),
        spread=_spread(every),
        courses=courses,
        span=span,
    )


def _shared(rows: Sequence[Line]) -> Line:
    """A docket row over all runs: the values that all of them recommend, and the strictest that any of them asks."""
    first = rows[0]
    skipped = all(row.skipped for row in rows)
    shared = tuple(value for value in first.values if all(value in row.values for row in rows[1:]))
    differs = any((row.values, row.skipped) != (first.values, first.skipped) for row in rows[1:])
    if not any(row.values for row in rows):
        differs = differs or any(frozenset(row.demands) != frozenset(first.demands) for row in rows[1:])
    barred: dict[Value, dict[str, None]] = {}
    for value, rules in (each for row in rows for each in (row.barred or {}).items()):
        barred.setdefault(value, {}).update(dict.fromkeys(rules))
    return replace(
        first,
        values=shared,
        skipped=skipped,
        differs=differs,
        demands=strictest(demand for row in rows for demand in row.demands),
        waits=tuple(dict.fromkeys(name for row in rows for name in row.waits)),
        barred={value: tuple(rules) for value, rules in barred.items()} if first.barred is not None or barred else None,
    )


def _shape(demand: Demand) -> tuple[object, ...]:
    """A demand without the figure that a case puts in for its limit."""
    return (demand.property, demand.level, demand.rule, _sign(demand.test))


def _sign(test: Condition) -> str:
    return test.sign if isinstance(test, Bound) else ""


def strictest(demands: Iterable[Demand]) -> tuple[Demand, ...]:
    """Each demand once; of one that the same rule makes with several limits, the strictest.

    >>> from advisor.conditions import ALWAYS
    >>> asked = [Demand("upper_c", Bound("upper_c", ">=", limit), 0, ALWAYS, "r") for limit in (90.0, 95.0, 92.0)]
    >>> [each.test.limit for each in strictest(asked)]
    [95.0]
    """
    found: dict[tuple[object, ...], Demand] = {}
    for demand in demands:
        test = demand.test
        strict = isinstance(test, Bound) and test.sign in {">", ">=", "<", "<="}
        key = (*_shape(demand), demand.for_, None if strict else test, bool(demand.void))
        known = found.get(key)
        if known is None or (strict and _stricter(test, known.test)):
            found[key] = demand
    return tuple(found.values())


def _stricter(test: Condition, known: Condition) -> bool:
    if not isinstance(test, Bound) or not isinstance(known, Bound):
        return False
    if not isinstance(test.limit, float) or not isinstance(known.limit, float):
        return False
    return test.limit > known.limit if test.sign in {">", ">="} else test.limit < known.limit


def _figures(rows: Sequence[Line], every: Sequence[Advice]) -> Line:
    """A row of figures, marked where only some runs give them."""
    given = [row for row in rows if not row.skipped]
    lacking = any(
        (fact := run.facts.get(name)) is None or fact.value is None
        for run, row in zip(every, rows, strict=True)
        if not row.skipped
        for name in row.facts
    )
    waits = tuple(dict.fromkeys(name for row in rows for name in row.waits))
    differs = 0 < len(given) < len(rows) or (lacking and not waits)
    return replace(rows[0], skipped=not given, differs=differs, waits=waits)


def _cautions(every: Sequence[Advice]) -> tuple[CautionGiven, ...]:
    """Every caution once; one that is given for everything in any run is given for everything."""
    given: dict[str, list[CautionGiven]] = {}
    for each in (each for run in every for each in run.cautions):
        given.setdefault(each.caution, []).append(each)
    found = []
    for caution, same in given.items():
        rules = dict.fromkeys(rule for each in same for rule in each.rules)
        concerns = dict.fromkeys(name for each in same for name in each.concerns)
        for_all = any(not each.concerns for each in same)
        found.append(CautionGiven(caution, tuple(rules), () if for_all else tuple(concerns)))
    order = {name: place for place, name in enumerate(every[0].knowledge.cautions)}
    return tuple(sorted(found, key=lambda each: order.get(each.caution, len(order))))


def _worst_verdicts(every: Sequence[Advice]) -> tuple[Ranked, ...]:
    order = list(Verdict)
    worst: dict[str, Ranked] = {}
    for each in (each for run in every for each in run.shelf):
        known = worst.get(each.item)
        if known is None or (order.index(each.verdict), each.steps) > (order.index(known.verdict), known.steps):
            worst[each.item] = each
    return tuple(sorted(worst.values(), key=lambda each: (order.index(each.verdict), each.steps, each.item)))


def _shared_codes(every: Sequence[Advice], *, blend: bool) -> CodesFound:
    """The codes that all runs give, or (blended) the lowest that serve in each; else why there are none."""
    found = [each.codes for each in every]
    design = Designer(every[0].knowledge)
    din = _serving([each.din for each in found], lambda *codes: din_serves(*map(design.read_din, codes)), blend=blend)
    iso = _serving([each.iso for each in found], lambda *codes: iso_serves(*map(design.read_iso, codes)), blend=blend)
    din_none = next((each.din_none for each in found if each.din_none), _DIFFERS)
    iso_none = next((each.iso_none for each in found if each.iso_none), _DIFFERS)
    return CodesFound(din, iso, "" if din else din_none, "" if iso else iso_none)


def _serving(asked: Sequence[tuple[str, ...]], serves: Callable[[str, str], bool], *, blend: bool) -> tuple[str, ...]:
    """The codes of all runs where these are the same; else the lowest that serve one of those asked in every run."""
    if all(codes == asked[0] for codes in asked):
        return asked[0]
    known = dict.fromkeys(code for codes in asked for code in codes) if blend else {}
    serving = [one for one in known if all(any(serves(one, code) for code in codes) for codes in asked)]
    return tuple(one for one in serving if not any(serves(one, other) and not serves(other, one) for other in serving))


def _spread(every: Sequence[Advice]) -> dict[str, Spread]:
    """The facts that are not the same in all runs."""
    found: dict[str, Spread] = {}
    for name in dict.fromkeys(name for run in every for name in run.facts):
        spread = _apart([None if (fact := run.facts.get(name)) is None else _value(fact) for run in every])
        if spread is not None:
            found[name] = spread
    kappa = _apart([run.kappa for run in every])
    return found | ({KAPPA: kappa} if kappa is not None else {})


def _value(fact: Fact) -> Value | None:
    return fact.value


def _apart(seen: Sequence[Value | None]) -> Spread | None:
    """How far values lie apart; None where they are one, or where there is none."""
    values = list(dict.fromkeys(each for each in seen if each is not None))
    if not values or (len(values) == 1 and None not in seen):
        return None
    numbers = [each for each in values if isinstance(each, float | int)]
    if len(numbers) == len(values):
        values = [min(numbers), max(numbers)]
    return Spread(tuple(dict.fromkeys(values)), None in seen)


def _once(found: Iterable, key: Callable) -> tuple:  # type: ignore[type-arg]  # any kind of entry, told apart by its key
    return tuple({key(each): each for each in reversed(list(found))}.values())[::-1]
