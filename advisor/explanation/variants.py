"""What was left open: what all variants share, what differs in each, and where along a range what changes."""

from collections.abc import Iterator, Sequence
from textwrap import shorten

from advisor.advice import KAPPA, Advice, Branch, Course, Line, Part, Reading, Span, said_at
from advisor.conditions import Domain, Value
from advisor.explanation.blocks import Block, Node, Para, Section, Tree, leaf
from advisor.explanation.contrasts import VERDICTS
from advisor.explanation.reasons import say_line
from advisor.explanation.seeing import say_known
from advisor.explanation.words import listed, say_source, say_value, title_of
from advisor.formulas.formula import plain, with_unit
from advisor.shelf import USABLE, Verdict

_USABLE_WORDS = frozenset(each.value for each in USABLE)
_FEW = 12
_SHORT_CAUTION = 60
_STANDARDS = {"din": "DIN 51825", "iso": "ISO 6743-9"}
_PLAIN_TITLES = {"state": "State", "withheld": "Withheld", "first": "First on the shelf"}
_AND_A_HALF = 1.5
"""Steps up to which two values are neighbours; the far end of a range need not lie on the step."""


def variants_section(advice: Advice, *, full: bool) -> Section | None:
    """What all runs of the case share, then what differs in each variant, then what changes along a range."""
    if not advice.runs:
        return None
    blocks: list[Block] = [Para(each) for each in lead(advice)]
    if advice.branches:
        nodes = [Node("What all of them share", leaf(*shared_lines(advice)))]
        nodes += [Node(title, leaf(*lines)) for title, lines in variant_lines(advice)]
        blocks.append(Tree(tuple(nodes)))
    blocks += _along(advice, full=full)
    figures = figure_lines(advice, full=full)
    if figures:
        blocks += [Para("Figures, lowest to highest:"), Tree(leaf(*figures))]
    return Section("variants", "What was left open", tuple(blocks))


def lead(advice: Advice) -> Iterator[str]:
    """What was run, what the advice is over all of it, and how sure the places of change are."""
    if advice.branches:
        yield (
            f"The case was run for {len(advice.branches)} variants. The docket shows what all of them share, and each "
            "product has its worst verdict."
        )
    elif advice.held_over:
        yield f"The docket holds for {advice.held_over} as one, and each product has its worst verdict."
    for name in dict.fromkeys(name for branch in advice.branches for name in branch.contested):
        fork = advice.knowledge.forks[name]
        sources = "; ".join(say_source(each, advice.knowledge) for each in fork.source)
        yield f"Contested: {fork.title}. {fork.because}" + (f" Source: {sources}." if sources else "")
    if advice.span is not None:
        yield _how_sure(advice, advice.span)
    yield f"What decides, the derivations and the computations are told for one of the runs: {advice.told_for}."


def _how_sure(advice: Advice, span: Span) -> str:
    domain = advice.knowledge.domain(span.fact)
    step = with_unit(domain.step.size if domain.step else 1.0, "K" if domain.unit == "°C" else domain.unit)
    if span.looked_at == span.values:
        return f"Each of the {span.values} values on the step of {step} was looked at."
    count = f"{span.looked_at} of {plain(span.values)} values on the step of {step} were looked at"
    if span.surely:
        return f"{count}; between them nothing can change."
    return (
        f"{count}. Where a change is named it is exact, unless it says between which values it lies; a change that is "
        "taken back between two values looked at would not be seen. Measure more closely, or answer a narrower range."
    )


def shared_lines(advice: Advice) -> list[str]:
    """What the docket recommends in every variant."""
    found = [f"{line.title}: {_classes(advice, line.row, line.values)}" for line in advice.docket if line.values]
    codes = (*advice.codes.din, *advice.codes.iso)
    return [*found, *([f"Code: {', '.join(codes)}"] if codes else [])] or ["no class at all"]


def variant_lines(advice: Advice) -> list[tuple[str, list[str]]]:
    """Each variant with what it says that not all of them say."""
    found = []
    for number, branch in enumerate(advice.branches, start=1):
        found.append((f"Variant {number}: {branch.label}", list(_own_lines(advice, branch)) or ["nothing of its own"]))
    return found


