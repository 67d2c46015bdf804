"""Engineering formulas by subject: pure functions on numbers, with equation, range, directions and source as data."""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType

from advisor.formulas import arithmetic, bearings, density, grades, grease, viscosity, viscosity_index
from advisor.formulas.formula import Formula, Input, OutOfRange

__all__ = ["FORMULAS", "Formula", "Input", "OutOfRange"]

FORMULAS: Mapping[str, Formula] = MappingProxyType({
    formula.name: formula
    for formula in (
        *viscosity.FORMULAS, *viscosity_index.FORMULAS, *grades.FORMULAS, *density.FORMULAS,
        *bearings.FORMULAS, *grease.FORMULAS, *arithmetic.FORMULAS,
    )
})  # fmt: skip
