"""The viscosity index is judged by the open library `chemicals`, which carries the table of L and H of ASTM D2270."""

from math import log

import pytest
from chemicals.viscosity import VI_Hs, VI_Ls, VI_nus
from chemicals.viscosity import viscosity_index as judge
from hypothesis import given
from hypothesis import strategies as st

from advisor.formulas import viscosity_index as index_room
from advisor.formulas.viscosity_index import (
    JOINTS,
    reported_viscosity_index,
    viscosity_100_from_index,
    viscosity_index,
    viscosity_of_index_0,
    viscosity_of_index_100,
)

TABLE = list(zip(VI_nus, VI_Ls, VI_Hs, strict=True))
FOUR_DIGITS = 0.0012  # the quadratics meet the four-digit table to 0.12 %


def test_the_table_of_the_judge_is_whole() -> None:
    assert len(TABLE) == 311
    assert (TABLE[0][0], TABLE[-1][0]) == (2.0, 70.0)


@pytest.mark.parametrize(("viscosity_100", "low", "high"), TABLE)
def test_l_and_h_agree_with_every_row_of_the_table(viscosity_100: float, low: float, high: float) -> None:
    assert viscosity_of_index_0(viscosity_100) == pytest.approx(low, rel=FOUR_DIGITS)
    assert viscosity_of_index_100(viscosity_100) == pytest.approx(high, rel=FOUR_DIGITS)


@given(viscosity_100=st.floats(2.05, 400), steepness=st.floats(1.3, 3))
def test_the_index_agrees_with_the_judge(viscosity_100: float, steepness: float) -> None:
    viscosity_40 = viscosity_100**steepness
    found = viscosity_index(viscosity_40, viscosity_100)
    expected = judge(viscosity_40 * 1e-6, viscosity_100 * 1e-6)
    low, high = viscosity_of_index_0(viscosity_100), viscosity_of_index_100(viscosity_100)
    if viscosity_40 >= high:
        # L and H each 0.12 % off move the index by this much.
        allowed = 100 * FOUR_DIGITS * (low + abs(found) / 100 * (low + high)) / (low - high)
    else:
        # dVI = ln 10 · 10^N / 0.00715 · dN, with dN = 0.12 % / (ln 10 · log10 Y) = 0.12 % / ln Y.
        allowed = log(10) * (found - 100 + 1 / 0.00715) * FOUR_DIGITS / log(viscosity_100)
    assert found == pytest.approx(expected, rel=0, abs=allowed + 0.05)


@given(viscosity_100=st.floats(2.01, 500), other=st.floats(2.01, 500), viscosity_40=st.floats(10, 5000))
def test_a_thicker_oil_at_100_has_the_higher_index_but_for_the_joints(
    viscosity_100: float, other: float, viscosity_40: float
) -> None:
    thin, thick = sorted((viscosity_100, other))
    if thick >= viscosity_40:
        return
    lower, higher = viscosity_index(viscosity_40, thin), viscosity_index(viscosity_40, thick)
    if any(thin <= joint <= thick for joint in JOINTS) and lower > -100:
        assert higher >= lower - 1
    elif not any(thin <= joint <= thick for joint in JOINTS):
        assert higher >= lower - 1e-6


@given(viscosity_40=st.floats(10, 3200), index=st.floats(0, 350))
def test_the_viscosity_found_from_an_index_has_that_index_but_for_the_joints(viscosity_40: float, index: float) -> None:
    found = viscosity_100_from_index(viscosity_40, index)
    allowed = 1 if any(abs(found - joint) < 1e-6 for joint in JOINTS) else 1e-6
    assert viscosity_index(viscosity_40, found) == pytest.approx(index, rel=0, abs=allowed)


@pytest.mark.parametrize(("viscosity_40", "viscosity_100", "reported"), [(73.30, 8.86, 92), (22.83, 5.05, 156)])
def test_the_worked_examples_of_the_standard_are_reported_as_printed(
    viscosity_40: float, viscosity_100: float, reported: int
) -> None:
    # Worked examples of ASTM D2270, procedures A and B.
    assert reported_viscosity_index(viscosity_40, viscosity_100) == reported


@pytest.mark.parametrize(("index", "reported"), [(100.5, 100), (101.5, 102), (-49.5, -50), (-25.6, -26)])
def test_halves_are_reported_to_the_even_number(monkeypatch: pytest.MonkeyPatch, index: float, reported: int) -> None:
    # Reporting rule of ASTM D2270.
    monkeypatch.setattr(index_room, "viscosity_index", lambda *_: index)
    assert reported_viscosity_index(120, 8) == reported
