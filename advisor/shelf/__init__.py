"""The shelf and the usual oils: judged and ranked column by column against a specification."""

from advisor.shelf.catalogue import Catalogue, Item, Raise, all_reads, facts_read
from advisor.shelf.columns import Column, judge, places
from advisor.shelf.judgements import Judgements
from advisor.shelf.judging import USABLE, Judgement, Ranked, Shortfall, Verdict, at_limit, shortness, steps_short
from advisor.shelf.stocking import choices, products, usual_oils

__all__ = [
    "USABLE",
    "Catalogue",
    "Column",
    "Item",
    "Judgement",
    "Judgements",
    "Raise",
    "Ranked",
    "Shortfall",
    "Verdict",
    "all_reads",
    "at_limit",
    "choices",
    "facts_read",
    "judge",
    "places",
    "products",
    "shortness",
    "steps_short",
    "usual_oils",
]
