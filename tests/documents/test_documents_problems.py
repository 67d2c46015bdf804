"""Problems are one plain sentence each, in the order of the lines, all at once."""

import pytest

from advisor.documents import Faulty, Mark, Problem, Problems, closest, nearest


def test_a_problem_reads_as_place_trail_sentence_and_mend() -> None:
    problem = Problem("rules.yaml", 3, 7, ("rule 'water'", "then"), "This key is not known", "Delete it")
    assert str(problem) == "rules.yaml:3:7: at rule 'water' > then: This key is not known. Delete it."


def test_a_problem_stays_on_one_line_with_one_full_stop() -> None:
    assert str(Problem("a", 1, 1, (), "Two\n lines.", "Really?")) == "a:1:1: Two lines. Really?"


def test_problems_come_in_the_order_of_the_lines() -> None:
    problems = Problems()
    problems.add(Problem.at(Mark("b", 1, 1), "third"))
    problems.extend([Problem.at(Mark("a", 10, 1), "second"), Problem.at(Mark("a", 9, 5), "first")])
    assert [problem.message for problem in problems] == ["first", "second", "third"]
    assert len(problems) == 3


def test_findings_alone_do_not_stop() -> None:
    problems = Problems([Problem.at(Mark("a", 1, 1), "odd", severity="finding")])
    problems.raise_if_any()
    assert problems.errors == ()
    assert len(problems.findings) == 1


def test_all_errors_are_raised_at_once() -> None:
    first, second = Problem.at(Mark("a", 1, 1), "one"), Problem.at(Mark("a", 2, 1), "two")
    finding = Problem.at(Mark("a", 1, 5), "odd", severity="finding")
    with pytest.raises(Faulty) as faulty:
        Problems([second, finding, first]).raise_if_any()
    assert faulty.value.problems == (first, second)
    assert str(faulty.value) == "a:1:1: one.\na:2:1: two."


def test_only_a_near_word_is_suggested() -> None:
    assert nearest("thicknr", ["form", "thickener"]) == " Did you mean 'thickener'?"
    assert nearest("zebra", ["form", "thickener"]) == ""


def test_a_short_word_is_like_another_of_the_same_letters() -> None:
    assert closest("PE", ["CR", "EP"]) == "EP"
    assert closest("PE", ["CR", "ES"]) == ""
