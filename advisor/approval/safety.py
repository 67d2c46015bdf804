"""Whether people could come to harm by a difference: as the comparison of editions sees it, told by the expectation."""

from functools import singledispatch

from advisor.advice import Advice
from advisor.replay import Difference, Played
from advisor.replay.demanded import told_by
from advisor.replay.docket_compared import strengths
from advisor.replay.expectations import AsksAtLeast, AsksFor, DemandedBy, ProductIs
from advisor.shelf import Verdict

_ALWAYS = {"state", "withheld", "cautions", "referrals", "conflicts", "barred", "must_not"}
_KEPT_OUT = {Verdict.FALLS_SHORT, Verdict.UNPROVEN}
"""The verdicts that musts make."""


def on_safety(difference: Difference, played: Played) -> bool:
    """Whether it is about the state, what is withheld, cautions, referrals, bars, musts or what musts keep out."""
    if difference.kind in _ALWAYS:
        return True
    written = (each for each in played.scenario.expectations if each.mark == difference.mark)
    return any(_about_musts(each, played.advice) for each in written)


@singledispatch
def _about_musts(_expected: object, _advice: Advice) -> bool:
    """Whether a must that is expected falls no more, or one falls that is not expected."""
    return False


@_about_musts.register
def _asks_for(expected: AsksFor, advice: Advice) -> bool:
    now = (strengths(run, expected.property, expected.value) for run in advice.single)
    return expected.strength == "must" or any("must" in each for each in now)


@_about_musts.register
def _asks_at_least(expected: AsksAtLeast, _advice: Advice) -> bool:
    return expected.strength == "must"


@_about_musts.register
def _demanded_by(expected: DemandedBy, advice: Advice) -> bool:
    wanted = {each for each in expected.demands if each[2] == 0}
    return any(wanted != {each for each in told_by(expected.rule, run) if each[2] == 0} for run in advice.single)


@_about_musts.register
def _product(expected: ProductIs, advice: Advice) -> bool:
    now = next((each.verdict for each in advice.shelf if each.item == expected.item), None)
    return now is not expected.verdict and (now is None or bool({now, expected.verdict} & _KEPT_OUT))
