"""Every value at the cursor, in a row a strip."""

from __future__ import annotations

from collections.abc import Iterator

from PySide6.QtCore import QRectF, QSize, Qt
from PySide6.QtGui import QAccessible, QPainter, QPaintEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.theme import AXIS, TABLE, font, theme, theme_signals
from app.widgets.strip import GATES, POSITION, STRIPS, Curve, Strip, value_at
from app.widgets.strip_scale import Figures, figures_for
from app.widgets.strips import Strips

ROW, HEAD = 17, 20
NARROW_BELOW = 260
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
        """The strip's short name and its units, then its curves in three columns."""
        narrow = self.width() < NARROW_BELOW
        name_width = 36.0 if narrow else 64.0
        column = (self.width() - name_width) / 3.0
        painter.setFont(font(AXIS))
        painter.setPen(theme().second_ink)
        name = QRectF(0, top, name_width, ROW)
        painter.drawText(name, LEFT, self._row_name(strip, narrow))
        for number, (curve, text) in enumerate(self._cells(strip)):
            room = QRectF(name_width + number * column, top, column, ROW)
            self._paint_cell(painter, room.adjusted(4.0 if narrow else 12.0, 0, 0, 0), curve, text)

    def _row_name(self, strip: Strip, narrow: bool) -> str:
        """'Line V', 'T1 A, V'; on a narrow column the units alone."""
        shown = ", ".join(dict.fromkeys(figures.unit for _, figures in self._figures(strip)))
        return shown if narrow else f"{_short_name(strip)} {shown}"

    def _figures(self, strip: Strip) -> Iterator[tuple[Curve, Figures]]:
        for lane, scale in zip(strip.lanes, self._strips.sheet.scales[strip.key], strict=True):
            for curve in lane.curves:
                yield curve, figures_for(scale, lane.unit)

    def _cells(self, strip: Strip) -> Iterator[tuple[Curve, str]]:
        sheet, at_deg = self._strips.sheet, self._strips.angle_cursor.angle_deg
        for curve, figures in self._figures(strip):
            yield curve, figures.of(value_at(sheet.angle_deg, curve.values, at_deg))

    def _paint_cell(self, painter: QPainter, room: QRectF, curve: Curve, text: str) -> None:
        sheet = self._strips.sheet
        painter.setPen(sheet.colour(curve.line))
        painter.drawText(room, LEFT, curve.name)
        painter.setPen(theme().stale if sheet.stale else theme().ink)
        painter.drawText(room, RIGHT, text)


def _short_name(strip: Strip) -> str:
    """'Line' of 'Line voltages', 'T1' of 'Position T1'."""
    return strip.title.split()[-1 if strip.key == POSITION else 0]
