"""The background worker: order, coalescing, failures, ending."""

from __future__ import annotations

import threading
from collections.abc import Iterator

import pytest
from pytestqt.qtbot import QtBot

from app.assessment_runner import AssessmentRunner
from app.looked_at import LookedAt
from app.picture import Picture, Problem
from engine.errors import Fault, InvalidSelection, NoSolution, ThermalRunaway
from engine.selection import Selection, new_selection, with_entry


def selection_called(title: str) -> Selection:
    return with_entry(new_selection(), "title", title)


def picture(selection: Selection, looked_at: LookedAt) -> Picture:
    """A picture without contents; the runner does not look inside."""
    fields = dict.fromkeys(Picture.__slots__)
    return Picture(**{**fields, "selection": selection, "looked_at": looked_at})


class Work:
    """A computation that waits until it is let go, and notes what it was asked."""

    def __init__(self) -> None:
        self.go = threading.Event()
        self.titles: list[str] = []
        self.last: list[Picture | None] = []
        self.error: Exception | None = None

    def __call__(self, selection: Selection, looked_at: LookedAt, last: Picture | None) -> Picture:
        self.titles.append(selection.title)
        self.last.append(last)
        assert self.go.wait(10)
        if self.error is not None:
            raise self.error
        return picture(selection, looked_at)


@pytest.fixture
def work() -> Work:
    return Work()


@pytest.fixture
def runner(qtbot: QtBot, work: Work) -> Iterator[AssessmentRunner]:
    runner = AssessmentRunner(work)
    yield runner
    work.go.set()
    runner.shut_down()


def ask(runner: AssessmentRunner, *titles: str) -> None:
    for title in titles:
        runner.request(selection_called(title), LookedAt())


def until_idle(qtbot: QtBot, runner: AssessmentRunner) -> None:
    qtbot.waitUntil(lambda: not runner.is_busy, timeout=5000)


def problems_of(
    qtbot: QtBot, runner: AssessmentRunner, work: Work, error: Exception
) -> tuple[Problem, ...]:
    work.error = error
    work.go.set()
    with qtbot.waitSignal(runner.failed, timeout=5000) as failed:
        ask(runner, "a")
    return failed.args[0]


def test_only_the_running_and_the_newest_request_are_computed(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    shown: list[str] = []
    runner.finished.connect(lambda picture: shown.append(picture.selection.title))
    ask(runner, "a", "b", "c", "d")
    work.go.set()
    until_idle(qtbot, runner)
    assert work.titles == ["a", "d"]
    assert shown == ["a", "d"]


def test_busy_ends_only_when_nothing_waits(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    said: list[bool] = []
    runner.busy.connect(said.append)
    ask(runner, "a", "b")
    work.go.set()
    until_idle(qtbot, runner)
    assert said == [True, True, False]


def test_a_request_made_while_a_result_is_shown_is_computed_too(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    runner.finished.connect(
        lambda picture: ask(runner, "b") if picture.selection.title == "a" else None
    )
    work.go.set()
    ask(runner, "a")
    qtbot.waitUntil(lambda: work.titles == ["a", "b"], timeout=5000)
    until_idle(qtbot, runner)


def test_a_cancelled_computation_shows_nothing(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    ask(runner, "a", "b")
    runner.cancel()
    with qtbot.assertNotEmitted(runner.finished), qtbot.assertNotEmitted(runner.failed):
        work.go.set()
        until_idle(qtbot, runner)
    assert work.titles == ["a"]
    with qtbot.waitSignal(runner.finished, timeout=5000):
        ask(runner, "c")


def test_the_last_picture_is_handed_to_the_next_computation(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    work.go.set()
    with qtbot.waitSignal(runner.finished, timeout=5000) as first:
        ask(runner, "a")
    with qtbot.waitSignal(runner.finished, timeout=5000):
        ask(runner, "b")
    assert work.last == [None, first.args[0]]


def test_each_fault_of_a_selection_is_a_problem_of_its_key(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    faults = [Fault("supply.voltage_V", "needed"), Fault("load.resistance_ohm", "needed")]
    assert problems_of(qtbot, runner, work, InvalidSelection(faults)) == (
        Problem("supply.voltage_V", "needed"),
        Problem("load.resistance_ohm", "needed"),
    )


def test_no_solution_names_the_entry_to_change(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    error = NoSolution("load.resistance_ohm", "no unique steady state")
    expected = (Problem("load.resistance_ohm", "no unique steady state"),)
    assert problems_of(qtbot, runner, work, error) == expected


def test_a_runaway_is_told_in_its_own_words(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    problems = problems_of(qtbot, runner, work, ThermalRunaway("does not come to rest"))
    assert problems == (Problem("", "does not come to rest"),)


def test_a_mistake_in_the_program_is_told_and_logged_and_work_goes_on(
    qtbot: QtBot, runner: AssessmentRunner, work: Work, caplog: pytest.LogCaptureFixture
) -> None:
    (problem,) = problems_of(qtbot, runner, work, ZeroDivisionError("by zero"))
    assert "mistake in this program (ZeroDivisionError)" in problem.text
    assert "by zero" in caplog.text
    work.error = None
    with qtbot.waitSignal(runner.finished, timeout=5000):
        ask(runner, "b")


def test_a_failure_is_not_shown_when_a_newer_request_waits(
    qtbot: QtBot, runner: AssessmentRunner, work: Work
) -> None:
    work.error = NoSolution("", "no")
    failures: list[object] = []
    runner.failed.connect(failures.append)
    ask(runner, "a", "b")
    work.go.set()
    until_idle(qtbot, runner)
    assert len(failures) == 1


def test_shutting_down_waits_for_the_worker_and_stays_silent(qtbot: QtBot, work: Work) -> None:
    runner = AssessmentRunner(work)
    shown: list[object] = []
    runner.finished.connect(shown.append)
    ask(runner, "a")
    threading.Timer(0.05, work.go.set).start()
    runner.shut_down()
    qtbot.wait(20)
    assert shown == []
    assert not [t for t in threading.enumerate() if t.name.startswith("assessment")]
