"""Boundary dimensions by designation, held against the rules of the dimension plans and a second typing.

All figures here are from memory of ISO 15, ISO 355 and ISO 104, as the table is; no publication was at hand. The second
typing was not copied from the rows, so that a slip of the hand shows; an error of memory may stand in both. How far the
old sizes may lie from the rules is set to what these sizes need.
"""

from collections.abc import Iterator
from itertools import pairwise
from typing import NamedTuple

import pytest

from advisor.knowledge import Knowledge


class Size(NamedTuple):
    bore: float
    outside: float
    width: float

    @property
    def ring_space(self) -> float:
        return self.outside - self.bore


Series = dict[float, Size]

CYLINDRICAL = ("NU", "NJ", "N", "NUP")
SHARED = {  # dimension series: the bearing series that are built to it
    "10": ("60",),
    "02": ("62", "72", "12", *(f"{form}2" for form in CYLINDRICAL)),
    "03": ("63", "73", "13", "213", *(f"{form}3" for form in CYLINDRICAL)),
    "04": ("64",),
    "22": ("22", "222", *(f"{form}22" for form in CYLINDRICAL)),
    "23": ("23", "223", *(f"{form}23" for form in CYLINDRICAL)),
    "30": ("230",), "31": ("231",), "32": ("232",), "40": ("240",), "41": ("241",),
}
TAPERED = {"302": "02", "303": "03", "322": "22", "323": "23"}
THRUST = ("511", "512")
TYPES = {
    "deep_groove_ball": ("60", "62", "63", "64"),
    "angular_contact_ball": ("72", "73"),
    "self_aligning_ball": ("12", "13", "22", "23"),
    "cylindrical_roller": tuple(f"{form}{end}" for form in CYLINDRICAL for end in ("2", "3", "22", "23")),
    "tapered_roller": tuple(TAPERED),
    "spherical_roller": ("213", "222", "223", "230", "231", "232", "240", "241"),
    "thrust_ball": THRUST,
}
EVERY_SERIES = tuple(series for group in TYPES.values() for series in group)

TYPED_AGAIN = """
6001 12 28 8      6006 30 55 13     6010 50 80 16     6016 80 125 22    6026 130 200 33   6036 180 280 46
6200 10 30 9      6203 17 40 12     6205 25 52 15     6209 45 85 19     6212 60 110 22    6218 90 160 30
6228 140 250 42   6240 200 360 58   6302 15 42 13     6304 20 52 15     6306 30 72 19     6308 40 90 23
6311 55 120 29    6316 80 170 39    6319 95 200 45    6322 110 240 50   6330 150 320 65   6406 30 90 23
6410 50 130 31    62/28 28 58 16    7206 30 62 16     7210 50 90 20     7312 60 130 31    7320 100 215 47
1205 25 52 15     1210 50 90 20     1309 45 100 25    2206 30 62 20     2211 55 100 25    2310 50 110 40
NU206 30 62 16    NJ208 40 80 18    NU220 100 180 34  NUP309 45 100 25  NU2215 75 130 31  NU2326 130 280 93
N312 60 130 31    NU324 120 260 55  NJ2210 50 90 23   NU236 180 320 52
22206 30 62 20    22210 50 90 23    22216 80 140 33   22220 100 180 46  22228 140 250 68  22236 180 320 86
22310 50 110 40   22318 90 190 64   22322 110 240 80  22330 150 320 108 22340 200 420 138 21310 50 110 27
23024 120 180 46  23032 160 240 60  23040 200 310 82  23056 280 420 106 23080 400 600 148 24030 150 225 75
23122 110 180 56  23136 180 300 96  23152 260 440 144 24128 140 225 85  24140 200 340 140 23218 90 160 52.4
23228 140 250 88  23240 200 360 128 231/500 500 830 264
30204 20 47 15.25 30206 30 62 17.25 30210 50 90 21.75 30216 80 140 28.25 30220 100 180 37 30305 25 62 18.25
30308 40 90 25.25 30312 60 130 33.5 32206 30 62 21.25 32210 50 90 24.75  32216 80 140 35.25 32222 110 200 56
32306 30 72 28.75 32310 50 110 42.25 32314 70 150 54
51100 10 24 9     51105 25 42 11    51110 50 70 14    51120 100 135 25  51204 20 40 14    51208 40 68 19
51212 60 95 26    51220 100 150 38  51226 130 190 45
"""


@pytest.fixture(scope="module")
def rows(knowledge: Knowledge) -> dict[str, dict[str, object]]:
    return {row.id: dict(row.cells) for row in knowledge.tables["boundary_dimensions"].rows}


@pytest.fixture(scope="module")
def series(rows: dict[str, dict[str, object]]) -> dict[str, Series]:
    found: dict[str, Series] = {}
    for cells in rows.values():
        size = Size(*(float(str(cells[name])) for name in ("bore_mm", "outside_mm", "width_mm")))
        of_series = found.setdefault(str(cells["series"]), {})
        assert size.bore not in of_series, cells
        of_series[size.bore] = size
    return found


