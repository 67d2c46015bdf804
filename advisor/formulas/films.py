"""Oil films between rolling surfaces: the dimensionless groups, the published fits for point and line, the film ratio."""

from __future__ import annotations

from math import exp, inf, pi, sqrt

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


def film_point_minimum(
    radius_mm: float, speed_group: float, material_group: float, load_group: float, ellipticity: float
) -> float:
    """Least film of a point contact in µm, from the reduced radius along the rolling direction in mm and the groups.

    Equation: h = R·3.63·U^0.68·G^0.49·W^−0.073·(1 − e^(−0.68·k)).
    Range: flooded, isothermal, hard surfaces. Source: Hamrock and Dowson 1977.

    >>> round(film_point_minimum(5.1091, 2.22701e-10, 5054.95, 8.61855e-4, 9.1393), 3)
    0.553
    """
    _demand_groups(radius_mm, speed_group, material_group, load_group)
    demand_positive(ellipticity, "ellipticity")
    fit = 3.63 * speed_group**0.68 * material_group**0.49 * load_group**-0.073
    return float(radius_mm * 1000.0 * fit * (1.0 - exp(-0.68 * ellipticity)))


def film_point_central(
    radius_mm: float, speed_group: float, material_group: float, load_group: float, ellipticity: float
) -> float:
    """Film in the middle of a point contact in µm, from the reduced radius along the rolling direction in mm.

    Equation: h = R·2.69·U^0.67·G^0.53·W^−0.067·(1 − 0.61·e^(−0.73·k)).
    Range: flooded, isothermal, hard surfaces. Source: Hamrock and Dowson 1977.

    >>> round(film_point_central(5.1091, 2.22701e-10, 5054.95, 8.61855e-4, 9.1393), 2)
    0.69
    """
    _demand_groups(radius_mm, speed_group, material_group, load_group)
    demand_positive(ellipticity, "ellipticity")
    fit = 2.69 * speed_group**0.67 * material_group**0.53 * load_group**-0.067
    return float(radius_mm * 1000.0 * fit * (1.0 - 0.61 * exp(-0.73 * ellipticity)))


def film_line_minimum(radius_mm: float, speed_group: float, material_group: float, load_group: float) -> float:
    """Least film of a line contact in µm after Dowson and Higginson, from the reduced radius in mm and the groups.

    Equation: h = R·2.65·U^0.70·G^0.54·W^−0.13. Range: flooded, isothermal. Source: Dowson and Higginson.

    >>> round(film_line_minimum(20, 2e-11, 5000, 1e-4), 3)
    0.566
    """
    return _line((radius_mm, speed_group, material_group, load_group), 2.65, 0.70, 0.54, -0.13)


def film_line_minimum_pan_hamrock(
    radius_mm: float, speed_group: float, material_group: float, load_group: float
) -> float:
    """Least film of a line contact in µm after Pan and Hamrock, from the reduced radius in mm and the groups.

    Equation: h = R·1.714·U^0.694·G^0.568·W^−0.128. Range: flooded, isothermal. Source: Pan and Hamrock 1989, from memory.

    >>> round(film_line_minimum_pan_hamrock(20, 2e-11, 5000, 1e-4), 2)
    0.53
    """
    return _line((radius_mm, speed_group, material_group, load_group), 1.714, 0.694, 0.568, -0.128)


def film_line_central_pan_hamrock(
    radius_mm: float, speed_group: float, material_group: float, load_group: float
) -> float:
    """Film in the middle of a line contact in µm after Pan and Hamrock, from the reduced radius in mm and the groups.

    Equation: h = R·2.922·U^0.692·G^0.470·W^−0.166. Range: flooded, isothermal. Source: Pan and Hamrock 1989, from memory.

    >>> round(film_line_central_pan_hamrock(20, 2e-11, 5000, 1e-4), 2)
    0.59
    """
    return _line((radius_mm, speed_group, material_group, load_group), 2.922, 0.692, 0.470, -0.166)


