"""The mutation score of a body of knowledge: its mutants dealt out to processes, each with an advisor of its own."""

import os
from collections.abc import Iterable, Sequence
from concurrent.futures import ProcessPoolExecutor
from dataclasses import dataclass
from multiprocessing import get_context
from pathlib import Path

from advisor.advice import Advisor
from advisor.answers import Saved
from advisor.bending import Bender
from advisor.documents import Problems
from advisor.knowledge import Knowledge, load
from advisor.mutation.killing import assemble
from advisor.mutation.mutants import Mutant, mutants
from advisor.mutation.searching import Search
from advisor.mutation.wording import as_scenario, say_mutant
from advisor.replay import Scenario, read_scenario

TRIES = 30


@dataclass(frozen=True, slots=True)
class Survivor:
    """A mutant that no scenario kills: with a scenario that would, or shown to advise the same on every case."""

    rule: str
    kind: str
    words: str
    equivalent: bool = False
    scenario: str = ""
    tries: int = 0


@dataclass(frozen=True, slots=True)
class Measured:
    """What the mutation found for one kind of point."""

    point_kind: str
    made: int
    killed: int
    survivors: tuple[Survivor, ...]

    @property
    def equivalent(self) -> int:
        """How many mutants advise the same on every case."""
        return sum(each.equivalent for each in self.survivors)

    @property
    def score(self) -> float:
        """The share killed of the mutants that are not equivalent."""
        lasting = self.made - self.equivalent
        return self.killed / lasting if lasting else 1.0


@dataclass(frozen=True, slots=True)
class Share:
    """The mutants that one process takes: every `of`th rule, from `first`."""

    root: Path
    point_kind: str
    shelf: Path | None
    files: tuple[Path, ...]
    rules: frozenset[str]
    first: int
    of: int
    tries: int


def measure(
    root: Path,
    point_kind: str,
    shelf: Path | None,
    files: Iterable[Path],
    *,
    rules: Iterable[str] = (),
    tries: int = TRIES,
    processes: int | None = None,
) -> Measured:
    """Make the mutants of the agreed rules (or of these), and see which of them the scenarios kill."""
    count = processes or min(os.cpu_count() or 1, 8)
    shares = [
        Share(root, point_kind, shelf, tuple(files), frozenset(rules), first, count, tries) for first in range(count)
    ]
    if count == 1:
        parts = [work(shares[0])]
    else:
        with ProcessPoolExecutor(count, mp_context=get_context("spawn")) as pool:
            parts = list(pool.map(work, shares))
    survivors = [each for part in parts for each in part.survivors]
    order = {rule: place for place, rule in enumerate(load(root, point_kind, shelf).rules)}
    survivors.sort(key=lambda each: order[each.rule])
    return Measured(point_kind, sum(part.made for part in parts), sum(part.killed for part in parts), tuple(survivors))


def work(share: Share) -> Measured:
    """One process's share. The engine belongs to its thread, so everything is made here."""
    knowledge = load(share.root, share.point_kind, share.shelf)
    jury = assemble(_scenarios(share.files, knowledge), Advisor(knowledge))
    search = Search(jury, Bender(jury.advisor))
    chosen = [each for each in mutants(knowledge) if not share.rules or each.rule in share.rules]
    own = _dealt(chosen, share)
    lasting = [mutant for mutant in own if not jury.killer(mutant)]
    survivors = tuple(_survivor(mutant, search, share.tries) for mutant in lasting)
    return Measured(share.point_kind, len(own), len(own) - len(lasting), survivors)


def _survivor(mutant: Mutant, search: Search, tries: int) -> Survivor:
    words = say_mutant(mutant, search.advisor.knowledge)
    if not search.region(mutant):
        return Survivor(mutant.rule, mutant.kind, words, equivalent=True)
    found, count = search.find(mutant, tries)
    return Survivor(mutant.rule, mutant.kind, words, scenario=as_scenario(found) if found else "", tries=count)


def _dealt(all_of_them: Sequence[Mutant], share: Share) -> list[Mutant]:
    """The mutants of every `of`th rule, so that the mutants of one rule stay together."""
    turn = {rule: place % share.of for place, rule in enumerate(dict.fromkeys(each.rule for each in all_of_them))}
    return [each for each in all_of_them if turn[each.rule] == share.first]


def _scenarios(files: Iterable[Path], knowledge: Knowledge) -> list[Scenario]:
    """The scenarios that count; those at fault are told by the replay."""
    problems, cases = Problems(), dict[Path, Saved]()
    read = (read_scenario(file, knowledge, problems, cases) for file in files)
    return [each for each in read if each is not None and each.status != "retired"]
