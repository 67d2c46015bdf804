"""What tables and sheets claim of their figures, in damaged copies of the shipped knowledge."""

from pathlib import Path

import pytest

from advisor.documents import Problems
from advisor.knowledge import examine, load
from tests.knowledge.damage import Damage, copied, listing, told

LUBRICANTS, BEARINGS, INTERVAL, SHELF = (
    "tables/lubricants.yaml", "tables/bearings.yaml", "tables/interval.yaml", "shelf/demo.yaml",
)  # fmt: skip
DIUREA = (
    "      - id: polyurea_diurea_modern\n        title: diurea, modern\n        compat: PU\n        cont_c: 150\n"
    "        cont_lenient_c: 160\n        peak_c: 175\n        dropping_from_c: 240\n"
)
OLD_OIL = "{id: naphthenic, title: naphthenic, vg_from: 10, vg_to: 460, viscosity_index: 45, cont_c: 80, peak_c: 100,"
DUST = "      - {dust: light, factor: 0.8, lenient: 1.0}\n"
FIRST = (
    "viscosity_40: 100, viscosity_100: 11.3, nlgi: \"2\", load_additive: none,\n"
    "     ep_type: none, solids: none, upper"
)
RATIO = "      speed_share: {kind: number, unit: \"\", limits: [0, 2]}"

CASES = [
    Damage(
        "a thickener without its heat", LUBRICANTS, DIUREA, DIUREA.replace("        cont_c: 150\n", ""),
        "row 'polyurea_diurea_modern' has no cont_c, which every row needs", hint="add 'cont_c:' to the row",
    ),
    Damage(
        "a base oil without its class for seals", LUBRICANTS, "mixing_group: PE, seal_class: phosphate_ester,",
        "mixing_group: PE,", "row 'phosphate_ester' has no seal_class",
    ),
    Damage("a factor left out", INTERVAL, DUST, DUST.replace("factor: 0.8, ", ""), "row 'light' has no factor"),
    Damage("a degree too many", LUBRICANTS, DIUREA, DIUREA.replace("cont_c: 150", "cont_c: 11000"),
           "11000 °C lies outside 0 to 400 °C", offset=3),
    Damage("colder than can be", LUBRICANTS, DIUREA, DIUREA.replace("cont_c: 150", "cont_c: -400"),
           "-400 °C lies outside 0 to 400 °C", offset=3),
    Damage("a factor that lengthens", INTERVAL, DUST, DUST.replace("0.8", "40"), "40 lies outside 0 to 1"),
    Damage("a grade beyond all", BEARINGS, "vg_lo: 15, vg_hi: 100,", "vg_lo: 15, vg_hi: 10000,",
           "10000 ISO VG lies outside 2 to 3200"),
    Damage("lenient below strict", INTERVAL, DUST, DUST.replace("lenient: 1.0", "lenient: 0.5"),
           "factor is 0.8, which lies above lenient, 0.5"),
    Damage("steady above brief", LUBRICANTS, OLD_OIL, OLD_OIL.replace("cont_c: 80", "cont_c: 180"),
           "cont_c is 180, which lies above peak_c, 100"),
    Damage("dropping points exchanged", LUBRICANTS, "dropping_from_c: 177\n", "dropping_from_c: 271\n",
           "dropping_from_c is 271, which lies above dropping_to_c, 204"),
    Damage("a limit on a strange column", LUBRICANTS, RATIO, RATIO.replace("[0, 2]", "[0, 2], at_most: shaer"),
           "'shaer' is no column of this table", hint="Did you mean 'shear'?"),
    Damage("a limit on words", LUBRICANTS, RATIO, RATIO.replace("[0, 2]", "[0, 2], at_most: title"),
           "'at_most' compares two columns of numbers"),
    Damage("a limit in another unit", LUBRICANTS, RATIO, RATIO.replace("[0, 2]", "[0, 2], at_most: peak_c"),
           "'speed_share' is in no unit, and 'peak_c' is in °C"),
    Damage("a key of a column misspelt", LUBRICANTS, RATIO, RATIO.replace("limits", "limist"),
           "'limist' is not known here", hint="Did you mean 'limits'?"),
    Damage("as thick when hot", SHELF, FIRST, FIRST.replace("11.3", "113"),
           "an oil is thinner at 100 °C than at 40 °C, and here it has 113 and 100 mm²/s"),
    Damage("alike when hot", SHELF, FIRST, FIRST.replace("11.3", "100"), "an oil is thinner at 100 °C than at 40 °C"),
]  # fmt: skip