def _own_lines(advice: Advice, branch: Branch) -> Iterator[str]:
    own, every = branch.advice, [each.advice for each in advice.branches]
    if len({each.state for each in every}) > 1:
        yield f"State: {own.state.value}"
    for shared in advice.docket:
        line = own.line(shared.row)
        if _recommends(advice, shared.row) and shared.differs:
            yield f"{line.title}: {_beside(advice, own, shared, line)}"
        elif _asks_otherwise([each.line(shared.row) for each in every]) and not _recommends(advice, shared.row):
            yield f"{line.title}: {say_line(own, line)}"
    if len({each.codes for each in every}) > 1:
        yield f"Code: {', '.join((*own.codes.din, *own.codes.iso)) or own.codes.din_none}"
    if len({_first(each) for each in every}) > 1:
        yield f"First on the shelf: {_first(own) or 'none fits'}"


def _asks_otherwise(lines: Sequence[Line]) -> bool:
    """Whether other rules ask in some than in others; limits that merely move are no difference."""
    musts = ({(each.property, each.rule) for each in line.demands if each.must} for line in lines)
    return len(set(map(frozenset, musts))) > 1


def _beside(advice: Advice, own: Advice, shared: Line, line: Line) -> str:
    """The classes of one variant beside those that all share; where they change within it, how they go."""
    course = next((each for each in own.courses if (each.what, each.name) == ("row", line.row)), None)
    if course is not None:
        return say_course(own, course)
    more = [value for value in line.values if value not in shared.values]
    if line.skipped or not line.values:
        return say_line(own, line)
    if not shared.values:
        return _classes(advice, line.row, line.values)
    return f"also {_classes(advice, line.row, more)}" if more else "nothing more"


def _recommends(advice: Advice, row: str) -> str:
    return next((each.recommends for each in advice.knowledge.docket if each.id == row), "")


def _classes(advice: Advice, row: str, values: Sequence[Value]) -> str:
    domain = advice.knowledge.properties[_recommends(advice, row)].domain
    return listed([_class(domain, each) for each in values])


def _class(domain: Domain, value: Value) -> str:
    """A class in words; a grade without its unit, which the row has in its title."""
    return f"{value:g}" if isinstance(value, float) else say_value(domain, value)


def _first(advice: Advice) -> str:
    return next((each.item for each in advice.shelf if each.verdict in USABLE), "")


# ---- along a range ---------------------------------------------------------------------------------------------------


def _along(advice: Advice, *, full: bool) -> Iterator[Block]:
    """Where along the range what changes, variant by variant."""
    if advice.span is None:
        return
    title = title_of(advice.span.fact, advice.knowledge)
    variants = dict.fromkeys(each.variant for each in advice.courses)
    if not variants:
        yield Para(f"Nothing that is recommended changes along the {title}.")
    for variant in variants:
        of = f", {variant}" if variant else ""
        lines = course_lines(advice, variant, full=full)
        yield Para(f"What changes along the {title}{of}:")
        yield Tree(leaf(*lines))


def course_lines(advice: Advice, variant: str, *, full: bool = True) -> list[str]:
    """Everything that changes along a range; the short list leaves most products out, and says so."""
    found, shown, left_out = [], 0, 0
    for each in (course for course in advice.courses if course.variant == variant):
        if each.what == "product" and not full:
            usable = any(part.reading in _USABLE_WORDS for part in each.parts)
            if not usable or shown >= _FEW:
                left_out += 1
                continue
            shown += 1
        found.append(f"{_title(advice, each)}: {say_course(advice, each)}")
    if left_out:
        found.append(f"{left_out} more products change their verdict; the full report lists them")
    return found


