"""Tell the outcome of a replay as Markdown, for a merge request."""

import re
from collections.abc import Iterator

from advisor.replay.differing import Difference
from advisor.replay.reporting import summary
from advisor.replay.running import Coverage, Outcome, Played

_MOST = 2
"""So many sentences of the trace are told."""
_MARKS = re.compile(r"([\\`*_\[\]<>|#])")


def as_markdown(outcome: Outcome, coverage: Coverage | None = None) -> str:
    """The counts, a table for every differing scenario, what is at fault, and what no scenario fires."""
    lines = ["## Replay of the scenarios", "", plain(summary(outcome)), ""]
    for played in outcome.differing:
        lines += [*_scenario(played), ""]
    if outcome.problems:
        lines += ["### At fault", "", *(f"- {plain(str(each))}" for each in outcome.problems), ""]
    if coverage is not None:
        lines += [*_never_fired(coverage), ""]
    return "\n".join(lines).rstrip("\n") + "\n"


def _scenario(played: Played) -> Iterator[str]:
    scenario = played.scenario
    yield f"### {plain(scenario.title)}"
    yield ""
    yield f"`{scenario.path.as_posix()}`. {plain(scenario.guards)}"
    yield ""
    yield "| line | what | expected | got | why |"
    yield "|---:|---|---|---|---|"
    for each in played.differences:
        what = f"{each.kind} {each.what}".strip() + ("" if each.read else " (trace only)")
        said = (what, str(each.expected), str(each.got), _why(each))
        yield f"| {each.mark.line} | {' | '.join(map(plain, said))} |"


def _why(difference: Difference) -> str:
    """The rules that made the difference, in short."""
    told = " ".join(difference.because[:_MOST])
    left = len(difference.because) - _MOST
    return f"{told} {left} more in the text of the replay." if left > 0 else told


def _never_fired(coverage: Coverage) -> Iterator[str]:
    yield "### Fired by no scenario"
    yield ""
    names = (*coverage.rules, *coverage.rows)
    yield from (f"- `{name}`" for name in names)
    if not names:
        yield "Every agreed rule is fired by a scenario, for every row of its table."


def plain(text: str) -> str:
    """The text on one line, so that Markdown shows it as it is."""
    return _MARKS.sub(r"\\\1", " ".join(text.split()))
