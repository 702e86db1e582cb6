"""Intervals after gate-off on one time axis, to scale."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import floor, log10
from typing import Literal

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QBrush, QPainter, QPaintEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.theme import (
    AXIS,
    TABLE,
    dead_brush,
    font,
    freewheel_brush,
    line_pen,
    overrun_brush,
    theme,
)
from app.verdict_sentence import rounded
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from engine.checks import Verdict

LANE, HEAD, MARGIN = 26, 8, 12
NAMES, NARROW_NAMES = 208, 160
FIGURES = 176
"""Room at the right for the length of each interval, and for a verdict."""
TICKS = 5

LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter

Pattern = Literal["dead", "freewheel", "overrun", "reversed", "needed"]


@dataclass(frozen=True, slots=True)
class Interval:
    """From one time after gate-off to another, in seconds."""

    start_s: float
    end_s: float
    pattern: Pattern


@dataclass(frozen=True, slots=True)
class Lane:
    """One line of the bar: intervals under a name; `verdict` where one was made."""

    name: str
    intervals: tuple[Interval, ...]
    verdict: Verdict | None = None

    @property
    def length_s(self) -> float:
        return max((each.end_s for each in self.intervals), default=0.0)

    def in_words(self) -> str:
        parts = [f"{self.name} {rounded(self.length_s, 's')}"]
        parts += [
            f"overrun {rounded(each.end_s - each.start_s, 's')}"
            for each in self.intervals
            if each.pattern == "overrun"
        ]
        return ", ".join([*parts, self.verdict] if self.verdict else parts)


class TimeBar(QWidget):
    """Lanes under each other over one axis from gate-off at 0."""

    def __init__(self) -> None:
        super().__init__()
        self._lanes: tuple[Lane, ...] = ()
        self._stale = False
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.setAccessibleName("Intervals after gate-off")
        self.show_lanes(())

    def show_lanes(self, lanes: Sequence[Lane]) -> None:
        self._lanes, self._stale = tuple(lanes), False
        self.setFixedHeight(HEAD + LANE * max(len(lanes), 3) + 28)
        self.setAccessibleDescription("\n".join(lane.in_words() for lane in lanes))
        self.update()

    def show_stale(self) -> None:
        self._stale = True
        self.update()

    @property
    def span_s(self) -> float:
        """What the axis reaches to."""
        return max((lane.length_s for lane in self._lanes), default=0.0)

    def _x(self, time_s: float) -> float:
        names = NAMES if self.width() > 1000 else NARROW_NAMES
        room = self.width() - names - FIGURES - MARGIN
        return names + (time_s / self.span_s * room if self.span_s else 0.0)

    # Painting ---------------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        bottom = self.height() - 28.0
        ground = QRectF(self._x(0), HEAD, self._right() - self._x(0), bottom - HEAD)
        painter.fillRect(ground, theme().panel)
        self._axis(painter, bottom)
        for number, lane in enumerate(self._lanes):
            self._lane(painter, HEAD + LANE * number, lane)

    def _right(self) -> float:
        return self.width() - FIGURES - MARGIN

    def _axis(self, painter: QPainter, bottom: float) -> None:
        look = theme()
        painter.setPen(look.field_edge)
        painter.drawLine(QPointF(self._x(0), bottom), QPointF(self._right(), bottom))
        painter.setFont(font(AXIS))
        for time_s in ticks(self.span_s):
            x = self._x(time_s)
            painter.setPen(look.rule)
            painter.drawLine(QPointF(x, HEAD), QPointF(x, bottom))
            painter.setPen(look.second_ink)
            text = rounded(time_s, "s") if time_s else "gate-off"
            painter.drawText(QRectF(x - 40, bottom + 4, 80, 18), Qt.AlignmentFlag.AlignCenter, text)

    def _lane(self, painter: QPainter, top: float, lane: Lane) -> None:
        look = theme()
        painter.setPen(look.stale if self._stale else look.ink)
        painter.setFont(font(TABLE))
        room = QRectF(0, top, self._x(0) - 12, LANE)
        name = painter.fontMetrics().elidedText(
            lane.name, Qt.TextElideMode.ElideRight, int(room.width())
        )
        painter.drawText(room, RIGHT, name)
        for interval in lane.intervals:
            self._interval(painter, top, interval)
        self._figure(painter, top, lane)

    def _interval(self, painter: QPainter, top: float, interval: Interval) -> None:
        left, right = self._x(interval.start_s), self._x(interval.end_s)
        if interval.pattern == "needed":
            self._bracket(painter, top + LANE / 2, left, right)
            return
        room = QRectF(left, top + 4, max(right - left, 1.0), LANE - 8)
        painter.setPen(line_pen(theme().field_edge, 1.0))
        painter.setBrush(_brush(interval.pattern))
        painter.drawRect(room)

    def _bracket(self, painter: QPainter, middle: float, left: float, right: float) -> None:
        """What is needed is a length, not a state: a line between two stops."""
        painter.setPen(line_pen(theme().stale if self._stale else theme().ink, 2.0))
        painter.drawLine(QPointF(left, middle), QPointF(right, middle))
        for x in (left, right):
            painter.drawLine(QPointF(x, middle - 6), QPointF(x, middle + 6))

    def _figure(self, painter: QPainter, top: float, lane: Lane) -> None:
        look = theme()
        left = self._right() + 8
        painter.setPen(look.stale if self._stale else look.ink)
        painter.drawText(QRectF(left, top, 64, LANE), RIGHT, rounded(lane.length_s, "s"))
        if lane.verdict is not None and not self._stale:
            mark = QRectF(left + 74, top + (LANE - SIZE) / 2, SIZE, SIZE)
            draw_verdict_mark(painter, mark, lane.verdict)
            painter.setPen(look.verdict[lane.verdict])
            painter.setFont(font(AXIS))
            painter.drawText(QRectF(left + 94, top, 90, LANE), LEFT, lane.verdict)


def _brush(pattern: Pattern) -> QBrush:
    brushes = {"dead": dead_brush, "freewheel": freewheel_brush, "overrun": overrun_brush}
    return brushes[pattern]() if pattern in brushes else QBrush(theme().band)


def ticks(span_s: float) -> list[float]:
    """Round times from 0 up to the span, at most `TICKS` + 1 of them."""
    if span_s <= 0.0:
        return []
    rough = span_s / TICKS
    power = 10.0 ** floor(log10(rough))
    step = next(s for s in (power, 2 * power, 5 * power, 10 * power) if span_s / s <= TICKS)
    return [number * step for number in range(int(span_s / step * (1 + 1e-9)) + 1)]
