"""Mutation: would the scenarios notice if a rule were changed a little? Those that nobody notices come with a case."""

from advisor.mutation.effects import draws, records
from advisor.mutation.measuring import TRIES, Measured, Survivor, measure
from advisor.mutation.standing_in import PlainRules, by_rules, keeps_facts, plain
from advisor.mutation.telling import told
from advisor.mutation.wording import as_data, as_text, summary

__all__ = [
    "TRIES",
    "Measured",
    "PlainRules",
    "Survivor",
    "as_data",
    "as_text",
    "by_rules",
    "draws",
    "keeps_facts",
    "measure",
    "plain",
    "records",
    "summary",
    "told",
]
