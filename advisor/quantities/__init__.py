"""Numbers with units at the boundary: read what people type, print it back.

Inside the program a quantity is a plain float in its canonical unit. One table drives reading, the cycling
of units and printing. What can be read in two ways is refused with a question, never guessed.
"""

from advisor.quantities.reading import Quantity, Unreadable, parse
from advisor.quantities.showing import show
from advisor.quantities.units import UNITS, convert, units_for

__all__ = ["UNITS", "Quantity", "Unreadable", "convert", "parse", "show", "units_for"]
