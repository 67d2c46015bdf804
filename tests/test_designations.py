"""Grease designations: the lowest code that suffices, and what every code says when read back."""

import math
from collections.abc import Callable
from dataclasses import replace

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from advisor.advice import Advice
from advisor.designations import Designer, DinCode, IsoCode, NoCode, din_serves, iso_serves
from advisor.knowledge import Knowledge

FIXED = settings(max_examples=120, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])


@pytest.fixture(scope="module")
def designer(knowledge: Knowledge) -> Designer:
    return Designer(knowledge)


def test_a_published_iso_code_reads_as_published(designer: Designer) -> None:
    """GB/T 7631.8, the adoption of ISO 6743-9, example XBEGB 00: -20 to 160 degC, water washing, EP.

    That G says no rust protection is from memory.
    """
    code = designer.read_iso("ISO-L-XBEGB 00")
    assert (code.lower_c, code.upper_c, code.environment, code.rust, code.load, code.nlgi) == (
        -20,
        160,
        2,
        0,
        "B",
        "00",
    )


def test_a_din_code_reads_as_din_51502_says(designer: Designer) -> None:
    """DIN 51502 as reprinted: K is 120 degC with a water rating 0 or 1 at 90 degC."""
    code = designer.read_din("KP2K-30")
    assert (
        code.additives,
        code.oil,
        code.nlgi,
        code.upper_c,
        code.water_test_c,
        code.water_rating_to,
        code.lower_c,
    ) == ("P", "", "2", 120, 90, 1, -30)


@pytest.mark.parametrize(
    "text", ["KP2K", "KP7K-30", "KP2Z-30", "KP2K-35", "G2K-30", "KP2K-30 extra", "", "ISO-L-XBEGB 00"]
)
def test_what_is_no_din_code_is_refused(text: str, designer: Designer) -> None:
    with pytest.raises(NoCode):
        designer.read_din(text)


@pytest.mark.parametrize(
    "text", ["ISO-L-XBEGB", "ISO-L-XZEGB 2", "ISO-L-XBEGC 2", "XBEGB 2", "ISO-L-XBEJB 2", "KP2K-30"]
)
def test_what_is_no_iso_code_is_refused(text: str, designer: Designer) -> None:
    with pytest.raises(NoCode):
        designer.read_iso(text)


@given(
    celsius=st.integers(-20, 150),
    start=st.integers(-40, 30),
    water=st.sampled_from(["none", "humid", "splash", "rain", "wash", "jet"]),
    load=st.sampled_from(["0.04", "0.12", "0.2"]),
)
@FIXED
def test_codes_cover_the_case_or_are_not_given(
    celsius: int, start: int, water: str, load: str, advise: Callable[..., Advice], designer: Designer
) -> None:
    advice = advise(
        running_temperature_c=f"{celsius} °C",
        start_temperature_c=f"{start} °C",
        water_exposure=water,
        load_ratio=load,
        salt="no",
        water_temperature_c="20 °C",
    )
    for text in advice.codes.din:
        code = designer.read_din(text)
        assert str(code) == text
        assert code.upper_c >= celsius
        assert code.lower_c <= start
        assert code.nlgi in advice.line("nlgi").values
    for text in advice.codes.iso:
        code = designer.read_iso(text)
        assert str(code) == text
        assert code.upper_c >= celsius
        assert code.lower_c <= start
    assert advice.codes.din or advice.codes.din_none
    assert advice.codes.iso or advice.codes.iso_none


DIN = st.builds(
    DinCode,
    st.sampled_from(["", "P", "F", "PF"]),
    st.sampled_from(["", "HC"]),
    st.sampled_from(["1", "2"]),
    st.just("X"),
    st.sampled_from([60.0, 80.0, 100.0, 120.0, 140.0]),
    st.sampled_from([40.0, 90.0, math.nan]),
    st.sampled_from([1.0, 3.0]),
    st.sampled_from([-10.0, -20.0, -30.0]),
)


@given(DIN)
def test_a_code_serves_itself_and_is_not_served_by_a_weaker_one(code: DinCode) -> None:
    assert din_serves(code, code)
    assert not din_serves(replace(code, upper_c=code.upper_c - 1), code)
    assert not din_serves(replace(code, lower_c=code.lower_c + 1), code)
    assert not din_serves(replace(code, nlgi="3"), code)
    if code.additives:
        assert not din_serves(replace(code, additives=""), code)
    if not math.isnan(code.water_test_c):
        assert not din_serves(replace(code, water_test_c=code.water_test_c - 1), code)
        assert not din_serves(replace(code, water_rating_to=code.water_rating_to + 1), code)


@given(
    st.builds(
        IsoCode,
        st.just("B"),
        st.just("C"),
        st.just("E"),
        st.sampled_from(["A", "B"]),
        st.just("2"),
        st.sampled_from([0.0, -20.0]),
        st.sampled_from([90.0, 120.0]),
        st.sampled_from([1.0, 2.0]),
        st.sampled_from([1.0, 2.0]),
    )
)
def test_an_iso_code_serves_itself_and_is_not_served_by_a_weaker_one(code: IsoCode) -> None:
    assert iso_serves(code, code)
    for weaker in (
        {"upper_c": code.upper_c - 1},
        {"lower_c": code.lower_c + 1},
        {"environment": code.environment - 1},
        {"rust": code.rust - 1},
        {"nlgi": "1"},
    ):
        assert not iso_serves(replace(code, **weaker), code)
    if code.load == "B":
        assert not iso_serves(replace(code, load="A"), code)


def test_food_gets_no_iso_code(advise: Callable[..., Advice]) -> None:
    advice = advise(site="food_incidental")
    assert not advice.codes.iso
    assert "food" in advice.codes.iso_none


def test_an_oil_point_gets_no_grease_code(advise: Callable[..., Advice]) -> None:
    advice = advise(supply="oil_system")
    assert (advice.codes.din, advice.codes.iso) == ((), ())
    assert "oil" in advice.codes.din_none
