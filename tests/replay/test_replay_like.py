"""A scenario takes the answers of another over: chains of them, with answers overridden and taken away."""

from pathlib import Path

from advisor.answers import Saved, read_case
from advisor.documents import Problems
from advisor.knowledge import Knowledge

HERE = Path(__file__).resolve().parent


def written(folder: Path, name: str, like: str, answers: str = "{}") -> None:
    text = f"format: 1\npoint_kind: rolling_bearing\nlike: {like}\nanswers: {answers}\nexpect: {{state: open}}\n"
    (folder / f"{name}.yaml").write_text(text, encoding="utf-8")


def read(folder: Path, name: str, knowledge: Knowledge) -> Saved:
    problems = Problems()
    found = read_case(folder / f"{name}.yaml", knowledge, problems)
    assert found is not None, "\n".join(map(str, problems))
    return found


def chain(folder: Path) -> None:
    (folder / "ordinary.yaml").write_bytes((HERE / "failing" / "ordinary.yaml").read_bytes())
    written(folder, "warmer", "ordinary", "{running_temperature_c: 85 °C, dust: heavy}")
    written(folder, "warmer_without_seal", "warmer", "{seal: unanswered, dust: light}")


def test_answers_come_from_the_end_of_the_chain_and_the_nearest_one_counts(
    tmp_path: Path, knowledge: Knowledge
) -> None:
    chain(tmp_path)
    answers = read(tmp_path, "warmer_without_seal", knowledge).case.answers
    assert answers["bore_mm"].value == 65
    assert answers["running_temperature_c"].value == 85
    assert answers["dust"].value == "light"


def test_an_answer_can_be_taken_away(tmp_path: Path, knowledge: Knowledge) -> None:
    chain(tmp_path)
    assert "seal" in read(tmp_path, "warmer", knowledge).case.answers
    found = read(tmp_path, "warmer_without_seal", knowledge)
    assert "seal" not in found.case.answers
    assert found.taken_away == {"seal"}


def test_only_answers_are_taken_over(tmp_path: Path, knowledge: Knowledge) -> None:
    chain(tmp_path)
    assert read(tmp_path, "warmer", knowledge).tree.get("guards") is None


def test_the_order_of_the_answers_is_that_of_the_questions(tmp_path: Path, knowledge: Knowledge) -> None:
    chain(tmp_path)
    answers = list(read(tmp_path, "warmer_without_seal", knowledge).case.answers)
    assert answers == [name for name in knowledge.facts if name in answers]
