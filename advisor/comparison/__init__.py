"""Two editions of the knowledge compared: which scenarios change and what that means, and where else rules differ."""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from pathlib import Path

from advisor.answers import Saved, point_kind_of, read_case
from advisor.comparison.changing import Changed, Editions, Replayed, Replays
from advisor.comparison.data import as_data
from advisor.comparison.editions import edition
from advisor.comparison.edits import Edit, edits
from advisor.comparison.meaning import Meaning
from advisor.comparison.regions import MOST_NEAR, LeftOut, Region, Witness, left_out, regions
from advisor.comparison.reporting import Comparison, Shelved, as_markdown, as_text, summary
from advisor.comparison.sharing import beside
from advisor.documents import Problems
from advisor.knowledge import Knowledge

__all__ = [
    "Changed",
    "Comparison",
    "Edit",
    "Editions",
    "LeftOut",
    "Meaning",
    "Region",
    "Shelved",
    "Witness",
    "as_data",
    "as_markdown",
    "as_text",
    "beside",
    "compare",
    "edition",
    "edits",
    "regions",
    "summary",
]

LEAST = 60
"""With fewer scenarios it takes longer to make a process."""
_HERE = 0.49
"""The share of the scenarios that is replayed where the regions are looked for."""


def compare(old: Knowledge, new: Knowledge, files: Iterable[Path]) -> Comparison:
    """Compare two editions over the scenarios about their kind of point, and over all that the edited rules can see."""
    paths = list(files)
    editions = Editions(old, new, edits(old, new))
    if not editions.edits:
        replayed = sum(point_kind_of(path) == new.point_kind.id for path in paths)
        return Comparison(old, new, (), replayed, (), (), ())
    found, told = _found(paths, editions)
    return Comparison(
        old,
        new,
        editions.edits,
        len(found.paths),
        found.changed,
        tuple(told),
        found.problems,
        left_out(editions),
        _came_and_went(editions, found.judged),
    )


def _came_and_went(editions: Editions, judged: Mapping[tuple[str, str], int]) -> tuple[Shelved, ...]:
    old, new = ([each.item for each in edition.shelf] for edition in (editions.old, editions.new))
    return tuple(
        Shelved(item, item in new, {verdict: count for (one, verdict), count in judged.items() if one == item})
        for item in dict.fromkeys((*old, *new))
        if item in editions.only_one_has
    )


def _found(paths: list[Path], editions: Editions) -> tuple[Replayed, list[Region]]:
    """The scenarios replayed, and the regions; where there are many, a part of the scenarios beside the rest."""
    replays = Replays(editions)
    cut = round(len(paths) * _HERE) if len(paths) >= LEAST else len(paths)

    def here() -> tuple[Replayed, list[Region]]:
        return replays.replayed(paths[:cut]), regions(editions, list(_some_of(paths, editions)))

    if cut == len(paths):
        return here()
    (first, told), rest = beside(here, lambda: replays.replayed(paths[cut:]))
    return first.with_more(rest), told


def _some_of(paths: Sequence[Path], editions: Editions) -> Iterator[Saved]:
    """As many of the scenarios as are looked at for a whole case in a region."""
    read: tuple[dict[Path, Saved], dict[Path, Saved]] = {}, {}
    for path in paths[:: max(1, len(paths) // MOST_NEAR)]:
        case = read_case(path, editions.new, Problems(), read[0]) or read_case(path, editions.old, Problems(), read[1])
        if case is not None:
            yield case
