"""A formula worked by hand: what is printed, and every mistake of a request told at once."""

import json

import pytest

from advisor.computing import ComputeFault, as_data, compute, list_formulas, render_text
from advisor.formulas import FORMULAS


def _complaints(name: str, inputs: dict[str, str]) -> tuple[str, ...]:
    try:
        compute(name, inputs)
    except ComputeFault as fault:
        return fault.messages
    return ()


def test_the_list_shows_every_formula_under_its_subject() -> None:
    text = list_formulas()
    assert all(f"  {name}: {formula.title}" in text for name, formula in FORMULAS.items())
    headings = [line for line in text.splitlines() if line and not line.startswith(" ")]
    assert headings == [
        "Viscosity", "Blends", "Conventional units", "Viscosity under pressure", "Rolling bearings", "Rating life",
        "Films", "Friction and heat", "Grease", "Oil life", "Cold start", "Arithmetic", "Grade systems",
    ]


def test_a_formula_is_worked_with_the_units_that_were_typed() -> None:
    # ISO 281:2007 equation (29): 1500 1/min and 70 mm ask for 13.8873 mm²/s.
    computed = compute("reference_viscosity", {"speed_rpm": "1500 rpm", "mean_diameter_mm": "7 cm"})
    assert computed.result == pytest.approx(13.8873, abs=1e-4)
    assert computed.values["mean_diameter_mm"].value == 70
    assert computed.warnings == ()


def test_the_text_shows_equation_numbers_result_ranges_source_and_how_sure() -> None:
    text = render_text(compute("reference_viscosity", {"speed_rpm": "1500", "mean_diameter_mm": "7 cm"}))
    for part in (
        "ν₁ = 4500·n^−0.5·d_m^−0.5", "ν₁ = 4500·1500^−0.5·70^−0.5", "ν₁ = 13.9 mm²/s", "70 mm (typed: 7 cm)",
        "range 5 to 5500 mm", "ISO 281:2007", "read in a public text", "2.3 %",
    ):
        assert part in text
    assert "typed: 1500" not in text
    assert "warning" not in text


@pytest.mark.parametrize(("name", "sure"), [
    ("interval_factor", "common practice"), ("bearing_free_volume", "from memory"), ("viscosity_index", "public text"),
])
def test_the_text_never_claims_more_certainty_than_the_formula_has(name: str, sure: str) -> None:
    inputs = {
        "interval_factor": {each.name: "1" for each in FORMULAS["interval_factor"].inputs},
        "bearing_free_volume": {"bore_mm": "30", "outside_mm": "62", "width_mm": "16", "mass_kg": "0.2"},
        "viscosity_index": {"viscosity_40": "73.30", "viscosity_100": "8.86"},
    }[name]
    (line,) = [line for line in render_text(compute(name, inputs)).splitlines() if "how sure" in line]
    assert sure in line


def test_the_data_goes_through_json_unrounded() -> None:
    computed = compute("total", {"a": "80.123456", "b": "-10"})
    data = json.loads(json.dumps(as_data(computed)))
    assert data["result"]["value"] == pytest.approx(70.123456)
    assert data["numbers"] == "c = 80.123456 + (-10)"
    assert [each["typed"] for each in data["inputs"]] == ["80.123456", "-10"]
    assert (data["inputs"][0]["low"], data["inputs"][0]["inside"]) == (-1e9, True)


def test_a_value_outside_its_range_is_worked_with_a_warning_that_prints_the_range() -> None:
    computed = compute("viscosity_at", {"viscosity_40": "68", "viscosity_100": "8.6", "temperature_c": "-25 °C"})
    (warning,) = computed.warnings
    assert "-25 °C" in warning
    assert "-20 to 200 °C" in warning
    assert warning in render_text(computed)
    assert as_data(computed)["warnings"] == [warning]


def test_where_the_physics_ends_there_is_no_result_but_a_sentence() -> None:
    with pytest.raises(ComputeFault) as refused:
        compute("viscosity_index", {"viscosity_40": "5", "viscosity_100": "8"})
    assert refused.value.messages[0] == (
        "The viscosity must fall with temperature: 5 mm²/s at 40 °C is not above 8 mm²/s at 100 °C."
    )


