"""Tell the outcome of a replay: as text, as data for JSON, and as JUnit XML."""

import re
from typing import Any
from xml.etree import ElementTree

from advisor.replay.differing import Difference
from advisor.replay.running import Coverage, Outcome, Played

FORMAT = 1
_NOT_XML = re.compile("[^\\t\\n\\r -\\ud7ff\\ue000-\\ufffd\\U00010000-\\U0010ffff]")


def as_text(outcome: Outcome, coverage: Coverage | None = None) -> str:
    """Every differing scenario with its differences, what is never fired, then the counts."""
    lines = [line for played in outcome.differing for line in (*_scenario_lines(played), "")]
    if coverage is not None:
        lines += [*_coverage_lines(coverage), ""]
    return "\n".join([*lines, summary(outcome)])


def summary(outcome: Outcome) -> str:
    """The counts in one line."""
    differing, played = len(outcome.differing), len(outcome.played)
    differences = sum(len(each.differences) for each in outcome.differing)
    words = f"{_count(played, 'scenario')} replayed, " + (
        f"{differing} of them {'differs' if differing == 1 else 'differ'} ({_count(differences, 'difference')})"
        if differing
        else "all as expected"
    )
    faulty = len({problem.file for problem in outcome.problems})
    if faulty and not played:
        return f"{_count(faulty, 'file')} could not be replayed, and nothing else was."
    return f"{words}; {_count(faulty, 'file')} could not be replayed." if faulty else f"{words}."


def _count(number: int, what: str) -> str:
    return f"{number} {what}{'' if number == 1 else 's'}"


def _scenario_lines(played: Played) -> list[str]:
    scenario = played.scenario
    lines = [f"{scenario.path}: {scenario.title}", f"  guards: {scenario.guards}"]
    for each in played.differences:
        lines += _difference_lines(each)
    return lines


def _difference_lines(difference: Difference) -> list[str]:
    what = f" {difference.what}" if difference.what else ""
    head = f"  line {difference.mark.line}: {difference.kind}{what}{'' if difference.read else ' (trace only)'}"
    return [
        head,
        f"    expected {difference.expected}",
        f"    got      {difference.got}",
        *(f"      {each}" for each in difference.because),
    ]


def _coverage_lines(coverage: Coverage) -> list[str]:
    """The rules and rows that no scenario fires, by name."""
    lines: list[str] = []
    for one, several, names in (
        ("rule is", "rules are", coverage.rules),
        ("row of a rule is", "rows of rules are", coverage.rows),
    ):
        if names:
            lines += [
                f"{len(names)} {one if len(names) == 1 else several} fired by no scenario:",
                *(f"  {name}" for name in names),
            ]
    return lines or ["Every agreed rule is fired by a scenario, for every row of its table."]


def as_data(outcome: Outcome, coverage: Coverage | None = None) -> dict[str, Any]:
    """The outcome for JSON."""
    data: dict[str, Any] = {
        "format": FORMAT,
        "replayed": len(outcome.played),
        "differing": len(outcome.differing),
        "scenarios": [_scenario_data(each) for each in outcome.played],
        "problems": [
            {"file": each.file, "line": each.line, "column": each.column, "message": str(each)}
            for each in outcome.problems
        ],
    }
    if coverage is not None:
        data["never_fired"] = {"rules": list(coverage.rules), "rows": list(coverage.rows)}
    return data


def _scenario_data(played: Played) -> dict[str, Any]:
    scenario = played.scenario
    return {
        "file": str(scenario.path),
        "title": scenario.title,
        "guards": scenario.guards,
        "state": str(played.advice.state),
        "same": not played.differences,
        "differences": [
            {
                "kind": each.kind,
                "what": each.what,
                "expected": str(each.expected),
                "got": str(each.got),
                "because": list(each.because),
                "line": each.mark.line,
                "trace_only": not each.read,
            }
            for each in played.differences
        ],
    }


def as_junit(outcome: Outcome) -> str:
    """The outcome as JUnit XML: one test case for every scenario, one error for every file at fault."""
    at_fault: dict[str, list[str]] = {}
    for problem in outcome.problems:
        at_fault.setdefault(problem.file, []).append(str(problem))
    suite = ElementTree.Element(
        "testsuite",
        {
            "name": "scenarios",
            "tests": str(len(outcome.played) + len(at_fault)),
            "failures": str(len(outcome.differing)),
            "errors": str(len(at_fault)),
            "skipped": "0",
        },
    )
    for played in outcome.played:
        case = _case(suite, str(played.scenario.path), played.scenario.name)
        if played.differences:
            failure = ElementTree.SubElement(
                case, "failure", {"message": _clean("; ".join(map(str, played.differences)))}
            )
            failure.text = _clean("\n".join(line for each in played.differences for line in _difference_lines(each)))
    for file, told in at_fault.items():
        error = ElementTree.SubElement(_case(suite, file, file), "error", {"message": _clean(told[0])})
        error.text = _clean("\n".join(told))
    ElementTree.indent(suite)
    return '<?xml version="1.0" encoding="UTF-8"?>\n' + ElementTree.tostring(suite, encoding="unicode") + "\n"


def _case(suite: ElementTree.Element, file: str, name: str) -> ElementTree.Element:
    return ElementTree.SubElement(
        suite, "testcase", {"classname": "scenarios", "name": _clean(name), "file": _clean(file)}
    )


def _clean(text: str) -> str:
    """The text without the characters that XML cannot hold."""
    return _NOT_XML.sub("?", text)
