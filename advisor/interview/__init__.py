"""The interview itself, free of any screen: questions in turn, answers kept after each one, and words for what stands."""

from advisor.interview.keeping import (
    Damaged,
    Keeper,
    Kept,
    copy_of,
    kept_interviews,
    new_interview,
    open_interview,
)
from advisor.interview.session import Session
from advisor.interview.wording import RowShown, answer_shown, codes_text, product_reasons, quantities_text, row_shown, rows_shown

__all__ = [
    "Damaged",
    "Keeper",
    "Kept",
    "RowShown",
    "Session",
    "answer_shown",
    "codes_text",
    "copy_of",
    "kept_interviews",
    "new_interview",
    "open_interview",
    "product_reasons",
    "quantities_text",
    "row_shown",
    "rows_shown",
]
