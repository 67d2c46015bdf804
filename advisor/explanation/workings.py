"""How facts came about: formulas with the numbers put in, look-ups with their rows, rules, assumptions, answers."""

from collections.abc import Mapping
from dataclasses import dataclass, replace

from advisor.advice import Advice
from advisor.case import Fact, Origin
from advisor.computations import looked_up
from advisor.conditions import Record, Value
from advisor.explanation.seeing import hides
from advisor.explanation.words import domain_of, say_fact, say_source, say_value, title_of
from advisor.formulas import FORMULAS, Formula
from advisor.formulas.formula import plain, put_in
from advisor.knowledge import Citation, Computation, Formed, LookedUp, Row, Table
from advisor.quantities import show

HIDDEN = "withheld"


class NotHere(ValueError):
    """A question about something that this advice does not have; the message says what there is."""


@dataclass(frozen=True, slots=True)
class Symbol:
    """One input of a working: its symbol, its value in words, what it is, and the fact behind it ('' for a number)."""

    symbol: str
    value: str
    title: str
    fact: str


@dataclass(frozen=True, slots=True)
class Working:
    """How one fact was computed or looked up."""

    fact: str
    title: str
    equation: str
    substituted: str
    symbols: tuple[Symbol, ...]
    result: str
    sources: tuple[str, ...]
    warnings: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Premise:
    """A fact that a rule or a working used, and what stands behind it, down to the answers."""

    fact: str
    title: str
    value: str
    origin: Origin
    note: str
    working: Working | None
    rules: tuple[str, ...]
    premises: tuple["Premise", ...]


def how_computed(advice: Advice, fact: str) -> Working:
    """Equation, numbers with units, result, source and validity of a computed fact.

    Raises:
        NotHere: where the fact is not computed, or not known in this advice.
    """
    computation = advice.knowledge.computations.get(fact)
    if computation is None or fact not in advice.facts:
        raise NotHere(f"'{fact}' was not computed in this case.")
    return _formed(advice, computation) if isinstance(computation.how, Formed) else _looked_up(advice, computation)


def _formed(advice: Advice, computation: Computation) -> Working:
    how = computation.how
    assert isinstance(how, Formed)  # noqa: S101 - asked before
    formula = FORMULAS[how.formula]
    numbers: dict[str, float] = {}
    symbols = []
    for each in formula.inputs:
        bound = how.inputs[each.name]
        value = advice.facts[bound].value if isinstance(bound, str) and bound in advice.facts else bound
        if isinstance(value, float | int):
            numbers[each.name] = float(value)
        symbols.append(_symbol(advice, each.symbol, each.unit, each.text, bound))
    result = say_fact(advice.facts[computation.fact], advice.knowledge)
    return Working(
        computation.fact,
        computation.title,
        formula.equation,
        with_numbers(formula, numbers),
        tuple(symbols),
        result,
        _sources(advice, computation.source, formula),
        formula.outside(numbers),
    )


def _symbol(advice: Advice, symbol: str, unit: str, text: str, bound: str | float) -> Symbol:
    if isinstance(bound, str):
        value = say_fact(advice.facts.get(bound), advice.knowledge)
        return Symbol(symbol, value, title_of(bound, advice.knowledge), bound)
    return Symbol(symbol, show(bound, unit), text, "")


def with_numbers(formula: Formula, numbers: Mapping[str, float]) -> str:
    """The equation with every known input symbol replaced by its number."""
    known = {each.symbol: _number(numbers[each.name]) for each in formula.inputs if each.name in numbers}
    return put_in(formula.equation, known)


def _number(value: float) -> str:
    text = plain(float(f"{value:.6g}"))
    return f"({text})" if value < 0 else text


def _sources(advice: Advice, cited: tuple[Citation, ...], formula: Formula | None) -> tuple[str, ...]:
    found = [say_source(each, advice.knowledge) for each in cited]
    if formula is not None and formula.source != formula.subject:
        sure = {"yes": "read", "common practice": "no source"}.get(formula.checked, formula.checked)
        found.insert(0, formula.source + ("" if sure in formula.source else f" ({sure})"))
    return tuple(dict.fromkeys(found))


def _looked_up(advice: Advice, computation: Computation) -> Working:
    how, knowledge = computation.how, advice.knowledge
    assert isinstance(how, LookedUp)  # noqa: S101 - asked before
    table = knowledge.tables[how.table]
    symbols = tuple(_symbol(advice, column, "", column.replace("_", " "), name) for column, name in how.by)
    rows = rows_met(how, table, advice.facts)
    by = ", ".join(f"{title_of(name, knowledge)} {say_fact(advice.facts.get(name), knowledge)}" for _, name in how.by)
    pick = f"; the {how.combine} counts" if how.combine else ""
    which = f"row{'s' * (len(rows) != 1)} {', '.join(row.id for row in rows)}" if rows else _no_row(how, table)
    cited = computation.source + (tuple(each for row in rows for each in row.source) or table.source)
    return Working(
        computation.fact,
        computation.title,
        f"table '{table.title}', column {how.column.replace('_', ' ')}{pick}",
        f"{by}: {which}",
        symbols,
        say_fact(advice.facts[computation.fact], knowledge),
        _sources(advice, cited, None),
        (),
    )


def _no_row(how: LookedUp, table: Table) -> str:
    if table.matrix:
        return "the entry where they meet"
    if how.otherwise is None:
        return "no row"
    return (
        f"no row, so {how.otherwise:g} is taken"
        if isinstance(how.otherwise, float)
        else f"no row, so {how.otherwise} is taken"
    )


def rows_met(how: LookedUp, table: Table, facts: Mapping[str, Fact]) -> tuple[Row, ...]:
    """The rows of the table that these facts meet."""
    if table.matrix or any(name not in facts or facts[name].value is None for _, name in how.by):
        return ()
    alone = replace(how, combine="", otherwise=None)

    def get(name: str) -> Value | None:
        return facts[name].value

    return tuple(
        row for row in table.rows if looked_up(alone, get, {table.id: replace(table, rows=(row,))}).value is not None
    )


def premise(advice: Advice, name: str, record: Record | None = None) -> Premise:
    """The fact with everything behind it, recursively down to the answers."""
    fact = advice.facts.get(name)
    title = title_of(name, advice.knowledge)
    if fact is None:
        seen = (record or {}).get(name)
        value = say_value(domain_of(name, advice.knowledge), seen)
        return Premise(name, title, value, Origin.CONCLUDED, "a result of this advice", None, (), ())
    if advice.withheld and hides(advice, name):
        return Premise(name, title, HIDDEN, fact.origin, "", None, (), ())
    computation = advice.knowledge.computations.get(name)
    declaration = advice.knowledge.facts.get(name)
    filled = declaration.filled if declaration is not None and fact.origin is Origin.LOOKED_UP else None
    behind = reads(computation.how) if computation else reads(filled) if filled else ()
    concluded = fact.origin is Origin.CONCLUDED
    return Premise(
        name,
        title,
        say_fact(fact, advice.knowledge),
        fact.origin,
        "" if concluded else fact.note,
        how_computed(advice, name) if computation else None,
        tuple(each for each in fact.note.split(", ") if each) if concluded else (),
        tuple(premise(advice, each) for each in behind),
    )


def reads(how: Formed | LookedUp) -> tuple[str, ...]:
    """The facts that a formula or a look-up uses."""
    if isinstance(how, Formed):
        return tuple(each for each in how.inputs.values() if isinstance(each, str))
    return tuple(name for _, name in how.by)
