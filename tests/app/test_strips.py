"""The strips in use: cursor, folding, copies, stale and empty."""

from __future__ import annotations

import csv
import io

import numpy as np
import pytest
from PySide6.QtCore import QByteArray, QPoint, QPointF, Qt
from PySide6.QtGui import QColor, QGuiApplication, QImage
from PySide6.QtSvg import QSvgRenderer
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from app.looked_at import LookedAt
from app.theme import LIGHT, apply_theme
from app.widgets.cursor import AngleCursor
from app.widgets.strip import (
    GATES,
    LINE_CURRENTS,
    LINE_VOLTAGES,
    LINK_CURRENT,
    PHASE_VOLTAGES,
    POSITION,
)
from app.widgets.strip_clipboard import copy_menu, copy_strips
from app.widgets.strip_export import strip_svg
from app.widgets.strips import Strips
from tests.app.solved import solved, with_load

Key, Modifier = Qt.Key, Qt.KeyboardModifier


@pytest.fixture
def strips(qtbot: QtBot, qapp: QApplication) -> Strips:
    apply_theme(qapp, "light")
    strips = Strips(AngleCursor())
    qtbot.addWidget(strips)
    strips.resize(704, 712)
    strips.show_picture(solved())
    strips.show()
    strips.activateWindow()
    qtbot.waitActive(strips)
    strips.setFocus()
    return strips


def place(strips: Strips, angle_deg: float, key: str = LINE_CURRENTS) -> QPoint:
    plot = strips.layout_of_strips.rooms[key].plot
    assert plot is not None
    return QPointF(strips.layout_of_strips.axis.x(angle_deg), plot.center().y()).toPoint()


def heading(strips: Strips, key: str) -> QPoint:
    return (strips.layout_of_strips.rooms[key].whole.topLeft() + QPointF(20, 8)).toPoint()


def colours(image: QImage) -> set[str]:
    return {
        image.pixelColor(x, y).name()
        for x in range(0, image.width(), 2)
        for y in range(0, image.height(), 1)
    }


# Cursor ---------------------------------------------------------------------------------


def test_arrow_keys_move_the_cursor_by_one_and_by_ten_degrees(qtbot: QtBot, strips: Strips) -> None:
    strips.angle_cursor.move_to(30.0)
    qtbot.keyClick(strips, Key.Key_Right)
    assert strips.angle_cursor.angle_deg == 31.0
    qtbot.keyClick(strips, Key.Key_Left, Modifier.ShiftModifier)
    assert strips.angle_cursor.angle_deg == 21.0
    qtbot.keyClick(strips, Key.Key_End)
    qtbot.keyClick(strips, Key.Key_Right)
    assert strips.angle_cursor.angle_deg == 1.0


def test_ctrl_and_arrow_go_from_event_to_event_around_the_period(
    qtbot: QtBot, strips: Strips
) -> None:
    assert strips.picture is not None
    angles = sorted({event.angle_deg for event in strips.picture.stress.events})
    strips.angle_cursor.move_to(0.0)
    qtbot.keyClick(strips, Key.Key_Right, Modifier.ControlModifier)
    assert strips.angle_cursor.angle_deg == pytest.approx(angles[1])
    qtbot.keyClick(strips, Key.Key_Left, Modifier.ControlModifier)
    qtbot.keyClick(strips, Key.Key_Left, Modifier.ControlModifier)
    assert strips.angle_cursor.angle_deg == pytest.approx(angles[-1])


def test_dragging_moves_the_cursor_and_stops_at_the_ends(qtbot: QtBot, strips: Strips) -> None:
    qtbot.mousePress(strips, Qt.MouseButton.LeftButton, pos=place(strips, 90.0))
    assert strips.angle_cursor.angle_deg == pytest.approx(90.0, abs=0.5)
    qtbot.mouseMove(strips, place(strips, 200.0))
    assert strips.angle_cursor.angle_deg == pytest.approx(200.0, abs=0.5)
    qtbot.mouseMove(strips, QPoint(strips.width() + 50, 300))
    assert strips.angle_cursor.angle_deg == 360.0


def test_the_read_out_gives_degrees_and_time(strips: Strips) -> None:
    strips.angle_cursor.move_to(180.0)
    assert strips.place_in_words() == "180.0°  10.0 ms"


def test_the_text_summary_reads_every_curve_at_the_cursor(strips: Strips) -> None:
    assert strips.picture is not None
    strips.angle_cursor.move_to(137.0)
    summary = strips.in_words()
    waveforms = strips.picture.waveforms
    current_A = float(np.interp(137.0, waveforms.angle_deg, waveforms.line_current_A[0]))
    assert f"A {current_A:.2f} A" in summary
    assert "AB −540 V" in summary
    assert strips.conducting_at_cursor() == "T2 T3 D4"


# Folding --------------------------------------------------------------------------------


def test_a_click_on_a_heading_folds_and_opens_the_strip(qtbot: QtBot, strips: Strips) -> None:
    before = strips.angle_cursor.angle_deg
    qtbot.mouseClick(strips, Qt.MouseButton.LeftButton, pos=heading(strips, LINE_VOLTAGES))
    assert strips.is_folded(LINE_VOLTAGES)
    assert strips.layout_of_strips.rooms[LINE_VOLTAGES].whole.height() == 20
    qtbot.mouseClick(strips, Qt.MouseButton.LeftButton, pos=heading(strips, LINE_VOLTAGES))
    assert not strips.is_folded(LINE_VOLTAGES)
    assert strips.angle_cursor.angle_deg == before


