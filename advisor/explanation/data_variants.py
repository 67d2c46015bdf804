"""What was left open, as plain data: the variants, where along a range what changes, and figures lowest to highest."""

from typing import Any

from advisor.advice import KAPPA, Advice, Branch, Course, Line, Reading, Spread
from advisor.explanation.changing_over import change_overs
from advisor.explanation.data_judged import shelf_data
from advisor.explanation.data_terms import demand_data, number

Data = dict[str, Any]


def variants_data(advice: Advice) -> Data:
    """The variants, and of a range how closely it was looked at and where along it what changes."""
    data: Data = {"branches": [_branch(each) for each in advice.branches]}
    if advice.held_over:
        data["held_over"] = advice.held_over
    if advice.told_for:
        data["told_for"] = advice.told_for
    span = advice.span
    if span is not None:
        data["range"] = {
            "fact": span.fact,
            "from": number(span.low),
            "to": number(span.high),
            "looked_at": span.looked_at,
            "values": span.values,
            "surely": span.surely,
            "along": [_course(each) for each in advice.courses],
        }
    if KAPPA in advice.spread:
        data[KAPPA] = spread_data(advice.spread[KAPPA])
    return data


def _branch(branch: Branch) -> Data:
    """A variant in short: what it sets, its state, its classes, its codes, its figures and verdicts."""
    own = branch.advice
    data: Data = {"label": branch.label, "settings": {name: _plain(value) for name, value in branch.settings.items()}}
    if branch.stretch is not None:
        data |= {"from": number(branch.stretch[0]), "to": number(branch.stretch[1])}
    if branch.contested:
        data["contested"] = list(branch.contested)
    data["state"] = own.state.value
    if own.withheld:
        return data | {"withheld": True}
    return data | {
        "recommended": {line.row: [_plain(each) for each in line.values] for line in own.docket if line.values},
        "designations": {"din": list(own.codes.din), "iso": list(own.codes.iso)},
        "renewal": {line.row: figures_data(own, line.facts) for line in own.quantities if not line.skipped},
        "cautions": [each.caution for each in own.cautions],
        "shelf": {each.item: each.verdict.value for each in own.shelf},
    }


def _course(course: Course) -> Data:
    data: Data = {"what": course.what}
    data |= {"name": course.name} if course.name else {}
    data |= {"variant": course.variant} if course.variant else {}
    parts = [
        {"from": number(each.low), "to": number(each.high), "reads": _reading(each.reading)} for each in course.parts
    ]
    return data | {"parts": parts}


def _reading(reading: Reading) -> Any:
    return [number(each) for each in reading] if isinstance(reading, tuple) else reading


def strictest_data(advice: Advice, line: Line) -> list[Data]:
    """The demands of a row that other runs make stricter than the one whose specification is told."""
    if not advice.runs:
        return []
    told = set(advice.specification.class_demands)
    domains = {name: each.domain for name, each in advice.knowledge.properties.items()}
    found = [demand_data(0, demand, domains) for demand in line.demands if demand not in told]
    return [{key: value for key, value in each.items() if key != "number"} for each in found]


def figures_data(advice: Advice, names: tuple[str, ...]) -> Data:
    """Some facts: their value, or how far it lies apart."""
    return {
        name: spread_data(advice.spread[name]) if name in advice.spread else _plain(advice.facts[name].value)
        for name in names
        if name in advice.facts
    }


def spread_data(spread: Spread) -> Data:
    """A number from .. to, anything else one by one; `lacking` where it has no value somewhere."""
    if all(isinstance(each, float | int) for each in spread.values):
        data: Data = {"from": number(spread.values[0]), "to": number(spread.values[-1])}
    else:
        data = {"any_of": [_plain(each) for each in spread.values]}
    return data | ({"lacking": True} if spread.lacking else {})


def _plain(value: Any) -> Any:
    return list(value) if isinstance(value, tuple) else None if value is None else number(value)


def shelf_over_runs(advice: Advice) -> list[Data]:
    """Every product by its worst verdict, with what it misses in the run that gave it, and which run that is."""
    found: list[Data] = []
    told: dict[int, dict[str, Data]] = {}
    needed = change_overs(advice)
    for each in advice.shelf:
        place = next(count for count, (_, run) in enumerate(advice.runs) if each in run.shelf)
        label, run = advice.runs[place]
        if place not in told:
            told[place] = {product["item"]: product for product in shelf_data(run)}
        product = told[place][each.item]
        found.append(product | {"told_for": label, "misses": [_miss(run, miss) for miss in product["misses"]]})
        if "closest" in product:
            found[-1]["closest"] = _miss(run, product["closest"])
        if each.item in needed:
            found[-1]["change_over"] = needed[each.item]
    return found


def _miss(run: Advice, miss: Data) -> Data:
    """A miss with the rule and the property instead of the number of the demand, which counts in that run only."""
    assert run.judgement is not None  # noqa: S101 - products were judged
    demand = run.judgement.demands[miss["demand"]]
    rest = {name: value for name, value in miss.items() if name != "demand"}
    return {"rule": demand.rule, "property": demand.property, "level": demand.level} | rest
