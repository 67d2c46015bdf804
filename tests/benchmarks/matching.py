"""How long the matching stage takes beside other rule engines: `python -m tests.benchmarks.matching`.

Processor time of this process; the contenders take turns within every round, so that a busy machine slows all alike.
"""

import argparse
import statistics
import sys
import time
from dataclasses import dataclass, field

from advisor.conditions import Condition, holds
from tests.benchmarks import contenders
from tests.benchmarks.made_rules import Case, Workload, workload

Outcome = list[frozenset[int]]


@dataclass(slots=True)
class Contender:
    """One engine with its steps built, and what was measured of it."""

    name: str
    steps: list[contenders.Fired]
    share: int
    bar: float | None
    microseconds: list[float] = field(default_factory=list)

    def run(self, case: Case) -> Outcome:
        """All steps of a case; each tells the next how many rules fired."""
        return through(self.steps, case)


def through(steps: list[contenders.Fired], case: Case) -> Outcome:
    """Take a case through the steps."""
    seen = dict(case)
    outcome: Outcome = []
    for number, fired in enumerate(steps):
        outcome.append(fired(seen))
        seen[f"fired_{number}"] = float(len(outcome[-1]))
    return outcome


# Name, how to build a step, one case in how many, and how many times slower than our matching stage it must be.
ENTRIES: tuple[tuple[str, contenders.Build, int, float | None], ...] = (
    ("gudgeon, matching stage", contenders.ours_matching, 1, None),
    ("gudgeon, judged and compared", contenders.ours_judged, 1, None),
    ("CLIPS, agenda read", contenders.clips_agenda, 1, 2.0),
    ("CLIPS, rules run", contenders.clips_run, 1, None),
    ("zen-engine, collecting table", contenders.zen_collect, 1, 8.0),
    ("experta, agenda read", contenders.experta_agenda, 20, 30.0),
)


def built(work: Workload) -> list[Contender]:
    """All contenders whose package is installed."""
    found: list[Contender] = []
    for name, build, share, bar in ENTRIES:
        try:
            found.append(Contender(name, [build(step, work.domains) for step in work.steps], share, bar))
        except ImportError as error:
            say(f"left out: {name} ({error}); pip install 'gudgeon[bench]'")
    return found


def differences(found: list[Contender], work: Workload, sample: int) -> int:
    """Cases of the sample on which some contender fires other rules than hold by plain judgement."""
    judged = [judged_plainly(step) for step in work.steps]
    expected = [through(judged, case) for case in work.cases[:sample]]
    wrong = 0
    for contender in found:
        for case, outcome in zip(work.cases[:: contender.share], expected[:: contender.share], strict=False):
            if contender.run(case) != outcome:
                wrong += 1
                say(f"{contender.name} differs")
    return wrong


def judged_plainly(step: tuple[Condition, ...]) -> contenders.Fired:
    """The plain judgement as a contender; the judge of the others, not measured."""
    return lambda case: frozenset(index for index, rule in enumerate(step) if holds(rule, case))


def measure(found: list[Contender], work: Workload, rounds: int) -> None:
    """Give every contender the same cases, round by round, each round led by another."""
    size = len(work.cases) // rounds
    for number in range(rounds):
        cases = work.cases[number * size : (number + 1) * size]
        turn = number % len(found)
        for contender in found[turn:] + found[:turn]:
            own = cases[:: contender.share]
            started = time.process_time()
            for case in own:
                contender.run(case)
            contender.microseconds.append((time.process_time() - started) / len(own) * 1e6)


def table(found: list[Contender]) -> str:
    """Medians, and how many times slower than the matching stage: median, least and greatest of the rounds."""
    first = found[0].microseconds
    lines = [f"{'contender':<30} {'us/case':>8} {'times':>7}  {'least-greatest':<15} bar"]
    for each in found:
        ratios = [own / ours for own, ours in zip(each.microseconds, first, strict=True)]
        spread = f"{min(ratios):.2f}-{max(ratios):.2f}"
        times = statistics.median(ratios)
        bar = "" if each.bar is None else f"{each.bar:g} {'held' if times >= each.bar else 'MISSED'}"
        lines.append(f"{each.name:<30} {statistics.median(each.microseconds):8.0f} {times:7.2f}  {spread:<15} {bar}")
    return "\n".join(lines)


def say(line: str) -> None:
    """One line to the person who measures."""
    sys.stdout.write(line + "\n")


def main() -> int:
    """Build, check that all fire the same, measure, print."""
    asked = argparse.ArgumentParser(description=__doc__)
    asked.add_argument("--cases", type=int, default=2000)
    asked.add_argument("--rounds", type=int, default=20)
    asked.add_argument("--missing", type=float, default=0.1, help="share of unanswered facts")
    asked.add_argument("--seed", type=int, default=1)
    options = asked.parse_args()
    work = workload(options.seed, options.cases, options.missing)
    found = built(work)
    wrong = differences(found, work, sample=min(200, options.cases))
    say(f"{sum(map(len, work.steps))} rules, {options.cases} cases, {wrong} differences in the sample")
    measure(found, work, options.rounds)
    say(table(found))
    return 1 if wrong else 0


if __name__ == "__main__":
    sys.exit(main())
