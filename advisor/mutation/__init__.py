"""Mutation: would the scenarios notice if a rule were changed a little? Those that nobody notices come with a case.

`measuring` and `wording` are imported by those who measure; what the comparison of editions takes from here is light.
"""

from advisor.mutation.effects import draws, records
from advisor.mutation.standing_in import PlainRules, by_rules, keeps_facts, plain
from advisor.mutation.telling import told

__all__ = ["PlainRules", "by_rules", "draws", "keeps_facts", "plain", "records", "told"]