def film_line_central_dowson_toyoda(
    radius_mm: float, speed_group: float, material_group: float, load_group: float
) -> float:
    """Film in the middle of a line contact in µm after Dowson and Toyoda, from the reduced radius in mm and the groups.

    Equation: h = R·3.06·U^0.69·G^0.56·W^−0.10. Range: flooded, isothermal. Source: Dowson and Toyoda 1978, from memory.

    >>> round(film_line_central_dowson_toyoda(20, 2e-11, 5000, 1e-4), 2)
    0.75
    """
    return _line((radius_mm, speed_group, material_group, load_group), 3.06, 0.69, 0.56, -0.10)


def film_ratio(film_um: float, roughness_1_um: float, roughness_2_um: float) -> float:
    """Film ratio Λ, without unit, from the film and the root mean square roughnesses of both surfaces in µm.

    Equation: Λ = h/√(Rq₁² + Rq₂²). Range: at least one surface rough. Source: textbooks.

    >>> round(film_ratio(0.5, 0.3, 0.1), 2)
    1.58
    """
    roughness = sqrt(roughness_1_um * roughness_1_um + roughness_2_um * roughness_2_um)
    demand_positive(roughness, "roughness of both surfaces together", "µm")
    return film_um / roughness


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


def _line(groups: tuple[float, float, float, float], factor: float, u: float, g: float, w: float) -> float:
    _demand_groups(*groups)
    radius_mm, speed_group, material_group, load_group = groups
    return float(radius_mm * 1000.0 * factor * speed_group**u * material_group**g * load_group**w)


def _demand_groups(radius_mm: float, speed_group: float, material_group: float, load_group: float) -> None:
    demand_positive(radius_mm, "reduced radius", "mm")
    demand_positive(speed_group, "speed group")
    demand_positive(material_group, "material group")
    demand_positive(load_group, "load group")


