"""Engineering formulas by subject: pure functions on numbers, with equation, range, directions and source as data."""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType

from advisor.formulas import (
    arithmetic,
    bearings,
    blends,
    cold,
    consistency,
    contacts,
    contamination,
    conventional_units,
    density,
    equivalent_load,
    films,
    friction,
    grade_systems,
    grades,
    grease,
    grease_life,
    life_factor,
    oil_life,
    pressure,
    rating_life,
    running_temperature,
    viscosity,
    viscosity_index,
)
from advisor.formulas.formula import Choice, Formula, Input, Lookup, Named, OutOfRange

__all__ = ["FORMULAS", "LOOKUPS", "Choice", "Formula", "Input", "Lookup", "Named", "OutOfRange"]

FORMULAS: Mapping[str, Formula] = MappingProxyType({
    formula.name: formula
    for formula in (
        *viscosity.FORMULAS, *viscosity_index.FORMULAS, *grades.FORMULAS, *density.FORMULAS, *blends.FORMULAS,
        *conventional_units.FORMULAS, *pressure.FORMULAS, *bearings.FORMULAS, *rating_life.FORMULAS,
        *equivalent_load.FORMULAS, *contamination.FORMULAS, *life_factor.FORMULAS, *contacts.FORMULAS, *films.FORMULAS,
        *friction.FORMULAS, *running_temperature.FORMULAS, *grease.FORMULAS, *grease_life.FORMULAS, *oil_life.FORMULAS,
        *cold.FORMULAS, *arithmetic.FORMULAS,
    )
})  # fmt: skip
"""Numbers in, one number out; knowledge may bind them."""

LOOKUPS: Mapping[str, Lookup] = MappingProxyType({
    lookup.name: lookup
    for lookup in (
        *grade_systems.LOOKUPS, *consistency.LOOKUPS, *pressure.LOOKUPS, *contamination.LOOKUPS, *friction.LOOKUPS,
        *running_temperature.LOOKUPS, *grease_life.LOOKUPS, *oil_life.LOOKUPS, *cold.LOOKUPS,
    )
})  # fmt: skip
"""For people: a name among the inputs, or names as the answer."""