@pytest.fixture(scope="module")
def plan(series: dict[str, Series]) -> dict[str, Series]:
    """The sizes by dimension series, from all bearing series that are built to it."""
    return {code: dict(each for name in names for each in series[name].items()) for code, names in SHARED.items()}


def bore_named_by(designation: str, series: str) -> float:
    """The bore that the end of a designation says: 00 to 03 by custom, then a fifth, or plain after a stroke."""
    assert designation.startswith(series)
    end = designation.removeprefix(series)
    if end.startswith("/"):
        return float(end[1:])
    assert len(end) == 2, designation
    return {"00": 10.0, "01": 12.0, "02": 15.0, "03": 17.0}.get(end, 5.0 * int(end))


def neighbours(sizes: Series) -> Iterator[tuple[Size, Size]]:
    return pairwise(sizes[bore] for bore in sorted(sizes))


@pytest.mark.parametrize(
    ("designation", "bore", "outside", "width"),
    list(zip(*(TYPED_AGAIN.split()[at::4] for at in range(4)), strict=True)))
def test_a_second_typing_agrees(
    designation: str, bore: str, outside: str, width: str, rows: dict[str, dict[str, object]]
) -> None:
    cells = rows[designation]
    assert (cells["bore_mm"], cells["outside_mm"], cells["width_mm"]) == (float(bore), float(outside), float(width))


def test_every_series_is_there_and_no_other(series: dict[str, Series]) -> None:
    assert set(series) == set(EVERY_SERIES)


def test_the_designation_says_the_bore(rows: dict[str, dict[str, object]]) -> None:
    wrong = {one: cells["bore_mm"] for one, cells in rows.items()
             if bore_named_by(one, str(cells["series"])) != cells["bore_mm"]}
    assert not wrong


def test_the_series_says_the_type_that_the_question_offers(
    rows: dict[str, dict[str, object]], knowledge: Knowledge
) -> None:
    type_of = {series: kind for kind, group in TYPES.items() for series in group}
    assert set(TYPES) <= set(knowledge.facts["bearing_type"].domain.choices)
    assert not [one for one, cells in rows.items() if cells["bearing_type"] != type_of[str(cells["series"])]]


def test_no_self_aligning_bearing_wider_than_its_dimension_series(rows: dict[str, dict[str, object]]) -> None:
    """1224 and 1226 are 42 and 46 mm wide where the dimension series has 40 and 40 mm (from memory)."""
    assert not {"1224", "1226"} & set(rows)


@pytest.mark.parametrize("dimension_series", SHARED)
def test_bearings_of_one_dimension_series_are_alike(dimension_series: str, series: dict[str, Series]) -> None:
    """ISO 15: bore, outside diameter and width belong to the dimension series, not to the type."""
    alike: dict[float, set[Size]] = {}
    for name in SHARED[dimension_series]:
        for bore, size in series[name].items():
            alike.setdefault(bore, set()).add(size)
    assert {len(sizes) for sizes in alike.values()} == {1}


@pytest.mark.parametrize("diameter_series", "01234")
def test_one_diameter_series_has_one_outside_diameter(
    diameter_series: str, plan: dict[str, Series], series: dict[str, Series]
) -> None:
    """ISO 15 and ISO 355: the last digit of the dimension series settles the outside diameter."""
    members = [sizes for code, sizes in plan.items() if code[1] == diameter_series]
    members += [series[name] for name, code in TAPERED.items() if code[1] == diameter_series]
    outside: dict[float, set[float]] = {}
    for sizes in members:
        for bore, size in sizes.items():
            outside.setdefault(bore, set()).add(size.outside)
    assert {len(each) for each in outside.values()} == {1}


@pytest.mark.parametrize("name", EVERY_SERIES)
def test_a_larger_bore_has_a_larger_outside_and_no_smaller_width(name: str, series: dict[str, Series]) -> None:
    for smaller, larger in neighbours(series[name]):
        assert smaller.outside < larger.outside, (smaller, larger)
        assert smaller.width <= larger.width, (smaller, larger)


@pytest.mark.parametrize("name", EVERY_SERIES)
def test_from_size_to_size_the_ring_space_does_not_jump(name: str, series: dict[str, Series]) -> None:
    """Common practice: from one bore to the next D - d grows by no more than about a third, and hardly ever falls."""
    for smaller, larger in neighbours(series[name]):
        assert 0.9 < larger.ring_space / smaller.ring_space < 1.34, (smaller, larger)


@pytest.mark.parametrize(("lighter", "heavier"), [("10", "02"), ("30", "31"), ("31", "32"), ("02", "03"), ("03", "04")])
def test_a_heavier_diameter_series_is_larger(lighter: str, heavier: str, plan: dict[str, Series]) -> None:
    common = plan[lighter].keys() & plan[heavier].keys()
    assert common
    assert all(plan[lighter][bore].outside < plan[heavier][bore].outside for bore in common)


@pytest.mark.parametrize(
    ("narrower", "wider"), [("10", "30"), ("30", "40"), ("31", "41"), ("02", "22"), ("22", "32"), ("03", "23")])
