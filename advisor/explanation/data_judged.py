"""Judged catalogues as plain data, made column by column: what many items miss alike is made once."""

from collections.abc import Callable
from typing import Any

from advisor.advice import Advice
from advisor.conditions import Coded, Domain
from advisor.explanation.changing_over import change_overs
from advisor.explanation.clearances import Clearance, least_clearances, limits_in
from advisor.explanation.data_terms import number
from advisor.explanation.seeing import recommended_oils
from advisor.shelf import Judgement, Verdict, places, shortness
from advisor.specification import Demand

Data = dict[str, Any]


def shelf_data(advice: Advice) -> list[Data]:
    """Every product, best first, with its verdict, its steps short, and every demand that it misses."""
    judgement = advice.judgement
    if judgement is None:
        return []
    misses = _misses(judgement)
    alive = [each.place for each in advice.shelf if each.verdict is not Verdict.FALLS_SHORT]
    closest = least_clearances(judgement, alive)
    needed = change_overs(advice)
    found = []
    for each in advice.shelf:
        data: Data = {"item": each.item, "verdict": each.verdict.value, "steps": list(each.steps)}
        if each.place in closest:
            data["closest"] = _closest(closest[each.place])
        if each.item in needed:
            data["change_over"] = needed[each.item]
        found.append(data | {"misses": misses[each.place]})
    return found


def _misses(judgement: Judgement) -> list[list[Data]]:
    """For each item its misses; `demand` is the number of the demand in the specification."""
    found: list[list[Data]] = [[] for _ in judgement.catalogue.items]
    order = sorted(range(len(judgement.demands)), key=lambda each: judgement.demands[each].level)
    for place in order:
        demand = judgement.demands[place]
        silent = {"demand": place, "seen": None} | ({"steps": 1} if demand.level else {})
        for item in places(judgement.missing[place]):
            found[item].append(silent)
        _add_failing(judgement, place, demand, found)
    return found


def _add_failing(judgement: Judgement, place: int, demand: Demand, found: list[list[Data]]) -> None:
    failing = judgement.failing[place]
    if not failing:
        return
    values, domain = judgement.columns[demand.property].values, judgement.domains[demand.property]
    limits = limits_in(demand.test) if domain.kind == "number" else []
    short_of = shortness(demand.test, domain)
    known: dict[Coded | None, Data] = {}
    for item in places(failing):
        seen = values[item]
        if seen not in known:
            known[seen] = _miss(place, seen, domain, limits, short_of if demand.level else None)
        found[item].append(known[seen])


def _miss(
    place: int, seen: Coded | None, domain: Domain, limits: list[float], short_of: Callable[[Coded], int] | None
) -> Data:
    if seen is None:
        return {"demand": place, "seen": None}
    data: Data = {"demand": place, "seen": _plain(domain, seen)}
    if len(limits) == 1:
        data["margin"] = abs(seen - limits[0])  # type: ignore[operator]  # limits stand on numbers only
    elif limits:
        data["margin"] = min(abs(seen - limit) for limit in limits)  # type: ignore[operator]  # the same
    if short_of is not None:
        data["steps"] = short_of(seen)
    return data


def _plain(domain: Domain, coded: Coded) -> Any:
    if domain.kind == "number":
        return coded
    meant = domain.decode(coded)
    return list(meant) if isinstance(meant, tuple) else number(meant)


def _closest(clear: Clearance) -> Data:
    """The must that a product meets with least to spare."""
    return {"demand": clear.demand, "seen": number(clear.seen), "margin": number(clear.margin)}


def oils_data(advice: Advice) -> list[Data]:
    """The usual oils: ranked ones first, the recommended marked; then barred ones with the rules that bar them."""
    judgement = advice.oils
    if judgement is None:
        return []
    chosen = {judgement.catalogue.items[place].code for place in recommended_oils(advice)}
    ranked = sorted(advice.oil_ranks.items(), key=lambda each: (each[1], judgement.catalogue.place[each[0]]))
    found: list[Data] = [
        {"oil": code, "steps": list(steps)} | ({"recommended": True} if code in chosen else {})
        for code, steps in ranked
    ]
    barring: dict[int, list[str]] = {}
    for demand, failing in zip(judgement.demands, judgement.failing, strict=True):
        for place in places(failing) if demand.must else ():
            barring.setdefault(place, []).append(demand.rule)
    for place, item in enumerate(judgement.catalogue.items):
        if place in barring:
            found.append({"oil": item.code, "barred": list(dict.fromkeys(barring[place]))})
        elif item.code not in advice.oil_ranks:
            found.append({"oil": item.code, "special": True})
    return found
