"""Overlaps and gaps against brute force: every place of small grids is looked at."""

from itertools import product

from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.anomalies.axes import axis
from advisor.anomalies.sweeps import Grid, Region, joined, numbers_in
from advisor.boxes import Stretch
from advisor.conditions import Domain
from advisor.knowledge import Band

SIZES = (6, 5, 4)


@st.composite
def regions(draw: st.DrawFn) -> Region:
    found = []
    for size in SIZES:
        low = draw(st.integers(0, size - 1))
        found.append((low, draw(st.integers(low + 1, size))))
    return tuple(found)


def places(region: Region) -> set[tuple[int, ...]]:
    return set(product(*(range(low, high) for low, high in region)))


@settings(max_examples=300, deadline=None)
@given(st.lists(regions(), max_size=12))
def test_gaps_are_disjoint_and_just_what_no_row_covers(rows: list[Region]) -> None:
    whole = tuple((0, size) for size in SIZES)
    uncovered = places(whole).difference(*map(places, rows))
    found = list(Grid(SIZES, rows).gaps(whole))
    for gaps in (found, joined(found)):
        seen = [place for gap in gaps for place in places(gap)]
        assert len(seen) == len(set(seen))
        assert set(seen) == uncovered


@settings(max_examples=300, deadline=None)
@given(st.lists(regions(), max_size=12))
def test_overlaps_are_just_the_pairs_that_share_a_place(rows: list[Region]) -> None:
    found = {(one, other) for one, met in Grid(SIZES, rows).overlaps() for other in numbers_in(met)}
    pairs = product(range(len(rows)), repeat=2)
    assert found == {(one, other) for one, other in pairs if one < other and places(rows[one]) & places(rows[other])}


@given(st.lists(st.tuples(st.integers(-3, 9), st.integers(1, 5)), max_size=5), st.integers(0, 24))
def test_a_number_lies_in_a_band_where_its_place_lies_in_the_run(bands: list[tuple[int, int]], quarter: int) -> None:
    domain, value = Domain("number", low=0, high=6), quarter / 4
    cells = [Band(float(low), float(low + width)) for low, width in bands]
    numbers = axis("c", "c", domain, cells)
    for cell in cells:
        run = numbers.run(cell)
        side = numbers.side(run) if run else None
        inside = isinstance(side, Stretch) and side.has(value)
        assert inside is cell.meets(value)


def test_the_ends_of_the_declared_limits_belong_to_the_axis() -> None:
    numbers = axis("c", "c", Domain("number", low=0, high=100), [Band(0, 50), Band(50, 100)])
    runs = [numbers.run(cell) for cell in (Band(0, 50), Band(50, 100))]
    grid = Grid([numbers.size], [(run,) for run in runs if run])
    (gap,) = grid.gaps((numbers.everything,))
    assert numbers.side(gap[0]) == Stretch(100, 100)
