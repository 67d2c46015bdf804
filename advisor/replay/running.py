"""Replay scenarios: find them, advise, compare, and see which rules they fire."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from pathlib import Path

from advisor.advice import Advice, Advisor, TooOpen
from advisor.answers import Saved, point_kind_of, read_case
from advisor.documents import Mapping as Tree
from advisor.documents import Node, Problem, Problems, Scalar
from advisor.knowledge import Knowledge
from advisor.places import scenario_folder
from advisor.replay.comparing import differences
from advisor.replay.differing import Difference
from advisor.replay.expectations import Expectation
from advisor.replay.reading import read_expectations

_STATUSES = ("draft", "agreed", "retired")


@dataclass(frozen=True, slots=True)
class Scenario:
    """A saved case with what is expected of its advice."""

    path: Path
    title: str
    guards: str
    status: str
    saved: Saved
    expectations: tuple[Expectation, ...]

    @property
    def name(self) -> str:
        """What people call it: the file without its ending."""
        return self.path.stem


@dataclass(frozen=True, slots=True)
class Played:
    """A scenario that was replayed: how its advice differs, and the rules that fired."""

    scenario: Scenario
    advice: Advice
    differences: tuple[Difference, ...]

    @property
    def fired(self) -> frozenset[str]:
        """The rules that fired and count in any run, one for each row of their table."""
        return frozenset(
            instance.id
            for run in self.advice.single
            for step in run.trace
            for instance, outcome in zip(step.instances, step.outcomes, strict=True)
            if outcome and instance.binds
        )


@dataclass(frozen=True, slots=True)
class Outcome:
    """What a replay found: the scenarios in the order of their paths, and the faults of the other files."""

    played: tuple[Played, ...]
    problems: tuple[Problem, ...]

    @property
    def differing(self) -> tuple[Played, ...]:
        """The scenarios whose advice differs."""
        return tuple(each for each in self.played if each.differences)


@dataclass(frozen=True, slots=True)
class Coverage:
    """Agreed rules that no scenario fires, and rows for which a rule never fires although it fires for others."""

    rules: tuple[str, ...]
    rows: tuple[str, ...]


def find(paths: Iterable[Path]) -> list[Path]:
    """The scenario files among these files and below these folders, each once, in order; without any: all scenarios."""
    chosen = list(paths) or [scenario_folder()]
    found: set[Path] = set()
    for path in chosen:
        found.update(path.rglob("*.yaml") if path.is_dir() else [path])
    return sorted(found)


def kinds_of(files: Iterable[Path]) -> list[str]:
    """The kinds of point that the files speak of."""
    return sorted({point_kind_of(file) for file in files if file.is_file()})


def replay(files: Iterable[Path], advisors: Mapping[str, Advisor]) -> Outcome:
    """Replay the scenarios, each with the advisor for its kind of point; retired ones are passed over."""
    problems = Problems()
    played: list[Played] = []
    first = next(iter(advisors))
    read: dict[str, dict[Path, Saved]] = {kind: {} for kind in advisors}
    for file in files:
        named = point_kind_of(file) if len(advisors) > 1 else first
        kind = named if named in advisors else first
        advisor = advisors[kind]
        scenario = read_scenario(file, advisor.knowledge, problems, read[kind])
        if scenario is not None and scenario.status != "retired":
            try:
                played.append(play(scenario, advisor))
            except TooOpen as fault:
                problems.add(Problem.at(_at(scenario.saved.tree, "answers").mark, str(fault).rstrip(".")))
    return Outcome(tuple(played), tuple(dict.fromkeys(problems)))


def play(scenario: Scenario, advisor: Advisor) -> Played:
    """Advise on one scenario and compare."""
    saved = scenario.saved
    advice = advisor.advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only)
    return Played(scenario, advice, differences(advice, scenario.expectations))


def read_scenario(
    path: Path, knowledge: Knowledge, problems: Problems, read: dict[Path, Saved] | None = None
) -> Scenario | None:
    """Read a scenario; every fault is collected, and then there is none. `read` keeps the cases that were read."""
    before = len(problems)
    saved = read_case(path, knowledge, problems, read)
    if saved is None:
        return None
    tree = saved.tree
    guards, status = _text(tree, "guards", problems), _text(tree, "status", problems)
    if status and status not in _STATUSES:
        problems.add(
            Problem.at(_at(tree, "status").mark, f"'{status}' is no status", f"Use one of {', '.join(_STATUSES)}")
        )
    expectations = read_expectations(saved, knowledge, problems)
    if len(problems) > before:
        return None
    return Scenario(path, saved.case.title, guards, status, saved, expectations)


def _at(tree: Tree, key: str) -> Node:
    return tree.get(key, tree)


def _text(tree: Tree, key: str, problems: Problems) -> str:
    """A text that every scenario has."""
    node = tree.get(key)
    if isinstance(node, Scalar) and node.strip():
        return str(node)
    hint = {"guards": "Say why this scenario exists", "status": "Write status: agreed"}[key]
    problems.add(Problem.at(_at(tree, key).mark, f"'{key}' is missing", hint))
    return ""


def coverage(outcome: Outcome, knowledge: Iterable[Knowledge]) -> Coverage:
    """What no scenario fires of the agreed rules."""
    fired = frozenset().union(*(each.fired for each in outcome.played))
    instances = [each for one in knowledge for step in one.instances.values() for each in step if each.binds]
    rules = {each.rule.id for each in instances if each.id in fired}
    return Coverage(
        tuple(dict.fromkeys(each.rule.id for each in instances if each.rule.id not in rules)),
        tuple(
            each
            for each in dict.fromkeys(each.id for each in instances if each.row is not None and each.rule.id in rules)
            if each not in fired
        ),
    )
