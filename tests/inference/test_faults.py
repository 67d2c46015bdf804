"""Nothing that goes wrong in the engine may reach advice: refused, noticed, or mended by a new engine."""

import gc
import math
import os
import subprocess
import sys
import threading
from collections.abc import Callable, Iterator
from contextlib import closing
from pathlib import Path

import pytest

import advisor
from advisor.conditions import Bound, Condition, Domain, Either, Every, Member, Record, Stated, Ticked
from advisor.inference import (
    Disagreement,
    EngineFault,
    EngineMissing,
    Matcher,
    StepRules,
    TooManyBranches,
    UnfitCondition,
    Unsendable,
)
from advisor.inference.matching import load_engine

DOMAINS = {
    "speed_rpm": Domain("number"),
    "load_n": Domain("number"),
    "form": Domain("choice", choices={"oil": "oil", "grease": "grease"}),
    "remark": Domain("text"),
    "around": Domain("several", choices={"wet": "wet", "dusty": "dusty"}),
}
CONDITIONS: list[Condition] = [Bound("speed_rpm", ">", 100.0 * n) for n in range(80)]
FAST: Record = {"speed_rpm": 5050.0}
SLOW: Record = {"speed_rpm": 50.0}

CALLS = ("assert_fact", "start_action_for_state", "complete_and_start_action", "retract_fact")


@pytest.fixture
def matcher() -> Iterator[Matcher]:
    with closing(Matcher(CONDITIONS, DOMAINS)) as made:
        yield made


def interrupting(monkeypatch: pytest.MonkeyPatch, name: str, at: int, error: BaseException) -> None:
    """Let the engine's function do its work and then be interrupted, at the given call and never again."""
    module = pytest.importorskip("durable_rules_engine")
    real: Callable[..., object] = getattr(module, name)
    calls = 0

    def call(*arguments: object) -> object:
        nonlocal calls
        calls += 1
        done = real(*arguments)
        if calls == at:
            raise error
        return done

    monkeypatch.setattr(module, name, call)


@pytest.mark.parametrize("name", CALLS)
@pytest.mark.parametrize("at", [1, 2])
@pytest.mark.parametrize("used", [False, True])
def test_after_an_interruption_the_next_cases_are_right(
    monkeypatch: pytest.MonkeyPatch, matcher: Matcher, name: str, at: int, used: bool
) -> None:
    if used:
        matcher.fired(SLOW)
    interrupting(monkeypatch, name, at, KeyboardInterrupt())
    with pytest.raises(KeyboardInterrupt):
        matcher.fired(FAST)
    for _ in range(3):
        assert matcher.fired(SLOW) == {0}
        assert matcher.fired(FAST) == set(range(51))


@pytest.mark.parametrize("name", [*CALLS, "create_ruleset"])
def test_an_error_of_the_engine_is_one_sentence_and_the_next_case_is_right(
    monkeypatch: pytest.MonkeyPatch, matcher: Matcher, name: str
) -> None:
    interrupting(monkeypatch, name, 1, RuntimeError("Could not assert fact, error code: 303"))
    with pytest.raises(EngineFault, match=r"^The rule engine failed on a case \(.*303\); run the case again\.$"):
        matcher.fired(FAST)
    assert matcher.fired(FAST) == set(range(51))


@pytest.mark.parametrize("silence", [(1, 0), (2, 0)])
def test_a_silent_sentinel_is_noticed_and_the_next_case_is_right(
    monkeypatch: pytest.MonkeyPatch, matcher: Matcher, silence: tuple[int, int]
) -> None:
    module = pytest.importorskip("durable_rules_engine")
    with monkeypatch.context() as broken:
        broken.setattr(module, "assert_fact", lambda _handle, _message: silence)
        with pytest.raises(EngineFault, match="stayed silent"):
            matcher.fired(FAST)
    assert matcher.fired(FAST) == set(range(51))


def test_the_sentinel_alone_silent_is_noticed(monkeypatch: pytest.MonkeyPatch, matcher: Matcher) -> None:
    # A number read with a decimal comma makes 0.7 a 0, so the sentinel's threshold fails while other rules fire.
    module = pytest.importorskip("durable_rules_engine")
    real: Callable[[int, str], object] = module.assert_fact
    monkeypatch.setattr(module, "assert_fact", lambda handle, message: real(handle, message.replace("0.7", "0")))
    with pytest.raises(EngineFault, match="stayed silent"):
        matcher.fired({"speed_rpm": 9000.0})


