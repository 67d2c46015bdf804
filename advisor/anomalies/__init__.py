"""What is wrong with the meaning of the knowledge, each finding with a case that shows it."""

from collections.abc import Sequence

from advisor.anomalies.clashes import clashes
from advisor.anomalies.finding import REAL_LIFE, Finding, Kind, Witness
from advisor.anomalies.ground import Ground
from advisor.anomalies.loading import turned_down
from advisor.anomalies.lone_rules import lone_rules
from advisor.anomalies.physics import physics
from advisor.anomalies.proving import Proving
from advisor.anomalies.repeats import repeats
from advisor.anomalies.tables import tables
from advisor.anomalies.uses import uses
from advisor.knowledge import Knowledge

__all__ = ["REAL_LIFE", "Finding", "Kind", "Witness", "examine_meaning", "examine_together", "turned_down"]


def examine_meaning(knowledge: Knowledge) -> list[Finding]:
    """Every anomaly of knowledge that the loader accepts, in the order of the files."""
    ground = Ground(knowledge)
    proving = Proving(ground)
    looks = (lone_rules, repeats, clashes, uses, physics, tables)
    found = [finding for look in looks for finding in look(ground, proving)]
    return sorted(found, key=lambda each: (each.where, each.kind, each.message))


def examine_together(bodies: Sequence[Knowledge]) -> list[Finding]:
    """The anomalies of one folder, read for each kind of point.

    What is common to several kinds is told once, and what only one of them leaves unused or idle is not told.
    """
    told: dict[tuple[object, ...], list[Finding]] = {}
    for body in bodies:
        for finding in examine_meaning(body):
            told.setdefault((finding.where, finding.kind, finding.rules or finding.message), []).append(finding)
    kept = [same[0] for same in told.values() if same[0].kind not in _IN_ALL or len(same) == _holding(same[0], bodies)]
    return sorted(kept, key=lambda each: (each.where, each.kind, each.message))


_IN_ALL = frozenset({"unused conclusion", "unused question", "never fires", "duplicate", "subsumed", "redundant"})


def _holding(finding: Finding, bodies: Sequence[Knowledge]) -> int:
    """How many kinds of point have what the finding speaks of."""
    return sum(
        any(
            each.mark == finding.where
            for part in (body.rules, body.facts, body.computations, body.properties)
            for each in part.values()
        )
        for body in bodies
    )
