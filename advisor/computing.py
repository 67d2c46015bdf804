"""One formula worked by hand: its inputs read from text, the result with everything a reader must know to trust it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from difflib import get_close_matches

from advisor.formulas import FORMULAS, LOOKUPS, Choice, Formula, Input, Lookup, Named, OutOfRange
from advisor.formulas.formula import plain, put_in, with_unit
from advisor.quantities import Quantity, Unreadable, parse, show

HOW_SURE = {
    "yes": "read in a public text that states it",
    "from memory": "from memory, not yet confirmed against the text",
    "common practice": "common practice; no standard was read for it",
}
EVERY: Mapping[str, Formula | Lookup] = {**FORMULAS, **LOOKUPS}


class ComputeFault(ValueError):
    """What stands in the way of a result; `messages` holds all of it, one sentence or two each."""

    def __init__(self, messages: Iterable[str]) -> None:
        self.messages = tuple(messages)
        super().__init__("\n".join(self.messages))


@dataclass(frozen=True, slots=True)
class Computed:
    """A formula with the values put in, its result in the unit of the formula, and the warnings about ranges."""

    formula: Formula | Lookup
    values: Mapping[str, Quantity | str]
    result: float | Named
    warnings: tuple[str, ...]


def list_formulas() -> str:
    """All formulas by subject: name, title and the inputs with their units."""
    subjects: dict[str, list[str]] = {}
    for formula in EVERY.values():
        lines = subjects.setdefault(formula.subject, [f"{formula.subject[:1].upper()}{formula.subject[1:]}"])
        inputs = " ".join(f"{each.name}=[{_kind(each)}]" for each in formula.inputs)
        lines += [f"  {formula.name}: {formula.title}", f"      {inputs}"]
    return "\n\n".join("\n".join(lines) for lines in subjects.values())


def compute(name: str, inputs: Mapping[str, str]) -> Computed:
    """The named formula with its inputs as typed; ComputeFault names everything that is wrong at once."""
    formula = EVERY.get(name)
    if formula is None:
        raise ComputeFault((f"There is no formula '{name}'.{_nearest(name, EVERY)}",))
    values, faults = _read(formula, inputs)
    if faults:
        raise ComputeFault(faults)
    warnings = formula.outside({each: value.value for each, value in values.items() if isinstance(value, Quantity)})
    try:
        result = _worked(formula, values)
    except OutOfRange as fault:
        raise ComputeFault((str(fault), *warnings)) from fault
    return Computed(formula, values, result, warnings)


def render_text(computed: Computed) -> str:
    """Equation, numbers put in, result, ranges, source and how sure it is, for the terminal."""
    formula = computed.formula
    lines = [
        f"{formula.title} ({formula.subject})",
        f"  equation   {formula.equation}",
        f"  numbers    {_numbers_put_in(computed)}",
        *(f"  with       {_input_line(each, computed.values[each.name])}" for each in formula.inputs),
        f"  result     {formula.result_symbol} = {_shown(computed.result, formula.result_unit)}  {formula.result}",
        *(f"  warning    {warning}" for warning in computed.warnings),
        f"  source     {formula.source}",
        f"  how sure   {HOW_SURE[formula.checked]}",
    ]
    return "\n".join(lines + ([f"  note       {formula.note}"] if formula.note else []))


def as_data(computed: Computed) -> dict[str, object]:
    """The same as plain data, ready for JSON; numbers are not rounded."""
    formula = computed.formula
    return {
        "formula": formula.name,
        "title": formula.title,
        "subject": formula.subject,
        "equation": formula.equation,
        "numbers": _numbers_put_in(computed),
        "inputs": [_input_data(each, computed.values[each.name]) for each in formula.inputs],
        "result": {
            "text": formula.result, "symbol": formula.result_symbol, "value": _as_json(computed.result),
            "unit": formula.result_unit, "shown": _shown(computed.result, formula.result_unit),
        },
        "warnings": list(computed.warnings),
        "source": formula.source,
        "checked": formula.checked,
        "note": formula.note,
    }  # fmt: skip


def _read(formula: Formula | Lookup, inputs: Mapping[str, str]) -> tuple[dict[str, Quantity | str], list[str]]:
    known = {each.name: each for each in formula.inputs}
    faults = [
        f"{formula.name} has no input '{name}'. Its inputs are {', '.join(known)}.{_nearest(name, known)}"
        for name in inputs
        if name not in known
    ]
    values: dict[str, Quantity | str] = {}
    for each in formula.inputs:
        if each.name not in inputs:
            faults.append(f"{each.name} is missing: {each.text}, {each.range}. Write {each.name}={_example(each)}.")
            continue
        try:
            values[each.name] = _value(each, inputs[each.name])
        except Unreadable as fault:
            faults.append(f"{each.name}: {fault}")
    return values, faults


def _value(wanted: Input | Choice, typed: str) -> Quantity | str:
    if isinstance(wanted, Input):
        return parse(typed, wanted.unit)
    known = {_bare(option): option for option in wanted.options}
    if _bare(typed) not in known:
        raise Unreadable(f"'{typed}' is not {wanted.range}.{_nearest(typed.strip(), wanted.options)}")
    return known[_bare(typed)]


def _bare(name: str) -> str:
    """A name without the marks and capitals that people set differently."""
    return name.strip().casefold().replace(" ", "_").replace("-", "_")


def _nearest(name: str, known: Iterable[str]) -> str:
    near = get_close_matches(name, list(known), n=3, cutoff=0.5)
    return f" Did you mean {' or '.join(near)}?" if near else ""


def _worked(formula: Formula | Lookup, values: Mapping[str, Quantity | str]) -> float | Named:
    if isinstance(formula, Lookup):
        return formula(**{name: _plain_value(value) for name, value in values.items()})
    return formula(**{name: value.value for name, value in values.items() if isinstance(value, Quantity)})


def _kind(wanted: Input | Choice) -> str:
    return "name" if isinstance(wanted, Choice) else wanted.unit or "number"


def _plain_value(value: Quantity | str) -> float | str:
    return value if isinstance(value, str) else value.value


def _example(wanted: Input | Choice) -> str:
    """The input's lower end as it may be typed, quoted for the shell where it holds a space."""
    if isinstance(wanted, Choice):
        return wanted.options[0]
    text = with_unit(wanted.low, wanted.unit)
    return f"'{text}'" if " " in text else text


