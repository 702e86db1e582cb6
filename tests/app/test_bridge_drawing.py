"""The bridge drawing: the current's path, verdicts at the positions, looking at one."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from app.looked_at import LookedAt
from app.position_verdicts import NONE, position_verdicts
from app.theme import LIGHT, apply_theme
from app.widgets.bridge_drawing import BridgeDrawing
from app.widgets.bridge_plan import BridgePlan, currents_at
from app.widgets.cursor import AngleCursor
from tests.app.assessments import BLOCKING, DEAD_INTERVAL, JUNCTION, MISSING, WAITING
from tests.app.solved import solved, with_load

UNLIKE = with_load(resistance_ohm=(9.0, 12.0, 5.0), inductance_H=0.012)


@pytest.fixture
def drawing(qtbot: QtBot, qapp: QApplication) -> BridgeDrawing:
    apply_theme(qapp, "light")
    drawing = BridgeDrawing(AngleCursor())
    qtbot.addWidget(drawing)
    drawing.resize(296, 320)
    drawing.show_picture(solved())
    drawing.show()
    return drawing


def asked(qtbot: QtBot, drawing: BridgeDrawing, key: Qt.Key) -> int:
    with qtbot.waitSignal(drawing.position_asked) as signal:
        qtbot.keyClick(drawing, key)
    position: int = signal.args[0]
    return position


# The current's path ---------------------------------------------------------------------


@pytest.mark.parametrize("angle_deg", [10.0, 137.0, 200.0, 359.0])
def test_currents_meet_kirchhoffs_law_at_every_node(angle_deg: float) -> None:
    picture = solved(UNLIKE)
    currents = currents_at(picture.waveforms, angle_deg)
    for leg, (upper, lower) in enumerate(((0, 3), (2, 5), (4, 1))):
        out = currents.through(upper) - currents.through(lower)
        assert out == pytest.approx(currents.line[leg], abs=1e-6)
    assert currents.upper_rail(0) == pytest.approx(currents.lower_rail(0), abs=1e-6)


def test_the_summary_names_what_conducts_at_the_cursor(drawing: BridgeDrawing) -> None:
    drawing._angle_cursor.move_to(137.0)
    conducting = drawing.in_words().splitlines()[1]
    assert [part.split()[0] for part in conducting.split(", ")] == ["T2", "T3", "D4"]


def test_a_line_that_carries_current_is_heavier(drawing: BridgeDrawing) -> None:
    drawing._angle_cursor.move_to(137.0)
    image = drawing.grab().toImage()
    plan = drawing.plan

    def ink_across(leg: int) -> int:
        """Pixels in ink across the lead above a leg's upper position."""
        x, y = int(plan.leg_x(leg)), int(plan.top) + 12
        row = [image.pixelColor(x + dx, y) for dx in range(-4, 5)]
        return sum(colour.lightness() < 60 for colour in row)

    assert ink_across(1) >= 2
    assert ink_across(0) == 0


# Verdicts -------------------------------------------------------------------------------


def test_alike_positions_share_the_verdict_of_the_one_that_is_named() -> None:
    picture = solved(with_load(resistance_ohm=9.0, inductance_H=0.012), BLOCKING, JUNCTION)
    assert position_verdicts(picture) == ("undersized",) * 6


def test_unlike_positions_show_only_what_is_known_of_them() -> None:
    verdicts = position_verdicts(solved(UNLIKE, BLOCKING, JUNCTION))
    assert verdicts == (None, None, "undersized", None, None, None)


def test_what_no_position_is_named_for_holds_at_each() -> None:
    assert position_verdicts(solved(UNLIKE, BLOCKING, MISSING)) == ("not assessed",) * 6


def test_what_waits_for_something_hides_no_verdict() -> None:
    assert position_verdicts(solved(UNLIKE, BLOCKING, WAITING)) == ("adequate",) * 6


def test_without_a_candidate_there_is_no_mark() -> None:
    assert position_verdicts(solved()) == NONE


def test_marks_are_drawn_and_go_when_stale(drawing: BridgeDrawing) -> None:
    drawing.show_picture(solved(UNLIKE, BLOCKING, DEAD_INTERVAL))
    plan, tight = drawing.plan, LIGHT.verdict["tight"]

    def is_marked() -> bool:
        room = plan.room(0).toRect()
        image = drawing.grab(room).toImage()
        columns, rows = range(image.width()), range(image.height())
        return any(image.pixelColor(x, y) == tight for x in columns for y in rows)

    assert is_marked()
    drawing.show_stale()
    assert not is_marked()
    assert "tight" not in drawing.in_words()


# Looking at a position ------------------------------------------------------------------


@pytest.mark.parametrize("position", range(6))
def test_a_click_on_a_position_asks_for_it(
    qtbot: QtBot, drawing: BridgeDrawing, position: int
) -> None:
    with qtbot.waitSignal(drawing.position_asked) as signal:
        where = drawing.plan.centre(position).toPoint()
        qtbot.mouseClick(drawing, Qt.MouseButton.LeftButton, pos=where)
    assert signal.args == [position]


def test_digits_and_arrows_ask_for_positions(qtbot: QtBot, drawing: BridgeDrawing) -> None:
    assert asked(qtbot, drawing, Qt.Key.Key_4) == 3
    assert asked(qtbot, drawing, Qt.Key.Key_Right) == 2
    assert asked(qtbot, drawing, Qt.Key.Key_Left) == 4
    assert asked(qtbot, drawing, Qt.Key.Key_Down) == 3
    drawing.show_picture(solved(looked_at=LookedAt(position=1)))
    assert asked(qtbot, drawing, Qt.Key.Key_Up) == 4


@pytest.mark.parametrize("size", [(296, 320), (220, 250), (212, 190)])
def test_no_position_overlaps_another(size: tuple[int, int]) -> None:
    plan = BridgePlan(*map(float, size))
    rooms = [plan.room(position) for position in range(6)]
    overlaps = [
        (a, b) for a in range(6) for b in range(a) if rooms[a].intersected(rooms[b]).width() > 4.0
    ]
    assert not overlaps
    assert all(room.left() >= 0 and room.right() <= plan.load_x for room in rooms)


@pytest.mark.parametrize("connection", ["star", "delta"])
def test_every_load_can_be_drawn(drawing: BridgeDrawing, connection: str) -> None:
    drawing.show_picture(solved(with_load(connection, resistance_ohm=9.0, inductance_H=0.0)))
    assert not drawing.grab().isNull()
    drawing.show_incomplete()
    assert not drawing.grab().isNull()
    assert drawing.in_words() == ""
