"""Approval: changed expectations are signed for group by group, in a log that shows when it was tampered with."""

from advisor.approval.approving import Review, approve, review, review_of
from advisor.approval.log import BEGIN, NAME, Entry, Log, read_log
from advisor.approval.signing import Signature, signature
from advisor.approval.telling import as_data, as_markdown, as_text

__all__ = [
    "BEGIN",
    "NAME",
    "Entry",
    "Log",
    "Review",
    "Signature",
    "approve",
    "as_data",
    "as_markdown",
    "as_text",
    "read_log",
    "review",
    "review_of",
    "signature",
]