_SUBJECT = "films"
_TEXTBOOKS = "textbooks, no clause"
_MODULUS = Input("modulus_gpa", "E′", "GPa", 1, 1000, "down", "reduced modulus, 227 GPa for steel on steel")
_RADIUS = Input("radius_mm", "R", "mm", 0.1, 2000, "down", "reduced radius")
_GROUPS = (
    Input("radius_mm", "R", "mm", 0.1, 2000, "up", "reduced radius along the rolling direction"),
    Input("speed_group", "U", "", 1e-14, 1e-8, "up", "speed group"),
    Input("material_group", "G", "", 500, 20_000, "up", "material group"),
    Input("load_group", "W", "", 1e-8, 1e-2, "down", "load group"),
)
_ELLIPTICITY = Input("ellipticity", "k", "", 0.1, 10, "up", "ellipticity")
_FLOODED = (
    "Flooded and isothermal: starved grease keeps about 0.7 of it or less, and heat at high speed takes more. "
    "The load hardly moves it. The ranges of the groups are from memory."
)
_CONVENTION = "E′ carries the factor 2; books without it have half of this, and other groups."
_LEAST, _MIDDLE = "least film", "film in the middle"

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
        "speed group", "U", "", "U = η₀·u/(E′·R), in SI units", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "material_group", _SUBJECT, "Material group", material_group,
        (Input("alpha", "α", "1/Pa", 5e-9, 5e-8, "up", "pressure-viscosity coefficient"),
         Input("modulus_gpa", "E′", "GPa", 1, 1000, "up", "reduced modulus, 227 GPa for steel on steel")),
        "material group", "G", "", "G = α·E′, in SI units", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "load_group_point", _SUBJECT, "Load group of a point contact", load_group_point,
        (Input("load_n", "F", "N", 0.01, 1e7, "up", "load on the contact"), _MODULUS, _RADIUS),
        "load group", "W", "", "W = F/(E′·R²), in SI units", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "load_group_line", _SUBJECT, "Load group of a line contact", load_group_line,
        (Input("load_n", "F", "N", 0.01, 1e8, "up", "load on the contact"),
         Input("length_mm", "L", "mm", 0.1, 5000, "down", "length of the contact"), _MODULUS, _RADIUS),
        "load group", "W", "", "W = F/(L·E′·R), in SI units", _TEXTBOOKS, "from memory", _CONVENTION,
    ),
    Formula(
        "ellipticity", _SUBJECT, "Ellipticity of a point contact", ellipticity,
        (Input("radius_across_mm", "R_y", "mm", 0.1, 1e5, "up", "reduced radius across the rolling direction"),
         Input("radius_along_mm", "R_x", "mm", 0.1, 2000, "down", "reduced radius along the rolling direction")),
        "ellipticity", "k", "", "k = (R_y/R_x)^(2/π)", "Hamrock and Dowson 1977, no clause", "from memory",
    ),
    Formula(
        "film_point_minimum", _SUBJECT, "Least film of a point contact", film_point_minimum, (*_GROUPS, _ELLIPTICITY),
        _LEAST, "h", "µm", "h = R·3.63·U^0.68·G^0.49·W^−0.073·(1 − e^(−0.68·k))", "Hamrock and Dowson 1977, no clause",
        "yes", _FLOODED,
    ),
    Formula(
        "film_point_central", _SUBJECT, "Film in the middle of a point contact", film_point_central,
        (*_GROUPS, _ELLIPTICITY), _MIDDLE, "h", "µm",
        "h = R·2.69·U^0.67·G^0.53·W^−0.067·(1 − 0.61·e^(−0.73·k))", "Hamrock and Dowson 1977, no clause", "yes",
        _FLOODED,
    ),
    Formula(
        "film_line_minimum", _SUBJECT, "Least film of a line contact", film_line_minimum, _GROUPS, _LEAST, "h", "µm",
        "h = R·2.65·U^0.70·G^0.54·W^−0.13", "Dowson and Higginson, no clause", "yes", _FLOODED,
    ),
    Formula(
        "film_line_minimum_pan_hamrock", _SUBJECT, "Least film of a line contact after Pan and Hamrock",
        film_line_minimum_pan_hamrock, _GROUPS, _LEAST, "h", "µm", "h = R·1.714·U^0.694·G^0.568·W^−0.128",
        "Pan and Hamrock 1989, no clause", "from memory", _FLOODED,
    ),
    Formula(
        "film_line_central_pan_hamrock", _SUBJECT, "Film in the middle of a line contact after Pan and Hamrock",
        film_line_central_pan_hamrock, _GROUPS, _MIDDLE, "h", "µm", "h = R·2.922·U^0.692·G^0.470·W^−0.166",
        "Pan and Hamrock 1989, no clause", "from memory", _FLOODED,
    ),
    Formula(
        "film_line_central_dowson_toyoda", _SUBJECT, "Film in the middle of a line contact after Dowson and Toyoda",
        film_line_central_dowson_toyoda, _GROUPS, _MIDDLE, "h", "µm", "h = R·3.06·U^0.69·G^0.56·W^−0.10",
        "Dowson and Toyoda 1978, as in AGMA 925, no clause", "from memory", _FLOODED,
    ),
    Formula(
        "film_ratio", _SUBJECT, "Film ratio", film_ratio,
        (Input("film_um", "h", "µm", 0.001, 100, "up", "film"),
         Input("roughness_1_um", "Rq₁", "µm", 0.005, 10, "down", "root mean square roughness of surface 1"),
         Input("roughness_2_um", "Rq₂", "µm", 0.005, 10, "down", "root mean square roughness of surface 2")),
        "film ratio", "Λ", "", "Λ = h/√(Rq₁² + Rq₂²)", _TEXTBOOKS, "common practice",
        "Rq is about 1.25·Ra. Below 0.4 to 1 the surfaces touch, up to 3 they do in part, above 3 a film parts them.",
    ),
    Formula(
        "bearing_entrainment_speed", _SUBJECT, "Mean surface speed in a rolling bearing", bearing_entrainment_speed,
        (Input("pitch_diameter_mm", "d_e", "mm", 3, 5500, "up", "pitch diameter"),
         Input("ball_diameter_mm", "d_b", "mm", 0.5, 300, "down", "diameter of the rolling element"),
         Input("speed_rpm", "n", "1/min", 0.1, 100_000, "up", "speed")),
        "mean surface speed", "u", "m/s", "u = (d_e² − d_b²)/(4·d_e)·π·n/30, in SI units",
        "NASA RP-1126 (Hamrock 1984), no clause", "from memory", "Contact angle 0, inner ring turning.",
    ),
)
