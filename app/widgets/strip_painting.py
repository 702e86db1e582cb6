"""Draws the plots of the strips: steps, intervals, curves and scales.

Nothing here depends on a widget, so that the window, a picture file and the report look alike.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
import shiboken6
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen, QPolygonF

from app.theme import AXIS, LINE, PHASE_DASHES, Theme, font, line_pen
from app.widgets.strip import GATES, POSITION, Array, Line, Strip
from app.widgets.strip_layout import AngleAxis, StripRoom
from app.widgets.strip_scale import Figures, Scale, figures_for, roundest, ticks

RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter

TEXT_ROW = 12.0
LOW_LANE = 54.0
"""Height below which a scale has room for two figures, 0 and one more."""
DIODE_DASH = (5.0, 3.0)
HATCH_APART = 7.0
FEW = 40
"""So few points are not worth thinning."""
_STRAIGHT_PX = 0.1
_THINNINGS = 4
_void_pointer: Any = (
    shiboken6.VoidPtr
)  # its declared types leave out the size and the right to write


@dataclass(frozen=True, slots=True)
class Interval:
    """A part of the period of the position looked at: shaded, hatched or cross-hatched."""

    name: str
    start_deg: float
    end_deg: float


@dataclass(frozen=True, slots=True, eq=False)
class Sheet:
    """What all strips of one picture have in common."""

    look: Theme
    axis: AngleAxis
    angle_deg: Array
    scales: Mapping[str, tuple[Scale, ...]]
    """By strip, a scale each lane."""
    intervals: Sequence[Interval] = ()
    """Drawn on the strip of the position looked at."""
    stale: bool = False

    def colour(self, line: Line) -> QColor:
        """The colour of a name or a line."""
        if self.stale:
            return self.look.stale
        if line == "other":
            return self.look.second_ink
        if line in ("position", "diode"):
            return self.look.ink
        return self.look.phase["ABC".index(line)]

    def pen(self, line: Line) -> QPen:
        dashes = PHASE_DASHES["ABC".index(line)] if line in "ABC" else ()
        return line_pen(self.colour(line), LINE, DIODE_DASH if line == "diode" else dashes)


# Lanes ------------------------------------------------------------------------------------


def lane_rooms(plot: QRectF, strip: Strip) -> list[QRectF]:
    """The plot shared equally among the lanes, top to bottom."""
    height = plot.height() / len(strip.lanes)
    return [
        QRectF(plot.left(), plot.top() + number * height, plot.width(), height)
        for number in range(len(strip.lanes))
    ]


def y_of(room: QRectF, scale: Scale, value: float) -> float:
    return room.bottom() - (value - scale.low) / scale.span * room.height()


def thinned(x: Array, y: Array) -> tuple[Array, Array]:
    """Without the points that lie on the line between their neighbours to a part of a pixel."""
    level = np.concatenate([[False], (y[1:-1] == y[:-2]) & (y[1:-1] == y[2:]), [False]])
    x, y = x[~level], y[~level]
    for _ in range(_THINNINGS):
        if len(x) < FEW:
            break
        dx, dy = x[2::2] - x[:-2:2], y[2::2] - y[:-2:2]
        off = np.abs(dx * (y[1:-1:2] - y[:-2:2]) - dy * (x[1:-1:2] - x[:-2:2]))
        keep = np.ones(len(x), dtype=bool)
        keep[1:-1:2] = off > _STRAIGHT_PX * np.hypot(dx, dy)
        x, y = x[keep], y[keep]
    return x, y


def polygon_of(x: Array, y: Array) -> QPolygonF:
    """The points as Qt wants them, written into Qt's memory at once: a loop costs ten times."""
    polygon = QPolygonF()
    polygon.resize(len(x))
    memory = _void_pointer(polygon.data(), len(x) * 16, True)
    points = np.frombuffer(memory, dtype=np.float64).reshape(len(x), 2)
    points[:, 0] = x
    points[:, 1] = y
    return polygon


# One strip --------------------------------------------------------------------------------


def paint_strip(painter: QPainter, sheet: Sheet, strip: Strip, room: StripRoom) -> None:
    """Everything of an open strip but its heading and the values at the cursor."""
    plot = room.plot
    if plot is None:
        return
    paint_steps(painter, sheet, plot)
    if not strip.lanes:
        return
    if strip.key == POSITION:
        for interval in sheet.intervals:
            _paint_interval(painter, sheet, plot, interval)
    if strip.key == GATES:
        _paint_gates(painter, sheet, strip, plot)
    else:
        _paint_lanes(painter, sheet, strip, plot)


def paint_steps(painter: QPainter, sheet: Sheet, plot: QRectF) -> None:
    """The ground in six steps of 60°."""
    painter.fillRect(plot, sheet.look.panel)
    for start_deg in (60.0, 180.0, 300.0):
        painter.fillRect(sheet.axis.rect(start_deg, start_deg + 60.0, plot), sheet.look.band)


