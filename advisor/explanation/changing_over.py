"""Changing over, product by product: what is recommended is a class, but what is bought is a product."""

from collections.abc import Iterable

from advisor.advice import Advice
from advisor.explanation.blocks import Block, Para, Section, Tree, leaf
from advisor.explanation.reasons import differing
from advisor.explanation.words import listed, say_source
from advisor.shelf import Verdict

_CHANGE_OVER = "change_over"


def change_overs(advice: Advice) -> dict[str, str]:
    """What has to be done for each product that no must rules out, by its item code; the most of all runs."""
    if _CHANGE_OVER not in advice.knowledge.properties or advice.withheld:
        return {}
    domain = advice.knowledge.properties[_CHANGE_OVER].domain
    columns = [
        column for run in advice.single if run.judgement and (column := run.judgement.columns.get(_CHANGE_OVER))
    ]
    found: dict[str, str] = {}
    for each in advice.shelf:
        if each.verdict is not Verdict.FALLS_SHORT:
            values = [value for column in columns if isinstance(value := column.values[each.place], float)]
            if values:
                found[each.item] = str(domain.decode(max(values)))
    return found


def say_change_over(advice: Advice, choice: str) -> str:
    """A way of changing over in words."""
    return advice.knowledge.properties[_CHANGE_OVER].domain.label(choice)


def of_the_classes(advice: Advice) -> frozenset[str]:
    """What the docket says of the recommended classes."""
    return frozenset(str(value) for line in advice.docket if line.row == _row(advice) for value in line.values)


def differ_from_the_classes(advice: Advice) -> bool:
    """Whether a product that may be used asks for another way of changing over than the recommended classes."""
    return any(choice not in of_the_classes(advice) for choice in change_overs(advice).values())


def change_over_section(advice: Advice) -> Section | None:
    """The numbered steps of every way of changing over that a recommended class or a product may need."""
    known = advice.knowledge.procedures
    of_classes = dict.fromkeys(
        str(value) for run in advice.single for line in run.docket if line.row == _row(advice) for value in line.values
    )
    of_products: dict[str, list[str]] = {}
    for item, choice in change_overs(advice).items():
        of_products.setdefault(choice, []).append(item)
    led_to = [each for choice in (*of_classes, *of_products) if choice in known for each in known[choice].leads_to]
    blocks: list[Block] = []
    for choice in known:
        if choice not in (*of_classes, *of_products, *led_to):
            continue
        whom = _for_whom(advice, choice, of_classes, of_products)
        blocks.append(Para(f"{known[choice].title}{whom}:", strong=True))
        blocks.append(Tree(leaf(*known[choice].steps), numbered=True))
        blocks.append(Para(f"Source: {'; '.join(say_source(each, advice.knowledge) for each in known[choice].source)}"))
    return Section(_CHANGE_OVER, "Change-over", tuple(blocks)) if blocks else None


def _for_whom(advice: Advice, choice: str, of_classes: Iterable[str], of_products: dict[str, list[str]]) -> str:
    """Whom these steps are for, where not all that is recommended needs the same."""
    items = of_products.get(choice, [])
    if choice in of_classes:
        told = of_the_classes(advice)
        parts = [] if choice in told else [f"it {differing(advice)}"]
        if len({*of_classes, *of_products}) > 1 and items:
            parts.append(f"the recommended classes, and {listed(items, 'and')}")
        return f" ({'; '.join(parts)})" if parts else ""
    return f" ({listed(items, 'and')})" if items else " (where the steps above lead to it)"


def _row(advice: Advice) -> str:
    return next((row.id for row in advice.knowledge.docket if row.recommends == _CHANGE_OVER), "")
