"""Two editions compared: what changed, what it means, which edit did it, and where else the rules do otherwise."""

import json
import re
import subprocess
from collections.abc import Callable
from pathlib import Path

import pytest
from click.testing import CliRunner

from advisor.advice import Advisor
from advisor.answers import read_case
from advisor.bending import domains_seen, inside
from advisor.cli import gudgeon
from advisor.comparison import Comparison, Editions, Meaning, as_markdown, as_text, compare, edition, edits, regions
from advisor.comparison.changing import pairs
from advisor.comparison.edits import with_edits
from advisor.comparison.meaning import Sense, Words, differing, worst
from advisor.comparison.regions import differs_on
from advisor.conditions import holds
from advisor.documents import Problems
from advisor.knowledge import Instance, Knowledge
from advisor.mishaps import Refusal
from advisor.places import knowledge_folder, scenario_folder
from tests.comparison.editing import HOT_STEEL, HOT_STEEL_SILENT, edited, random_records

SCENARIOS = scenario_folder() / "rolling_bearing"
RECORDS = 2000
PEAK = "{row: peak_c}}}\n    then:\n      - must: {base_oil"

EDITS: dict[str, tuple[str, list[tuple[str, str]]]] = {
    "a limit": ("temperature.yaml", [HOT_STEEL, HOT_STEEL_SILENT]),
    "two alternatives": (
        "temperature.yaml",
        [("        - start_temperature_c: {below: -40}", "        - start_temperature_c: {below: -45}")],
    ),
    "a level": (
        "viscosity.yaml",
        [("kappa: {at_least: 1.5}}\n        level: 2", "kappa: {at_least: 1.5}}\n        level: 3")],
    ),
    "rows of a table": (
        "temperature.yaml",
        [(f"when: {{bearing_peak_c: {{above: {PEAK}", f"when: {{bearing_peak_c: {{at_least: {PEAK}")],
    ),
}


@pytest.fixture(scope="module")
def hot_steel(tmp_path_factory: pytest.TempPathFactory) -> Knowledge:
    place = tmp_path_factory.mktemp("hot_steel")
    return edited(place, "rolling_bearing/temperature.yaml", HOT_STEEL, HOT_STEEL_SILENT)


@pytest.fixture(scope="module")
def compared(knowledge: Knowledge, hot_steel: Knowledge) -> Comparison:
    names = ("dry_motor_bearing", "hot_bearing_steel", "hot_spells_past_five_percent")
    return compare(knowledge, hot_steel, [SCENARIOS / f"{name}.yaml" for name in names])


def test_nothing_differs_from_itself(knowledge: Knowledge) -> None:
    same = compare(knowledge, knowledge, [SCENARIOS / "dry_motor_bearing.yaml"])
    assert same.edits == same.changed == same.regions == ()
    assert as_text(same).startswith("Nothing was edited")


def test_moving_lines_about_is_no_edit(knowledge: Knowledge, tmp_path: Path) -> None:
    moved = edited(tmp_path, "rolling_bearing/temperature.yaml", ("rules:\n", "# a remark\n\nrules:\n"))
    assert edits(knowledge, moved) == ()


def test_an_edited_rule_is_named_alone(compared: Comparison) -> None:
    assert [str(each) for each in compared.edits] == ["rule bearing_steel_hot changed"]


def test_a_caution_that_comes_anew_is_a_matter_of_safety(compared: Comparison) -> None:
    # Above 110 degrees instead of 120: of these three only the one that runs at 115 degrees is concerned anew.
    found = {each.name: each.meaning for each in compared.changed}
    assert found == {"hot_spells_past_five_percent": Meaning.SAFETY}


def test_other_words_are_reasons_only(knowledge: Knowledge, tmp_path: Path) -> None:
    other = edited(
        tmp_path, "rolling_bearing/temperature.yaml", ("ordinary bearing steel may grow", "bearing steel grows")
    )
    found = compare(knowledge, other, [SCENARIOS / "hot_bearing_steel.yaml", SCENARIOS / "dry_motor_bearing.yaml"])
    assert {each.name: each.meaning for each in found.changed} == {"hot_bearing_steel": Meaning.REASONS}
    assert found.regions == ()


def test_of_two_edits_only_the_one_that_matters_is_a_cause(knowledge: Knowledge, tmp_path: Path) -> None:
    both = edited(
        tmp_path,
        "rolling_bearing/temperature.yaml",
        HOT_STEEL,
        HOT_STEEL_SILENT,
        *EDITS["two alternatives"][1],
    )
    found = compare(knowledge, both, [SCENARIOS / "hot_spells_past_five_percent.yaml"])
    assert len(found.edits) == 2
    (changed,) = found.changed
    assert [each.name for each in changed.causes] == ["bearing_steel_hot"]