def test_all_mistakes_are_told_at_once() -> None:
    with pytest.raises(ComputeFault) as refused:
        compute("interval_base", {"speed_rmp": "1500", "bore_mm": "wide", "interval_k": "10 kg", "speed_ratio": "0.3"})
    told = "\n".join(refused.value.messages)
    assert len(refused.value.messages) == 5
    assert "no input 'speed_rmp'" in told
    assert "Did you mean speed_rpm" in told
    assert "speed_rpm is missing: speed, 1 to 100 000 1/min. Write speed_rpm='1 1/min'." in told
    assert "bore_mm: 'wide'" in told
    assert "interval_k: " in told
    assert "speed_factor is missing" in told


def test_an_unknown_formula_names_the_nearest() -> None:
    with pytest.raises(ComputeFault, match=r"no formula 'viscosity_idx'\. Did you mean viscosity_index"):
        compute("viscosity_idx", {})


@pytest.mark.parametrize("name", FORMULAS)
def test_a_formula_without_inputs_asks_for_each_with_its_range(name: str) -> None:
    with pytest.raises(ComputeFault) as asked:
        compute(name, {})
    assert len(asked.value.messages) == len(FORMULAS[name].inputs)
    for message, each in zip(asked.value.messages, FORMULAS[name].inputs, strict=True):
        assert message.startswith(f"{each.name} is missing")
        assert each.range in message


@pytest.mark.parametrize("name", FORMULAS)
def test_what_a_missing_input_advises_to_write_can_be_read(name: str) -> None:
    advised = [message.rpartition("Write ")[2].rstrip(".").partition("=") for message in _complaints(name, {})]
    inputs = {key: value.strip("'") for key, _, value in advised}
    # Only the physics may still refuse, never the reading.
    assert not any(message.startswith(tuple(f"{key}:" for key in inputs)) for message in _complaints(name, inputs))
    assert set(inputs) == {each.name for each in FORMULAS[name].inputs}


def test_a_look_up_answers_in_names_with_the_sentence_beside_them() -> None:
    # SAE J300:2015: 6.5 mm²/s at 100 °C lies in grade 12 and in grade 16.
    computed = compute("sae_j300_grades", {"viscosity_100": "6.5 cSt"})
    result = as_data(computed)["result"]
    assert isinstance(result, dict)
    assert result["value"] == ["12", "16"]
    assert "SAE = 12 (high shear at least 2.0) or 16" in render_text(computed)


def test_a_gap_between_grades_is_told_as_one() -> None:
    data = json.loads(json.dumps(as_data(compute("nlgi_grade", {"penetration": "300"}))))
    assert data["result"]["value"] == []
    assert data["result"]["shown"] == "between 1 and 2"


@pytest.mark.parametrize("typed", ["grease_severe", "Grease severe", "grease-severe"])
def test_a_name_is_read_however_it_is_set(typed: str) -> None:
    inputs = {"cleanliness": typed, "kappa": "1", "mean_diameter_mm": "70"}
    # ISO 281:2007, annex A, grease with severe contamination, coefficients from memory.
    assert compute("contamination_factor_of", inputs).result == pytest.approx(0.0421317, abs=1e-6)


def test_an_unknown_name_is_refused_with_the_names_there_are() -> None:
    with pytest.raises(ComputeFault) as refused:
        compute("vg_of_agma", {"number": "8B"})
    (message,) = refused.value.messages
    assert "'8B' is not one of 0, 1, 2" in message
    assert "Did you mean 8" in message


def test_a_look_up_by_numbers_warns_outside_its_range_too() -> None:
    computed = compute("sae_j306_grades", {"viscosity_100": "600"})
    assert "3.8 to 500 mm²/s" in computed.warnings[0]


def test_a_power_of_an_input_is_put_in_as_well() -> None:
    text = render_text(compute("load_group_point", {"load_n": "500", "modulus_gpa": "227", "radius_mm": "5"}))
    assert "W = 500/(227·5²)/1000" in text


@pytest.mark.parametrize(("name", "inputs", "result"), [
    ("viscosity_barus", {"dynamic_viscosity": "100 cP", "alpha": "20 1/GPa", "pressure_mpa": "0.5 GPa"}, 2_202_647),
    ("film_ratio", {"film_um": "500 nm", "roughness_1_um": "0.3 µm", "roughness_2_um": "0.1"}, 1.581139),
    ("power_loss", {"torque_nmm": "0.1 Nm", "speed_rpm": "50 Hz"}, 31.41593),
    ("viscosity_from_engler", {"engler": "5 °E"}, 37.4),
])
def test_the_units_of_pressure_film_torque_and_cups_are_read(name: str, inputs: dict[str, str], result: float) -> None:
    # Barus A125, film ratio B102, power loss B084, Vogel A110.
    assert compute(name, inputs).result == pytest.approx(result, rel=5e-3)