def test_a_wider_width_series_is_wider(narrower: str, wider: str, plan: dict[str, Series]) -> None:
    common = plan[narrower].keys() & plan[wider].keys()
    assert common
    assert all(plan[narrower][bore].width < plan[wider][bore].width for bore in common)


@pytest.mark.parametrize(
    ("dimension_series", "factor"),
    [("10", 0.84), ("30", 0.84), ("40", 0.84), ("31", 1.12), ("41", 1.12), ("02", 1.48), ("22", 1.48), ("32", 1.48),
     ("03", 1.92), ("23", 1.92)])
def test_outside_diameters_follow_the_extension_rule(
    dimension_series: str, factor: float, plan: dict[str, Series]
) -> None:
    """ISO 15, rule for new sizes (from memory): D = d + f d^0.9; old sizes from 100 mm lie within 8 % of it."""
    for size in plan[dimension_series].values():
        if size.bore >= 100:
            assert size.outside == pytest.approx(size.bore + factor * size.bore**0.9, rel=0.08), size


@pytest.mark.parametrize(
    ("dimension_series", "factor", "within"),
    [("30", 1.5, 0.03), ("40", 2.0, 0.02), ("41", 2.0, 0.02), ("31", 1.6, 0.04), ("32", 1.6, 0.07), ("22", 1.15, 0.22),
     ("23", 1.15, 0.20)])
def test_widths_follow_the_extension_rule(
    dimension_series: str, factor: float, within: float, plan: dict[str, Series]
) -> None:
    """ISO 15, rule for new sizes (from memory): B = 0.5 f (D - d).

    The factor of width series 3 is 1.5; the old sizes of 31 and 32 keep to 1.6. The older 22 and 23 only lie near.
    """
    for size in plan[dimension_series].values():
        assert size.width == pytest.approx(0.5 * factor * size.ring_space, rel=within), size


@pytest.mark.parametrize(
    ("dimension_series", "low", "high"),
    [("10", 0.45, 0.56), ("02", 0.36, 0.56), ("03", 0.36, 0.49), ("04", 0.36, 0.42)])
def test_narrow_bearings_are_about_half_as_wide_as_their_ring_space(
    dimension_series: str, low: float, high: float, plan: dict[str, Series]
) -> None:
    """Common practice: widths of the narrow series, older than the rule, as a share of D - d."""
    assert all(low <= size.width / size.ring_space <= high for size in plan[dimension_series].values())


def test_radial_bearings_stand_in_whole_millimetres_and_round_diameters(plan: dict[str, Series]) -> None:
    """ISO 15 (from memory): D from 75 mm steps by 5, from 300 mm by 10; only series 32 has widths from inches."""
    for code, sizes in plan.items():
        for size in sizes.values():
            assert size.outside % (10 if size.outside >= 300 else 5 if size.outside >= 75 else 1) == 0, size
            assert size.width.is_integer() or (code == "32" and size.bore <= 110), size


@pytest.mark.parametrize(("narrow", "wide"), [("302", "322"), ("303", "323")])
def test_the_cone_stands_out_as_far_in_the_wide_series(
    narrow: str, wide: str, plan: dict[str, Series], series: dict[str, Series]
) -> None:
    """ISO 355 (from memory): T exceeds B of ISO 15 by as much in 322 as in 302, in 323 as in 303, to 140 mm."""
    common = [bore for bore in series[narrow].keys() & series[wide].keys() if bore <= 140]
    assert len(common) > 20
    for bore in common:
        excess = [series[name][bore].width - plan[TAPERED[name]][bore].width for name in (narrow, wide)]
        assert excess[0] == excess[1], bore


@pytest.mark.parametrize("name", TAPERED)
def test_the_assembled_width_exceeds_the_cone_by_a_rising_quarter(
    name: str, plan: dict[str, Series], series: dict[str, Series]
) -> None:
    """ISO 355 (from memory): T - B comes in quarters of a millimetre, 0.75 to 8 mm, and does not fall with the bore."""
    excess = [size.width - plan[TAPERED[name]][bore].width for bore, size in sorted(series[name].items())]
    assert all((4 * each).is_integer() and 0.75 <= each <= 8 for each in excess)
    assert excess == sorted(excess)


@pytest.mark.parametrize(("name", "factor"), [("511", 0.72), ("512", 1.20)])
def test_thrust_bearings_follow_the_extension_rule(name: str, factor: float, series: dict[str, Series]) -> None:
    """ISO 104, rule for new sizes (from memory): D = d + f d^0.8 and T = 0.8 (D - d); heights stay below it."""
    for size in series[name].values():
        if size.bore >= 60:
            assert size.outside == pytest.approx(size.bore + factor * size.bore**0.8, rel=0.08), size
        assert 0.63 <= size.width / size.ring_space <= 0.81, size


def test_a_heavier_thrust_bearing_is_larger_and_higher(series: dict[str, Series]) -> None:
    for bore, size in series["511"].items():
        assert size.outside < series["512"][bore].outside, bore
        assert size.width < series["512"][bore].width, bore
