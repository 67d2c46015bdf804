"""How facts, values, conditions, demands and steps are said: one way for every screen and report."""

import re
import unicodedata
from collections.abc import Iterable, Mapping, Sequence

from advisor.case import Fact
from advisor.conditions import (
    Bound,
    Coded,
    Condition,
    Domain,
    Either,
    Every,
    FactRef,
    Record,
    Stated,
    Ticked,
    Value,
    Valueless,
    holds,
    leaves,
)
from advisor.conditions.terms import Term, Void
from advisor.knowledge import CLOSING_FACTS, Band, Citation, Instance, Knowledge
from advisor.knowledge.rules import PLACEHOLDER
from advisor.quantities import show
from advisor.specification import Demand

OPERATORS = {"<": "below", "<=": "at most", ">": "above", ">=": "at least", "=": "equal to", "!=": "other than"}
LEVELS = ("must", "strong wish (level 1)", "strong wish (level 2)", "wish (level 3)", "taste (level 4)")
HOW_SURE = {"yes": "read", "from memory": "from memory", "no source": "no source"}
NO_VALUE = "no value"
NOT_KNOWN = "not known"
SHEET_SILENT = "its sheet does not say"

_PICTURES = 0x2400
_DELETE = 0x7F


def harmless(text: str) -> str:
    """The text on one line, with control characters as signs that a terminal only prints.

    >>> harmless("Fan 3" + chr(27) + "[31m" + chr(10) + "drive end")
    'Fan 3␛[31m drive end'
    """
    if text.isascii() and text.isprintable():
        return text
    return "".join(map(_harmless, text))


def _harmless(sign: str) -> str:
    if sign.isprintable():
        return sign
    if sign in "\n\r\t\u2028\u2029" or unicodedata.category(sign) == "Zs":
        return " "
    if ord(sign) < ord(" "):
        return chr(_PICTURES + ord(sign))
    return "␡" if ord(sign) == _DELETE else f"<{ord(sign):04X}>"


def domain_of(name: str, knowledge: Knowledge) -> Domain:
    """The domain of a fact, a property, or a result that the closing step sees."""
    return CLOSING_FACTS[name] if name in CLOSING_FACTS else knowledge.domain(name)


def title_of(name: str, knowledge: Knowledge) -> str:
    """The title of a fact or property."""
    for known in (knowledge.facts, knowledge.computations, knowledge.properties):
        if name in known:
            return known[name].title
    return name.replace("_", " ")


def say_value(domain: Domain, value: Coded | Value | Void | None) -> str:
    """A value, coded or not, as a person reads it.

    >>> say_value(Domain("number", "°C"), 120.0), say_value(Domain("yes_no", choices={"no": "no", "yes": "yes"}), 1.0)
    ('120 °C', 'yes')
    """
    if value is None:
        return NOT_KNOWN
    if isinstance(value, Void):
        return NO_VALUE
    meant = domain.decode(value) if not isinstance(value, tuple) else value
    return show(meant, domain.unit) if isinstance(meant, float | int) else domain.label(meant)


def say_fact(fact: Fact | None, knowledge: Knowledge) -> str:
    """The value of a fact as a person reads it."""
    if fact is None or (fact.value is None and not fact.note):
        return NOT_KNOWN
    if fact.value is None:
        return f"{NO_VALUE} ({fact.note})"
    return say_value(domain_of(fact.name, knowledge), fact.value)


def _in_order(domain: Domain, among: Iterable[str | float]) -> list[str]:
    order = {choice: place for place, choice in enumerate(domain.choices)}
    meant = [domain.decode(each) for each in among]
    meant.sort(key=lambda each: (order.get(str(each), len(order)), str(each)))
    return [say_value(domain, each) for each in meant]


def listed(words: Sequence[str], last: str = "or") -> str:
    """Words as a list in a sentence.

    >>> listed(["a", "b", "c"])
    'a, b or c'
    """
    comma = "; " if any("," in word for word in words) else ", "
    return words[0] if len(words) == 1 else f"{comma.join(words[:-1])} {last} {words[-1]}" if words else "nothing"


