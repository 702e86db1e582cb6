"""Every value at the cursor, in a row a strip."""

from __future__ import annotations

from collections.abc import Iterator

from PySide6.QtCore import QRectF, QSize, Qt
from PySide6.QtGui import QAccessible, QPainter, QPaintEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.theme import AXIS, TABLE, font, theme, theme_signals
from app.widgets.strip import GATES, POSITION, STRIPS, Curve, Strip, value_at
from app.widgets.strip_scale import figures_for
from app.widgets.strips import Strips

ROW, HEAD = 17, 20
LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter


class ReadOut(QWidget):
    """Reads what the strips show: their curves, their scales, their cursor."""

    def __init__(self, strips: Strips) -> None:
        super().__init__()
        self._strips = strips
        self.setAccessibleName("Values at the cursor")
        self.setFixedHeight(HEAD + ROW * (len(STRIPS) - 1) + 6)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        strips.angle_cursor.moved.connect(self.refresh)
        theme_signals.changed.connect(self.update)

    def refresh(self) -> None:
        """The strips show something else, or the cursor has moved."""
        if QAccessible.isActive():
            self.setAccessibleDescription(self._strips.in_words())
        self.update()

    def sizeHint(self) -> QSize:
        return QSize(220, self.height())

    # Painting ---------------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        self._paint_head(painter)
        shown = [strip for strip in self._strips.strips if strip.key != GATES and strip.lanes]
        for number, strip in enumerate(shown):
            self._paint_row(painter, HEAD + ROW * number, strip)

    def _paint_head(self, painter: QPainter) -> None:
        room = QRectF(0, 0, self.width(), HEAD)
        painter.setPen(theme().accent)
        painter.setFont(font(TABLE, bold=True))
        painter.drawText(room, LEFT, self._strips.place_in_words())
        painter.setPen(theme().second_ink)
        painter.setFont(font(TABLE))
        painter.drawText(room, RIGHT, self._strips.conducting_at_cursor())

    def _paint_row(self, painter: QPainter, top: float, strip: Strip) -> None:
        """The strip's short name, then its curves in three columns."""
        name_width = 40.0 if self.width() < 260 else 62.0
        column = (self.width() - name_width) / 3.0
        painter.setFont(font(AXIS))
        painter.setPen(theme().second_ink)
        painter.drawText(QRectF(0, top, name_width, ROW), LEFT, _short_name(strip, name_width))
        for number, (curve, text) in enumerate(self._cells(strip)):
            room = QRectF(name_width + number * column + 6.0, top, column - 6.0, ROW)
            self._paint_cell(painter, room, curve, text)

    def _cells(self, strip: Strip) -> Iterator[tuple[Curve, str]]:
        sheet, at_deg = self._strips.sheet, self._strips.angle_cursor.angle_deg
        for lane, scale in zip(strip.lanes, sheet.scales[strip.key], strict=True):
            figures = figures_for(scale, lane.unit)
            for curve in lane.curves:
                value = figures.of(value_at(sheet.angle_deg, curve.values, at_deg))
                yield curve, f"{value} {figures.unit}"

    def _paint_cell(self, painter: QPainter, room: QRectF, curve: Curve, text: str) -> None:
        sheet = self._strips.sheet
        painter.setPen(sheet.colour(curve.line))
        painter.drawText(room, LEFT, curve.name)
        painter.setPen(theme().stale if sheet.stale else theme().ink)
        painter.drawText(room, RIGHT, text)


def _short_name(strip: Strip, width: float) -> str:
    if width < 60.0:
        return ""
    return strip.title.split()[-1 if strip.key == POSITION else 0]