def _paint_gates(painter: QPainter, sheet: Sheet, strip: Strip, plot: QRectF) -> None:
    for lane_room, lane in zip(lane_rooms(plot, strip), strip.lanes, strict=True):
        curve = lane.curves[0]
        bar = lane_room.adjusted(0.0, 3.0, 0.0, -3.0)
        for start_deg, end_deg in intervals_on(sheet.angle_deg, curve.values):
            painter.fillRect(sheet.axis.rect(start_deg, end_deg, bar), sheet.colour(curve.line))


def intervals_on(angle_deg: Array, values: Array) -> list[tuple[float, float]]:
    """Where a gate is on, as pairs of angles."""
    on = np.concatenate([[0.0], values > 0.5, [0.0]])
    starts, ends = np.flatnonzero(np.diff(on) > 0), np.flatnonzero(np.diff(on) < 0) - 1
    return [(float(angle_deg[i]), float(angle_deg[j])) for i, j in zip(starts, ends, strict=True)]


def _paint_lanes(painter: QPainter, sheet: Sheet, strip: Strip, plot: QRectF) -> None:
    rooms, scales = lane_rooms(plot, strip), sheet.scales[strip.key]
    for number, (room, lane, scale) in enumerate(zip(rooms, strip.lanes, scales, strict=True)):
        zero = y_of(room, scale, 0.0)
        painter.setPen(line_pen(sheet.look.field_edge, 1.0))
        painter.drawLine(QPointF(plot.left(), zero), QPointF(plot.right(), zero))
        with_unit = number == 0 or strip.lanes[number - 1].unit != lane.unit
        _paint_scale(painter, sheet, room, figures_for(scale, lane.unit), scale, with_unit)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    x = sheet.axis.left + sheet.angle_deg * ((sheet.axis.right - sheet.axis.left) / 360.0)
    for room, lane, scale in zip(rooms, strip.lanes, scales, strict=True):
        for curve in lane.curves:
            y = room.bottom() - (curve.values - scale.low) * (room.height() / scale.span)
            painter.setPen(sheet.pen(curve.line))
            painter.drawPolyline(polygon_of(*thinned(x, y)))
    painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)


def _paint_scale(
    painter: QPainter, sheet: Sheet, room: QRectF, figures: Figures, scale: Scale, with_unit: bool
) -> None:
    """Round figures at the left; the unit stands with the uppermost."""
    low_lane = room.height() < LOW_LANE
    marks = [0.0, roundest(scale)] if low_lane else ticks(scale, room.height(), 1.4 * TEXT_ROW)
    painter.setFont(font(AXIS))
    painter.setPen(sheet.look.second_ink)
    for value in marks:
        y = y_of(room, scale, value)
        unit = f" {figures.unit}" if with_unit and value == marks[-1] else ""
        place = QRectF(0.0, y - 8.0, room.left() - 6.0, 16.0)
        painter.drawText(place, RIGHT, figures.round_of(value) + unit)
        painter.drawLine(QPointF(room.left() - 4.0, y), QPointF(room.left(), y))


# Intervals of the position looked at ------------------------------------------------------


def _paint_interval(painter: QPainter, sheet: Sheet, plot: QRectF, interval: Interval) -> None:
    for start_deg, end_deg in within_period(interval.start_deg, interval.end_deg):
        room = sheet.axis.rect(start_deg, end_deg, plot)
        fill_interval(painter, sheet, room, interval.name)


def fill_interval(painter: QPainter, sheet: Sheet, room: QRectF, name: str) -> None:
    """Shade a dead interval, hatch a freewheel, hatch an overrun crosswise."""
    if name == "dead":
        painter.fillRect(room, sheet.look.shade)
        return
    painter.setPen(line_pen(sheet.look.field_edge, 1.0))
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    for rising in (True, False) if name == "overrun" else (True,):
        _hatch(painter, room, rising)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)


def within_period(start_deg: float, end_deg: float) -> list[tuple[float, float]]:
    """An interval cut at 360° and brought back to 0°."""
    start = start_deg % 360.0
    end = start + (end_deg - start_deg)
    if end <= start:
        return []
    return [(start, end)] if end <= 360.0 else [(start, 360.0), (0.0, end - 360.0)]


def _hatch(painter: QPainter, room: QRectF, rising: bool) -> None:
    """Lines at 45°, each cut to the room: a pattern brush is no vector in every file."""
    width, height = room.width(), room.height()
    for number in range(int((width + height) / HATCH_APART) + 1):
        start = (number + 0.5) * HATCH_APART - height
        low, high = max(0.0, -start), min(height, width - start)
        if high <= low:
            continue
        ends = [(start + t, height - t if rising else t) for t in (low, high)]
        a, b = (QPointF(room.left() + x, room.top() + y) for x, y in ends)
        painter.drawLine(a, b)