def test_no_edits_made_is_the_old_and_all_is_the_new(knowledge: Knowledge, hot_steel: Knowledge) -> None:
    assert with_edits(knowledge, hot_steel, ()).instances == dict(knowledge.instances)
    assert edits(with_edits(knowledge, hot_steel, edits(knowledge, hot_steel)), hot_steel) == ()


def test_an_edited_table_takes_its_rules_along(knowledge: Knowledge, tmp_path: Path) -> None:
    text = (knowledge_folder() / "tables" / "lubricants.yaml").read_text(encoding="utf-8")
    row = text.partition("id: lithium_complex\n")[2].partition("- id:")[0]
    cooler = re.sub(r"\bcont_c: (\d+)", lambda limit: f"cont_c: {int(limit[1]) - 5}", row)
    assert cooler != row
    other = edited(tmp_path, "tables/lubricants.yaml", (row, cooler))
    found = edits(knowledge, other)
    assert [(each.kind, each.name) for each in found] == [("table", "thickeners")]
    told = regions(Editions(knowledge, other, found), [])
    assert told
    assert {each.instance.partition("/")[2] for each in told} == {"lithium_complex"}


@pytest.mark.parametrize("name", EDITS)
def test_records_differ_inside_the_regions_and_nowhere_else(name: str, knowledge: Knowledge, tmp_path: Path) -> None:
    file, changes = EDITS[name]
    other = edited(tmp_path, f"rolling_bearing/{file}", *changes)
    inside_count, same_inside, differing_outside = tally(knowledge, other, RECORDS, seed=4)
    assert inside_count > 0
    assert differing_outside == 0
    assert same_inside == 0


def tally(old: Knowledge, new: Knowledge, count: int, seed: int) -> tuple[int, int, int]:
    """Records inside a region, those of them that do not differ, and records outside that do."""
    editions = Editions(old, new, edits(old, new))
    told = regions(editions, [])
    counts = [0, 0, 0]
    for edit in editions.edits:
        own = [each for each in told if each.edit == edit]
        both = [(was, now) for _, was, now in pairs(old, new, edit)]
        concerned: list[Instance] = [each for pair in both for each in pair if each is not None]
        for record in random_records(concerned, new, count, seed):
            differs = any(_drawn(was, record) != _drawn(now, record) for was, now in both)
            within = any(inside(each.box, record) for each in own)
            counts[0] += within
            counts[1] += within and not differs
            counts[2] += differs and not within
    return counts[0], counts[1], counts[2]


def _drawn(instance: Instance | None, record: dict[str, object]) -> object:
    return instance.then if instance is not None and instance.binds and holds(instance.when, record) else None


def test_every_witness_differs_by_both_engines(knowledge: Knowledge, tmp_path: Path) -> None:
    other = edited(tmp_path, "rolling_bearing/temperature.yaml", *EDITS["rows of a table"][1])
    editions = Editions(knowledge, other, edits(knowledge, other))
    by_name = {now.id: (was, now) for _, was, now in pairs(knowledge, other, editions.edits[0]) if now is not None}
    found = regions(editions, [])
    assert found
    for each in found:
        assert differs_on(each.witness.record, *by_name[each.instance], domains_seen(other))


NEAR = (
    "dry_motor_bearing",
    "hot_bearing_steel",
    "hot_spells_past_five_percent",
    "creeping_ball_bearing_takes_the_thickest_oil",
    "film_at_a_creep_is_more_than_kappa",
    "sealed_motor_bearing",
    "no_temperature_measured",
    "both_policies_side_by_side",
    "ball_bearing_in_an_oil_system",
)
MORE: dict[str, tuple[str, list[tuple[str, str]]]] = {
    "the closing step": (
        "closing.yaml",
        [
            ("recommended_kappa: {below: 0.4}", "recommended_kappa: {below: 1.6}"),
            ("below: 5000}", "below: 500000}"),
            (
                "silent: {recommended_kappa: 0.2, speed_factor: 12000}",
                "silent: {recommended_kappa: 2, speed_factor: 12000}",
            ),
        ],
    ),
    "a conclusion that later rules see": ("form.yaml", [("usual_top_vg: 680", "usual_top_vg: 320")]),
    "a referral that withholds": (
        "safeguards.yaml",
        [("      - refer: bearing_change\n        withhold: yes", "      - refer: bearing_change")],
    ),
    "a rule no longer agreed": (
        "temperature.yaml",
        [
            (
                "    title: Bearing steel changes size in the heat\n    status: agreed",
                "    title: Bearing steel changes size in the heat\n    status: draft",
            )
        ],
    ),
}


