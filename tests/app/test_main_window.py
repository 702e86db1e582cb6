"""The window by mouse and keyboard: editing, files, pages, looked-at point, closing."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import QMimeData, QPointF, Qt, QUrl
from PySide6.QtGui import QAction, QDragEnterEvent, QDropEvent, QGuiApplication
from PySide6.QtWidgets import QApplication, QLineEdit, QVBoxLayout, QWidget
from pytestqt.qtbot import QtBot

from app.cautions import cautions
from app.looked_at import LookedAt, looked_at_corner
from app.main_window import MainWindow
from app.open_selection import OpenSelection
from app.pages.page import Page
from app.picture import Picture, Problem
from app.selection_file import demo_selection, read_selection, selection_bytes
from app.settings import Settings
from engine.checks import Corner
from engine.selection import entry, new_selection, with_entry
from engine.version import VERSION
from tests.app.answers import Answers

VOLTAGE, RESISTANCE = "supply.voltage_V", "load.resistance_ohm"
Key, Control, Shift = Qt.Key, Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier
NO_MODIFIER = Qt.KeyboardModifier.NoModifier


class FieldsPage(Page):
    """A page with plain fields that notes what it is told to show."""

    keys: tuple[str, ...] = ()

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document)
        self.shown: list[object] = []
        self.fields = {key: QLineEdit() for key in self.keys}
        layout = QVBoxLayout(self)
        for key, field in self.fields.items():
            field.textEdited.connect(lambda text, k=key: self._type(k, text))
            layout.addWidget(field)
        own = QAction("Fold everything", self)
        self.addAction(own)

    def _type(self, key: str, text: str) -> None:
        self.document.set_entry(key, float(text) if text else None, f"Edit {key}")

    def show_picture(self, picture: Picture) -> None:
        self.shown.append(picture)

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self.shown.append(problems)

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self.shown.append(missing)

    def go_to(self, key: str) -> bool:
        if key not in self.fields:
            return False
        self.fields[key].setFocus()
        return True


class FirstPage(FieldsPage):
    title = "Duty"
    keys = (VOLTAGE, "gating.frequency_Hz")


class SecondPage(FieldsPage):
    title = "Candidates"
    keys = (RESISTANCE,)


class Desk:
    """A window in view, with dialogs that answer by themselves."""

    def __init__(self, qtbot: QtBot) -> None:
        self.qtbot = qtbot
        self.answers = Answers()
        self.window = MainWindow((FirstPage, SecondPage), Settings(), self.answers)
        self.document = self.window.document
        self.window.show()
        self.window.activateWindow()
        qtbot.waitActive(self.window)
        self.document.open(demo_selection(), None)
        self.settle()

    @property
    def page(self) -> FieldsPage:
        page = self.window.current_page
        assert isinstance(page, FieldsPage)
        return page

    def settle(self) -> None:
        self.qtbot.waitUntil(lambda: not self.window._runner.is_busy, timeout=20_000)

    def press(self, key: Qt.Key, modifier: Qt.KeyboardModifier = NO_MODIFIER) -> None:
        self.qtbot.keyClick(QApplication.focusWidget() or self.window, key, modifier)

    def type_voltage(self, text: str) -> QLineEdit:
        field = self.page.fields[VOLTAGE]
        field.setFocus()
        field.selectAll()
        self.qtbot.keyClicks(field, text)
        return field


@pytest.fixture
def desk(qtbot: QtBot) -> Iterator[Desk]:
    desk = Desk(qtbot)
    yield desk
    desk.window.leave()


def voltage(desk: Desk) -> float:
    value: float = entry(desk.document.selection, VOLTAGE)
    return value


def test_typing_undo_redo_save_and_open_by_keyboard(desk: Desk, tmp_path: Path) -> None:
    before = desk.document.selection
    desk.type_voltage("537")
    assert voltage(desk) == 537.0
    desk.press(Key.Key_Z, Control)
    assert desk.document.selection == before
    desk.press(Key.Key_Z, Control | Shift)
    assert voltage(desk) == 537.0
    desk.answers.save_file = tmp_path / "winch.json"
    desk.press(Key.Key_S, Control)
    assert read_selection(tmp_path / "winch.json").selection.supply.voltage_V == 537.0
    desk.press(Key.Key_N, Control)
    assert desk.document.selection == new_selection()
    desk.answers.open_file = tmp_path / "winch.json"
    desk.press(Key.Key_O, Control)
    assert voltage(desk) == 537.0


def test_undo_works_from_within_the_field_that_was_typed_in(desk: Desk) -> None:
    field = desk.type_voltage("537")
    assert field.hasFocus()
    desk.press(Key.Key_Z, Control)
    assert voltage(desk) == demo_selection().supply.voltage_V


def test_coming_back_to_a_field_begins_a_new_undo_step(desk: Desk) -> None:
    desk.type_voltage("53")
    desk.page.fields["gating.frequency_Hz"].setFocus()
    desk.type_voltage("537")
    assert desk.document.undo_stack.count() == 2


def test_a_star_in_the_title_marks_unsaved_changes(desk: Desk, tmp_path: Path) -> None:
    assert not desk.window.isWindowModified()
    desk.type_voltage("537")
    assert desk.window.isWindowModified()
    assert "[*]" in desk.window.windowTitle()
    desk.answers.save_file = tmp_path / "winch.json"
    desk.press(Key.Key_S, Control)
    assert not desk.window.isWindowModified()
    assert desk.window.windowTitle().startswith("winch[*]")


def test_every_edit_brings_a_new_picture_to_the_page_in_view(desk: Desk) -> None:
    desk.type_voltage("537")
    desk.settle()
    picture = desk.page.shown[-1]
    assert isinstance(picture, Picture)
    assert picture.selection is desk.document.selection


def test_a_contradiction_makes_the_page_stale_and_undo_brings_it_back(desk: Desk) -> None:
    desk.type_voltage("10000")
    desk.settle()
    problems = desk.page.shown[-1]
    assert isinstance(problems, tuple)
    assert problems[0].key == "supply.voltage_high_V"
    desk.press(Key.Key_Z, Control)
    desk.settle()
    assert isinstance(desk.page.shown[-1], Picture)


def test_a_page_out_of_view_is_brought_up_to_date_when_it_comes_into_view(desk: Desk) -> None:
    desk.press(Key.Key_2, Control)
    second = desk.page
    desk.press(Key.Key_1, Control)
    count = len(second.shown)
    desk.type_voltage("537")
    desk.settle()
    assert len(second.shown) == count
    desk.press(Key.Key_2, Control)
    assert desk.page is second
    assert second.shown[-1].selection is desk.document.selection


def test_a_new_document_says_what_it_needs(desk: Desk) -> None:
    desk.press(Key.Key_N, Control)
    desk.settle()
    assert VOLTAGE in desk.page.shown[-1]


def test_closing_asks_about_unsaved_changes(desk: Desk) -> None:
    desk.type_voltage("537")
    desk.answers.unsaved = "cancel"
    assert not desk.window.close()
    assert desk.window.isVisible()
    desk.answers.unsaved = "discard"
    assert desk.window.close()


def test_a_dropped_file_is_opened(desk: Desk, tmp_path: Path) -> None:
    file = tmp_path / "dropped.json"
    file.write_bytes(selection_bytes(with_entry(demo_selection(), VOLTAGE, 551.0)))
    drop(desk, file)
    desk.qtbot.waitUntil(lambda: voltage(desk) == 551.0)
    assert desk.document.path == file


def test_a_bad_dropped_file_is_explained_and_costs_nothing(desk: Desk, tmp_path: Path) -> None:
    file = tmp_path / "dropped.json"
    file.write_bytes(b"\x00\x01")
    before = desk.document.selection
    drop(desk, file)
    desk.qtbot.waitUntil(lambda: any("cannot be opened" in said for said in desk.answers.said))
    assert desk.document.selection is before


def drop(desk: Desk, file: Path) -> None:
    data = QMimeData()
    data.setUrls([QUrl.fromLocalFile(str(file))])
    action, button = Qt.DropAction.CopyAction, Qt.MouseButton.LeftButton

    enter = QDragEnterEvent(QPointF(9, 9).toPoint(), action, data, button, NO_MODIFIER)
    desk.window.dragEnterEvent(enter)
    assert enter.isAccepted()
    desk.window.dropEvent(QDropEvent(QPointF(9, 9), action, data, button, NO_MODIFIER))


def test_recent_files_are_listed_and_missing_ones_greyed(desk: Desk, tmp_path: Path) -> None:
    here, gone = tmp_path / "here.json", tmp_path / "gone.json"
    here.write_bytes(selection_bytes(demo_selection()))
    desk.window.settings.remember_file(gone)
    desk.window.files.open(here)
    desk.window._menus._fill_recent()
    listed = {action.text(): action for action in desk.window._menus._recent.actions()}
    assert listed[str(here)].isEnabled()
    assert not listed[str(gone)].isEnabled()
    desk.document.open(new_selection(), None)
    listed[str(here)].trigger()
    assert desk.document.path == here


def test_ctrl_0_looks_at_nominal_and_keeps_the_position(desk: Desk) -> None:
    desk.document.looked_at = LookedAt(voltage="high", load="overload", position=3)
    desk.press(Key.Key_0, Control)
    assert desk.document.looked_at == LookedAt(position=3)


def test_going_to_a_row_shows_its_corner_its_page_and_its_field(desk: Desk) -> None:
    corner = Corner(voltage_V=594.0, frequency_Hz=90.0, load_factor=1.0, ambient_C=45.0)
    desk.window.go_to(RESISTANCE, looked_at_corner(corner, "T3"))
    assert isinstance(desk.page, SecondPage)
    assert desk.page.fields[RESISTANCE].hasFocus()
    assert desk.document.looked_at.voltage == 594.0
    assert desk.document.looked_at.position == 2


def test_f6_goes_from_pane_to_pane_and_back(desk: Desk) -> None:
    start = desk.page.fields[VOLTAGE]
    start.setFocus()
    visited: list[QWidget | None] = []
    for _ in range(12):
        desk.press(Key.Key_F6)
        visited.append(QApplication.focusWidget())
        if desk.page.isAncestorOf(visited[-1]):
            break
    assert any(desk.window.rail is w or desk.window.rail.isAncestorOf(w) for w in visited)
    desk.press(Key.Key_F6, Shift)
    assert QApplication.focusWidget() is visited[-2]


def test_the_cautions_stand_until_understood_and_then_under_help(desk: Desk) -> None:
    band = desk.window._band
    assert band.isVisible()
    desk.qtbot.mouseClick(band.button, Qt.MouseButton.LeftButton)
    assert not band.isVisible()
    assert Settings().cautions_understood == VERSION
    desk.press(Key.Key_F1)
    for caution in cautions():
        assert caution in desk.answers.said[-1]


def test_the_pages_own_actions_stand_in_the_view_menu(desk: Desk) -> None:
    view = desk.window._menus.view
    view.aboutToShow.emit()
    view.aboutToShow.emit()
    assert [a.text() for a in view.actions()].count("Fold everything") == 1


def test_copy_takes_the_marked_text_of_a_field_else_the_page(desk: Desk) -> None:
    field = desk.type_voltage("537")
    field.selectAll()
    desk.press(Key.Key_C, Control)
    assert QGuiApplication.clipboard().text() == "537"
    desk.window.rail.setFocus()
    desk.window.copy()
    assert not QGuiApplication.clipboard().pixmap().isNull()


def test_every_shortcut_is_there_once(desk: Desk) -> None:
    actions = desk.window.findChildren(QAction)
    keys = [key.toString() for action in actions for key in action.shortcuts()]
    assert len(keys) == len(set(keys))
    expected = ["Ctrl+N", "Ctrl+O", "Ctrl+S", "Ctrl+Shift+S", "Ctrl+Z", "Ctrl+Shift+Z", "Ctrl+C"]
    assert {*expected, "Ctrl+Q", "Ctrl+0", "Ctrl+1", "Ctrl+2", "F5", "F6"} <= set(keys)


def test_every_widget_that_takes_the_focus_has_a_name(desk: Desk) -> None:
    own = [w for w in desk.window.findChildren(QWidget) if not desk.page.isAncestorOf(w)]
    takers = [w for w in own if w.focusPolicy() & Qt.FocusPolicy.TabFocus and w.isVisible()]
    nameless = [w for w in takers if not (w.accessibleName() or getattr(w, "text", str)())]
    assert nameless == []


def test_the_window_can_be_made_small(desk: Desk) -> None:
    assert desk.window.minimumWidth() <= 1024
    assert desk.window.minimumHeight() <= 640


def test_size_is_kept_for_the_next_start(desk: Desk, qtbot: QtBot) -> None:
    desk.window.resize(1024, 666)
    desk.window.leave()
    window = MainWindow((FirstPage,), Settings(), Answers())
    window.restore_layout()
    assert (window.width(), window.height()) == (1024, 666)
    window.leave()


def test_a_mistake_in_the_program_is_shown_with_its_text(desk: Desk) -> None:
    desk.window.show_mistake("Traceback: ZeroDivisionError")
    assert "ZeroDivisionError" in desk.answers.said[-1]
    assert desk.window.isVisible()