@pytest.mark.parametrize("action", ["fired", "close"])
def test_a_foreign_thread_is_refused(matcher: Matcher, action: str) -> None:
    caught: list[BaseException] = []

    def elsewhere() -> None:
        try:
            matcher.fired(FAST) if action == "fired" else matcher.close()
        except EngineFault as fault:
            caught.append(fault)

    thread = threading.Thread(target=elsewhere)
    thread.start()
    thread.join()
    assert "foreign thread" in str(caught[0])
    assert matcher.fired(FAST) == set(range(51))


def test_each_thread_may_have_a_matcher_of_its_own() -> None:
    wrong: list[frozenset[int]] = []

    def work(record: Record, expected: set[int]) -> None:
        with closing(Matcher(CONDITIONS, DOMAINS)) as own:
            wrong.extend(found for _ in range(200) if (found := own.fired(record)) != expected)

    threads = [threading.Thread(target=work, args=case) for case in ((FAST, set(range(51))), (SLOW, {0})) * 2]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert wrong == []


@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf, 2**53 + 1, -(2**60), True, "85", frozenset({"wet"})])
def test_a_number_that_cannot_be_sent_is_refused_by_name(matcher: Matcher, value: float) -> None:
    with pytest.raises(Unsendable, match=r"^speed_rpm: .*give a finite number"):
        matcher.fired({"speed_rpm": value})
    assert matcher.fired(FAST) == set(range(51))


@pytest.mark.parametrize(
    ("value", "mend"),
    [("x" * 30_001, "shorten it"), ("é" * 15_001, "shorten it"), ("\ud800", "type it anew"), (1.0, "expected")],
)
def test_a_text_that_cannot_be_sent_is_refused_by_name(value: str, mend: str) -> None:
    with closing(Matcher([Member("remark", frozenset({"x" * 30_000}))], DOMAINS)) as matcher:
        with pytest.raises(Unsendable, match=rf"^remark: .*{mend}"):
            matcher.fired({"remark": value})
        assert matcher.fired({"remark": "x" * 30_000}) == {0}
        assert matcher.fired({"remark": "x" * 29_999 + "y"}) == frozenset()


def test_a_tick_list_that_is_no_set_is_refused_by_name() -> None:
    wet = [Ticked("around", frozenset({"wet"}))]
    with closing(Matcher(wet, DOMAINS)) as matcher, pytest.raises(Unsendable, match=r"^around: .*list of ticks"):
        matcher.fired({"around": "wet and dusty"})


@pytest.mark.parametrize(
    ("condition", "reason"),
    [
        (Bound("speed_rpm", ">", math.nan), "finite"),
        (Bound("speed_rpm", ">", math.inf), "finite"),
        (Bound("speed_rpm", ">", 2**53 + 1), "finite"),
        (Bound("form", ">", 1.0), "threshold"),
        (Bound("nowhere", ">", 1.0), "nowhere is not declared"),
        (Stated("nowhere"), "nowhere is not declared"),
        (Member("speed_rpm", frozenset({"fast"})), "finite"),
        (Member("form", frozenset({1.0})), "expected"),
        (Member("remark", frozenset({"x" * 30_001})), "shorten"),
        (Member("around", frozenset({"wet"})), "list of ticks"),
        (Ticked("form", frozenset({"oil"})), "no list of ticks"),
    ],
)
def test_a_condition_of_the_wrong_kind_is_refused_with_its_position(condition: Condition, reason: str) -> None:
    with pytest.raises(UnfitCondition, match=reason) as caught:
        Matcher([CONDITIONS[0], condition], DOMAINS)
    assert caught.value.index == 1
    assert reason in caught.value.reason


def alternatives(count: int) -> Either:
    return Either(tuple(Bound("speed_rpm", "=", float(n)) for n in range(count)))


@pytest.mark.parametrize(
    ("condition", "count"),
    [(alternatives(41), 41), (Every((alternatives(7), alternatives(6))), 42), (Every((alternatives(2),) * 60), 2**60)],
)
def test_a_condition_of_more_than_40_branches_is_refused_with_their_count(condition: Condition, count: int) -> None:
    with pytest.raises(TooManyBranches, match=f"multiply to {count} combinations.*write several rules"):
        Matcher([condition], DOMAINS)


def test_a_condition_of_40_branches_is_taken_and_an_impossible_one_is_not_unfolded() -> None:
    impossible = Every((*(alternatives(2),) * 60, Either(())))
    with closing(Matcher([alternatives(40), Either((impossible, alternatives(3)))], DOMAINS)) as matcher:
        assert matcher.fired({"speed_rpm": 2.0}) == {0, 1}
        assert matcher.fired({"speed_rpm": 39.0}) == {0}


