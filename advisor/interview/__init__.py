"""The interview itself, free of any screen: questions in turn, answers kept after each one, words for it all."""

from advisor.explanation.contrasts import VERDICTS
from advisor.interview.keeper import Keeper
from advisor.interview.keeping import (
    Damaged,
    Kept,
    copy_of,
    kept_interviews,
    new_interview,
    open_interview,
)
from advisor.interview.outcome import (
    care_text,
    cautions_told,
    count_text,
    outcome_text,
    product_reasons,
    referrals_added,
    referrals_told,
    variant_text,
)
from advisor.interview.session import Session
from advisor.interview.typed import holding, list_number, own_choices
from advisor.interview.wording import (
    RowShown,
    answer_shown,
    codes_text,
    exactly,
    if_unknown,
    quantities_text,
    row_shown,
    rows_shown,
    shown_value,
)

__all__ = [
    "VERDICTS",
    "Damaged",
    "Keeper",
    "Kept",
    "RowShown",
    "Session",
    "answer_shown",
    "care_text",
    "cautions_told",
    "codes_text",
    "copy_of",
    "count_text",
    "exactly",
    "holding",
    "if_unknown",
    "kept_interviews",
    "list_number",
    "new_interview",
    "open_interview",
    "outcome_text",
    "own_choices",
    "product_reasons",
    "quantities_text",
    "referrals_added",
    "referrals_told",
    "row_shown",
    "rows_shown",
    "shown_value",
    "variant_text",
]
