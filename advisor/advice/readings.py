"""What people read of an advice, thing by thing, and how much a change of each means."""

from collections.abc import Mapping

from advisor.advice.model import Advice, Line, Reading
from advisor.shelf import USABLE

Name = tuple[str, str]
"""What kind of thing, and which: `("row", "vg")`, `("product", "GR-101")`."""

FIRST: Name = ("first", "")
STANDING = frozenset({"state", "withheld", "referral", "conflict", "question"})
LEVELS = 4
"""Levels of meaning, the gravest first: how the case stands, classes, the grade, the base oil."""


def readings(advice: Advice) -> Mapping[Name, Reading]:
    """Everything that is recommended, given or asked, without the figures."""
    found: dict[Name, Reading] = {("state", ""): advice.state.value, ("withheld", ""): advice.withheld}
    found |= {("referral", each.to): True for each in advice.referrals}
    found |= {("conflict", each.about): True for each in advice.conflicts}
    found |= {("question", each.fact): True for each in advice.open_questions}
    found |= {("caution", each.caution): True for each in advice.cautions}
    if advice.withheld:
        return found
    recommending = {row.id for row in advice.knowledge.docket if row.recommends}
    found |= {("row", each.row): _classes(each) for each in advice.docket if each.row in recommending}
    found |= {("code", "din"): advice.codes.din, ("code", "iso"): advice.codes.iso}
    found |= {("product", each.item): each.verdict.value for each in advice.shelf}
    found[FIRST] = next((each.item for each in advice.shelf if each.verdict in USABLE), "")
    found |= {("figure", each.row): True for each in advice.quantities if not each.skipped}
    return found


def _classes(line: Line) -> Reading:
    return None if line.skipped else line.values


def level_of(name: Name, advice: Advice) -> int:
    """How much a change means, 0 the gravest; things at `LEVELS` are told one by one and part no stretches."""
    what, which = name
    if what in STANDING:
        return 0
    if what != "row":
        return LEVELS
    recommends = next(row.recommends for row in advice.knowledge.docket if row.id == which)
    return {"vg": 2, advice.knowledge.usual_oils.family: 3}.get(recommends, 1)
