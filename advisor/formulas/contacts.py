"""What an oil film is computed from: the reduced modulus, the dimensionless groups and the speed of the surfaces."""

from __future__ import annotations

from math import inf, pi

from advisor.formulas.formula import Formula, Input, OutOfRange, demand_positive, demand_within, plain


def reduced_modulus(modulus_1_gpa: float, poisson_1: float, modulus_2_gpa: float, poisson_2: float) -> float:
    """Reduced modulus E′ of two surfaces in GPa, from their elastic moduli in GPa and Poisson ratios.

    Equation: E′ = 2/((1 − v₁²)/E₁ + (1 − v₂²)/E₂). Range: Poisson ratios of 0 to 0.5. Source: textbooks; the other
    convention, without the 2, halves it.

    >>> round(reduced_modulus(207, 0.3, 207, 0.3), 1)
    227.5
    """
    give = 0.0
    for modulus, poisson in ((modulus_1_gpa, poisson_1), (modulus_2_gpa, poisson_2)):
        demand_positive(modulus, "elastic modulus", "GPa")
        demand_within(poisson, 0, 0.5, "Poisson ratio")
        give += (1.0 - poisson * poisson) / modulus
    return 2.0 / give


def speed_group(dynamic_viscosity: float, entrainment_speed: float, modulus_gpa: float, radius_mm: float) -> float:
    """Speed group U, without unit: dynamic viscosity in mPa·s, mean surface speed in m/s, E′ in GPa, radius in mm.

    Equation: U = η₀·u/(E′·R), in SI units. Range: rolling contacts. Source: textbooks.

    >>> f"{speed_group(40, 6.5, 227, 5.1):.3g}"
    '2.25e-10'
    """
    demand_positive(modulus_gpa, "reduced modulus", "GPa")
    demand_positive(radius_mm, "reduced radius", "mm")
    return dynamic_viscosity * 1e-3 * entrainment_speed / (modulus_gpa * 1e9 * radius_mm * 1e-3)


def material_group(alpha: float, modulus_gpa: float) -> float:
    """Material group G, without unit, from the pressure-viscosity coefficient in 1/Pa and E′ in GPa.

    Equation: G = α·E′. Range: rolling contacts. Source: textbooks.

    >>> round(material_group(2.2e-8, 227))
    4994
    """
    return alpha * modulus_gpa * 1e9


def load_group_point(load_n: float, modulus_gpa: float, radius_mm: float) -> float:
    """Load group W of a point contact, without unit: load in N, E′ in GPa, reduced radius in mm.

    Equation: W = F/(E′·R²), in SI units. Range: rolling contacts. Source: textbooks.

    >>> f"{load_group_point(500, 227, 5):.3g}"
    '8.81e-05'
    """
    demand_positive(modulus_gpa, "reduced modulus", "GPa")
    demand_positive(radius_mm, "reduced radius", "mm")
    return load_n / (modulus_gpa * 1e3 * radius_mm * radius_mm)


def load_group_line(load_n: float, length_mm: float, modulus_gpa: float, radius_mm: float) -> float:
    """Load group W of a line contact, without unit: load in N, length and reduced radius in mm, E′ in GPa.

    Equation: W = F/(L·E′·R), in SI units. Range: rolling contacts. Source: textbooks.

    >>> f"{load_group_line(4540, 10, 227, 20):.3g}"
    '0.0001'
    """
    for value, text in ((length_mm, "length of the contact"), (radius_mm, "reduced radius")):
        demand_positive(value, text, "mm")
    demand_positive(modulus_gpa, "reduced modulus", "GPa")
    return load_n / (length_mm * modulus_gpa * 1e3 * radius_mm)


def ellipticity(radius_across_mm: float, radius_along_mm: float) -> float:
    """Ellipticity k of a point contact, without unit, from the radii across and along the rolling direction in mm.

    Equation: k = (R_y/R_x)^(2/π). Range: ratios of about 0.03 to 35. Source: Hamrock and Dowson 1977.

    >>> round(ellipticity(20, 20), 1)
    1.0
    """
    demand_positive(radius_across_mm, "radius across the rolling direction", "mm")
    demand_positive(radius_along_mm, "radius along the rolling direction", "mm")
    return float((radius_across_mm / radius_along_mm) ** (2.0 / pi))


