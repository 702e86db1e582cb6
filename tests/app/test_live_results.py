"""What stands on the screen: a picture, a stale one, or what is still needed."""

from __future__ import annotations

import threading
from collections.abc import Iterator

import pytest
from pytestqt.qtbot import QtBot

from app.assessment_runner import AssessmentRunner
from app.live_results import CANCELLED, LiveResults, Standing
from app.looked_at import LookedAt
from app.open_selection import OpenSelection
from app.picture import Picture, Problem
from engine.duty import REQUIRED
from engine.errors import NoSolution
from engine.selection import Selection, new_selection, with_entry

VOLTAGE = "supply.voltage_V"


def complete(voltage_V: float = 540.0) -> Selection:
    selection = new_selection()
    for key, value in zip(REQUIRED, (voltage_V, 120.0, 50.0, "star", 9.0, 0.012), strict=True):
        selection = with_entry(selection, key, value)
    return selection


class Compute:
    """Gives empty pictures; link voltages above 1000 V have no solution. Can be held up."""

    def __init__(self) -> None:
        self.go = threading.Event()
        self.go.set()
        self.count = 0

    def __call__(self, selection: Selection, looked_at: LookedAt, last: Picture | None) -> Picture:
        self.count += 1
        assert self.go.wait(10)
        if (selection.supply.voltage_V or 0.0) > 1000.0:
            raise NoSolution(VOLTAGE, "too much")
        fields = dict.fromkeys(Picture.__slots__)
        return Picture(**{**fields, "selection": selection, "looked_at": looked_at})


class View:
    """Notes what it is told to show."""

    def __init__(self) -> None:
        self.calls: list[tuple[str, object]] = []

    def show_picture(self, picture: Picture) -> None:
        self.calls.append(("picture", picture))

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self.calls.append(("stale", problems))

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self.calls.append(("incomplete", missing))


class Desk:
    """A document with live results."""

    def __init__(self, qtbot: QtBot) -> None:
        self.qtbot = qtbot
        self.compute = Compute()
        self.document = OpenSelection()
        self.runner = AssessmentRunner(self.compute)
        self.results = LiveResults(self.document, self.runner)

    def settle(self) -> Standing:
        self.qtbot.waitUntil(lambda: not self.runner.is_busy, timeout=5000)
        return self.results.standing

    def edit(self, voltage_V: float | None) -> None:
        self.document.set_entry(VOLTAGE, voltage_V, "Edit link voltage")


@pytest.fixture
def desk(qtbot: QtBot) -> Iterator[Desk]:
    desk = Desk(qtbot)
    yield desk
    desk.compute.go.set()
    desk.runner.shut_down()


def test_an_incomplete_document_names_what_is_needed_and_is_not_computed(desk: Desk) -> None:
    desk.edit(540.0)
    assert desk.settle() == Standing(missing=REQUIRED[1:])
    assert desk.compute.count == 0


def test_a_complete_document_gives_a_picture_of_itself(desk: Desk) -> None:
    desk.document.open(complete(), None)
    standing = desk.settle()
    assert standing.picture is not None
    assert standing.picture.selection is desk.document.selection
    assert not standing.stale


def test_opening_computes_once(desk: Desk) -> None:
    desk.document.open(complete(), None)
    desk.settle()
    assert desk.compute.count == 1


def test_looking_elsewhere_computes_there(desk: Desk) -> None:
    desk.document.open(complete(), None)
    desk.settle()
    desk.document.looked_at = LookedAt(voltage="high")
    picture = desk.settle().picture
    assert picture is not None
    assert picture.looked_at == LookedAt(voltage="high")


def test_no_solution_keeps_the_last_picture_stale_and_undo_brings_it_back(desk: Desk) -> None:
    desk.document.open(complete(), None)
    good = desk.settle().picture
    desk.edit(2000.0)
    problem = Problem(VOLTAGE, "too much")
    assert desk.settle() == Standing(picture=good, stale=True, problems=(problem,))
    desk.document.undo_stack.undo()
    standing = desk.settle()
    assert not standing.stale
    assert standing.picture is not None
    assert standing.picture.selection is desk.document.selection


