"""Draws what is written around the plots of the strips: headings, names, values, angles."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, QSizeF, Qt
from PySide6.QtGui import QFontMetricsF, QPainter, QPolygonF

from app.theme import AXIS, font, line_pen
from app.widgets.strip import GATES, POSITION, Curve, Strip, value_at
from app.widgets.strip_layout import FOLDED, HEADING, StripRoom
from app.widgets.strip_painting import TEXT_ROW, Sheet, fill_interval, lane_rooms, y_of
from app.widgets.strip_scale import Figures, figures_for

LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
MIDDLE = Qt.AlignmentFlag.AlignCenter

LEADER, SAMPLE, WORDS_APART = 8.0, 18.0, 12.0
NO_LENGTH_DEG = 0.05
BESIDE_PLOT = 50.0
"""What triangle and name need side by side where they stand beside the plot, not above it."""


def paint_heading(
    painter: QPainter, sheet: Sheet, strip: Strip, room: StripRoom, accent: bool = False
) -> None:
    """Triangle, name, rms and peak; 'stale' where the curves are older than the entries.

    `accent` marks the strip that the keyboard works on. On the strip of the position looked at
    the intervals are named at the right.
    """
    folded = room.plot is None
    line = QRectF(room.whole.topLeft(), QSizeF(room.whole.width(), FOLDED if folded else HEADING))
    look = sheet.look
    painter.setPen(look.accent if accent else look.stale if sheet.stale else look.ink)
    _paint_triangle(painter, line, folded)
    beside_plot = strip.key == GATES and not folded
    if beside_plot and sheet.axis.left < BESIDE_PLOT:
        line.translate(-12.0, HEADING - 4.0)
    line.setLeft(_paint_title(painter, line, strip.title, accent))
    painter.setFont(font(AXIS))
    painter.setPen(look.stale if sheet.stale else look.second_ink)
    if beside_plot:
        line.translate(14.0 - line.left(), HEADING)
    line.setLeft(_paint_words(painter, line, "stale" if sheet.stale else ""))
    line.setLeft(_paint_words(painter, line, strip.figures))
    if strip.key == POSITION and not folded:
        _paint_interval_names(painter, sheet, line)


def _paint_title(painter: QPainter, line: QRectF, title: str, accent: bool) -> float:
    """Returns where the words after it begin."""
    painter.setFont(font(AXIS, bold=True))
    name = line.adjusted(14.0, 0.0, 0.0, 0.0)
    width = painter.fontMetrics().horizontalAdvance(title)
    if accent:
        painter.drawLine(name.bottomLeft(), name.bottomLeft() + QPointF(width, 0.0))
    painter.drawText(name, LEFT, title)
    return name.left() + width + WORDS_APART


def _paint_words(painter: QPainter, line: QRectF, text: str) -> float:
    """Returns where the next words begin."""
    if not text:
        return line.left()
    painter.drawText(line, LEFT, text)
    return line.left() + painter.fontMetrics().horizontalAdvance(text) + WORDS_APART


def _paint_interval_names(painter: QPainter, sheet: Sheet, line: QRectF) -> None:
    """Names and lengths of the intervals, each beside a sample of its filling, where they fit."""
    metrics = painter.fontMetrics()
    right = sheet.axis.right
    for interval in reversed(sheet.intervals):
        length_deg = interval.end_deg - interval.start_deg
        text = f"{interval.name} {length_deg:.1f}°"
        left = right - metrics.horizontalAdvance(text) - SAMPLE - 4.0
        if length_deg < NO_LENGTH_DEG or left < line.left():
            continue
        top = line.top() + 3.0
        fill_interval(painter, sheet, QRectF(left, top, SAMPLE, HEADING - 6.0), interval.name)
        painter.setPen(sheet.look.stale if sheet.stale else sheet.look.second_ink)
        painter.drawText(QRectF(left + SAMPLE + 4.0, top - 3.0, 120.0, HEADING), LEFT, text)
        right = left - 12.0


def _paint_triangle(painter: QPainter, line: QRectF, folded: bool) -> None:
    """Points right when folded, down when open."""
    x, y = line.left() + 6.0, line.center().y()
    corners = (
        [(-2.5, -4.0), (2.5, 0.0), (-2.5, 4.0)] if folded else [(-4, -2.5), (4, -2.5), (0, 2.5)]
    )
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.setBrush(painter.pen().color())
    painter.drawPolygon(QPolygonF([QPointF(x + dx, y + dy) for dx, dy in corners]))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)


@dataclass(frozen=True, slots=True, eq=False)
class EndLabel:
    """The name of a curve at the right end of its line."""

    curve: Curve
    figures: Figures
    line_y: float
    text_y: float


def end_labels(sheet: Sheet, strip: Strip, plot: QRectF) -> list[EndLabel]:
    """Names beside the ends of their lines, moved apart where lines end together."""
    if not strip.lanes:
        return []
    if strip.key == GATES:
        rooms = lane_rooms(plot, strip)
        none = Figures("", 1.0)
        return [
            EndLabel(lane.curves[0], none, room.center().y(), room.center().y())
            for room, lane in zip(rooms, strip.lanes, strict=True)
        ]
    ends = []
    scales = sheet.scales[strip.key]
    for room, lane, scale in zip(lane_rooms(plot, strip), strip.lanes, scales, strict=True):
        figures = figures_for(scale, lane.unit)
        ends += [
            (y_of(room, scale, float(curve.values[-1])), curve, figures) for curve in lane.curves
        ]
    ends.sort(key=lambda end: end[0])
    places = moved_apart([end[0] for end in ends], plot.top() + 6.0, plot.bottom() - 6.0)
    return [
        EndLabel(curve, figures, y, place)
        for (y, curve, figures), place in zip(ends, places, strict=True)
    ]


def moved_apart(wanted: Sequence[float], top: float, bottom: float) -> list[float]:
    """Places in rising order, a row of text apart, as near to the wanted ones as the room lets."""
    places = []
    lowest = top
    for y in wanted:
        places.append(max(y, lowest))
        lowest = places[-1] + TEXT_ROW
    highest = bottom
    for number in range(len(places) - 1, -1, -1):
        places[number] = min(places[number], highest)
        highest = places[number] - TEXT_ROW
    return places


def paint_names(painter: QPainter, sheet: Sheet, labels: Sequence[EndLabel]) -> None:
    """Each name with a leader from the end of its line."""
    painter.setFont(font(AXIS))
    x = sheet.axis.right
    for label in labels:
        painter.setPen(line_pen(sheet.colour(label.curve.line), 1.0))
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.drawLine(QPointF(x + 1.0, label.line_y), QPointF(x + LEADER - 1.0, label.text_y))
        painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)
        painter.drawText(QRectF(x + LEADER, label.text_y - 8.0, 40.0, 16.0), LEFT, label.curve.name)


def paint_values(
    painter: QPainter, sheet: Sheet, labels: Sequence[EndLabel], right: float, cursor_deg: float
) -> None:
    """The value of each curve at the cursor, at the right of its name."""
    painter.setFont(font(AXIS))
    for label in labels:
        painter.setPen(sheet.look.stale if sheet.stale else sheet.look.ink)
        value = value_at(sheet.angle_deg, label.curve.values, cursor_deg)
        room = QRectF(sheet.axis.right, label.text_y - 8.0, right - sheet.axis.right, 16.0)
        painter.drawText(room, RIGHT, label.figures.of(value))


def angle_places(sheet: Sheet, foot: QRectF) -> dict[int, QRectF]:
    """Where 0°, 60° … 360° stand below the last strip."""
    return {
        angle_deg: QRectF(sheet.axis.x(angle_deg) - 20.0, foot.top() + 4.0, 40.0, 14.0)
        for angle_deg in range(0, 361, 60)
    }


def paint_angles(painter: QPainter, sheet: Sheet, foot: QRectF) -> None:
    """The angles of the steps."""
    painter.setFont(font(AXIS))
    painter.setPen(sheet.look.second_ink)
    for angle_deg, room in angle_places(sheet, foot).items():
        x = room.center().x()
        painter.drawLine(QPointF(x, foot.top()), QPointF(x, foot.top() + 3.0))
        painter.drawText(room, MIDDLE, f"{angle_deg}°")


def fits(names: str, width: float) -> bool:
    """Whether the names of a part have room above it."""
    return QFontMetricsF(font(AXIS)).horizontalAdvance(names) + 6.0 < width


def paint_conduction(
    painter: QPainter, sheet: Sheet, head: QRectF, parts: Sequence[tuple[float, float, str]]
) -> None:
    """The devices that conduct, above the steps; a part too narrow for its name is a tick."""
    painter.setFont(font(AXIS))
    for start_deg, end_deg, names in parts:
        room = sheet.axis.rect(start_deg, end_deg, head)
        painter.setPen(sheet.look.rule)
        painter.drawLine(QPointF(room.left(), head.top() + 3), QPointF(room.left(), head.bottom()))
        painter.setPen(sheet.look.stale if sheet.stale else sheet.look.second_ink)
        if fits(names, room.width()):
            painter.drawText(room, MIDDLE, names)
        else:
            painter.drawLine(
                QPointF(room.center().x(), head.bottom() - 6.0),
                QPointF(room.center().x(), head.bottom() - 1.0),
            )
