"""The findings of an advice as sections: docket, shelf, codes, quantities, change-over, cautions."""

from collections import Counter
from collections.abc import Iterator
from typing import Any

from advisor.advice import Advice
from advisor.explanation.blocks import GLYPHS, Block, Grid, Node, Para, Section, Tree, leaf
from advisor.explanation.changing_over import change_overs, differ_from_the_classes, say_change_over
from advisor.explanation.contrasts import Miss, WhyNot, product
from advisor.explanation.reasons import WAITS, Why
from advisor.explanation.ruling import Rules
from advisor.explanation.seeing import hides, say_known
from advisor.explanation.words import SHEET_SILENT, harmless, listed, say_source, title_of
from advisor.explanation.workings import HIDDEN, Premise, Working
from advisor.knowledge import Formed
from advisor.shelf import Verdict

LONG_SHELF = 80
_TOP = 12
_LAST_WORD = ("maker", "sds", "loto")
_SHORT = 3


def answers_section(advice: Advice) -> Section:
    """What was answered, as typed and as read."""
    rows = []
    for name, answer in advice.case.answers.items():
        hidden = hides(advice, name)
        fact = advice.facts.get(name)
        read = HIDDEN if hidden else say_known(advice, name)
        origin = "set aside: not asked here" if name in advice.set_aside else fact.origin.value if fact else ""
        rows.append((title_of(name, advice.knowledge), HIDDEN if hidden else answer.typed or "none", read, origin))
    return Section("answers", "Answers", (Grid(("Question", "As typed", "Counts as", "Origin"), tuple(rows)),))


def docket_section(whys: list[Why]) -> Section:
    """The docket, row by row, with the rules behind it."""
    rows = []
    for each in whys:
        rules = dict.fromkeys(reason.rule.rule for reason in each.reasons if reason.decides or reason.level <= 1)
        shown = [*rules][:_SHORT] + ([f"{len(rules) - _SHORT} more"] if len(rules) > _SHORT else [])
        waits = f"waits for: {', '.join(each.waits)}"
        settled = not each.waits or each.conclusion == WAITS
        said = (waits if each.conclusion == WAITS else each.conclusion) + ("" if settled else f" ({waits})")
        rows.append((each.title, said, ", ".join(shown)))
    return Section("docket", "Docket", (Grid(("Row", "Recommended, or asked", "Rules"), tuple(rows)),))


def shelf_verdicts(advice: Advice, rules: Rules) -> list[WhyNot]:
    """The products of the shelf with all that each misses, best first; the far end of a long shelf is left out."""
    return [product(advice, each.place, rules) for each in advice.shelf[:LONG_SHELF]]


def shelf_section(advice: Advice, verdicts: list[WhyNot], rules: Rules) -> Section:
    """The products that are not ruled out, best first; the others counted by the main reason."""
    title = f"Shelf: {advice.knowledge.shelf_title}" if advice.knowledge.shelf_title else "Shelf"
    if not verdicts:
        return Section("shelf", title, (Para("No product was judged."),))
    alive = [
        each for each, ranked in zip(verdicts, advice.shelf, strict=False) if ranked.verdict is not Verdict.FALLS_SHORT
    ]
    shown = alive[:_TOP] or verdicts[:_SHORT]
    rows = [_shelf_row(each) for each in shown]
    head = ("Product", "Verdict", "What it misses")
    blocks: list[Block] = [Grid(head, tuple(rows))]
    if differ_from_the_classes(advice):
        needed = change_overs(advice)
        told = [say_change_over(advice, choice) if (choice := needed.get(each.subject)) else "" for each in shown]
        with_it = tuple((*row[:2], each, row[2]) for row, each in zip(rows, told, strict=True))
        blocks = [Grid((*head[:2], "Change-over", head[2]), with_it)]
    rest = advice.shelf[len(shown) :]
    if rest:
        blocks.append(Para(f"{len(rest)} more, counted by the first demand that each one misses:"))
        counts = Counter(_main_reason(advice, each.place, rules) for each in rest)
        ordered = sorted(counts.items(), key=lambda each: (-each[1], each[0]))
        blocks.append(Tree(leaf(*(f"{count}: {reason}" for reason, count in ordered))))
    return Section("shelf", title, tuple(blocks))


def _shelf_row(verdict: WhyNot) -> tuple[str, str, str]:
    word, _, steps = verdict.verdict.partition(": ")
    deciding = [each for each in verdict.misses if each.level == 0] or list(verdict.misses)
    reasons = list(dict.fromkeys(say_miss(each) for each in deciding))
    more = f"; {len(reasons) - _SHORT} more" if len(reasons) > _SHORT else ""
    said = "; ".join(reasons[:_SHORT]) + more
    return (
        f"{verdict.subject} {verdict.title}",
        f"{GLYPHS[word]} {word}",
        f"{steps}: {said}" if steps and said else said or steps,
    )


def say_miss(miss: Miss) -> str:
    """A demand that is missed, with what was seen and by how much."""
    if miss.barred and miss.seen != SHEET_SILENT:
        return f"{miss.property} {miss.seen} is barred"
    away = f", {miss.margin} away" if miss.margin else ""
    seen = SHEET_SILENT if miss.seen == SHEET_SILENT else f"has {miss.seen}"
    return f"{miss.demand}: {seen}{away}"


def miss_lines(misses: tuple[Miss, ...]) -> list[str]:
    """What is missed, one line for each strength, with the rules; what several rules ask alike is said once."""
    found: dict[str, dict[str, list[str]]] = {}
    for each in misses:
        steps = f", {each.steps} step{'s' * (each.steps != 1)}" if each.level else ""
        shared = ", as the recommended class does" if each.shared else ""
        found.setdefault(each.strength, {}).setdefault(f"{say_miss(each)}{steps}{shared}", []).append(each.rule.id)
    return [
        f"{strength}: " + "; ".join(f"{said} ({', '.join(rules)})" for said, rules in asked.items())
        for strength, asked in found.items()
    ]


