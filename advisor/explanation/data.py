"""The whole advice as plain data and as JSON: values and codes, not prose; the same bytes for the same advice."""

import json
import re
from collections.abc import Mapping
from typing import Any

from pydantic_core import PydanticSerializationError, to_json

from advisor import __version__
from advisor.advice import FORMAT, Advice
from advisor.advice.model import CautionGiven, Line
from advisor.conditions import Domain, Value
from advisor.explanation.data_judged import oils_data, shelf_data
from advisor.explanation.data_terms import condition_data, demand_data
from advisor.explanation.data_trace import trace_data
from advisor.explanation.data_variants import (
    figures_data,
    shelf_over_runs,
    spread_data,
    strictest_data,
    variants_data,
)
from advisor.explanation.seeing import hides, run_assuming

_UNSAFE = re.compile("[\x7f-\x9f\u200b-\u200f\u2028-\u202e\u2066-\u2069\ufeff\ud800-\udfff]")
Data = dict[str, Any]


def as_json(advice: Advice) -> str:
    """The advice as JSON on one line; characters that steer a terminal are escaped."""
    data = as_data(advice)
    try:
        text = to_json(data, inf_nan_mode="null").decode()
    except PydanticSerializationError:  # a lone surrogate in what was typed: UTF-8 cannot hold it
        text = json.dumps(data, ensure_ascii=False, separators=(",", ":"))
    if not text.isprintable():  # tells sooner than the search
        text = _UNSAFE.sub(lambda found: f"\\u{ord(found.group()):04x}", text)
    return text + "\n"


def as_data(advice: Advice) -> Data:
    """The advice as plain data; what is withheld is not in it."""
    data = {
        "format": FORMAT,
        "program": {"name": "gudgeon", "version": __version__},
        "knowledge": {"fingerprint": advice.knowledge.fingerprint},
        "case": _case(advice),
        "state": advice.state.value,
        "withheld": advice.withheld,
        "facts": _facts(advice),
    }
    if not advice.withheld:
        data |= _result(advice)
    return data | {
        "cautions": [_caution(advice, each) for each in advice.cautions],
        "standing_cautions": [name for name, each in advice.knowledge.cautions.items() if each.standing],
        "referrals": [
            {
                "to": each.to,
                "person": advice.knowledge.referrals[each.to].to,
                "rule": each.rule,
                "withhold": each.withhold,
            }
            for each in advice.referrals
        ],
        "assumptions": [_assumption(advice, name) for name in advice.assumptions],
        "open_questions": [
            {"fact": each.fact, "decides": each.decides, "waiting": list(each.waiting), "dont_know": each.dont_know}
            for each in advice.open_questions
        ],
        "conflicts": [{"about": each.about, "rules": list(each.rules)} for each in advice.conflicts],
        "at_limit": [{each.what: each.name, "rule": each.rule} for each in advice.at_limit],
        "set_aside": list(advice.set_aside),
        **variants_data(advice),
        "trace": trace_data(advice),
    }


def _result(advice: Advice) -> Data:
    """What is recommended: specification, docket, oils, quantities, shelf."""
    numbers = {demand: number for number, demand in enumerate(advice.specification.class_demands)}
    return {
        "specification": _specification(advice),
        "docket": [_line(advice, each, numbers) for each in advice.docket],
        "usual_oils": oils_data(advice),
        "renewal": {line.row: _quantity(advice, line) for line in advice.quantities},
        "shelf": shelf_over_runs(advice) if advice.runs else shelf_data(advice),
        "fits": advice.fits,
    }


def _specification(advice: Advice) -> Data:
    """The demands, numbered through: for every lubricant, for some, and those that no lubricant here can fall under."""
    domains = {name: each.domain for name, each in advice.knowledge.properties.items()}
    said = [demand_data(number, each, domains) for number, each in enumerate(advice.specification.class_demands)]
    plain, some = len(advice.specification.plain), len(advice.specification.conditional)
    codes = advice.codes
    designations = {
        "din": list(codes.din),
        "iso": list(codes.iso),
        "din_none": codes.din_none,
        "iso_none": codes.iso_none,
    }
    return {
        "demands": said[:plain],
        "conditional": said[plain : plain + some],
        "dropped": said[plain + some :],
        "designations": designations,
    }