def say_wanted(term: Term, knowledge: Knowledge, record: Record) -> str:
    """What a term asks for, without the name: `above 110 °C`, `none of sodium`."""
    domain = domain_of(term.name, knowledge)
    if isinstance(term, Stated):
        return "stated" if term.wanted else "not stated"
    if isinstance(term, Valueless):
        return "without a value" if term.wanted else "with a value"
    if isinstance(term, Bound):
        return _say_bound(term, domain, knowledge, record)
    words = listed(_in_order(domain, term.among))
    if isinstance(term, Ticked):
        return f"with {words} ticked" if term.wanted else f"without {words}"
    return words if term.wanted else f"other than {words}"


def _say_bound(term: Bound, domain: Domain, knowledge: Knowledge, record: Record) -> str:
    plain = term.sign == "=" and domain.kind != "number"
    sign = "" if plain else OPERATORS[term.sign] + " "
    if not isinstance(term.limit, FactRef):
        return sign + say_value(domain, term.limit)
    name = term.limit.name
    if not record:
        return f"{sign}{title_of(name, knowledge)}"
    return f"{sign}{say_value(domain, record.get(name))} ({title_of(name, knowledge)})"


def say_term(term: Term, knowledge: Knowledge, record: Record) -> str:
    """A term with what was seen: `steady temperature with margin 120 °C is above 110 °C`."""
    title, wanted = title_of(term.name, knowledge), say_wanted(term, knowledge, record)
    if isinstance(term, Stated | Valueless):
        return f"{title} is {wanted}"
    seen = say_value(domain_of(term.name, knowledge), record.get(term.name))
    if isinstance(term, Bound) and seen not in {NOT_KNOWN, NO_VALUE}:
        verb = "is" if holds(term, record) else "is not"
        return f"{title} is {seen}" if verb == "is" and seen == wanted else f"{title} {seen} {verb} {wanted}"
    return f"{title} is {seen}"


def say_failure(term: Term, knowledge: Knowledge, record: Record) -> str:
    """Why a term failed: `needs steady temperature above 130 °C, saw 120 °C (10 K away)`."""
    title, wanted = title_of(term.name, knowledge), say_wanted(term, knowledge, record)
    if isinstance(term, Stated):
        return f"needs {title} {wanted}"
    domain, seen = domain_of(term.name, knowledge), record.get(term.name)
    away = margin(term, seen, record)
    counts = away is not None and domain.kind != "yes_no"
    apart = f" ({say_margin(away or 0.0, domain)} away)" if counts else ""
    return f"needs {title} {wanted}, saw {say_value(domain, seen)}{apart}"


def margin(term: Condition, seen: Coded | Void | None, record: Record) -> float | None:
    """How far a number lies from the limit of a threshold; None where that has no meaning."""
    if not isinstance(term, Bound):
        return None
    limit = record.get(term.limit.name) if isinstance(term.limit, FactRef) else term.limit
    if not isinstance(seen, float | int) or not isinstance(limit, float | int):
        return None
    return abs(seen - limit)


def say_margin(away: float, domain: Domain) -> str:
    """A distance in the unit of the domain; temperatures differ by kelvins, scales by places.

    >>> say_margin(10.0, Domain("number", "°C")), say_margin(1.0, Domain("scale"))
    ('10 K', '1 place')
    """
    if domain.kind != "number":
        return f"{away:.0f} place" if away == 1 else f"{away:.0f} places"
    if domain.unit == "ISO VG":
        return f"{show(away, '')} mm²/s at 40 °C"
    return show(away, "K" if domain.unit == "°C" else domain.unit)


