"""The Duty page as a whole: parts follow each other, states, lists, the small window."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from app.inductive_sentence import inductive_sentence
from app.open_selection import OpenSelection
from app.pages.duty import DutyPage
from app.picture import Picture, Problem
from app.theme import apply_theme
from app.widgets.position_table import event_row
from app.widgets.strip import LINE_CURRENTS
from tests.app.assessments import SELECTION
from tests.app.solved import solved, with_load

Control, Shift = Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier
PROBLEM = Problem("supply.voltage_V", "must be above 0; got -5")


@pytest.fixture
def picture() -> Picture:
    return solved()


@pytest.fixture
def page(qtbot: QtBot, qapp: QApplication, picture: Picture) -> DutyPage:
    apply_theme(qapp, "light")
    page = DutyPage(OpenSelection(SELECTION))
    qtbot.addWidget(page)
    page.resize(1440, 736)
    page.show_picture(picture)
    page.show()
    page.activateWindow()
    qtbot.waitActive(page)
    return page


def click_row(qtbot: QtBot, table: object, row: int) -> None:
    rect = table.visualItemRect(table.item(row, 0))  # type: ignore[attr-defined]
    qtbot.mouseClick(
        table.viewport(),  # type: ignore[attr-defined]
        Qt.MouseButton.LeftButton,
        pos=rect.center(),
    )


# Parts that follow each other -----------------------------------------------------------


def test_a_device_that_is_clicked_is_looked_at_everywhere_at_once(
    qtbot: QtBot, page: DutyPage
) -> None:
    where = page.side.drawing.plan.centre(3).toPoint()
    qtbot.mouseClick(page.side.drawing, Qt.MouseButton.LeftButton, pos=where)
    assert page.document.looked_at.position == 3
    assert "Position T4" in [strip.title for strip in page.strips.strips]
    assert page.side.positions.item(3, 0).font().bold()


def test_a_row_of_the_positions_is_looked_at_and_so_is_its_diode(
    qtbot: QtBot, page: DutyPage
) -> None:
    click_row(qtbot, page.side.positions, 2)
    assert page.document.looked_at.position == 2
    click_row(qtbot, page.side.positions, 10)
    assert page.document.looked_at.position == 4


def test_an_event_row_moves_the_cursor_there(
    qtbot: QtBot, page: DutyPage, picture: Picture
) -> None:
    qtbot.keyClick(page, Qt.Key.Key_L, Control)
    assert page.side.list is page.side.events
    click_row(qtbot, page.side.events, 5)
    assert page.angle_cursor.angle_deg == picture.stress.events[5].angle_deg


def test_the_key_exchanges_positions_and_events(qtbot: QtBot, page: DutyPage) -> None:
    assert page.side.list is page.side.positions
    qtbot.keyClick(page, Qt.Key.Key_L, Control)
    assert page.side.events.isVisible()
    qtbot.keyClick(page, Qt.Key.Key_L, Control)
    assert page.side.positions.isVisible()


# Figures --------------------------------------------------------------------------------


def test_the_table_holds_the_engines_figures(page: DutyPage, picture: Picture) -> None:
    switch = picture.stress.positions[0].switch
    name, average, rms, peak, blocks = page.side.positions.texts(0)
    assert name == "T1"
    assert float(average) == pytest.approx(switch.current_avg_A, rel=5e-3)
    assert float(rms) == pytest.approx(switch.current_rms_A, rel=5e-3)
    assert float(peak) == pytest.approx(switch.current_peak_A, rel=5e-3)
    assert float(blocks) == switch.forward_blocking_peak_V
    assert page.side.positions.rowCount() == 12


def test_in_a_narrow_column_the_diodes_share_a_row_of_their_highest_figures(
    page: DutyPage, picture: Picture
) -> None:
    page.side.fit(narrow=True)
    assert page.side.positions.rowCount() == 7
    highest = max(each.diode.current_rms_A for each in picture.stress.positions)
    assert float(page.side.positions.texts(6)[2]) == pytest.approx(highest, rel=5e-3)


def test_an_event_names_the_device_that_changes(picture: Picture) -> None:
    diode = next(event for event in picture.stress.events if event.device == "diode")
    row = event_row(diode)
    assert row[1] == f"D{diode.position[1]}"
    assert row[2] == diode.kind


def test_the_sentence_sets_the_phase_rms_against_the_resistive_figure(picture: Picture) -> None:
    sentence = inductive_sentence(picture)
    assert "0.408 × 540 V = 220 V" in sentence
    rms_V = picture.stress.phase_voltage_rms_V
    assert rms_V is not None
    assert sentence.startswith(f"Phase rms {rms_V[0]:.0f} V")


def test_no_sentence_where_the_ideal_figure_holds_or_branches_differ() -> None:
    assert inductive_sentence(solved(with_load(resistance_ohm=9.0, inductance_H=0.0))) == ""
    unlike = with_load(resistance_ohm=(9.0, 12.0, 5.0), inductance_H=0.012)
    assert inductive_sentence(solved(unlike)) == ""


# States ---------------------------------------------------------------------------------


def test_stale_marks_strips_drawing_lists_and_the_entry_to_blame(page: DutyPage) -> None:
    page.show_stale((PROBLEM,))
    assert page.strips.sheet.stale
    assert page.side.drawing.in_words().startswith("stale")
    stale = page.side.positions.item(0, 1).foreground().color()
    assert stale == page.strips.sheet.look.stale
    assert page._sentence.text() == ""


def test_another_position_can_be_looked_at_while_stale(page: DutyPage) -> None:
    page.show_stale((PROBLEM,))
    page.look_at(5)
    assert "Position T6" in [strip.title for strip in page.strips.strips]
    assert page.strips.sheet.stale


def test_a_new_picture_ends_the_stale_state(page: DutyPage, picture: Picture) -> None:
    page.show_stale((PROBLEM,))
    page.show_picture(picture)
    assert not page.strips.sheet.stale
    assert page._sentence.text()


def test_an_incomplete_duty_names_what_it_needs(page: DutyPage) -> None:
    page.show_incomplete(("supply.voltage_V", "load.resistance_ohm"))
    assert page.strips.in_words() == "Needs link voltage, R"
    assert page.side.positions.rowCount() == 0


def test_a_first_result_that_fails_is_explained_on_the_axes(page: DutyPage) -> None:
    page.show_incomplete(())
    page.show_stale((PROBLEM,))
    assert page.strips.in_words() == f"No result: {PROBLEM.text}"


# Copies ---------------------------------------------------------------------------------


def test_copy_takes_the_table_in_focus_as_tabbed_text(page: DutyPage) -> None:
    page.side.positions.setFocus()
    page.copy()
    lines = QGuiApplication.clipboard().text().splitlines()
    assert lines[0].split("\t")[1:] == ["avg A", "rms A", "peak A", "block V"]
    assert len(lines) == 13


def test_copy_takes_the_current_strip_when_the_strips_are_in_focus(
    qtbot: QtBot, page: DutyPage
) -> None:
    page.strips.setFocus()
    for _ in range(3):
        qtbot.keyClick(page.strips, Qt.Key.Key_Down)
    assert page.strips.current == LINE_CURRENTS
    page.copy()
    heads = QGuiApplication.clipboard().text().splitlines()[0]
    assert heads == "angle_deg,time_s,line_current_A_A,line_current_B_A,line_current_C_A"


def test_ctrl_shift_c_copies_all_strips(qtbot: QtBot, page: DutyPage) -> None:
    qtbot.keyClick(page, Qt.Key.Key_C, Control | Shift)
    assert "T6_gate" in QGuiApplication.clipboard().text().splitlines()[0]


# The small window -----------------------------------------------------------------------


def test_below_1100_px_the_right_column_hides(page: DutyPage) -> None:
    page.resize(1090, 550)
    assert not page.side.isVisible()
    assert page.side.drawing not in page.panes()
    page.resize(1100, 550)
    assert page.side.isVisible()


def test_a_low_window_shows_the_list_only_at_its_key(qtbot: QtBot, page: DutyPage) -> None:
    page.resize(1440, 430)
    QApplication.processEvents()
    assert not page.side.positions.isVisible()
    assert page.side.drawing.isVisible()
    qtbot.keyClick(page, Qt.Key.Key_L, Control)
    assert page.side.positions.isVisible()
    assert not page.side.drawing.isVisible()
    qtbot.keyClick(page, Qt.Key.Key_L, Control)
    assert page.side.events.isVisible()
    qtbot.keyClick(page, Qt.Key.Key_L, Control)
    assert page.side.drawing.isVisible()


def test_every_part_that_takes_the_focus_has_a_name(page: DutyPage) -> None:
    for pane in page.panes():
        assert pane.accessibleName()
