"""Published and independently computed check values, each with its source in checks.csv."""

import csv
import re
from collections.abc import Callable
from decimal import Decimal
from pathlib import Path

import pytest

from advisor.formulas import bearings, density, grease, viscosity
from advisor.formulas.formula import OutOfRange
from advisor.formulas.viscosity_index import (
    viscosity_100_from_index,
    viscosity_index,
    viscosity_of_index_0,
    viscosity_of_index_100,
)
from tests.formulas.checked_bearings import CALLS as OF_BEARINGS
from tests.formulas.checked_viscosity import CALLS as OF_VISCOSITY
from tests.formulas.checked_viscosity import NAMED

with (Path(__file__).parent / "checks.csv").open(encoding="utf-8", newline="") as opened:
    ROWS = {row["id"]: row for row in csv.DictReader(opened)}


def _refused_interval() -> float:
    """What the refused interval formula says it would have given."""
    with pytest.raises(OutOfRange, match="above 0 h") as refused:
        grease.interval_base(20_000, 100, 10, speed_factor=2_800_000, speed_ratio=0.5)
    found = re.search(r"gives (-?[\d ]+) h", str(refused.value))
    assert found
    return float(found[1].replace(" ", ""))


def _lower_limit(vg: int) -> Callable[[], float]:
    return lambda: viscosity.grade_lower_limit(vg)


def _low(viscosity_100: float) -> Callable[[], float]:
    return lambda: viscosity_of_index_0(viscosity_100)


def _high(viscosity_100: float) -> Callable[[], float]:
    return lambda: viscosity_of_index_100(viscosity_100)


CALLS: dict[str, Callable[[], float]] = {
    "A001": lambda: viscosity.walther_z(10),
    "A002": lambda: viscosity.walther_z(0.5),
    "A005": lambda: viscosity.viscosity_from_z(viscosity.walther_z(68)),
    "A007": lambda: viscosity.walther_z(0.25),
    "A008": lambda: viscosity.walther_slope(68, 8.6),
    "A009": lambda: viscosity.viscosity_at(68, 8.6, 60),
    "A011": lambda: viscosity.viscosity_at(100, 11.2, 20),
    "A014": lambda: viscosity.viscosity_at(46, 6.8, -20),
    "A015": lambda: viscosity.temperature_for(46, 6.8, 13),
    "A016": lambda: viscosity.viscosity_at(68, 8.6, 60),
    "A020": lambda: viscosity_index(73.30, 8.86),
    "A021": lambda: viscosity_index(22.83, 5.05),
    "A024": lambda: viscosity_index(120, 8),
    "A026": lambda: viscosity_index(120, 50),
    "A031": _high(2.0),
    "A032": _low(4.0),
    "A033": _high(4.0),
    "A035": _high(5.0),
    "A036": _low(6.0),
    "A037": _high(6.0),
    "A038": _low(8.0),
    "A039": _high(8.0),
    "A040": _low(10.0),
    "A041": _high(10.0),
    "A042": _low(12.0),
    "A045": _high(16.0),
    "A047": _high(20.0),
    "A048": _low(28.0),
    "A049": _high(28.0),
    "A051": _high(50.0),
    "A053": _high(70.0),
    "A054": _low(100.0),
    "A055": _high(100.0),
    "A058": lambda: viscosity_100_from_index(68, 96.79),
    "A059": lambda: viscosity_100_from_index(100, 95),
    "A061": lambda: viscosity_index(46, viscosity_100_from_index(46, 150)),
    "A070": _lower_limit(2),
    "A071": _lower_limit(3),
    "A072": _lower_limit(5),
    "A074": _lower_limit(10),
    "A075": _lower_limit(15),
    "A078": _lower_limit(46),
    "A080": _lower_limit(100),
    "A081": _lower_limit(150),
    "A082": _lower_limit(220),
    "A086": _lower_limit(1000),
    "A087": _lower_limit(1500),
    "A088": _lower_limit(2200),
    "A089": _lower_limit(3200),
    "A116": lambda: density.density_at(880, 100),
    "A118": lambda: density.K1 / 1.8,
    "A119": lambda: density.dynamic_viscosity(68, 860),
    "B002": lambda: bearings.speed_factor(1500, bearings.mean_diameter(50, 90)),
    "B004": lambda: bearings.reference_viscosity(1500, 70),
    "B005": lambda: bearings.reference_viscosity(10, 200),
    "B006": lambda: bearings.reference_viscosity(3000, 46),
    "B008": lambda: bearings.reference_viscosity(1000, 100),
    "B110": lambda: grease.renewal_quantity(90, 20, 0.005),
    "B111": lambda: grease.renewal_quantity(215, 47, 0.005),
    "B112": lambda: grease.interval_base(1500, 50, 10, speed_factor=105_000, speed_ratio=0.3),
    "B114": lambda: grease.interval_base(1500, 50, 1, speed_factor=105_000, speed_ratio=0.3),
    "B115": _refused_interval,
    "B116": lambda: grease.temperature_factor(85, 70, 15),
    "B117": lambda: grease.temperature_factor(100, 70, 15),
    "B121": lambda: grease.bearing_free_volume(30, 62, 16, 0.2),
    **OF_VISCOSITY,
    **OF_BEARINGS,
}


