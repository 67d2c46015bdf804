"""Density of oils over temperature, and the step between kinematic and dynamic viscosity."""

from __future__ import annotations

from math import exp

from advisor.formulas.formula import Formula, Input, demand_positive

# ASTM D1250-04, constant K1 of lubricating oils, kg/m³ per K; 0.34878 per °F in the table for 60 °F.
K1 = 0.6278
SHRINKS_BY = 0.65  # kg/m³ per K; common practice


def density_at(density_15: float, temperature_c: float) -> float:
    """Density of a lubricating oil at a temperature, in kg/m³, from the density at 15 °C in kg/m³.

    Equation: ρ = ρ₁₅·exp(−α·Δ·(1 + 0.8·α·Δ)), α = K1/ρ₁₅, K1 = 0.6278 kg/(m³·K), Δ = t − 15 °C.
    Range: 800 to 1164 kg/m³, −20 to 150 °C. Source: ASTM D1250 (API MPMS 11.1), lubricating oils.

    >>> round(density_at(880, 40), 1)
    864.2
    """
    demand_positive(density_15, "density at 15 °C", "kg/m³")
    shrink = K1 / density_15 * (temperature_c - 15.0)
    return density_15 * exp(-shrink * (1.0 + 0.8 * shrink))


def density_at_linear(density_15: float, temperature_c: float) -> float:
    """Density of an oil at a temperature by the short rule, in kg/m³, from the density at 15 °C in kg/m³.

    Equation: ρ = ρ₁₅ − 0.65·(t − 15), t in °C.
    Range: 800 to 1000 kg/m³, −20 to 120 °C. Source: common practice.

    >>> density_at_linear(880, 100)
    824.75
    """
    density = density_15 - SHRINKS_BY * (temperature_c - 15.0)
    demand_positive(density, "density by the short rule", "kg/m³")
    return density


def dynamic_viscosity(viscosity: float, density: float) -> float:
    """Dynamic viscosity in mPa·s from the kinematic viscosity in mm²/s and the density in kg/m³.

    Equation: η = ν·ρ/1000, both at the same temperature. Range: any liquid.
    Source: definition of kinematic viscosity.

    >>> dynamic_viscosity(68, 860)
    58.48
    """
    demand_positive(viscosity, "kinematic viscosity", "mm²/s")
    demand_positive(density, "density", "kg/m³")
    return viscosity * density / 1000.0


def kinematic_viscosity(dynamic_viscosity: float, density: float) -> float:
    """Kinematic viscosity in mm²/s from the dynamic viscosity in mPa·s and the density in kg/m³.

    Equation: ν = 1000·η/ρ, both at the same temperature. Range: any liquid.
    Source: definition of kinematic viscosity.

    >>> round(kinematic_viscosity(58.48, 860), 6)
    68.0
    """
    demand_positive(dynamic_viscosity, "dynamic viscosity", "mPa·s")
    demand_positive(density, "density", "kg/m³")
    return 1000.0 * dynamic_viscosity / density


_DEFINITION = "definition of kinematic viscosity, no clause"
_SAME = "Viscosity and density belong to the same temperature."
_UP = Input("density", "ρ", "kg/m³", 600, 2100, "up", "density at the temperature of the viscosity")
_DOWN = Input("density", "ρ", "kg/m³", 600, 2100, "down", "density at the temperature of the viscosity")

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "density_at", "viscosity", "Density of an oil at a temperature", density_at,
        (Input("density_15", "ρ₁₅", "kg/m³", 800, 1164, "up", "density at 15 °C"),
         Input("temperature_c", "t", "°C", -20, 150, "down", "oil temperature")),
        "density at the temperature", "ρ", "kg/m³",
        "ρ = ρ₁₅·exp(−α·Δ·(1 + 0.8·α·Δ)), α = 0.6278/ρ₁₅, Δ = t − 15",
        "ASTM D1250-04 (API MPMS 11.1), lubricating oils", "from memory",
        "The constant was read per °F and agrees; the range is from memory. Made for petroleum oils.",
    ),
    Formula(
        "density_at_linear", "viscosity", "Density of an oil at a temperature, short rule", density_at_linear,
        (Input("density_15", "ρ₁₅", "kg/m³", 800, 1000, "up", "density at 15 °C"),
         Input("temperature_c", "t", "°C", -20, 120, "down", "oil temperature")),
        "density at the temperature", "ρ", "kg/m³", "ρ = ρ₁₅ − 0.65·(t − 15)", "common practice, no source",
        "common practice", "About 0.1 % from ASTM D1250 at 100 °C for an oil of 880 kg/m³.",
    ),
    Formula(
        "dynamic_viscosity", "viscosity", "Dynamic viscosity", dynamic_viscosity,
        (Input("viscosity", "ν", "mm²/s", 0.2, 20_000_000, "up", "kinematic viscosity"), _UP),
        "dynamic viscosity", "η", "mPa·s", "η = ν·ρ/1000", _DEFINITION, "common practice", _SAME,
    ),
    Formula(
        "kinematic_viscosity", "viscosity", "Kinematic viscosity", kinematic_viscosity,
        (Input("dynamic_viscosity", "η", "mPa·s", 0.1, 20_000_000, "up", "dynamic viscosity"), _DOWN),
        "kinematic viscosity", "ν", "mm²/s", "ν = 1000·η/ρ", _DEFINITION, "common practice", _SAME,
    ),
)