@pytest.mark.parametrize("damage", CASES, ids=lambda damage: damage.name)
def test_what_is_claimed_is_told_where_it_is_broken(damage: Damage, tmp_path: Path) -> None:
    folder = copied(tmp_path)
    line = damage.apply(folder)
    problems = told(folder)
    at = [each for each in problems if each.file == str(folder / damage.file) and each.line == line]
    assert any(damage.message in each.message and damage.hint in each.hint for each in at), listing(problems)
    assert len(problems) == 1, listing(problems)


def test_a_blank_cell_that_is_not_needed_is_no_fault(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    Damage("", LUBRICANTS, "        dropping_from_c: 220\n", "", "").apply(folder)
    assert told(folder) == []


@pytest.mark.parametrize(("at_40", "seen"), [("90", False), ("110", False), ("89.9", True), ("460", True)])
def test_a_viscosity_outside_its_grade_asks_for_a_look(at_40: str, seen: bool, tmp_path: Path) -> None:
    """ISO 3448: VG 100 goes from 90.0 to 110 mm²/s."""
    folder, problems = copied(tmp_path), Problems()
    line = Damage("", SHELF, FIRST, FIRST.replace("40: 100", f"40: {at_40}"), "").apply(folder)
    assert examine(folder, "rolling_bearing", None, problems) is not None, "it keeps nobody from an advice"
    expected = [(line, f"ISO VG 100 goes from 90 to 110 mm²/s at 40 °C, and here it has {at_40}", "finding")]
    assert [(each.line, each.message, each.severity) for each in problems] == (expected if seen else [])


def test_a_second_shelf_that_is_not_read_is_told(tmp_path: Path) -> None:
    folder, problems = copied(tmp_path), Problems()
    mine = folder / "shelf" / "mine.yaml"
    mine.write_text((folder / SHELF).read_text(encoding="utf-8"), encoding="utf-8")
    assert examine(folder, "rolling_bearing", None, problems) is not None
    (only,) = problems
    assert (only.file, only.severity) == (str(mine), "finding")
    assert only.message == "this file is not read: the shelf is demo.yaml"
    assert "--shelf" in only.hint


def test_a_shelf_that_is_named_leaves_the_others_in_peace(tmp_path: Path) -> None:
    folder, problems = copied(tmp_path), Problems()
    mine = folder / "shelf" / "mine.yaml"
    mine.write_text((folder / SHELF).read_text(encoding="utf-8"), encoding="utf-8")
    assert examine(folder, "rolling_bearing", mine, problems) is not None
    assert list(problems) == []


def test_the_file_of_a_step_that_is_gone_is_the_only_fault(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    (folder / "rolling_bearing/load.yaml").unlink()
    (only,) = told(folder)
    steps = (folder / "steps.yaml").read_text(encoding="utf-8").splitlines()
    assert only.file == str(folder / "steps.yaml")
    assert steps[only.line - 1].startswith("  load:")
    assert only.message == "no file holds the step 'load'"
    assert "rolling_bearing/load.yaml" in only.hint


def test_a_step_may_have_no_rules() -> None:
    small = Path(__file__).parent / "small"
    assert not any(rule.step == "choice" for rule in load(small, "hinge").rules.values())
    assert (small / "common/choice.yaml").is_file()
