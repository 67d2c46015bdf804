"""The calls that belong to the check values of viscosity, blends, conventional units, pressure and grade systems."""

from collections.abc import Callable

from advisor.formulas import Named
from advisor.formulas.blends import blend_viscosity, blending_index, share_for_viscosity
from advisor.formulas.consistency import nlgi_grade
from advisor.formulas.conventional_units import (
    saybolt_furol_122,
    saybolt_universal,
    viscosity_from_engler,
    viscosity_from_redwood,
)
from advisor.formulas.density import density_at_linear
from advisor.formulas.grade_systems import sae_j300_grades, sae_j306_grades, vg_of_agma
from advisor.formulas.pressure import (
    AGMA_925,
    GOLD,
    alpha_agma_925,
    alpha_gold,
    alpha_so_klaus,
    alpha_wooster,
    roelands_z,
    viscosity_barus,
    viscosity_roelands,
)

F_100 = 340 / 9  # °C

CALLS: dict[str, Callable[[], float]] = {
    "A096": lambda: saybolt_universal(10, F_100),
    "A097": lambda: saybolt_universal(20, F_100),
    "A098": lambda: saybolt_universal(32, F_100),
    "A101": lambda: saybolt_universal(200, F_100),
    "A106": lambda: saybolt_furol_122(1300),
    "A108": lambda: viscosity_from_engler(1.5),
    "A110": lambda: viscosity_from_engler(5),
    "A111": lambda: viscosity_from_engler(10),
    "A112": lambda: viscosity_from_redwood(100),
    "A117": lambda: density_at_linear(880, 100),
    "A120": lambda: blending_index(2.234),
    "A122": lambda: blend_viscosity(5, 20, 0.6),
    "A123": lambda: blend_viscosity(32, 150, 0.5),
    "A124": lambda: share_for_viscosity(460, 68, 150),
    # The rows of pressure are in Pa·s, the formulas in mPa·s.
    "A125": lambda: viscosity_barus(100, 2e-8, 500) / 1000,
    "A126": lambda: roelands_z(100, 2e-8),
    "A127": lambda: viscosity_roelands(100, 0.6, 500) / 1000,
    "A128": lambda: alpha_wooster(153),
    "A129": lambda: alpha_gold(68, *GOLD["mineral"]),
    "A130": lambda: alpha_agma_925(13.62, *AGMA_925["pao"]),
    "A131": lambda: alpha_so_klaus(68, 3.6, 870),
}

NAMED: dict[str, Callable[[], Named]] = {
    "A135": lambda: sae_j300_grades(5.8),
    "A136": lambda: sae_j300_grades(6.5),
    "A137": lambda: sae_j300_grades(8.0),
    "A140": lambda: sae_j300_grades(16.3),
    "A141": lambda: sae_j300_grades(24.0),
    "A145": lambda: sae_j306_grades(19.5),
    "A146": lambda: sae_j306_grades(30.0),
    "A147": lambda: sae_j306_grades(33.0),
    "A150": lambda: vg_of_agma("0"),
    "A152": lambda: vg_of_agma("2"),
    "A153": lambda: vg_of_agma("3"),
    "A154": lambda: vg_of_agma("4"),
    "A156": lambda: vg_of_agma("6"),
    "A157": lambda: vg_of_agma("7"),
    "A158": lambda: vg_of_agma("8"),
    "A159": lambda: vg_of_agma("8A"),
    "A161": lambda: nlgi_grade(460),
    "A163": lambda: nlgi_grade(370),
    "A164": lambda: nlgi_grade(325),
    "A165": lambda: nlgi_grade(280),
    "A166": lambda: nlgi_grade(235),
    "A167": lambda: nlgi_grade(190),
    "A168": lambda: nlgi_grade(145),
    "A169": lambda: nlgi_grade(100),
    "A170": lambda: nlgi_grade(300),
}
