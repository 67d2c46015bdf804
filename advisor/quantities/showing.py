"""Print a quantity back."""

import math


def show(value: float, unit: str) -> str:
    """The value and its unit, short enough to read at a glance: `12 600 mm/min`, `90.8 mm²/s`.

    Nothing that it prints is ambiguous when typed back.
    """
    number = _short(value)
    if unit == "":
        return number
    if unit == "ISO VG":
        return f"ISO VG {number}"
    if unit in {"months", "weeks", "years", "days"} and number == "1":
        return f"1 {unit[:-1]}"
    return f"{number} {unit}"


def _short(value: float) -> str:
    """The number alone: three significant digits below ten, one decimal below a thousand, then whole numbers."""
    size = abs(value)
    if not 1e-4 <= size < 1e12 and size:
        mantissa, _, power = f"{value:.3g}".partition("e")
        return f"{mantissa}e{int(power)}" if power else mantissa
    text = f"{value:.{_decimals(size)}f}"
    text = text.rstrip("0").rstrip(".") if "." in text else text
    if len(text.lstrip("-")) > 4 and "." not in text:
        text = f"{int(text):,}".replace(",", " ")
    return "0" if text == "-0" else text


def _decimals(size: float) -> int:
    """How many decimals suit a number of this size."""
    if size >= 1 or not size:
        return 0 if size >= 1000 else 1 if size >= 10 else 2
    return 2 - math.floor(math.log10(size))
