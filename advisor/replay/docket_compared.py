"""Compare the docket, its demands, the codes and the quantities with what a scenario expects of them."""

from advisor.advice import Advice, Line
from advisor.conditions import Domain, Value, holds
from advisor.designations import Designer, din_serves, iso_serves
from advisor.explanation.falling import Demands, asks, falling, nothing, say_at_least, turns_against
from advisor.explanation.words import say_test
from advisor.quantities import show
from advisor.replay import reasons
from advisor.replay.differing import Difference
from advisor.replay.expectations import (
    ASKING,
    INTERVAL_ROW,
    AsksAtLeast,
    AsksFor,
    Bars,
    CodeServes,
    FillIs,
    IntervalIs,
    KeepsFrom,
    Recommends,
    fill_row,
)
from advisor.specification import mentions

_WITHHELD = "withheld"


def recommends(expected: Recommends, advice: Advice) -> Difference | None:
    """Whether the docket recommends something expected, and nothing beyond what is accepted."""
    values = recommended(advice, expected.property)
    if set(values) & set(expected.expected) and set(values) <= {*expected.expected, *expected.accept}:
        return None
    wanted = _listed(expected.expected) + (f" (accepted: {_listed(expected.accept)})" if expected.accept else "")
    missing = [each for each in expected.expected if each not in values]
    surplus = [each for each in values if each not in {*expected.expected, *expected.accept}]
    because = tuple(word for each in (*missing, *surplus) for word in _of_value(advice, expected.property, each))
    return Difference(
        "recommended",
        expected.property,
        wanted,
        _got(advice, expected.property),
        tuple(dict.fromkeys((*because, *reasons.of_property(advice, expected.property)))),
        expected.mark,
    )


def keeps_from(expected: KeepsFrom, advice: Advice) -> Difference | None:
    """Whether none of the values is recommended."""
    found = [each for each in recommended(advice, expected.property) if each in expected.values]
    if not found:
        return None
    because = tuple(word for each in found for word in _of_value(advice, expected.property, each))
    return Difference(
        "must_not",
        expected.property,
        f"none of {_listed(expected.values)}",
        _got(advice, expected.property),
        (*because, *reasons.of_property(advice, expected.property)),
        expected.mark,
    )


def _line(advice: Advice, name: str) -> Line | None:
    """The docket row that recommends the property."""
    rows = [row.id for row in advice.knowledge.docket if row.recommends == name]
    return next((line for line in advice.docket if line.row in rows), None)


def recommended(advice: Advice, name: str) -> tuple[Value, ...]:
    """What the docket recommends of a property; nothing where its row does not apply."""
    line = _line(advice, name)
    return () if line is None or line.skipped else line.values


def _got(advice: Advice, name: str) -> str:
    line = _line(advice, name)
    if line is None:
        return _WITHHELD if advice.withheld else "no row of the docket"
    return "no recommendation, since the row is left out" if line.skipped else _listed(line.values)


def _listed(values: tuple[Value, ...]) -> str:
    return ", ".join(map(_word, values)) or "nothing"


def _word(value: Value) -> str:
    return f"{value:g}" if isinstance(value, float) else str(value)


def _of_value(advice: Advice, name: str, value: Value) -> tuple[str, ...]:
    """What became of one value: barred by whom, or so many steps short of the shoulds."""
    line = _line(advice, name)
    if line is None:
        return ()
    if line.barred and value in line.barred:
        return (f"{_word(value)} is barred by {', '.join(line.barred[value])}.",)
    steps = [each.steps for each in line.candidates if each.value == value]
    if not steps:
        return reasons.of_value(advice, name, value, _word(value))
    return (f"{_word(value)} is {', '.join(map(str, min(steps)))} steps short, level by level.",)


def bars(expected: Bars, advice: Advice) -> Difference | None:
    """Whether a must, or the must of this rule, rules the value out."""
    rules = _barring(advice, expected.property, expected.value)
    if rules and (not expected.rule or reasons.named(rules, expected.rule)):
        return None
    got = f"barred by {', '.join(rules)}" if rules else _WITHHELD if advice.withheld else "not barred"
    because = (
        reasons.of_rule(advice, expected.rule, str(expected.value))
        if expected.rule
        else reasons.of_property(advice, expected.property)
    )
    what = f"{expected.property} {_word(expected.value)}"
    return Difference("barred", what, f"barred by {expected.rule or 'any rule'}", got, because, expected.mark)


def _barring(advice: Advice, name: str, value: Value) -> list[str]:
    """The rules that bar the value: as the docket tells it, and by musts on the property itself."""
    line = _line(advice, name)
    rules = list((line.barred or {}).get(value, ())) if line is not None else []
    coded = advice.knowledge.properties[name].domain.code(value)
    always = [
        {demand.rule for demand in _musts(demands) if holds(demand.test, {name: coded}) is False}
        for demands in falling(advice, name)
    ]
    return list(dict.fromkeys([*rules, *sorted(set.intersection(*always))]))


def asks_for(expected: AsksFor, advice: Advice) -> Difference | None:
    """Whether a must or a should asks for the value, turns against it, or leaves it free."""
    found = strengths(advice, expected.property, expected.value)
    if expected.strength in found or _at_level(expected, advice):
        return None
    about = f" {_word(expected.value)}" if expected.value is not None else ""
    return Difference(
        "demands",
        expected.property,
        f"{_strength_words(expected.strength)}{about}",
        f"{' and '.join(found)}{about}",
        reasons.of_property(advice, expected.property),
        expected.mark,
    )


