"""Rules that say nothing new: duplicates, rules within another rule, rules within several others together."""

from collections.abc import Iterator, Sequence

from advisor.anomalies.finding import Finding, Kind
from advisor.anomalies.ground import Ground, Spoken
from advisor.anomalies.proving import Proving
from advisor.boxes import Box, covered
from advisor.conditions import Either, holds
from advisor.knowledge import Asks, Rule, Sets, Warns

_Key = tuple[object, ...]


def repeats(ground: Ground, proving: Proving) -> Iterator[Finding]:
    """Every rule whose conclusions are all drawn by other rules as well; of two that say the same, the later one."""
    by_rule: dict[str, list[Spoken]] = {}
    by_key: dict[_Key, list[Spoken]] = {}
    for spoken in ground.spoken():
        by_rule.setdefault(spoken.rule.id, []).append(spoken)
        by_key.setdefault(_key(spoken), []).append(spoken)
    superfluous: set[str] = set()
    for name, own in sorted(by_rule.items(), key=lambda item: _place(item[1][0].rule), reverse=True):
        others = _others(name, own, by_key, superfluous, ground)
        if others is not None:
            superfluous.add(name)
            yield _finding(own, others, by_rule, ground, proving)


def _place(rule: Rule) -> tuple[str, int, int]:
    return rule.mark.file, rule.mark.line, rule.mark.column


def _key(spoken: Spoken) -> _Key:
    """What conclusions must share for the one to stand for the other."""
    each = spoken.instance.then[spoken.place]
    if isinstance(each, Asks):
        # A must is met or missed; every should is counted by itself.
        return ("must", each.property) if each.level == 0 else ("should", each.property, each.level, each.test)
    if isinstance(each, Sets):
        return ("set", each.name, each.value, spoken.rule.step)
    return ("caution", each.caution) if isinstance(each, Warns) else ("refer", each.to, each.withhold)


def _others(
    name: str, own: Sequence[Spoken], by_key: dict[_Key, list[Spoken]], gone: set[str], ground: Ground
) -> list[str] | None:
    """The fewest other rules found that draw all conclusions of a rule; nothing where some is its own."""
    used: dict[str, None] = {}
    spoken_at_all = False
    for spoken in own:
        boxes = ground.boxes(spoken.region)
        if not boxes:
            continue
        spoken_at_all = True
        same = [
            each
            for each in by_key[_key(spoken)]
            if each.rule.id != name and each.rule.id not in gone and _as_strong(each, spoken, ground)
        ]
        if not same or not _drawn(boxes, same, ground):
            return None
        used |= dict.fromkeys(each.rule.id for each in _needed(boxes, same, ground))
    return list(used) if spoken_at_all else None


def _as_strong(other: Spoken, own: Spoken, ground: Ground) -> bool:
    """Whether what meets the other's demand meets one's own."""
    theirs, mine = other.instance.then[other.place], own.instance.then[own.place]
    if not isinstance(theirs, Asks) or not isinstance(mine, Asks) or theirs.test == mine.test:
        return True
    allowed = ground.boxes(mine.test)
    return all(covered(box, allowed) for box in ground.boxes(theirs.test))


def _drawn(boxes: Sequence[Box], by: Sequence[Spoken], ground: Ground) -> bool:
    regions = [box for each in by for box in ground.boxes(each.region)]
    names = {name for region in regions for name in region.names}
    # One case that lies in none of the regions settles most questions at once.
    for box in boxes:
        case = box.witness(names)
        if not box.may_be_wider and not any(holds(each.region, case) for each in by):
            return False
    return all(covered(box, regions) for box in boxes)


def _needed(boxes: Sequence[Box], same: list[Spoken], ground: Ground) -> list[Spoken]:
    """One of them that suffices alone, else the few without which the regions are not covered."""
    alone = next((each for each in same if _drawn(boxes, [each], ground)), None)
    if alone is not None:
        return [alone]
    kept = list(same)
    for each in same:
        rest = [other for other in kept if other is not each]
        if _drawn(boxes, rest, ground):
            kept = rest
    return kept


def _finding(
    own: Sequence[Spoken], others: list[str], by_rule: dict[str, list[Spoken]], ground: Ground, proving: Proving
) -> Finding:
    rule = own[0].rule
    kind = _kind(own, others, by_rule, ground)
    spoken = next(each for each in own if ground.boxes(each.region))
    theirs = [each for other in others for each in by_rule[other] if _key(each) == _key(spoken)]
    box, also = next(
        (met, each)
        for each in theirs
        for one in ground.boxes(spoken.region)
        for two in ground.boxes(each.region)
        if (met := one.intersect(two)) is not None
    )
    witness = proving.shows(box, [spoken.region, Either((also.region,))])
    named = " and ".join(f"'{other}'" for other in others)
    messages = {
        "duplicate": f"rule '{rule.id}' says the same as {named}",
        "subsumed": f"rule '{rule.id}' only speaks where {named} says the same already",
        "redundant": f"rule '{rule.id}' only speaks where one of {named} says the same already",
    }
    return Finding(
        kind,
        rule.mark,
        messages[kind],
        f"take '{rule.id}' out, or let it say something of its own",
        witness,
        (rule.id, *others),
    )


def _kind(own: Sequence[Spoken], others: list[str], by_rule: dict[str, list[Spoken]], ground: Ground) -> Kind:
    if len(others) > 1:
        return "redundant"
    back = by_rule[others[0]]
    same = all(
        (mine := [each for each in own if _key(each) == _key(spoken) and _as_strong(each, spoken, ground)])
        and _drawn(ground.boxes(spoken.region), mine, ground)
        for spoken in back
        if ground.boxes(spoken.region)
    )
    return "duplicate" if same else "subsumed"
