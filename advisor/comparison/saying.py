"""The regions of a comparison and their witnesses in words."""

from advisor.boxes import Among, Box, Lacking, Side, Stretch, Ticks
from advisor.comparison.regions import Witness
from advisor.conditions import Domain
from advisor.explanation.words import domain_of, say_value, title_of
from advisor.knowledge import Knowledge


def say_witness(witness: Witness, knowledge: Knowledge) -> str:
    """What a region was found on."""
    seen = ", ".join(
        f"{title_of(name, knowledge)} {say_value(domain_of(name, knowledge), value)}"
        for name, value in witness.record.items()
    )
    if witness.answers is None:
        return f"record: {seen or 'anything'}"
    answers = ", ".join(f"{name}: {text}" for name, text in witness.answers.items())
    return f"whole case: like {witness.like}{f' with {answers}' if answers else ''}; there {seen}"


def say_box(box: Box, knowledge: Knowledge) -> str:
    """A region in words."""
    words = []
    for key, side in box.sides.items():
        if isinstance(key, tuple):
            order = " or ".join(sorted(map(str, side.values))) if isinstance(side, Among) else ""
            words.append(f"{title_of(key[0], knowledge)} {order} {title_of(key[1], knowledge)}")
        else:
            words.append(f"{title_of(key, knowledge)} {_say_side(side, key, knowledge)}")
    return ", ".join(words) or "always"


def _say_side(side: Side, name: str, knowledge: Knowledge) -> str:
    domain = domain_of(name, knowledge)
    if isinstance(side, Lacking):
        return "without a value"
    if isinstance(side, Ticks):
        parts = [f"with {domain.label(tuple(sorted(side.set)))}"] if side.set else []
        parts += [f"without {domain.label(tuple(sorted(side.clear)))}"] if side.clear else []
        return " and ".join(parts) or "with a value"
    if isinstance(side, Among):
        values = sorted(side.values, key=str)
        return f"{'' if side.wanted else 'other than '}{' or '.join(say_value(domain, each) for each in values)}"
    return _say_stretch(side, domain)


def _say_stretch(side: Stretch, domain: Domain) -> str:
    if side.low == side.high:
        return f"exactly {say_value(domain, side.low)}"
    parts = []
    if side.low > domain.low or side.low_open:
        parts.append(f"{'above' if side.low_open else 'at least'} {say_value(domain, side.low)}")
    if side.high < domain.high or side.high_open:
        parts.append(f"{'below' if side.high_open else 'at most'} {say_value(domain, side.high)}")
    return " and ".join(parts) or "with a value"
