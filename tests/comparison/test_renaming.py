"""Editions of which only one has a name: each is worded by its own knowledge, and what cannot be compared is said."""

import json
from dataclasses import replace
from pathlib import Path

import pytest

from advisor.comparison import Comparison, Editions, as_data, as_markdown, as_text, changing, compare, edits
from advisor.comparison.edits import with_edits
from advisor.comparison.standing import names_of, stands
from advisor.knowledge import Knowledge
from advisor.places import scenario_folder
from tests.comparison.editing import HOT_STEEL, HOT_STEEL_SILENT, edited, renamed

SCENARIOS = scenario_folder() / "rolling_bearing"
FILES = [SCENARIOS / f"{each}.yaml" for each in ("dry_motor_bearing", "bearing_under_cold_water")]


@pytest.fixture(scope="module", params=["emcor", "load_additive", "load_ratio"])
def both(
    request: pytest.FixtureRequest, knowledge: Knowledge, tmp_path_factory: pytest.TempPathFactory
) -> tuple[str, Knowledge, Knowledge]:
    name = str(request.param)
    return name, knowledge, renamed(tmp_path_factory.mktemp("renamed") / "knowledge", name)


@pytest.fixture(params=["there", "back"])
def compared(request: pytest.FixtureRequest, both: tuple[str, Knowledge, Knowledge]) -> tuple[str, Comparison]:
    name, old, new = both
    return name, compare(old, new, FILES) if request.param == "there" else compare(new, old, FILES)


def test_a_name_that_went_is_told_by_the_edition_that_has_it(compared: tuple[str, Comparison]) -> None:
    name, comparison = compared
    text = as_text(comparison)
    assert name in text
    assert f"{name}_renamed" in text
    assert "removed" in text
    assert as_markdown(comparison)
    assert json.dumps(as_data(comparison))


def test_regions_that_no_edition_can_tell_are_left_out_and_that_is_said(compared: tuple[str, Comparison]) -> None:
    # `ep_heavy` asks for the load ratio in its condition; it demands a load additive, whose name no condition reads.
    name, comparison = compared
    lost = {each.instance: set(each.names) for each in comparison.left_out}
    said = [each for each in as_text(comparison).splitlines() if each.startswith("No regions were looked for in")]
    if name == "load_ratio":
        assert lost["ep_heavy"] == {"load_ratio", "load_ratio_renamed"}
        assert len(said) == 1
        assert "load_ratio_renamed" in said[0]
        assert said[0] in as_markdown(comparison)
        assert {"instance": "ep_heavy", "names": list(comparison.left_out[0].names)} in as_data(comparison)["left_out"]
        assert "rule ep_heavy changed: no rule does otherwise" not in as_text(comparison)
    else:
        assert lost == {}
        assert said == []


def test_a_mixture_that_reads_an_undeclared_name_does_not_stand(both: tuple[str, Knowledge, Knowledge]) -> None:
    name, old, new = both
    declared = names_of(old) | names_of(new)
    found = edits(old, new)
    without = with_edits(old, new, [each for each in found if each.name != f"{name}_renamed"])
    assert not stands(without, declared)
    assert stands(old, declared)
    assert stands(new, declared)


def test_codes_that_read_an_undeclared_property_do_not_stand(knowledge: Knowledge) -> None:
    # The letter P of DIN 51825 is printed by what is asked of the property `load_additive`.
    properties = {name: each for name, each in knowledge.properties.items() if name != "load_additive"}
    bare = replace(knowledge, properties=properties, instances={}, docket=(), shelf=())
    assert not stands(bare, names_of(knowledge))
    assert stands(replace(bare, designations={}), names_of(knowledge))


def test_a_fault_of_ours_is_not_taken_for_an_edit_that_is_no_cause(
    knowledge: Knowledge, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    drier = ("        - start_temperature_c: {below: -40}", "        - start_temperature_c: {below: -45}")
    new = edited(tmp_path, "rolling_bearing/temperature.yaml", HOT_STEEL, HOT_STEEL_SILENT, drier)

    def faulty(*_: object) -> object:
        raise KeyError("a fault of ours")

    monkeypatch.setattr(changing, "say", faulty)
    with pytest.raises(KeyError, match="a fault of ours"):
        compare(knowledge, new, [SCENARIOS / "hot_spells_past_five_percent.yaml"])


def test_an_edit_that_needs_another_is_tried_with_it_alone(both: tuple[str, Knowledge, Knowledge]) -> None:
    name, old, new = both
    editions = Editions(old, new, edits(old, new))
    rule = next(each for each in editions.edits if each.kind == "rule")
    assert editions.advisor([rule]) is None, name
    assert editions.advisor(editions.edits) is not None