def test_a_refused_text_makes_the_results_stale_until_it_is_mended(desk: Desk) -> None:
    desk.document.open(complete(), None)
    good = desk.settle().picture
    desk.document.refuse_entry(VOLTAGE, "must be above 0")
    assert desk.results.standing.stale
    assert desk.results.standing.problems == (Problem(VOLTAGE, "must be above 0"),)
    desk.document.refuse_entry(VOLTAGE, "")
    assert desk.results.standing == Standing(picture=good)


def test_other_entries_are_computed_while_a_text_is_refused_but_nothing_counts_as_valid(
    desk: Desk,
) -> None:
    desk.document.open(complete(), None)
    desk.settle()
    desk.document.refuse_entry("load.resistance_ohm", "must be at least 0")
    desk.edit(600.0)
    standing = desk.settle()
    assert standing.stale
    assert standing.picture is not None
    assert standing.picture.selection.supply.voltage_V == 600.0


def test_emptying_a_required_entry_keeps_the_last_picture_stale(desk: Desk) -> None:
    desk.document.open(complete(), None)
    good = desk.settle().picture
    desk.edit(None)
    standing = desk.settle()
    assert standing.picture is good
    assert standing.stale
    assert standing.problems == (Problem(VOLTAGE, "needed, not given"),)


def test_a_new_document_shows_nothing_of_the_old_one(desk: Desk) -> None:
    desk.document.open(complete(), None)
    desk.settle()
    desk.document.open(new_selection(), None)
    assert desk.settle() == Standing(missing=REQUIRED)


def test_the_answer_for_a_document_that_is_gone_is_not_shown(desk: Desk) -> None:
    desk.compute.go.clear()
    desk.document.open(complete(), None)
    desk.document.open(new_selection(), None)
    desk.compute.go.set()
    assert desk.settle() == Standing(missing=REQUIRED)


def test_a_document_without_solution_never_shows_the_picture_of_another(desk: Desk) -> None:
    desk.document.open(complete(), None)
    before = desk.settle()
    desk.document.open(complete(2000.0), None)
    standing = desk.settle()
    view = View()
    standing.show_on(view, before)
    assert view.calls == [("incomplete", ()), ("stale", (Problem(VOLTAGE, "too much"),))]


def test_a_long_computation_marks_the_results_stale_then_shows_progress(desk: Desk) -> None:
    desk.document.open(complete(), None)
    good = desk.settle().picture
    desk.compute.go.clear()
    desk.edit(600.0)
    assert not desk.results.standing.stale
    with desk.qtbot.waitSignal(desk.results.slow, check_params_cb=bool, timeout=5000):
        desk.qtbot.waitUntil(lambda: desk.results.standing.stale, timeout=5000)
    assert desk.results.standing == Standing(picture=good, stale=True)
    desk.compute.go.set()
    assert not desk.settle().stale


def test_cancelling_leaves_the_last_picture_stale_and_computing_anew_mends_it(desk: Desk) -> None:
    desk.document.open(complete(), None)
    good = desk.settle().picture
    desk.compute.go.clear()
    desk.edit(600.0)
    desk.results.cancel()
    desk.compute.go.set()
    assert desk.settle() == Standing(picture=good, stale=True, problems=(CANCELLED,))
    desk.results.compute_anew()
    assert not desk.settle().stale


def test_cancelling_when_nothing_runs_does_nothing(desk: Desk) -> None:
    desk.document.open(complete(), None)
    before = desk.settle()
    desk.results.cancel()
    assert desk.results.standing == before


def test_a_view_gets_only_what_is_news_to_it() -> None:
    picture = Picture(**dict.fromkeys(Picture.__slots__))
    fresh, stale = Standing(picture), Standing(picture, stale=True)
    view = View()
    fresh.show_on(view, None)
    fresh.show_on(view, fresh)
    stale.show_on(view, fresh)
    fresh.show_on(view, stale)
    stale.show_on(view, None)
    assert [kind for kind, _ in view.calls] == [
        "picture",
        "stale",
        "picture",
        "picture",
        "stale",
    ]
