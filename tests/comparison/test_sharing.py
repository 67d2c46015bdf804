"""Work shared with a second process comes to the same, whatever the helper comes upon."""

import os
import sys

import pytest

from advisor.comparison.sharing import beside


@pytest.mark.skipif(sys.platform != "linux" or (os.cpu_count() or 1) < 2, reason="nothing is shared here")
def test_the_second_is_done_beside_the_first() -> None:
    here, other = beside(os.getpid, os.getpid)
    assert (here, other != here) == (os.getpid(), True)


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
