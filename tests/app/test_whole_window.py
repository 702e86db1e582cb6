"""The main job in the real window, by keyboard and mouse, with the real pages."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication, QLineEdit, QPlainTextEdit, QWidget
from pytestqt.qtbot import QtBot

from app.main_window import MainWindow
from app.picture import Picture
from app.selection_file import demo_selection, read_selection
from app.settings import Settings
from app.start import PAGES
from app.widgets.number_entry import NumberEntry
from tests.app.answers import Answers

VOLTAGE = "supply.voltage_V"
Key, Control = Qt.Key, Qt.KeyboardModifier.ControlModifier


@pytest.fixture
def answers() -> Answers:
    return Answers()


@pytest.fixture
def window(qtbot: QtBot, answers: Answers) -> Iterator[MainWindow]:
    window = MainWindow(PAGES, Settings(), answers)
    window.resize(1440, 830)
    window.show()
    window.activateWindow()
    qtbot.waitActive(window)
    window.document.open(demo_selection(), None)
    settle(qtbot, window)
    yield window
    window.leave()


def settle(qtbot: QtBot, window: MainWindow) -> None:
    qtbot.waitUntil(lambda: not window._runner.is_busy, timeout=30_000)


def field(window: MainWindow, key: str) -> NumberEntry:
    """The field of a key in the page in view, with the focus."""
    assert window.current_page.go_to(key)
    focus = QApplication.focusWidget()
    assert isinstance(focus, NumberEntry)
    return focus


def type_into(qtbot: QtBot, entry: QLineEdit, text: str) -> None:
    entry.selectAll()
    qtbot.keyClicks(entry, text)


def shown(window: MainWindow) -> Picture:
    picture = window.results.standing.picture
    assert picture is not None
    return picture


def test_typing_a_value_moves_everything_and_undo_brings_it_back(
    qtbot: QtBot, window: MainWindow
) -> None:
    entry = field(window, VOLTAGE)
    type_into(qtbot, entry, "560")
    settle(qtbot, window)
    assert shown(window).corner.voltage_V == 560.0
    qtbot.keyClick(entry, Key.Key_Z, Control)
    settle(qtbot, window)
    assert shown(window).corner.voltage_V == 540.0
    assert entry.text() == "540"


def test_a_text_that_is_no_value_keeps_the_last_result_stale_until_escape(
    qtbot: QtBot, window: MainWindow
) -> None:
    before = shown(window)
    type_into(qtbot, field(window, VOLTAGE), "x12")
    settle(qtbot, window)
    standing = window.results.standing
    assert standing.stale
    assert standing.problems[0].key == VOLTAGE
    assert window.verdict_line.statement.verdict is None
    qtbot.keyClick(QApplication.focusWidget(), Key.Key_Escape)
    settle(qtbot, window)
    assert not window.results.standing.stale
    assert shown(window) is before
    assert window.document.undo_stack.count() == 0


def test_entries_that_contradict_each_other_are_explained_and_the_last_result_stays(
    qtbot: QtBot, window: MainWindow
) -> None:
    before = shown(window).corner
    type_into(qtbot, field(window, "supply.voltage_low_V"), "600")
    settle(qtbot, window)
    assert window.results.standing.stale
    assert shown(window).corner.voltage_V == before.voltage_V
    assert "lowest link voltage" in str(window.verdict_line.statement)


def test_the_verdict_line_leads_to_the_worst_check_and_its_corner(
    qtbot: QtBot, window: MainWindow
) -> None:
    asked = window.verdict_line.statement
    qtbot.mouseClick(window.verdict_line, Qt.MouseButton.LeftButton)
    settle(qtbot, window)
    assert asked.key
    assert asked.looked_at is not None
    assert window.document.looked_at == asked.looked_at
    assert window.current_page.isAncestorOf(QApplication.focusWidget())
    qtbot.keyClick(window, Key.Key_0, Control)
    assert window.document.looked_at.is_nominal


def test_the_rail_opens_every_page(qtbot: QtBot, window: MainWindow) -> None:
    window.rail.findChildren(QWidget)[0].setFocus()
    for title in window.page_titles[1:]:
        qtbot.keyClick(QApplication.focusWidget(), Key.Key_Down)
        assert window.current_page.title == title
        assert window.current_page.isVisible()


def test_a_document_made_saved_and_opened_again_gives_the_same_results(
    qtbot: QtBot, window: MainWindow, answers: Answers, tmp_path: Path
) -> None:
    type_into(qtbot, field(window, VOLTAGE), "560")
    settle(qtbot, window)
    before = shown(window)
    answers.save_file = tmp_path / "winch.json"
    qtbot.keyClick(window, Key.Key_S, Control)
    qtbot.keyClick(window, Key.Key_N, Control)
    assert window.results.standing.picture is None
    assert read_selection(tmp_path / "winch.json").selection == before.selection
    answers.open_file = tmp_path / "winch.json"
    qtbot.keyClick(window, Key.Key_O, Control)
    settle(qtbot, window)
    assert shown(window).assessment == before.assessment


def test_a_new_document_is_computed_as_soon_as_the_last_required_entry_is_made(
    qtbot: QtBot, window: MainWindow
) -> None:
    qtbot.keyClick(window, Key.Key_N, Control)
    for key, text in {
        VOLTAGE: "540",
        "gating.conduction_deg": "120",
        "gating.frequency_Hz": "50",
        "load.resistance_ohm": "9",
    }.items():
        type_into(qtbot, field(window, key), text)
    window.document.set_entry("load.connection", "star", "change connection")
    assert window.results.standing.missing == ("load.inductance_H",)
    type_into(qtbot, field(window, "load.inductance_H"), "12m")
    settle(qtbot, window)
    assert shown(window).duty.inductance_H == (0.012, 0.012, 0.012)
    assert "No candidate yet" in str(window.verdict_line.statement)


def test_every_widget_of_every_page_that_takes_the_focus_has_a_name(window: MainWindow) -> None:
    nameless = []
    for title in window.page_titles:
        window.show_page(title)
        for widget in window.findChildren(QWidget):
            takes_it = widget.focusPolicy() & Qt.FocusPolicy.TabFocus
            named = widget.accessibleName() or getattr(widget, "text", str)()
            if takes_it and widget.isVisible() and not named:
                nameless.append(f"{title}: {type(widget).__name__} {widget.objectName()}")
    assert nameless == []


def test_a_file_dropped_on_a_field_goes_to_the_window(window: MainWindow) -> None:
    for title in window.page_titles:
        window.show_page(title)
        fields = [w for kind in (QLineEdit, QPlainTextEdit) for w in window.findChildren(kind)]
        assert fields
        assert [(title, f.accessibleName()) for f in fields if f.acceptDrops()] == []


@pytest.mark.parametrize("width", [1100, 1440])
def test_no_page_asks_for_more_room_than_the_window_has(window: MainWindow, width: int) -> None:
    height = {1100: 640, 1440: 830}[width]
    for title in window.page_titles:
        window.show_page(title)
        window.resize(width, height)
        assert (window.width(), window.height()) == (width, height), title
        assert window.minimumSizeHint().width() <= width, title