def test_every_check_value_is_put_to_a_formula_and_names_its_source() -> None:
    assert set(CALLS) | set(NAMED) == set(ROWS)
    assert not set(CALLS) & set(NAMED)
    assert all(row["source"] and row["confidence"] for row in ROWS.values())


@pytest.mark.parametrize("row", [ROWS[each] for each in NAMED], ids=NAMED)
def test_tables_give_the_names_of_the_check_values(row: dict[str, str]) -> None:
    assert row["tolerance"] == "exact"
    assert repr(list(NAMED[row["id"]]().names)) == _as_list(row["expected"]), row["source"]


def _as_list(expected: str) -> str:
    """The names of a row as a list: a bare name is the only one, None is none."""
    return expected if expected.startswith("[") else "[]" if expected == "None" else f"['{expected}']"


@pytest.mark.parametrize("row", [ROWS[each] for each in CALLS], ids=CALLS)
def test_formulas_agree_with_the_check_values(row: dict[str, str]) -> None:
    expected, tolerance = float(row["expected"]), row["tolerance"]
    if tolerance == "exact":
        allowed = 0.0
    elif tolerance.endswith("%"):
        allowed = abs(expected) * float(tolerance.removesuffix("%")) / 100
        printed = Decimal(row["expected"]).as_tuple()
        if len(printed.digits) >= 6:
            # Some long check values are printed to fewer digits than their tolerance asks for.
            allowed = max(allowed, 0.5 * 10.0 ** int(printed.exponent))
    else:
        allowed = float(tolerance.removeprefix("+/-"))
    assert CALLS[row["id"]]() == pytest.approx(expected, rel=0, abs=allowed), row["source"]


# Midpoints and limits of ISO 3448:1992 as printed on public pages; 2200 and 3200 from memory.
@pytest.mark.parametrize(("vg", "middle"), [(2, 2.2), (3, 3.2), (5, 4.6), (7, 6.8), (10, 10), (46, 46), (3200, 3200)])
def test_grade_limits_lie_ten_per_cent_about_the_midpoint(vg: int, middle: float) -> None:
    assert viscosity.grade_midpoint(vg) == middle
    assert viscosity.grade_limits(vg) == pytest.approx((0.9 * middle, 1.1 * middle))


def test_every_grade_follows_the_rule_of_ten_per_cent_without_overlap() -> None:
    assert len(viscosity.GRADES) == 20
    for grade in viscosity.GRADES:
        assert (grade.lowest, grade.highest) == pytest.approx((0.9 * grade.midpoint, 1.1 * grade.midpoint))
    assert all(low.highest < high.lowest for low, high in zip(viscosity.GRADES, viscosity.GRADES[1:], strict=False))


@pytest.mark.parametrize(("seen", "grade"), [(41.4, 46), (50.6, 46), (80, None), (1.9, None), (3600, None), (6.8, 7)])
def test_a_viscosity_between_the_limits_has_the_grade_and_one_in_a_gap_has_none(seen: float, grade: int | None) -> None:
    assert viscosity.grade_of(seen) == grade
    if grade is None:
        with pytest.raises(OutOfRange, match="no ISO viscosity grade"):
            viscosity.viscosity_grade(seen)
    else:
        assert viscosity.viscosity_grade(seen) == grade


