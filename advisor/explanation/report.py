"""The report of an advice: its sections in the order in which they are read."""

from dataclasses import replace

from advisor import __version__
from advisor.advice import Advice
from advisor.explanation import details, findings, first_screen
from advisor.explanation.blocks import Para, Report, Section
from advisor.explanation.changes import what_would_change
from advisor.explanation.changing_over import change_over_section
from advisor.explanation.reasons import why
from advisor.explanation.ruling import Rules
from advisor.explanation.variants import variants_section

_OF_ONE_RUN = {"decisive", "why", "computed", "not_fired"}
_THE_REST = (
    "Why each row stands, why not each class and product, every computation with its numbers, the rules that did not "
    "fire, what would change it, and the sources: add --full, or --markdown, --html FILE, --json."
)


def report(advice: Advice, *, full: bool = True) -> Report:
    """The report; what is withheld is not in it. The short one leaves the derivations out and says where they are."""
    title = advice.case.title or "A lubrication point without a name"
    about = f"{findings.about(advice)} gudgeon {__version__}."
    sections = _withheld(advice) if advice.withheld else _complete(advice) if full else _short(advice)
    return Report(title, about, advice.state.value, tuple(_labelled(each, advice) for each in sections if each))


def _labelled(section: Section, advice: Advice) -> Section:
    """A section of derivations says for which run they are told, where something was left open."""
    if not advice.told_for or section.id not in _OF_ONE_RUN:
        return section
    return replace(section, blocks=(*section.blocks, Para(f"Told for {advice.told_for}.")))


def _withheld(advice: Advice) -> list[Section | None]:
    return [
        first_screen.state_section(advice, Rules(advice)),
        findings.cautions_section(advice),
        first_screen.caution_section(advice, what_would_change(advice)),
        findings.answers_section(advice),
        details.not_fired_section(advice),
        details.sources_section(advice),
        findings.last_word(advice),
    ]


def _short(advice: Advice) -> list[Section | None]:
    rules, changes = Rules(advice), what_would_change(advice)
    rows = [why(advice, line.row, rules) for line in advice.docket]
    figures = [why(advice, line.row, rules) for line in advice.quantities]
    return [
        first_screen.state_section(advice, rules),
        first_screen.caution_section(advice, changes),
        variants_section(advice, full=False),
        first_screen.decisive_section(rows),
        findings.docket_section(rows),
        findings.shelf_section(advice, findings.shelf_verdicts(advice, rules), rules),
        findings.codes_section(advice),
        findings.quantities_section(advice, figures),
        change_over_section(advice),
        findings.cautions_section(advice),
        Section("rest", "The rest", (Para(_THE_REST),)),
        findings.last_word(advice),
    ]


def _complete(advice: Advice) -> list[Section | None]:
    rules, changes = Rules(advice), what_would_change(advice)
    rows = [why(advice, line.row, rules) for line in advice.docket]
    figures = [why(advice, line.row, rules) for line in advice.quantities]
    verdicts = findings.shelf_verdicts(advice, rules)
    return [
        first_screen.state_section(advice, rules),
        first_screen.caution_section(advice, changes),
        variants_section(advice, full=True),
        first_screen.decisive_section(rows),
        findings.docket_section(rows),
        findings.shelf_section(advice, verdicts, rules),
        findings.codes_section(advice),
        findings.quantities_section(advice, figures),
        change_over_section(advice),
        findings.cautions_section(advice),
        details.why_section([*rows, *figures]),
        *details.why_not_sections(advice, verdicts, rules),
        details.computed_section(advice),
        details.not_fired_section(advice),
        details.changes_section(changes),
        findings.answers_section(advice),
        details.sources_section(advice),
        findings.last_word(advice),
    ]
