"""Root finding for formulas that have no closed inverse."""

from __future__ import annotations

from collections.abc import Callable


def crossing(rising: Callable[[float], float], wanted: float, low: float, high: float) -> float:
    """The place between two ends where a rising function reaches the wanted value, by bisection to the last digit.

    The ends must bracket the place; bisection then always arrives, which stepping by slopes or by substitution
    does not where an oil thins out as fast as it warms.

    >>> round(crossing(lambda x: x * x, 2, 0, 2), 6)
    1.414214
    """
    while low < (middle := (low + high) / 2) < high:
        if rising(middle) < wanted:
            low = middle
        else:
            high = middle
    return high
