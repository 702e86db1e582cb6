"""The rail: the pages, the worst verdict of each, and the way through them by keyboard."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication, QHBoxLayout, QWidget

from app.picture import Problem
from app.rail import NARROW_WIDTH, WIDTH, PageStanding, Rail
from app.theme import LIGHT, apply_theme
from engine.selection import Cooling, with_entry
from tests.app.assessments import (
    BLOCKING,
    DEAD_INTERVAL,
    JUNCTION,
    MISSING,
    SELECTION,
    WAITING,
    picture,
    result,
)

TITLES = ("Duty", "Candidates", "Turn-off", "Report")


@pytest.fixture
def rail(qtbot, qapp: QApplication) -> Rail:
    apply_theme(qapp, "light")
    window = QWidget()
    qtbot.addWidget(window)
    rail = Rail(TITLES)
    layout = QHBoxLayout(window)
    layout.setContentsMargins(0, 0, 0, 0)
    layout.addWidget(rail)
    layout.addStretch(1)
    window.resize(1440, 700)
    window.show()
    window.activateWindow()
    qtbot.waitActive(window)
    rail.set_current("Duty")
    rail.window_of_test = window
    return rail


def test_each_page_shows_its_worst_verdict_by_mark_and_word(rail: Rail) -> None:
    rail.show_picture(picture(result("undersized", BLOCKING, JUNCTION, DEAD_INTERVAL)))
    assert rail.standing("Candidates") == PageStanding("undersized")
    assert rail.standing("Turn-off") == PageStanding("tight")
    image = rail.grab().toImage()
    candidates_mark = (12 + 7, 8 + 52 + 29 + 7)
    assert image.pixelColor(*candidates_mark) == LIGHT.verdict["undersized"]


def test_report_counts_what_is_assumed_or_missing(rail: Rail) -> None:
    rail.show_picture(picture(result("not assessed", BLOCKING, MISSING, WAITING)))
    missing, assumed = rail.standing("Report").text.splitlines()
    assert missing == "1 missing"
    confirmed = with_entry(SELECTION, "cooling", Cooling(sink_K_per_W=0.08, ambient_C=40.0))
    rail.show_picture(picture(result("adequate", BLOCKING), selection=confirmed))
    fewer = rail.standing("Report").text
    assert int(fewer.split()[0]) == int(assumed.split()[0]) - 1


def test_without_a_chosen_candidate_no_page_has_a_verdict(rail: Rail) -> None:
    rail.show_picture(picture(result("adequate", BLOCKING), chosen=""))
    assert rail.standing("Candidates") == PageStanding()


def test_stale_shows_neither_verdict_nor_mark(rail: Rail) -> None:
    rail.show_picture(picture(result("adequate", BLOCKING)))
    rail.show_stale(
        (Problem("load.resistance_ohm", "must be at least 0"), Problem("", "cancelled"))
    )
    assert rail.standing("Candidates") == PageStanding(words="stale")
    assert rail.standing("Duty").text == "1 fault"


def test_incomplete_counts_what_is_needed(rail: Rail) -> None:
    rail.show_incomplete(("supply.voltage_V", "load.resistance_ohm"))
    assert rail.standing("Duty").text == "2 needed"
    assert rail.standing("Candidates") == PageStanding()


def item(rail: Rail, title: str) -> QWidget:
    return next(
        child for child in rail.findChildren(QWidget) if getattr(child, "title", "") == title
    )


def test_a_click_chooses_a_page(rail: Rail, qtbot) -> None:
    with qtbot.waitSignal(rail.page_chosen) as chosen:
        qtbot.mouseClick(item(rail, "Report"), Qt.MouseButton.LeftButton)
    assert chosen.args == ["Report"]


def test_arrow_keys_go_through_the_pages_and_stop_at_the_ends(rail: Rail, qtbot) -> None:
    chosen: list[str] = []
    rail.page_chosen.connect(chosen.append)
    item(rail, "Duty").setFocus()
    qtbot.keyClick(item(rail, "Duty"), Qt.Key.Key_Up)
    qtbot.keyClick(item(rail, "Duty"), Qt.Key.Key_Down)
    qtbot.keyClick(item(rail, "Candidates"), Qt.Key.Key_Down)
    assert chosen == ["Candidates", "Turn-off"]
    assert item(rail, "Turn-off").hasFocus()


def test_each_page_is_named_with_its_verdict(rail: Rail) -> None:
    rail.show_picture(picture(result("tight", DEAD_INTERVAL)))
    assert item(rail, "Turn-off").accessibleName() == "Turn-off, tight"


def test_rail_is_narrower_in_a_narrow_window(rail: Rail, qtbot) -> None:
    assert rail.width() == WIDTH
    rail.window_of_test.resize(1100, 640)
    qtbot.waitUntil(lambda: rail.width() == NARROW_WIDTH)