def say_condition(condition: Condition, knowledge: Knowledge, record: Record | None = None) -> str:
    """A whole condition: `form is grease, and either ... or ...`."""
    known: Record = record if record is not None else {}
    if isinstance(condition, Every):
        return " and ".join(say_condition(part, knowledge, known) for part in condition.parts) or "always"
    if isinstance(condition, Either):
        return "either " + " or ".join(f"({say_condition(part, knowledge, known)})" for part in condition.parts)
    title = title_of(condition.name, knowledge)
    if isinstance(condition, Ticked):
        return f"under {title}, {_say_ticks(condition, knowledge)}"
    return f"{title} is {say_wanted(condition, knowledge, known)}"


def _say_ticks(term: Ticked, knowledge: Knowledge) -> str:
    ticks = _in_order(domain_of(term.name, knowledge), term.among)
    if term.wanted or len(ticks) == 1:
        return f"{listed(ticks)} is {'' if term.wanted else 'not '}ticked"
    return f"none of {listed(ticks, 'and')} is ticked"


def say_test(test: Condition, knowledge: Knowledge, record: Record | None = None) -> str:
    """What a demand asks: `upper service temperature at least 130 °C`."""
    known: Record = record if record is not None else {}
    terms = list(leaves(test))
    if isinstance(test, Either) or len({term.name for term in terms}) != 1:
        return say_condition(test, knowledge, known)
    wanted = " and ".join(say_wanted(term, knowledge, known) for term in terms)
    return f"{title_of(terms[0].name, knowledge)} {wanted}"


def say_demand(demand: Demand, knowledge: Knowledge) -> str:
    """A demand with its strength and with the lubricants it is for."""
    for_ = "" if demand.for_ == Every() else f", where {say_condition(demand.for_, knowledge)}"
    void = f"; {listed(sorted(demand.void), 'and')} has no value, so nothing can prove it" if demand.void else ""
    return f"{LEVELS[demand.level]}: {say_test(demand.test, knowledge)}{for_}{void}"


def say_steps(steps: Sequence[int]) -> str:
    """Steps short, level by level.

    >>> say_steps((0, 4, 1, 0)), say_steps((0, 0, 0, 0))
    ('4 steps short at level 2, 1 step at level 3', 'nothing short')
    """
    short = [(level, count) for level, count in enumerate(steps, start=1) if count]
    if not short:
        return "nothing short"
    words = [
        f"{count} step{'s' * (count != 1)}{' short' * (place == 0)} at level {level}"
        for place, (level, count) in enumerate(short)
    ]
    return ", ".join(words)


def fill_in(text: str, instance: Instance, facts: Mapping[str, Fact], record: Record, knowledge: Knowledge) -> str:
    """A sentence of a rule with its placeholders filled from the facts and from the row of its table."""

    def filled(found: re.Match[str]) -> str:
        of_row, name = found.groups()
        if of_row:
            return _say_cell(instance, name, knowledge)
        if name in facts:
            return say_fact(facts[name], knowledge)
        return say_value(domain_of(name, knowledge), record.get(name))

    return PLACEHOLDER.sub(filled, text)


def _say_cell(instance: Instance, column: str, knowledge: Knowledge) -> str:
    """A cell without its unit: the sentence around it states the unit."""
    cell = instance.row.cells.get(column) if instance.row else None
    if cell is None:
        return "(not given)"
    if isinstance(cell, Band):
        return f"{show(cell.low, '')} to below {show(cell.high, '')}"
    table = knowledge.tables.get(instance.rule.table)
    domain = table.columns.get(column) if table else None
    return show(cell, "") if isinstance(cell, float) else domain.label(cell) if domain else str(cell)


def say_source(citation: Citation, knowledge: Knowledge) -> str:
    """A source with its place and how surely it was read."""
    source = knowledge.sources.get(citation.id)
    title = source.title if source else citation.id
    sure = HOW_SURE.get(citation.checked, citation.checked)
    where = f", {citation.where}" if citation.where else ""
    return f"{title}{where}" + ("" if sure in title else f" ({sure})")
