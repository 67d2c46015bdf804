"""Mutation: would the scenarios notice if a rule were changed a little? Those that nobody notices come with a case."""

from advisor.mutation.measuring import TRIES, Measured, Survivor, measure
from advisor.mutation.wording import as_data, as_text, summary

__all__ = ["TRIES", "Measured", "Survivor", "as_data", "as_text", "measure", "summary"]