def bearing_entrainment_speed(pitch_diameter_mm: float, ball_diameter_mm: float, speed_rpm: float) -> float:
    """Mean surface speed in the contacts of a bearing in m/s: pitch and ball diameter in mm, speed in 1/min.

    Equation: u = (d_e² − d_b²)/(4·d_e)·ω, ω = π·n/30. Range: contact angle 0, inner ring turning. Source: Hamrock 1984.

    >>> round(bearing_entrainment_speed(65, 12.7, 3820), 2)
    6.25
    """
    demand_positive(ball_diameter_mm, "ball diameter", "mm")
    if not ball_diameter_mm < pitch_diameter_mm < inf:
        raise OutOfRange(
            f"The pitch diameter must be larger than the ball, but it is {plain(pitch_diameter_mm)} mm and the ball "
            f"{plain(ball_diameter_mm)} mm."
        )
    reach = (pitch_diameter_mm - ball_diameter_mm) * (pitch_diameter_mm + ball_diameter_mm) / (4.0 * pitch_diameter_mm)
    return reach / 1000.0 * pi * speed_rpm / 30.0


_SUBJECT = "films"
_TEXTBOOKS = "textbooks, no clause"
_MODULUS = Input("modulus_gpa", "E′", "GPa", 1, 1000, "down", "reduced modulus, 227 GPa for steel on steel")
_RADIUS = Input("radius_mm", "R", "mm", 0.1, 2000, "down", "reduced radius")
_CONVENTION = "E′ carries the factor 2; books without it have half of this, and other groups."

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "reduced_modulus", _SUBJECT, "Reduced modulus of two surfaces", reduced_modulus,
        (Input("modulus_1_gpa", "E₁", "GPa", 1, 1000, "up", "elastic modulus of surface 1"),
         Input("poisson_1", "v₁", "", 0, 0.5, "up", "Poisson ratio of surface 1"),
         Input("modulus_2_gpa", "E₂", "GPa", 1, 1000, "up", "elastic modulus of surface 2"),
         Input("poisson_2", "v₂", "", 0, 0.5, "up", "Poisson ratio of surface 2")),
        "reduced modulus", "E′", "GPa", "E′ = 2/((1 − v₁²)/E₁ + (1 − v₂²)/E₂)", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "speed_group", _SUBJECT, "Speed group", speed_group,
        (Input("dynamic_viscosity", "η₀", "mPa·s", 0.5, 1e6, "up", "dynamic viscosity at ambient pressure"),
         Input("entrainment_speed", "u", "m/s", 1e-4, 200, "up", "mean surface speed"), _MODULUS, _RADIUS),
        "speed group", "U", "", "U = η₀·u/(E′·R)·10⁻⁹", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "material_group", _SUBJECT, "Material group", material_group,
        (Input("alpha", "α", "1/Pa", 5e-9, 5e-8, "up", "pressure-viscosity coefficient"),
         Input("modulus_gpa", "E′", "GPa", 1, 1000, "up", "reduced modulus, 227 GPa for steel on steel")),
        "material group", "G", "", "G = α·E′·10⁹", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "load_group_point", _SUBJECT, "Load group of a point contact", load_group_point,
        (Input("load_n", "F", "N", 0.01, 1e7, "up", "load on the contact"), _MODULUS, _RADIUS),
        "load group", "W", "", "W = F/(E′·R²)/1000", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "load_group_line", _SUBJECT, "Load group of a line contact", load_group_line,
        (Input("load_n", "F", "N", 0.01, 1e8, "up", "load on the contact"),
         Input("length_mm", "L", "mm", 0.1, 5000, "down", "length of the contact"), _MODULUS, _RADIUS),
        "load group", "W", "", "W = F/(L·E′·R)/1000", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "ellipticity", _SUBJECT, "Ellipticity of a point contact", ellipticity,
        (Input("radius_across_mm", "R_y", "mm", 0.1, 1e5, "up", "reduced radius across the rolling direction"),
         Input("radius_along_mm", "R_x", "mm", 0.1, 2000, "down", "reduced radius along the rolling direction")),
        "ellipticity", "k", "", "k = (R_y/R_x)^(2/π)", "Hamrock and Dowson 1977, no clause", "from memory",
    ),
    Formula(
        "bearing_entrainment_speed", _SUBJECT, "Mean surface speed in a rolling bearing", bearing_entrainment_speed,
        (Input("pitch_diameter_mm", "d_e", "mm", 3, 5500, "up", "pitch diameter"),
         Input("ball_diameter_mm", "d_b", "mm", 0.5, 300, "down", "diameter of the rolling element"),
         Input("speed_rpm", "n", "1/min", 0.1, 100_000, "up", "speed")),
        "mean surface speed", "u", "m/s", "u = (d_e² − d_b²)/(4·d_e)·π·n/30000",
        "NASA RP-1126 (Hamrock 1984), no clause", "from memory", "Contact angle 0, inner ring turning.",
    ),
)