def test_space_folds_the_strip_that_the_arrows_chose(qtbot: QtBot, strips: Strips) -> None:
    assert strips.current == GATES
    qtbot.keyClick(strips, Key.Key_Down)
    qtbot.keyClick(strips, Key.Key_Space)
    assert strips.is_folded(PHASE_VOLTAGES)
    qtbot.keyClick(strips, Key.Key_Space)
    assert not strips.is_folded(PHASE_VOLTAGES)


def test_a_folded_strip_gives_its_height_to_the_others(qtbot: QtBot, strips: Strips) -> None:
    before = strips.layout_of_strips.rooms[LINK_CURRENT].whole.height()
    strips.fold(LINE_CURRENTS)
    assert strips.layout_of_strips.rooms[LINK_CURRENT].whole.height() > before


# Copies ---------------------------------------------------------------------------------


def test_a_copy_holds_picture_vectors_and_table_side_by_side(strips: Strips) -> None:
    copy_strips(strips, LINE_CURRENTS)
    data = QGuiApplication.clipboard().mimeData()
    assert not QImage(data.imageData()).isNull()
    assert QSvgRenderer(data.data("image/svg+xml")).isValid()
    rows = list(csv.reader(io.StringIO(data.text())))
    assert rows[0] == [
        "angle_deg",
        "time_s",
        "line_current_A_A",
        "line_current_B_A",
        "line_current_C_A",
    ]
    assert strips.picture is not None
    table = np.array(rows[1:], dtype=float)
    assert np.array_equal(table[:, 2:].T, strips.picture.waveforms.line_current_A)
    assert table[-1, 1] == pytest.approx(0.02)


def test_the_menu_copies_in_one_format_alone(strips: Strips) -> None:
    menu = copy_menu(strips)
    action = next(each for each in menu.actions() if each.text() == "Copy All Strips as CSV")
    action.trigger()
    data = QGuiApplication.clipboard().mimeData()
    assert not data.hasImage()
    heads = data.text().splitlines()[0].split(",")
    assert {"T1_gate", "phase_voltage_A_V", "T1_voltage_V", "link_current_A"} <= set(heads)


def test_a_strip_is_drawn_as_vectors_with_its_names_as_text(qapp: QApplication) -> None:
    picture = solved()
    svg = strip_svg(picture.waveforms, LIGHT, 600, 300, (LINE_CURRENTS, POSITION)).decode()
    assert "<image" not in svg
    assert "Line currents" in svg
    assert "Position T1" in svg
    assert "Link current" not in svg
    renderer = QSvgRenderer(QByteArray(svg.encode()))
    assert renderer.isValid()
    assert renderer.viewBoxF().width() == 600.0


# Other states ---------------------------------------------------------------------------


def test_stale_curves_lose_their_colour_and_say_so(strips: Strips) -> None:
    phase_colours = {colour.name() for colour in LIGHT.phase}
    assert phase_colours <= colours(strips.grab().toImage())
    strips.show_stale()
    shown = colours(strips.grab().toImage())
    assert not phase_colours & shown
    assert LIGHT.stale.name() in shown
    assert strips.in_words().startswith("stale")


def test_a_new_picture_ends_the_stale_state(strips: Strips) -> None:
    strips.show_stale()
    strips.show_picture(solved())
    assert not strips.sheet.stale


def test_without_a_result_there_are_axes_and_what_is_needed(strips: Strips) -> None:
    strips.show_incomplete("Needs R, L")
    image = strips.grab().toImage()
    assert image.pixelColor(place(strips, 90.0, GATES)) == QColor(LIGHT.band)
    assert strips.in_words() == "Needs R, L"
    copy_strips(strips)
    assert strips.picture is None


def test_a_theme_change_repaints_the_curves(qapp: QApplication, strips: Strips) -> None:
    light = colours(strips.grab().toImage())
    apply_theme(qapp, "dark")
    assert light.isdisjoint({strips.grab().toImage().pixelColor(70, 150).name()})


def test_the_position_looked_at_has_its_dead_interval_shaded(strips: Strips) -> None:
    dead = place(strips, 150.0, POSITION) + QPoint(0, -30)
    assert strips.grab().toImage().pixelColor(dead) == LIGHT.shade
    strips.show_picture(solved(looked_at=LookedAt(position=2)))
    assert strips.grab().toImage().pixelColor(dead) != LIGHT.shade


@pytest.mark.parametrize(
    "load",
    [
        {"resistance_ohm": 9.0, "inductance_H": 0.0},
        {"resistance_ohm": 0.05, "inductance_H": 0.5},
        {"connection": "delta", "resistance_ohm": (9.0, 1.0, 30.0), "inductance_H": 0.01},
    ],
)
def test_any_load_can_be_drawn(strips: Strips, load: dict[str, object]) -> None:
    strips.show_picture(solved(with_load(**load)))
    assert not strips.grab().isNull()
    assert strips.conducting_at_cursor()
