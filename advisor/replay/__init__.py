"""Replay of scenarios: what they expect, how the advice differs, and which rules they fire."""

from advisor.replay.comparing import differences
from advisor.replay.differing import Difference
from advisor.replay.expectations import Expectation
from advisor.replay.markdown import as_markdown, plain
from advisor.replay.reading import read_expectations
from advisor.replay.reporting import as_data, as_junit, as_text
from advisor.replay.running import (
    Coverage,
    Outcome,
    Played,
    Scenario,
    coverage,
    find,
    kinds_of,
    play,
    read_scenario,
    replay,
)

__all__ = [
    "Coverage",
    "Difference",
    "Expectation",
    "Outcome",
    "Played",
    "Scenario",
    "as_data",
    "as_junit",
    "as_markdown",
    "as_text",
    "coverage",
    "differences",
    "find",
    "kinds_of",
    "plain",
    "play",
    "read_expectations",
    "read_scenario",
    "replay",
]
