"""Changes told short: of lists what came and went, of reasons the rule, and of many equal changes one."""

from collections.abc import Mapping
from pathlib import Path

import pytest

from advisor.comparison import Meaning, as_data, as_text, compare
from advisor.comparison.changing import Changed
from advisor.comparison.differences import MOST_ALONE, alike, difference_lines
from advisor.knowledge import Knowledge
from advisor.places import scenario_folder
from tests.comparison.editing import edited

SCENARIOS = scenario_folder() / "rolling_bearing"
TEMPLATE = "Grows {row.title} stands {row.cont_c} °C for long"
CASES: list[tuple[dict[tuple[str, ...], tuple[str, str]], list[str]]] = [
    ({("fired", "heat/sodium"): ("", TEMPLATE)}, ["rule heat/sodium fires now"]),
    ({("fired", "heat/sodium"): (TEMPLATE, "")}, ["rule heat/sodium no longer fires"]),
    ({("fired", "heat"): (TEMPLATE, "other words")}, ["rule heat: its words or sources changed"]),
    (
        {("fired", "heat"): ("", TEMPLATE), ("demanded", "heat", "cont_c"): ("", "must: at least 110 °C")},
        ["rule heat fires now"],
    ),
    (
        {("demanded", "heat", "cont_c"): ("must: at least 110 °C", "must: at least 120 °C")},
        ["rule heat asks of cont_c: no longer: must: at least 110 °C; new: must: at least 120 °C"],
    ),
    (
        {("cautions", "hot"): ("", "hot"), ("cautions", "cold"): ("", "cold"), ("cautions", "wet"): ("wet", "")},
        ["cautions: no longer: wet; new: hot, cold"],
    ),
    ({("recommended", "nlgi"): ("[1, 2]", "[2, 3]")}, ["recommended nlgi: no longer: 1; new: 3"]),
    ({("recommended", "nlgi"): ("[1, 2]", "[1]")}, ["recommended nlgi: no longer: 2"]),
    ({("codes", "din"): ("[K2K, K3K]", "[K3K, K2K]")}, ["codes din: [K2K, K3K] -> [K3K, K2K]"]),
    (
        {("must", "nlgi", "one, a"): ("one, a", ""), ("must", "nlgi", "two"): ("", "two")},
        ["must nlgi: no longer: one, a; new: two"],
    ),
    ({("state",): ("settled", "open")}, ["state: settled -> open"]),
    ({("facts", "x"): ("1", "2"), ("facts", "x", "in a variant"): ("1", "2")}, ["facts x: 1 -> 2"]),
    ({("order",): ("a, b, c, d", "a, c, b, d")}, ["order from place 2: b, c -> c, b"]),
    ({("cautioned", "hot"): ("heat: GR-1, GR-2", "heat: GR-2")}, ["caution hot: no longer: for GR-1"]),
    ({("cautioned", "hot"): ("heat: a, b", "heat: b, a")}, ["cautioned hot: heat: a, b -> heat: b, a"]),
    ({("products", "GR-1", "heat"): ("", "falls_short by heat")}, ["products GR-1: new: falls_short by heat"]),
    (
        {("products", "GR-1"): ("fits", "falls_short"), ("products", "GR-2"): ("fits", "falls_short")},
        ["products fits -> falls short: GR-1, GR-2"],
    ),
    (
        {("products", f"GR-{place}"): ("fits", "unproven") for place in range(10)},
        ["products fits -> unproven: GR-0, GR-1, GR-2, GR-3, GR-4, GR-5, GR-6, GR-7 and 2 more"],
    ),
]
NEW = '  - {item: GR-900, title: "New", form: grease, thickener: lithium_12OH, base_oil: mineral_II, vg: 100}\n'


@pytest.mark.parametrize(("differences", "lines"), CASES)
def test_a_difference_is_told_short(differences: Mapping[tuple[str, ...], tuple[str, str]], lines: list[str]) -> None:
    assert difference_lines(differences) == lines


def _changed(name: str, value: str) -> Changed:
    return Changed(name, Path(f"{name}.yaml"), Meaning.SAFETY, {("facts", "x"): ("1", value)}, ())


def test_many_equal_changes_are_told_once_with_their_count() -> None:
    same = [_changed(f"case_{place}", "2") for place in range(MOST_ALONE + 1)]
    found = alike([*same, _changed("another", "3")])
    assert [each.names for each in found] == ["6 scenarios, such as case_0, case_1, case_2", "another"]
    assert len(alike(same[:MOST_ALONE])) == MOST_ALONE


def test_changes_that_are_told_alike_but_differ_are_not_put_together() -> None:
    # Only eight products are named: what lies behind "and 1 more" differs.
    def changed(place: int) -> Changed:
        items = [*(f"GR-{each}" for each in range(8)), f"OL-{place}"]
        parts = {("products", item): ("fits", "unproven") for item in items}
        return Changed(f"case_{place}", Path("case.yaml"), Meaning.RECOMMENDATION, parts, ())

    assert len(alike(changed(place) for place in range(MOST_ALONE + 1))) == MOST_ALONE + 1


def test_other_words_are_told_without_the_words(knowledge: Knowledge, tmp_path: Path) -> None:
    words = ("ordinary bearing steel may grow", "bearing steel grows")
    other = edited(tmp_path, "rolling_bearing/temperature.yaml", words)
    text = as_text(compare(knowledge, other, [SCENARIOS / "hot_bearing_steel.yaml"]))
    changed = text.partition("Changed by")[2]
    assert "rule bearing_steel_hot: its words or sources changed" in changed
    assert "bearing steel grows" not in changed


def test_a_new_product_that_does_not_fit_changes_no_recommendation(knowledge: Knowledge, tmp_path: Path) -> None:
    # Its sheet states neither temperatures nor a load additive: where those are musts it stays unproven.
    new = edited(tmp_path, "shelf/demo.yaml", ("products:\n", f"products:\n{NEW}"))
    files = [SCENARIOS / f"{each}.yaml" for each in ("dry_motor_bearing", "hot_bearing_steel")]
    for comparison, word in ((compare(knowledge, new, files), "new"), (compare(new, knowledge, files), "gone")):
        assert comparison.changed == ()
        (shelved,) = comparison.shelved
        assert sum(shelved.verdicts.values()) == len(files)
        assert f"GR-900 is {word}: " in as_text(comparison)
        assert as_data(comparison)["shelf"] == [
            {"item": "GR-900", "new": word == "new", "verdicts": dict(shelved.verdicts)}
        ]
