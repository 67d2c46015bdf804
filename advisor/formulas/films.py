"""Oil films between rolling surfaces: the published fits for point and line contacts, and the film ratio."""

from __future__ import annotations

from math import exp, sqrt

from advisor.formulas.formula import Formula, Input, demand_positive


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

    Equation: h = R·1.714·U^0.694·G^0.568·W^−0.128. Range: flooded, isothermal.
    Source: Pan and Hamrock 1989, from memory.

    >>> round(film_line_minimum_pan_hamrock(20, 2e-11, 5000, 1e-4), 2)
    0.53
    """
    return _line((radius_mm, speed_group, material_group, load_group), 1.714, 0.694, 0.568, -0.128)


def film_line_central_pan_hamrock(
    radius_mm: float, speed_group: float, material_group: float, load_group: float
) -> float:
    """Film in the middle of a line contact in µm after Pan and Hamrock, from the reduced radius in mm and the groups.

    Equation: h = R·2.922·U^0.692·G^0.470·W^−0.166. Range: flooded, isothermal.
    Source: Pan and Hamrock 1989, from memory.

    >>> round(film_line_central_pan_hamrock(20, 2e-11, 5000, 1e-4), 2)
    0.58
    """
    return _line((radius_mm, speed_group, material_group, load_group), 2.922, 0.692, 0.470, -0.166)


def film_line_central_dowson_toyoda(
    radius_mm: float, speed_group: float, material_group: float, load_group: float
) -> float:
    """Film in the middle of a line contact in µm after Dowson and Toyoda, from the reduced radius in mm and the groups.

    Equation: h = R·3.06·U^0.69·G^0.56·W^−0.10. Range: flooded, isothermal.
    Source: Dowson and Toyoda 1978, from memory.

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
_LEAST, _MIDDLE = "least film", "film in the middle"

FORMULAS: tuple[Formula, ...] = (
    Formula(
        "film_point_minimum", _SUBJECT, "Least film of a point contact", film_point_minimum, (*_GROUPS, _ELLIPTICITY),
        _LEAST, "h", "µm", "h = 1000·R·3.63·U^0.68·G^0.49·W^−0.073·(1 − e^(−0.68·k))",
        "Hamrock and Dowson 1977, no clause", "yes", _FLOODED,
    ),
    Formula(
        "film_point_central", _SUBJECT, "Film in the middle of a point contact", film_point_central,
        (*_GROUPS, _ELLIPTICITY), _MIDDLE, "h", "µm",
        "h = 1000·R·2.69·U^0.67·G^0.53·W^−0.067·(1 − 0.61·e^(−0.73·k))", "Hamrock and Dowson 1977, no clause", "yes",
        _FLOODED,
    ),
    Formula(
        "film_line_minimum", _SUBJECT, "Least film of a line contact", film_line_minimum, _GROUPS, _LEAST, "h", "µm",
        "h = 1000·R·2.65·U^0.70·G^0.54·W^−0.13", "Dowson and Higginson, no clause", "yes", _FLOODED,
    ),
    Formula(
        "film_line_minimum_pan_hamrock", _SUBJECT, "Least film of a line contact after Pan and Hamrock",
        film_line_minimum_pan_hamrock, _GROUPS, _LEAST, "h", "µm", "h = 1000·R·1.714·U^0.694·G^0.568·W^−0.128",
        "Pan and Hamrock 1989, no clause", "from memory", _FLOODED,
    ),
    Formula(
        "film_line_central_pan_hamrock", _SUBJECT, "Film in the middle of a line contact after Pan and Hamrock",
        film_line_central_pan_hamrock, _GROUPS, _MIDDLE, "h", "µm", "h = 1000·R·2.922·U^0.692·G^0.470·W^−0.166",
        "Pan and Hamrock 1989, no clause", "from memory", _FLOODED,
    ),
    Formula(
        "film_line_central_dowson_toyoda", _SUBJECT, "Film in the middle of a line contact after Dowson and Toyoda",
        film_line_central_dowson_toyoda, _GROUPS, _MIDDLE, "h", "µm", "h = 1000·R·3.06·U^0.69·G^0.56·W^−0.10",
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
)