def _case(advice: Advice) -> Data:
    answers = {
        name: {"typed": "withheld", "value": "withheld"}
        if hides(advice, name)
        else {"typed": answer.typed, "value": plain(answer.value)} | ({"estimate": True} if answer.estimate else {})
        for name, answer in advice.case.answers.items()
    }
    data: Data = {"point_kind": advice.case.point_kind, "title": advice.case.title, "answers": answers}
    if advice.assume_gaps:
        data["gaps"] = "dont_know"
    if advice.only is not None and not advice.withheld:
        data["shelf"] = sorted(advice.only)
    return data


def _facts(advice: Advice) -> list[Data]:
    found = []
    for fact in advice.facts.values():
        if hides(advice, fact.name):
            continue
        data: Data = {"fact": fact.name, "value": plain(fact.value), "origin": fact.origin.value}
        unit = advice.knowledge.domain(fact.name).unit
        if unit:
            data["unit"] = unit
        if fact.note:
            data["note"] = fact.note
        if fact.name in advice.spread:
            data |= spread_data(advice.spread[fact.name])
        found.append(data)
    return found


def plain(value: Value | None) -> Any:
    """A value as JSON has it: whole numbers without a fraction, ticks as a list."""
    if isinstance(value, tuple):
        return list(value)
    return int(value) if isinstance(value, float) and value.is_integer() and abs(value) < 1e15 else value


def _line(advice: Advice, line: Line, numbers: Mapping[Any, int]) -> Data:
    data: Data = {"row": line.row, "title": line.title}
    row = next(each for each in advice.knowledge.docket if each.id == line.row)
    if line.skipped:
        return data | {"skipped": True}
    if row.recommends:
        data["recommended"] = [plain(each) for each in line.values]
        data["candidates"] = _candidates(line)
        data["barred"] = [[plain(value), list(rules)] for value, rules in (line.barred or {}).items()]
    if line.demands:
        data["demands"] = [numbers[demand] for demand in line.demands if demand in numbers]
        data |= {"strictest": strictest} if (strictest := strictest_data(advice, line)) else {}
    if line.facts:
        data["facts"] = list(line.facts)
    if line.waits:
        data["waits"] = list(line.waits)
    return data


def _candidates(line: Line) -> list[Any]:
    """Each value with the fewest steps that it is short."""
    best: dict[Any, list[int]] = {}
    for each in line.candidates:
        best.setdefault(plain(each.value), list(each.steps))
    return [[value, steps] for value, steps in best.items()]


def _quantity(advice: Advice, line: Line) -> Data:
    data: Data = {"shown": not line.skipped}
    if line.skipped:
        row = next(each for each in advice.knowledge.docket if each.id == line.row)
        return data | {"shown_if": condition_data(row.shown_if, _domains(advice))}
    if line.differs:
        data["differs"] = True
    data["values"] = figures_data(advice, line.facts)
    return data | ({"waits": list(line.waits)} if line.waits else {})


def _domains(advice: Advice) -> Mapping[str, Domain]:
    facts = {name: each.domain for name, each in advice.knowledge.facts.items()}
    return facts | {name: each.domain for name, each in advice.knowledge.computations.items()}


def _caution(advice: Advice, caution: CautionGiven) -> Data:
    data: Data = {"caution": caution.caution, "rules": list(caution.rules)}
    return data | ({"concerns": list(caution.concerns)} if caution.concerns and not advice.withheld else {})


def _assumption(advice: Advice, name: str) -> Data:
    fact = run_assuming(advice, name).facts[name]
    value = "withheld" if hides(advice, name) else plain(fact.value)
    return {"fact": name, "value": value, "because": fact.note, "keeps_open": name in advice.keeping_open}