@pytest.mark.parametrize("name", [*EDITS, *MORE])
def test_a_scenario_changes_as_its_whole_advice_does_and_no_other_changes(
    name: str, knowledge: Knowledge, tmp_path: Path
) -> None:
    file, changes = (EDITS | MORE)[name]
    other = edited(tmp_path, f"rolling_bearing/{file}", *changes)
    files = [SCENARIOS / f"{each}.yaml" for each in NEAR]
    found = {each.path: (each.meaning, dict(each.differences)) for each in compare(knowledge, other, files).changed}
    assert found == {path: each for path in files if (each := _from_the_start(path, knowledge, other)) is not None}
    assert found or name == "two alternatives"


def _from_the_start(path: Path, old: Knowledge, new: Knowledge) -> object:
    """What a scenario says otherwise by the other edition, both advised on from the start."""
    said = []
    for edition_ in (old, new):
        saved = read_case(path, edition_, Problems())
        assert saved is not None
        advice = Advisor(edition_).advise(saved.case, assume_gaps=saved.assume_gaps, only=saved.only)
        said.append(Sense(advice, Words(edition_)))
    meaning = worst(*said)
    return None if meaning is Meaning.SAME else (meaning, differing(*said, meaning))


def test_a_scenario_about_another_kind_of_point_is_left_out(
    knowledge: Knowledge, hot_steel: Knowledge, tmp_path: Path
) -> None:
    text = (SCENARIOS / "hot_bearing_steel.yaml").read_text(encoding="utf-8")
    other = tmp_path / "gear.yaml"
    other.write_text(text.replace("point_kind: rolling_bearing", "point_kind: gear"), encoding="utf-8")
    found = compare(knowledge, hot_steel, [other, SCENARIOS / "dry_motor_bearing.yaml"])
    assert found.replayed == 1
    assert found.problems == ()


def test_a_whole_case_is_named_where_answers_lead_into_the_region(compared: Comparison) -> None:
    (region,) = compared.regions
    assert region.witness.answers is not None
    assert 110 < float(str(region.witness.record["t_eff_c"])) <= 120
    assert "whole case: like" in as_text(compared)


def test_a_region_is_said_in_words(compared: Comparison) -> None:
    assert "fires now where effective temperature above 110 °C and at most 120 °C" in as_text(compared)
    assert as_markdown(compared).startswith("### ")


def test_folders_and_revisions_are_editions(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    repository = tmp_path / "repository"
    (repository / "knowledge").mkdir(parents=True)
    (repository / "knowledge" / "point_kinds.yaml").write_text("format: 1\n", encoding="utf-8")
    for words in (["init", "-q"], ["add", "."], ["-c", "user.name=a", "-c", "user.email=a@b", "commit", "-qm", "one"]):
        subprocess.run(["git", *words], cwd=repository, check=True)
    monkeypatch.chdir(repository)
    with edition("HEAD") as found:
        assert (found / "point_kinds.yaml").is_file()
    assert not found.exists()
    with edition("knowledge") as found:
        assert found == Path("knowledge")


@pytest.mark.parametrize("named", ["no_such_revision", "--help"])
def test_what_is_neither_folder_nor_revision_is_refused(
    named: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    with pytest.raises(Refusal, match="is no folder, and the current folder lies in no git repository"), edition(named):
        pass


def test_a_folder_without_knowledge_is_refused(tmp_path: Path) -> None:
    with pytest.raises(Refusal, match="holds no knowledge"), edition(str(tmp_path)):
        pass


@pytest.fixture
def run(tmp_path: Path) -> Callable[..., tuple[int, str]]:
    def invoke(*words: str) -> tuple[int, str]:
        edited(tmp_path / "new", "rolling_bearing/temperature.yaml", HOT_STEEL, HOT_STEEL_SILENT)
        few = tmp_path / "few"
        few.mkdir()
        for name in ("dry_motor_bearing", "hot_bearing_steel"):
            (few / f"{name}.yaml").write_bytes((SCENARIOS / f"{name}.yaml").read_bytes())
        arguments = ["compare", str(knowledge_folder()), str(tmp_path / "new"), "--scenarios", str(few), *words]
        done = CliRunner().invoke(gudgeon, arguments)
        return done.exit_code, done.output

    return invoke


def test_the_command_tells_it_as_json_and_ends_with_1(run: Callable[..., tuple[int, str]]) -> None:
    code, output = run("--json")
    data = json.loads(output)
    assert code == 1
    (edit,) = data["edits"]
    assert (edit["kind"], edit["name"], edit["how"]) == ("rule", "bearing_steel_hot", "changed")
    assert data["regions"][0]["witness"]["kind"] in {"record", "whole case"}


def test_the_command_tells_it_as_markdown(run: Callable[..., tuple[int, str]]) -> None:
    assert "### Where bearing_steel_hot does otherwise: 1 region" in run("--markdown")[1]