def _main_reason(advice: Advice, place: int, rules: Rules) -> str:
    judgement = advice.judgement
    first = judgement.shortfalls(place)[:1] if judgement is not None else []
    return next(
        (f"{rule.title} ({rule.rule})" for rule in (rules.reason(each.demand.rule) for each in first)), "nothing"
    )


def codes_section(advice: Advice) -> Section:
    """The designations asked for; any code that covers them serves as well."""
    codes = advice.codes
    lines = [
        f"DIN 51825: {', '.join(codes.din) or f'none, since {codes.din_none}'}",
        f"ISO 6743-9: {', '.join(codes.iso) or f'none, since {codes.iso_none}'}",
    ]
    given = codes.din or codes.iso
    after = ["These are the lowest codes that suffice; a higher letter serves as well."] if given else []
    if codes.din and (letters := base_oil_letters(advice)):
        named = listed([f"{letter} for {title}" for title, letter in letters.items()])
        after.append(
            "The code alone would buy mineral oil, which is ruled out here. Ask for the base oil as well; its letters "
            f"stand before the NLGI grade: {named}."
        )
    return Section("codes", "Designations", (Tree(leaf(*lines)), *map(Para, after)))


def base_oil_letters(advice: Advice) -> dict[str, str]:
    """The letters of DIN 51502 of the recommended base oils, where no oil without a letter passes the musts."""
    told: Any = advice.knowledge.designations.get("din", {})
    if "base_oil" not in told or advice.oils is None:
        return {}
    table, name = advice.knowledge.tables[str(told["base_oil"]["table"])], str(told["base_oil"]["property"])
    domain, column = advice.knowledge.properties[name].domain, advice.oils.columns[name]
    letters = {row.id: str(row.cells.get(str(told["base_oil"]["letters"]), "")) for row in table.rows}
    passing = {str(domain.decode(value)) for value, items in column.by_value.items() if items & advice.oils.passing}
    recommended = [value for line in advice.docket if line.row == name for value in line.values]
    if not recommended or any(not letters.get(each) for each in passing):
        return {}
    return {domain.label(value): letters[str(value)] for value in recommended}


def quantities_section(advice: Advice, whys: list[Why]) -> Section:
    """Fill, quantity and interval: figure, formula, how surely its source was read, and its guard."""
    nodes = []
    for each in whys:
        under = [line for premise in each.premises if premise.working for line in working_lines(premise.working)]
        under += dict.fromkeys(line for premise in each.premises for line in _behind(advice, premise))
        under += [f"{reason.demand}. {reason.rule.because} ({reason.rule.id})" for reason in each.reasons]
        under += each.notes
        if each.waits:
            under.append(f"waits for: {', '.join(each.waits)}")
        nodes.append(Node(f"{each.title}: {each.conclusion}", leaf(*dict.fromkeys(under))))
    return Section("quantities", "Quantities and interval", (Tree(tuple(nodes)),))


def _behind(advice: Advice, premise: Premise) -> Iterator[str]:
    """The formulas of the same step behind a figure."""
    known = advice.knowledge.computations
    for each in premise.premises:
        if each.working is not None and known[each.fact].step == known[premise.fact].step:
            if isinstance(known[each.fact].how, Formed):
                yield f"{each.title} = {each.value}: {each.working.equation}; {each.working.substituted}"
            yield from _behind(advice, each)


def working_lines(working: Working) -> list[str]:
    """A working line by line: equation, numbers put in, what the symbols are, source, warnings."""
    symbols = "; ".join(f"{each.symbol} = {each.value} ({each.title})" for each in working.symbols)
    numbers = [working.equation, working.substituted] if working.equation != working.substituted else [working.equation]
    source = [f"source: {'; '.join(working.sources)}"] if working.sources else []
    return [*numbers, f"with {symbols}", *source, *(f"warning: {each}" for each in working.warnings)]


def cautions_section(advice: Advice) -> Section | None:
    """The cautions with their full text, what they concern, and the rules that gave them."""
    nodes = []
    for each in advice.cautions:
        caution = advice.knowledge.cautions[each.caution]
        concerns = [] if advice.withheld or not each.concerns else [f"concerns: {', '.join(each.concerns)}"]
        source = f"source: {'; '.join(say_source(cited, advice.knowledge) for cited in caution.source)}"
        rules = f"rules: {', '.join(each.rules)}"
        nodes.append(Node(caution.text, leaf(*concerns, f"{rules}; {source}")))
    given = {each.caution for each in advice.cautions}
    standing = [
        each.text for name, each in advice.knowledge.cautions.items() if each.standing and name not in given
    ]
    blocks: list[Block] = [Tree(tuple(nodes))] if nodes else []
    if standing:
        blocks += [Para("At every point:"), Tree(leaf(*standing))]
    return Section("cautions", "Cautions", tuple(blocks)) if blocks else None


def last_word(advice: Advice) -> Section:
    """Whose word comes before this advice."""
    given = {each.caution for each in advice.cautions}
    texts = [advice.knowledge.cautions[name].text for name in _LAST_WORD if name in given]
    return Section(
        "last",
        "Whose word comes first",
        (
            Para("This is the advice of rules. The machine maker, local codes and licensed practice come before it."),
            Tree(leaf(*texts)),
        ),
    )


def about(advice: Advice) -> str:
    """One line about the case."""
    kind = harmless(advice.knowledge.point_kind.title)
    return f"{kind}. Knowledge {advice.knowledge.fingerprint}."
