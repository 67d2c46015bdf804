"""Cases bent into a region: answers changed until what the rules see lies in a box."""

from advisor.bending.bender import MOST_FIXES, Bender, answered, answers_of, typed
from advisor.bending.possible import possible
from advisor.bending.regions import apart, domains_seen, inside, may_lack, unmet, where

__all__ = [
    "MOST_FIXES",
    "Bender",
    "answered",
    "answers_of",
    "apart",
    "domains_seen",
    "inside",
    "may_lack",
    "possible",
    "typed",
    "unmet",
    "where",
]