def test_a_disagreement_names_the_conditions(monkeypatch: pytest.MonkeyPatch) -> None:
    with closing(StepRules(CONDITIONS[:4], DOMAINS)) as rules:
        monkeypatch.setattr(Matcher, "fired", lambda _self, _record: frozenset({0, 3}))
        with pytest.raises(Disagreement, match="disagree on condition 1, 3;") as caught:
            rules.judge({"speed_rpm": 150.0})
    assert caught.value.indices == (1, 3)


def test_an_undecided_condition_names_what_it_waits_for() -> None:
    both = Every((Bound("speed_rpm", ">", 100.0), Bound("load_n", ">", 10.0)))
    with closing(StepRules([both], DOMAINS)) as rules:
        assert rules.judge({"speed_rpm": 150.0}) == (None,)
        assert rules.waits(0, {"speed_rpm": 150.0}) == {"load_n"}
        assert rules.waits(0, {"speed_rpm": 50.0}) == set()


@pytest.mark.parametrize("missing", [True, False])
def test_a_missing_engine_is_one_sentence_with_the_mend(monkeypatch: pytest.MonkeyPatch, missing: bool) -> None:
    if missing:
        monkeypatch.setitem(sys.modules, "durable_rules_engine", None)
    else:
        monkeypatch.setattr("importlib.import_module", _broken)
    with pytest.raises(EngineMissing) as caught:
        Matcher(CONDITIONS, DOMAINS)
    told = str(caught.value)
    assert "\n" not in told
    assert told.endswith(
        "CPPFLAGS=-DPyEval_CallObject=PyObject_CallObject "
        "pip install --no-cache-dir --no-binary durable-rules durable-rules==2.0.28"
    )
    assert caught.value.__suppress_context__


def _broken(_name: str) -> object:
    raise ImportError("undefined symbol: PyEval_CallObject")


def test_a_closed_matcher_may_be_closed_again_and_builds_anew(matcher: Matcher) -> None:
    matcher.close()
    matcher.fired(FAST)
    matcher.close()
    matcher.close()
    assert matcher.fired(FAST) == set(range(51))


def test_a_matcher_that_is_dropped_gives_its_memory_back(monkeypatch: pytest.MonkeyPatch) -> None:
    engine = load_engine()
    given_back: list[int] = []
    delete = engine.delete_ruleset
    monkeypatch.setattr(engine, "delete_ruleset", lambda handle: (given_back.append(handle), delete(handle)))
    dropped = Matcher(CONDITIONS, DOMAINS)
    dropped.fired(FAST)
    handles = [each for each in dropped._handles if each is not None]
    del dropped
    gc.collect()
    assert handles
    assert given_back == handles


def test_a_matcher_closes_after_an_interruption(monkeypatch: pytest.MonkeyPatch, matcher: Matcher) -> None:
    # Forgetting a session in which nothing fired, or which was left halfway, would end the process.
    interrupting(monkeypatch, "complete_and_start_action", 1, KeyboardInterrupt())
    with pytest.raises(KeyboardInterrupt):
        matcher.fired(FAST)
    matcher.close()


IMPORTING = "import sys, advisor.inference; sys.exit('durable_rules_engine' in sys.modules or 'durable' in sys.modules)"

LIVING = """
import resource
from advisor.conditions import Bound, Domain
from advisor.inference import StepRules
rules = StepRules([Bound("t", ">", float(n)) for n in range(8)], {"t": Domain("number")})
def live(cases):
    for n in range(cases):
        rules.judge({"t": n % 9 + 0.5})
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
early = live(1_000)
print((live(20_000) - early) / 1024)
"""

REBUILDING = """
import resource
from advisor.conditions import Bound, Domain
from advisor.inference import Matcher
def build(times):
    for n in range(times):
        matcher = Matcher([Bound("t", ">", float(n)) for n in range(20)], {"t": Domain("number")})
        matcher.fired({"t": 9.5})
        matcher.close()
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
early = build(50)
print((build(500) - early) / 1024)
"""


def run_alone(program: str) -> str:
    """Run in a fresh process, whose memory no other test has touched."""
    root = str(Path(advisor.__file__).parents[1])
    command, surroundings = [sys.executable, "-c", program], {**os.environ, "PYTHONPATH": root}
    done = subprocess.run(command, check=True, capture_output=True, text=True, env=surroundings)  # our own
    return done.stdout


def test_importing_the_room_does_not_load_the_engine() -> None:
    run_alone(IMPORTING)


@pytest.mark.parametrize("program", [LIVING, REBUILDING])
def test_memory_stays_flat_over_cases_and_over_matchers(program: str) -> None:
    assert float(run_alone(program)) < 3.0, "growth in MB, on systems that count in kB"