def _title(advice: Advice, course: Course) -> str:
    knowledge, what, name = advice.knowledge, course.what, course.name
    if what in {"row", "figure"}:
        title = next(row.title for row in knowledge.docket if row.id == name)
        return title if what == "row" else f"{title}, a figure"
    if what == "caution":
        return f"Caution '{shorten(knowledge.cautions[name].text, _SHORT_CAUTION, placeholder=' ...')}'"
    if what == "referral":
        return f"Referral to {knowledge.referrals[name].to}"
    if what == "code":
        return _STANDARDS.get(name, name)
    heads = {"conflict": "Conflict about ", "question": "Open: "}
    return f"{heads[what]}{title_of(name, knowledge)}" if what in heads else _PLAIN_TITLES.get(what, name)


def say_course(advice: Advice, course: Course) -> str:
    """How one thing goes along a range; of a row, over which stretches each class is recommended."""
    if course.what == "row":
        return "; ".join(_by_class(advice, course))
    places = [(number, each) for number, each in enumerate(course.parts)]
    return "; ".join(f"{_say_reading(course, each.reading)} {_stretch(advice, course, [n])}" for n, each in places)


def _by_class(advice: Advice, course: Course) -> Iterator[str]:
    """Each class with the stretches over which it is recommended, then where there is none."""
    row = next(each for each in advice.knowledge.docket if each.id == course.name)
    domain = advice.knowledge.properties[row.recommends].domain
    sets = [each.reading if isinstance(each.reading, tuple) else () for each in course.parts]
    for value in dict.fromkeys(value for each in sets for value in each):
        numbers = [number for number, each in enumerate(sets) if value in each]
        where = "throughout" if len(numbers) == len(sets) else _stretch(advice, course, numbers)
        yield f"{_class(domain, value)} {where}"
    for said, reading in (("nothing is left", ()), ("does not apply", None)):
        numbers = [number for number, each in enumerate(course.parts) if each.reading == reading]
        if numbers:
            yield f"{said} {_stretch(advice, course, numbers)}"


def _stretch(advice: Advice, course: Course, numbers: Sequence[int]) -> str:
    """Where some parts of a course lie: `to 28 °C, from 30 °C to 37 °C and from 39 °C`."""
    assert advice.span is not None  # noqa: S101 - only ranges have courses
    domain = advice.knowledge.domain(advice.span.fact)
    joined: list[list[int]] = []
    for number in numbers:
        if joined and joined[-1][-1] == number - 1:
            joined[-1].append(number)
        else:
            joined.append([number])
    return listed([_where(course.parts, each[0], each[-1], domain) for each in joined], "and")


def _where(parts: Sequence[Part], first: int, last: int, domain: Domain) -> str:
    low, high = said_at(parts[first].low, domain), said_at(parts[last].high, domain)
    if parts[first].low == parts[last].high:
        return f"at {low}"
    if not first:
        return f"to {high}"
    before = parts[first - 1].high
    step = domain.step.size if domain.step else 1.0
    exact = parts[first].low - before < _AND_A_HALF * step
    start = f"from {low}" if exact else f"from somewhere between {said_at(before, domain)} and {low}"
    return start if last == len(parts) - 1 else f"{start} to {high}"


def _say_reading(course: Course, reading: Reading) -> str:
    if isinstance(reading, bool):
        return (
            ("given" if reading else "not given")
            if course.what in {"caution", "figure"}
            else "yes"
            if reading
            else "no"
        )
    if isinstance(reading, str):
        return VERDICTS[Verdict(reading)] if course.what == "product" else reading or "none"
    return ", ".join(map(str, reading or ())) or "none"


# ---- figures ---------------------------------------------------------------------------------------------------------


def figure_lines(advice: Advice, *, full: bool) -> list[str]:
    """Figures that are not the same throughout, lowest to highest."""
    shown = {name for line in advice.quantities if not line.skipped for name in line.facts}
    computed = (name for name in advice.spread if name in advice.knowledge.computations and (full or name in shown))
    return [
        f"{title_of(name, advice.knowledge)}: {say_known(advice, name)}"
        for name in (KAPPA, *computed)
        if name in advice.spread and all(isinstance(each, float | int) for each in advice.spread[name].values)
    ]