def _at_level(expected: AsksFor, advice: Advice) -> bool:
    """Whether a should of the expected level asks for the value, whatever is recommended."""
    if expected.value is None or not expected.strength.startswith("should_") or advice.withheld:
        return False
    domain, levels = advice.knowledge.properties[expected.property].domain, ASKING[expected.strength]
    return all(
        any(asks((demand,), expected.value, domain) for demand in demands if demand.level in levels)
        for demands in falling(advice, expected.property)
    )


def strengths(advice: Advice, name: str, value: Value | None) -> list[str]:
    """How the demands on all that is recommended stand to a value; without one: to more than nothing of it."""
    if advice.withheld:
        return [_WITHHELD]
    domain = advice.knowledge.properties[name].domain
    combinations = falling(advice, name)
    none = nothing(domain)
    wanted = [value] if value is not None else [each for each in domain.choices if each != none]
    found = []
    if any(all(asks(_musts(demands), each, domain) for demands in combinations) for each in wanted):
        found.append("must")
    elif any(all(_wished(demands, each, domain) for demands in combinations) for each in wanted):
        found.append("should")
    if none and all(any(turns_against(one, domain) for one in demands) for demands in combinations):
        found.append("unwanted")
    return found or ["allowed"]


def _musts(demands: Demands) -> Demands:
    return tuple(demand for demand in demands if demand.must)


def _wished(demands: Demands, value: Value, domain: Domain) -> bool:
    return any(asks((demand,), value, domain) for demand in demands if not demand.must)


def asks_at_least(expected: AsksAtLeast, advice: Advice) -> Difference | None:
    """Whether the musts (or one of the shoulds) that fall on what is recommended say at least this."""
    name = expected.property
    combinations = () if advice.withheld else falling(advice, name)
    if combinations and all(_says(expected, demands, advice) for demands in combinations):
        return None
    said = [demand for demand in advice.specification.demands if demand.property == name]
    got = "; ".join(
        dict.fromkeys(
            f"{_strength_words('must' if each.must else f'should_{each.level}')} be "
            f"{say_test(each.test, advice.knowledge)}"
            for each in said
        )
    )
    wanted = f"{_strength_words(expected.strength)} be {expected.written}"
    return Difference(
        "demands",
        name,
        wanted,
        _WITHHELD if advice.withheld else got or "no demand",
        reasons.of_property(advice, name),
        expected.mark,
    )


def _strength_words(strength: str) -> str:
    word, _, level = strength.partition("_")
    return f"{word} (level {level})" if level else word


def _says(expected: AsksAtLeast, demands: Demands, advice: Advice) -> bool:
    domain = advice.knowledge.properties[expected.property].domain
    if expected.strength == "must":
        return say_at_least(_musts(demands), expected.test, domain)
    levels = ASKING[expected.strength]
    return any(say_at_least((demand,), expected.test, domain) for demand in demands if demand.level in levels)


def code_serves(expected: CodeServes, advice: Advice) -> Difference | None:
    """Whether a grease of the expected code meets a code that is asked for."""
    codes, none = (
        (advice.codes.din, advice.codes.din_none)
        if expected.standard == "din"
        else (advice.codes.iso, advice.codes.iso_none)
    )
    if expected.code is None:
        same = not codes
    else:
        same = any(_serves(Designer(advice.knowledge), expected, code) for code in codes)
    if same:
        return None
    because = (f"No code: {none}.",) if none else tuple(f"{code} is the lowest code that suffices." for code in codes)
    return Difference(
        "codes", expected.standard, expected.code or "no code", ", ".join(codes) or "no code", because, expected.mark
    )


def _serves(designer: Designer, expected: CodeServes, asked: str) -> bool:
    if expected.standard == "din":
        return din_serves(designer.read_din(str(expected.code)), designer.read_din(asked))
    return iso_serves(designer.read_iso(str(expected.code)), designer.read_iso(asked))


def interval(expected: IntervalIs, advice: Advice) -> Difference | None:
    """Whether the interval that is shown lies between the ends, or none is shown."""
    line = next((each for each in advice.quantities if each.row == INTERVAL_ROW and not each.skipped), None)
    fact = advice.facts.get(line.facts[0]) if line is not None else None
    value = fact.value if fact is not None else None
    if expected.ends is None:
        same = not isinstance(value, float)
    else:
        same = isinstance(value, float) and expected.ends[0] <= value <= expected.ends[1]
    if same:
        return None
    row = next(each for each in advice.knowledge.docket if each.id == INTERVAL_ROW)
    unit = advice.knowledge.domain(row.facts[0]).unit
    wanted = " to ".join(show(each, unit) for each in expected.ends) if expected.ends else "no figure"
    got = show(value, unit) if isinstance(value, float) else "no figure"
    because = reasons.of_fact(advice, row.facts[0])
    for name in sorted(mentions(row.shown_if)):
        because += reasons.of_fact(advice, name)
    return Difference("interval", "", wanted, got, because, expected.mark)


def fill(expected: FillIs, advice: Advice) -> Difference | None:
    """Whether the fill of the part is shown with these ends."""
    row = next(each for each in advice.knowledge.docket if each.id == fill_row(expected.part))
    line = next((each for each in advice.quantities if each.row == row.id and not each.skipped), None)
    values = (
        [fact.value if (fact := advice.facts.get(name)) else None for name in row.facts] if line is not None else []
    )
    if values == [expected.low, expected.high]:
        return None
    got = (
        " to ".join(reasons.written_fact(advice, advice.facts.get(name)) for name in row.facts)
        if line is not None
        else "no fill"
    )
    because = tuple(dict.fromkeys(word for name in row.facts for word in reasons.of_fact(advice, name)))
    return Difference(
        "fill", expected.part, f"{show(expected.low, '%')} to {show(expected.high, '%')}", got, because, expected.mark
    )
