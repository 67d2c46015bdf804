"""What was left open: what each branch of an advice recommends, and which of them decides about a product."""

from collections.abc import Iterator

from advisor.advice import Advice
from advisor.explanation.blocks import Grid, Para, Section
from advisor.explanation.reasons import say_line


def ends_of(advice: Advice) -> Iterator[tuple[str, Advice]]:
    """Every advice behind a merged one, with its label; a stretch of a range has two ends."""
    for branch in advice.branches:
        yield branch.label, branch.advice
        if branch.other_end is not None:
            yield f"{branch.label}, other end", branch.other_end


def deciding_end(advice: Advice, place: int) -> Advice:
    """The advice that gave a product its verdict; without branches the advice itself."""
    verdict = next((each.verdict for each in advice.shelf if each.place == place), None)
    for _, end in ends_of(advice):
        if any(each.place == place and each.verdict is verdict for each in end.shelf):
            return end
    return advice


def variants_section(advice: Advice) -> Section | None:
    """What the branches share stands in the docket; here stands where they differ."""
    ends = list(ends_of(advice))
    if not ends:
        return None
    heads = ("Row", *(label for label, _ in ends))
    rows = [("State", *(end.state.value for _, end in ends))]
    for line in advice.docket:
        said = [say_line(end, end.line(line.row)) for _, end in ends]
        if len(set(said)) > 1:
            rows.append((line.title, *said))
    told = Para(
        "The case was run once for each value that was left open. Elsewhere the docket shows what all of them share."
    )
    return Section("variants", "Variants", (told, Grid(heads, tuple(rows))))
