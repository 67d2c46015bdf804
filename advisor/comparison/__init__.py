"""Two editions of the knowledge compared: which scenarios change and what that means, and where else rules differ."""

from collections.abc import Iterable
from pathlib import Path

from advisor.answers import point_kind_of
from advisor.comparison.changing import Changed, Editions, changes
from advisor.comparison.editions import edition
from advisor.comparison.edits import Edit, edits
from advisor.comparison.meaning import Meaning
from advisor.comparison.regions import Region, Witness, regions
from advisor.comparison.reporting import Comparison, as_data, as_markdown, as_text, summary
from advisor.documents import Problems
from advisor.knowledge import Knowledge

__all__ = [
    "Changed",
    "Comparison",
    "Edit",
    "Editions",
    "Meaning",
    "Region",
    "Witness",
    "as_data",
    "as_markdown",
    "as_text",
    "compare",
    "edition",
    "edits",
    "regions",
    "summary",
]


def compare(old: Knowledge, new: Knowledge, files: Iterable[Path]) -> Comparison:
    """Compare two editions over the scenarios about their kind of point, and over all that the edited rules can see."""
    paths = list(files)
    editions = Editions(old, new, edits(old, new))
    problems = Problems()
    if not editions.edits:
        replayed = sum(point_kind_of(path) == new.point_kind.id for path in paths)
        return Comparison(old, new, (), replayed, (), (), ())
    changed, cases = changes(paths, editions, problems)
    found = regions(editions, cases)
    return Comparison(old, new, editions.edits, len(cases), tuple(changed), tuple(found), tuple(problems))
