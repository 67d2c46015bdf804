"""Tables that only rules over their rows read, in damaged copies of the shipped knowledge."""

from pathlib import Path

import pytest

from advisor.anomalies import Finding, examine_meaning
from advisor.knowledge import load
from tests.knowledge.damage import copied

SEALS, MIXING, LUBRICANTS = "tables/elastomers.yaml", "tables/compatibility.yaml", "tables/lubricants.yaml"
PAIR = "      - {seal: HNBR, oil: PFPE, rating: good}\n"
TEST_ROW = "      - {pair: T, action: test_or_clean}\n"


def found(folder: Path, *, file: str, seek: str, put: str) -> tuple[list[Finding], int]:
    """What must be mended in the damaged copy, and the line of the text that was damaged."""
    path = folder / file
    text = path.read_text(encoding="utf-8")
    assert text.count(seek) == 1
    path.write_text(text.replace(seek, put), encoding="utf-8")
    findings = [each for each in examine_meaning(load(folder)) if each.must_be_mended]
    return findings, text[: text.index(seek)].count("\n") + 1


@pytest.mark.parametrize("rating", ["veto", "poor", "fair"])
def test_a_second_row_for_a_seal_and_an_oil_is_an_overlap(rating: str, tmp_path: Path) -> None:
    second = f"      - {{seal: HNBR, oil: PFPE, rating: {rating}}}\n"
    findings, line = found(copied(tmp_path), file=SEALS, seek=PAIR, put=PAIR + second)
    (finding,) = findings
    assert (finding.kind, finding.where.line, finding.confirmed) == ("overlap", line + 1, True)
    assert f"'HNBR-PFPE' (line {line})" in finding.message
    assert finding.witness.values == {"row.seal": "HNBR", "row.oil": "PFPE"}


def test_a_row_that_differs_in_what_the_rules_compare_is_no_overlap(tmp_path: Path) -> None:
    """Thickeners share figures, and the rules compare figures; the id tells the rows apart."""
    row = "cont_c: 150\n        cont_lenient_c: 160\n        peak_c: 175\n"
    same = row.replace("150", "140").replace("175", "170")
    findings, _ = found(copied(tmp_path), file=LUBRICANTS, seek=row, put=same)
    assert findings == []


def test_two_caps_for_one_cold_start_are_an_overlap(tmp_path: Path) -> None:
    cap = "      - {below_c: -15, vg: 100}\n"
    findings, line = found(copied(tmp_path), file="tables/bearings.yaml", seek=cap, put=cap + cap.replace("100", "220"))
    (finding,) = findings
    assert (finding.kind, finding.where.line) == ("overlap", line + 1)


@pytest.mark.parametrize(
    ("file", "row", "values"),
    [
        (MIXING, TEST_ROW, {"row.pair": "T"}),
        (SEALS, PAIR, {"row.seal": "HNBR", "row.oil": "PFPE"}),
        ("tables/interval.yaml", "      - {dust: heavy, factor: 0.4, lenient: 0.7}\n", {"dust": "heavy"}),
        ("tables/designations.yaml", "      - {water: rain, salt: yes, letter: I}\n",
         {"water_exposure": "rain", "salt": "yes"}),
    ],
)
def test_a_row_taken_out_of_a_complete_table_leaves_a_gap(
    file: str, row: str, values: dict[str, str], tmp_path: Path
) -> None:
    findings, _ = found(copied(tmp_path), file=file, seek=row, put="")
    gaps = [each for each in findings if each.kind == "gap"]
    assert len(gaps) == 1, findings
    assert values.items() <= gaps[0].witness.values.items()
    assert gaps[0].confirmed


def test_where_all_rows_count_none_overlaps_and_none_is_missed(tmp_path: Path) -> None:
    folder = copied(tmp_path)
    path = folder / SEALS
    text = path.read_text(encoding="utf-8")
    assert text.count("    policy: complete\n") == 1
    path.write_text(text.replace("    policy: complete\n", "    policy: all\n"), encoding="utf-8")
    findings, _ = found(folder, file=SEALS, seek=PAIR, put=PAIR + PAIR.replace("good", "fair"))
    assert findings == []
