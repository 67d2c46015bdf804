"""Why, why not, how computed, what would change it; as plain text, Markdown, HTML and JSON.

The writers load when they are called, so that importing this room does not load jinja2.
"""

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from advisor.advice import Advice
    from advisor.explanation.changes import Changes
    from advisor.explanation.contrasts import WhyNot
    from advisor.explanation.reasons import Why
    from advisor.explanation.ruling import RuleVerdict
    from advisor.explanation.workings import Working

__all__ = [
    "as_data",
    "as_json",
    "how_computed",
    "html",
    "markdown",
    "text",
    "what_would_change",
    "why",
    "why_not",
    "why_not_rule",
]


def text(advice: "Advice", *, full: bool = True) -> str:
    """The report as plain text for a terminal; the short one leaves the derivations out."""
    from advisor.explanation.text_report import text as write

    return write(advice, full=full)


def markdown(advice: "Advice") -> str:
    """The report as Markdown."""
    from advisor.explanation.markdown_report import markdown as write

    return write(advice)


def html(advice: "Advice") -> str:
    """The report as one HTML file."""
    from advisor.explanation.html_report import html as write

    return write(advice)


def as_data(advice: "Advice") -> dict[str, Any]:
    """The whole advice as plain data."""
    from advisor.explanation.data import as_data as write

    return write(advice)


def as_json(advice: "Advice") -> str:
    """The whole advice as JSON; the same bytes for the same advice."""
    from advisor.explanation.data import as_json as write

    return write(advice)


def why(advice: "Advice", row_id: str) -> "Why":
    """Why a row of the docket shows what it shows."""
    from advisor.explanation.reasons import why as answer

    return answer(advice, row_id)


def why_not(advice: "Advice", subject: str) -> "WhyNot":
    """Why a product or a class is not recommended."""
    from advisor.explanation.contrasts import why_not as answer

    return answer(advice, subject)


def why_not_rule(advice: "Advice", rule_id: str) -> "RuleVerdict":
    """Whether a rule fired; else what it saw against what it wanted, or what it waits for."""
    from advisor.explanation.ruling import why_not_rule as answer

    return answer(advice, rule_id)


def how_computed(advice: "Advice", fact: str) -> "Working":
    """Equation, numbers with units, result, source and validity of a computed fact."""
    from advisor.explanation.workings import how_computed as answer

    return answer(advice, fact)


def what_would_change(advice: "Advice") -> "Changes":
    """Open questions, assumptions, and limits that are close."""
    from advisor.explanation.changes import what_would_change as answer

    return answer(advice)
