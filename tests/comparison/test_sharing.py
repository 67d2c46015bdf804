"""Work shared with a second process comes to the same, in the same order, whatever the helper comes upon."""

import os
import sys
from collections.abc import Sequence
from itertools import chain

import pytest

from advisor.comparison.sharing import beside, halves


def squares(numbers: Sequence[int]) -> list[int]:
    return [number * number for number in numbers]


@pytest.mark.parametrize("count", [0, 1, 59, 60, 61, 1000])
def test_both_halves_come_back_in_order(count: int) -> None:
    assert list(chain(*halves(squares, range(count)))) == squares(range(count))


@pytest.mark.skipif(sys.platform != "linux" or (os.cpu_count() or 1) < 2, reason="nothing is shared here")
def test_the_second_half_is_done_beside_the_first() -> None:
    here = os.getpid()
    first, second = halves(lambda _: os.getpid(), range(60))
    assert (first, second != here) == (here, True)


def test_little_work_stays_here() -> None:
    assert halves(lambda _: os.getpid(), range(59)) == [os.getpid()]


def test_what_a_helper_comes_upon_comes_up_here() -> None:
    with pytest.raises(ZeroDivisionError):
        beside(lambda: 1, lambda: 1 // 0)


def test_where_the_first_fails_no_helper_is_left(capfd: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(ZeroDivisionError):
        beside(lambda: 1 // 0, lambda: "x" * 10_000_000)
    assert capfd.readouterr() == ("", "")


def test_a_result_that_cannot_be_sent_is_made_here() -> None:
    _, made = beside(lambda: 1, lambda: (number for number in (1, 2)))
    assert list(made) == [1, 2]
