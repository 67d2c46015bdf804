"""The calls that belong to the check values of rolling bearings and of life in heat."""

from collections.abc import Callable
from math import log

from advisor.formulas.contacts import reduced_modulus
from advisor.formulas.contamination import contamination_factor_of
from advisor.formulas.equivalent_load import equivalent_load_deep_groove
from advisor.formulas.films import film_line_minimum, film_line_minimum_pan_hamrock, film_point_minimum, film_ratio
from advisor.formulas.friction import (
    load_torque,
    power_loss,
    reference_heat_flow,
    thermal_reference_speed,
    viscous_torque,
)
from advisor.formulas.grease_life import SLOPE as GREASE_SLOPE
from advisor.formulas.grease_life import grease_life_50
from advisor.formulas.life_factor import (
    life_factor_radial_ball,
    life_factor_radial_roller,
    life_factor_thrust_ball,
    life_factor_thrust_roller,
)
from advisor.formulas.oil_life import (
    OIL_LIFE_K1,
    SLOPE,
    kelvin_per_halving,
    oil_life_factor,
    oil_oxidation_life,
)
from advisor.formulas.rating_life import (
    LIFE_EXPONENT,
    fatigue_limit_ball,
    fatigue_limit_roller,
    rating_life_hours,
    reliability_factor,
)
from advisor.formulas.running_temperature import running_temperature_estimate

GAS = 8.31446261815324  # J/(mol·K), exact since 2019
INNER_RACE = (5.1091, 2.22701e-10, 5054.95, 8.61855e-4, 9.1393)  # radius in mm
LINE = (20, 2e-11, 5000, 1e-4)  # radius in mm


def _dirt(cleanliness: str) -> Callable[[], float]:
    return lambda: contamination_factor_of(cleanliness, 1, 70)


def _life(family: Callable[[float, float, float, float], float], kappa: float, ratio: float) -> Callable[[], float]:
    """A life factor for e_C·C_u/P = ratio."""
    return lambda: family(kappa, min(1, ratio / 0.2), 0.2 * max(1, ratio / 0.2) * 1000, 1000)


CALLS: dict[str, Callable[[], float]] = {
    "B016": lambda: contamination_factor_of("grease_slight_typical", 4, 499.99)
    / contamination_factor_of("grease_slight_typical", 4, 500),
    "B017": _dirt("grease_high"),
    "B020": _dirt("grease_severe"),
    "B021": _dirt("grease_very_severe"),
    "B022": _dirt("online_13_10"),
    "B023": _dirt("online_15_12"),
    "B024": _dirt("online_17_14"),
    "B027": _dirt("bath_15_12"),
    "B028": _dirt("bath_17_14"),
    "B029": _dirt("bath_19_16"),
    "B030": _dirt("bath_21_18"),
    "B035": lambda: fatigue_limit_ball(11_200, 46),
    "B036": lambda: fatigue_limit_ball(500_000, 250),
    "B037": lambda: fatigue_limit_roller(37_500, 46),
    "B038": lambda: fatigue_limit_roller(2_400_000, 280),
    "B040": _life(life_factor_radial_ball, 0.2, 0.1),
    "B045": _life(life_factor_radial_roller, 0.2, 0.1),
    "B046": _life(life_factor_radial_roller, 0.5, 0.1),
    "B047": _life(life_factor_radial_roller, 1, 0.1),
    "B048": _life(life_factor_radial_roller, 2, 0.1),
    "B049": _life(life_factor_radial_roller, 4, 0.1),
    "B050": _life(life_factor_thrust_ball, 0.2, 0.1),
    "B051": _life(life_factor_thrust_ball, 0.5, 0.1),
    "B054": _life(life_factor_thrust_ball, 4, 0.1),
    "B056": _life(life_factor_thrust_roller, 0.5, 0.1),
    "B057": _life(life_factor_thrust_roller, 1, 0.1),
    "B058": _life(life_factor_thrust_roller, 2, 0.1),
    "B060": _life(life_factor_radial_ball, 4, 5),
    "B062": lambda: _life(life_factor_radial_ball, 1 - 1e-9, 0.1)() / _life(life_factor_radial_ball, 1, 0.1)(),
    "B063": _life(life_factor_radial_ball, 1, 0),
    "B064": _life(life_factor_radial_roller, 8, 0.05),
    "B071": lambda: rating_life_hours(19_500, 2000, LIFE_EXPONENT["ball"], 1500),
    "B072": lambda: rating_life_hours(44_000, 6000, LIFE_EXPONENT["roller"], 1000),
    "B073": lambda: reliability_factor(95),
    "B074": lambda: reliability_factor(99),
    "B075": lambda: equivalent_load_deep_groove(5000, 500, 20_000, 14),
    "B076": lambda: equivalent_load_deep_groove(2000, 2000, 20_000, 13.8),
    "B080": lambda: viscous_torque(2, 20, 3000, 46),
    "B082": lambda: viscous_torque(2, 1, 2000 - 1e-9, 46) / viscous_torque(2, 1, 2000, 46),
    "B083": lambda: load_torque(0.0002, 2000, 46),
    "B084": lambda: power_loss(100, 3000),
    "B086": lambda: reference_heat_flow(100_000),
    "B087": lambda: thermal_reference_speed(30, 62, 16, 11_200, 2, 0.0002),
    # The row leaves load and viscosity at 100 °C open: 1000 N and 8.7 mm²/s, VG 68 of index 99, at 20 °C about it.
    "B090": lambda: running_temperature_estimate(10_000, 30, 62, 16, 68, 8.7, 1000, 2, 0.0002, 20, 0),
    # The rows of moduli are in Pa and those of films in m; the formulas in GPa and µm.
    "B095": lambda: reduced_modulus(207, 0.3, 207, 0.3) * 1e9,
    "B096": lambda: film_point_minimum(*INNER_RACE) * 1e-6,
    "B097": lambda: film_point_minimum(*INNER_RACE) * 1e-6,
    "B099": lambda: film_line_minimum(*LINE) * 1e-6,
    "B100": lambda: film_line_minimum_pan_hamrock(*LINE) / film_line_minimum(*LINE),
    "B102": lambda: film_ratio(0.5, 0.3, 0.1),
    "B118": lambda: grease_life_50(100, 0),
    "H001": lambda: 1 / oil_life_factor(80, 60, 10),
    # The rows take 273.15 K for the ice point, the equation of life 273 K; the difference is far below 1 %.
    "H002": lambda: oil_oxidation_life(100, -8.45) / oil_oxidation_life(110, -8.45),
    "H003": lambda: SLOPE * log(10) * GAS,
    "H005": lambda: oil_oxidation_life(100, OIL_LIFE_K1["turbine"]),
    "H006": lambda: oil_oxidation_life(80, OIL_LIFE_K1["hydraulic"]),
    "H008": lambda: kelvin_per_halving(125, SLOPE),
    "H010": lambda: kelvin_per_halving(100, GREASE_SLOPE),
}