def test_at_a_thousand_turns_the_reference_viscosity_drops_by_the_documented_step() -> None:
    # Ratio of equations (28) and (29) of ISO 281:2007 at n = 1000: 10 · 1000^-0.33 = 1.0233.
    below, at = bearings.reference_viscosity(1000 - 1e-6, 100), bearings.reference_viscosity(1000, 100)
    assert below / at == pytest.approx(1.0233, abs=1e-4)


@pytest.mark.parametrize(("share", "expected"), [(0, 80), (5, 80), (5.1, 110), (100, 110)])
def test_the_peak_counts_only_above_the_limit_share(share: float, expected: float) -> None:
    assert bearings.effective_temperature(80, 110, share, 5) == expected


def test_the_film_floor_is_a_share_of_the_film_of_the_usual_oil_and_never_above_the_cap() -> None:
    # VG 220 of index 95 has 51.2 mm²/s at 70 °C (line of ASTM D341 through ISO 3448 and ASTM D2270, worked twice).
    assert bearings.film_floor(220, 95, 70, 51.2, share=0.6, cap=1) == pytest.approx(0.6, rel=0.005)
    assert bearings.film_floor(220, 95, 70, 10, share=0.6, cap=1) == 1


def test_of_dust_and_water_only_the_stronger_shortens_the_interval() -> None:
    assert grease.interval_factor(0.5, 0.8, 0.7, 0.3, 1, 0.5, 1) == pytest.approx(0.5 * 0.8 * 0.3 * 0.5)
    assert grease.interval_factor(1, 1, 0.3, 0.7, 1, 1, 1) == grease.interval_factor(1, 1, 0.7, 0.3, 1, 1, 1)


@pytest.mark.parametrize(("refused", "guard"), [
    (lambda: grease.interval_base(90, 100, 1, 9_999, 0.1), "10 000 mm/min"),
    (lambda: grease.interval_base(3000, 50, 1, 210_000, 0.76), "0.75 of the grease speed ceiling"),
    (lambda: grease.interval_base(0, 50, 1, 210_000, 0.1), "speed must be more than 0 1/min"),
    (lambda: grease.interval_factor(1.1, 1, 1, 1, 1, 1, 1), "above 0 and at most 1"),
    (lambda: grease.bearing_free_volume(30, 62, 16, 5), "mass must be more than 0 and below"),
    (lambda: viscosity.fit(40, 68, 55, 30), "at least 20 K apart"),
    (lambda: viscosity.fit(40, 8, 100, 68), "must fall with temperature"),
    (lambda: viscosity.walther_z(0.2), "0.21 to 20 000 000"),
    (lambda: viscosity.viscosity_from_z(0.9), "0.21 and 20 000 000"),
    (lambda: viscosity.viscosity_at(68, 8.6, -273.15), "0.21 to 20 000 000"),
    (lambda: viscosity.viscosity_at(68, 8.6, float("nan")), "0.21 to 20 000 000"),
    (lambda: viscosity_index(30, 1.9), "from 2 mm²/s"),
    (lambda: viscosity_index(5, 6), "must fall with temperature"),
    (lambda: viscosity_100_from_index(2.2, 95), "measured viscosity at 100 °C"),
    (lambda: viscosity.grade_midpoint(47), "no ISO viscosity grade"),
    (lambda: bearings.reference_viscosity(0, 70), "more than 0 1/min"),
    (lambda: bearings.mean_diameter(90, 50), "larger than the bore"),
    (lambda: bearings.viscosity_ratio(10, 0), "more than 0 mm²/s"),
    (lambda: density.density_at(0, 20), "more than 0 kg/m³"),
])
def test_where_the_physics_ends_the_formula_names_the_range(refused: Callable[[], float], guard: str) -> None:
    with pytest.raises(OutOfRange, match=guard):
        refused()


def test_the_order_of_the_points_does_not_matter_to_the_fit() -> None:
    assert viscosity.fit(100, 8.6, 40, 68) == viscosity.fit(40, 68, 100, 8.6)
