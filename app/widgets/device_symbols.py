"""Symbols of the switches and of the load, as in IEC 60617, drawn with the painter's pen."""

from __future__ import annotations

from typing import Literal

from PySide6.QtCore import QPointF, QRectF
from PySide6.QtGui import QPainter

SwitchKind = Literal["thyristor", "igbt", "contact"]
"""`contact` where no candidate says what the switch is."""

HALF = 8.0


def draw_lines(painter: QPainter, *points: tuple[float, float]) -> None:
    """One line through all points."""
    painter.drawPolyline([QPointF(x, y) for x, y in points])


def draw_diode(painter: QPainter, x: float, y: float) -> None:
    """Conducts upwards."""
    draw_lines(painter, (x - 7, y + HALF), (x + 7, y + HALF), (x, y - HALF), (x - 7, y + HALF))
    draw_lines(painter, (x - 7, y - HALF), (x + 7, y - HALF))
    draw_lines(painter, (x, y + HALF), (x, y - HALF))


def draw_switch(painter: QPainter, kind: SwitchKind, x: float, y: float) -> None:
    """Conducts downwards, from `HALF` above to `HALF` below its centre."""
    drawing = {"thyristor": _thyristor, "igbt": _igbt, "contact": _contact}
    drawing[kind](painter, x, y)


def _thyristor(painter: QPainter, x: float, y: float) -> None:
    """Reverse blocking triode thyristor, its gate on the side of the cathode."""
    draw_lines(painter, (x - 7, y - HALF), (x + 7, y - HALF), (x, y + HALF), (x - 7, y - HALF))
    draw_lines(painter, (x - 7, y + HALF), (x + 7, y + HALF))
    draw_lines(painter, (x, y - HALF), (x, y + HALF))
    draw_lines(painter, (x - 1, y + HALF), (x - 7, y + HALF + 6), (x - 10, y + HALF + 6))


def _igbt(painter: QPainter, x: float, y: float) -> None:
    """Insulated-gate bipolar transistor, N-channel: collector above, emitter below."""
    draw_lines(painter, (x - 6, y - 7), (x - 6, y + 7))
    draw_lines(painter, (x - 10, y - 5), (x - 10, y + 5))
    draw_lines(painter, (x - 10, y + 5), (x - 14, y + 5))
    draw_lines(painter, (x - 6, y - 3), (x, y - HALF))
    draw_lines(painter, (x - 6, y + 3), (x, y + HALF))
    draw_lines(painter, (x - 4.5, y + 7.5), (x - 0.5, y + 7.6), (x - 1.8, y + 3.8))


def _contact(painter: QPainter, x: float, y: float) -> None:
    """Make contact."""
    draw_lines(painter, (x, y + HALF), (x - 7, y - HALF + 1))


def draw_branch(
    painter: QPainter, start: QPointF, end: QPointF, resistor: bool, coil: bool
) -> None:
    """A load branch from one point to another, level or upright."""
    level = abs(end.x() - start.x()) >= abs(end.y() - start.y())
    length = end.x() - start.x() if level else end.y() - start.y()
    painter.save()
    painter.translate(start)
    if not level:
        painter.rotate(90.0)
    _level_branch(painter, length, resistor, coil)
    painter.restore()


def _level_branch(painter: QPainter, length: float, resistor: bool, coil: bool) -> None:
    body = (14.0 if resistor else 0.0) + (15.0 if coil else 0.0)
    gap = 4.0 if resistor and coil and length > 36.0 else 0.0
    left = (length - body - gap) / 2.0
    draw_lines(painter, (0, 0), (left, 0))
    if resistor:
        painter.drawRect(QRectF(left, -4.0, 14.0, 8.0))
        left += 14.0
        draw_lines(painter, (left, 0), (left + gap, 0))
        left += gap
    if coil:
        for number in range(3):
            painter.drawArc(QRectF(left + 5.0 * number, -2.5, 5.0, 5.0), 0, 180 * 16)
        left += 15.0
    draw_lines(painter, (left, 0), (length, 0))


def draw_arrow(painter: QPainter, tip: QPointF, rightwards: bool) -> None:
    """An open arrowhead on a level line."""
    back = -5.0 if rightwards else 5.0
    painter.drawPolyline([tip + QPointF(back, -3.5), tip, tip + QPointF(back, 3.5)])