def _numbers_put_in(computed: Computed) -> str:
    """The equation with every input symbol on its right-hand sides replaced by its number."""
    numbers = {each.symbol: _number(_plain_value(computed.values[each.name])) for each in computed.formula.inputs}
    return put_in(computed.formula.equation, numbers)


def _number(value: float | str) -> str:
    if isinstance(value, str):
        return value
    return f"({plain(value)})" if value < 0 else plain(value)


def _input_line(wanted: Input | Choice, quantity: Quantity | str) -> str:
    if isinstance(wanted, Choice) or isinstance(quantity, str):
        return f"{wanted.symbol} = {quantity}  {wanted.text}"
    shown = with_unit(quantity.value, wanted.unit)
    typed = "" if _same_number(quantity) else f" (typed: {quantity.typed.strip()})"
    return f"{wanted.symbol} = {shown}{typed}  {wanted.text}, range {wanted.range}"


def _same_number(quantity: Quantity) -> bool:
    """Whether what was typed begins with the value that is used, so that it need not be repeated."""
    return quantity.typed.replace(" ", "").replace("ISOVG", "").startswith(f"{quantity.value:.10g}")


def _input_data(wanted: Input | Choice, quantity: Quantity | str) -> dict[str, object]:
    if isinstance(wanted, Choice) or isinstance(quantity, str):
        options = list(wanted.options) if isinstance(wanted, Choice) else []
        return {
            "name": wanted.name, "symbol": wanted.symbol, "text": wanted.text, "value": quantity, "options": options,
        }  # fmt: skip
    return {
        "name": wanted.name, "symbol": wanted.symbol, "text": wanted.text, "value": quantity.value,
        "unit": wanted.unit, "typed": quantity.typed, "low": wanted.low, "high": wanted.high,
        "inside": wanted.holds(quantity.value),
    }  # fmt: skip


def _as_json(result: float | Named) -> float | list[str]:
    return list(result.names) if isinstance(result, Named) else result


def _shown(value: float | Named, unit: str) -> str:
    """A result with its unit; plain ratios keep six digits, because they may be put into the next formula."""
    if isinstance(value, Named):
        return value.text
    return show(value, unit) if unit or not 1e-3 <= abs(value) < 1e5 else f"{value:.6g}"
