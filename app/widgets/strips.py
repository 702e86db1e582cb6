"""The strips: every waveform of one period over one angle axis, read by a cursor.

Painted by QPainter alone. Measured in one run: all strips with headings, names and values take
12.9 ms at full line width; the bare curves in six plots of pyqtgraph with fixed ranges 21.7 ms.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

import numpy as np
from PySide6.QtCore import QPointF, QRectF, QSize, Qt, Signal
from PySide6.QtGui import (
    QAccessible,
    QContextMenuEvent,
    QFocusEvent,
    QKeyEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
    QPixmap,
    QResizeEvent,
)
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.picture import Picture
from app.theme import AXIS, TABLE, cursor_pen, font, theme, theme_signals
from app.widgets.cursor import LONG_STEP_DEG, STEP_DEG, AngleCursor
from app.widgets.strip import EMPTY, GATES, Strip, strips_of
from app.widgets.strip_export import paint_strips
from app.widgets.strip_labels import (
    MIDDLE,
    RIGHT,
    angle_places,
    end_labels,
    fits,
    paint_heading,
    paint_values,
)
from app.widgets.strip_layout import FOLDED, HEADING, MARGINS, StripLayout, lay_out
from app.widgets.strip_painting import Sheet
from app.widgets.strip_scale import in_figures
from app.widgets.strip_sheet import Scales, conduction_parts, intervals_of, scales_of

Key, Modifier = Qt.Key, Qt.KeyboardModifier


class Strips(QWidget):
    """Shows a picture's waveforms. ←/→ move the cursor, ↑/↓ choose a strip, Space folds it."""

    menu_asked = Signal(object)
    """A menu for the current strip at this place on the screen, a `QPoint`."""

    def __init__(self, angle_cursor: AngleCursor) -> None:
        super().__init__()
        self.angle_cursor = angle_cursor
        self._picture: Picture | None = None
        self._strips: tuple[Strip, ...] = EMPTY
        self._scales: Scales = {}
        self._needs = ""
        self._chosen: dict[str, bool] = {}
        self._current = 0
        self._curves: QPixmap | None = None
        self._layout = self._laid_out()
        self._sheet = self._make_sheet()
        self.setAccessibleName("Waveforms of one period")
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setMinimumSize(300, 240)
        angle_cursor.moved.connect(self._on_cursor)
        theme_signals.changed.connect(self._on_theme)

    # What is shown ----------------------------------------------------------------------

    @property
    def picture(self) -> Picture | None:
        return self._picture

    @property
    def strips(self) -> tuple[Strip, ...]:
        return self._strips

    @property
    def layout_of_strips(self) -> StripLayout:
        return self._layout

    @property
    def sheet(self) -> Sheet:
        return self._sheet

    @property
    def current(self) -> str:
        """Key of the strip that the keyboard works on."""
        return self._strips[self._current].key

    @property
    def current_title(self) -> str:
        return self._strips[self._current].title

    def show_picture(self, picture: Picture) -> None:
        self._picture, self._needs = picture, ""
        self._strips = strips_of(
            picture.waveforms, picture.duty.connection, picture.looked_at.position, picture.stress
        )
        self._scales = scales_of(self._strips, self._scales)
        self._redraw(self._make_sheet())

    def show_stale(self) -> None:
        """The curves stay, in the stale colour."""
        self._redraw(replace(self._sheet, stale=self._picture is not None))

    def show_incomplete(self, needs: str) -> None:
        """Empty axes, and a sentence that says what is needed."""
        self._picture, self._strips, self._scales = None, EMPTY, {}
        self._needs = needs
        self._redraw(self._make_sheet())

    def _make_sheet(self) -> Sheet:
        if self._picture is None:
            return Sheet(theme(), self._layout.axis, np.zeros(0), {})
        waveforms, position = self._picture.waveforms, self._picture.looked_at.position
        return Sheet(
            theme(),
            self._layout.axis,
            waveforms.angle_deg,
            self._scales,
            intervals_of(waveforms, position),
        )

    def _redraw(self, sheet: Sheet) -> None:
        self._sheet, self._curves = sheet, None
        self._describe()
        self.update()

    def _on_theme(self) -> None:
        self._redraw(replace(self._sheet, look=theme()))

    def _on_cursor(self) -> None:
        self._describe()
        self.update()

    def _describe(self) -> None:
        if QAccessible.isActive():
            self.setAccessibleDescription(self.in_words())

    def in_words(self) -> str:
        """The cursor's place, then a line a strip."""
        if self._picture is None:
            return self._needs
        angles = self._picture.waveforms.angle_deg
        lines = [
            f"{strip.title}: {strip.figures}; at the cursor "
            f"{strip.values_in_words(angles, self.angle_cursor.angle_deg)}"
            for strip in self._strips
            if strip.key != GATES
        ]
        stale = ["stale"] if self._sheet.stale else []
        return "\n".join([*stale, self.place_in_words(), *lines])

    def place_in_words(self) -> str:
        """The cursor in degrees and time: '37.0°  2.06 ms'."""
        angle_deg = self.angle_cursor.angle_deg
        if self._picture is None:
            return f"{angle_deg:.1f}°"
        time_s = angle_deg / 360.0 / self._picture.corner.frequency_Hz
        return f"{angle_deg:.1f}°  {in_figures(time_s, 's')}"

    # Places -----------------------------------------------------------------------------

    def _laid_out(self) -> StripLayout:
        keys = [strip.key for strip in self._strips]
        return lay_out(keys, self.width(), self.height(), self._chosen)

    def _lay_out(self) -> None:
        self._layout = self._laid_out()
        self._redraw(replace(self._sheet, axis=self._layout.axis))

    def is_folded(self, key: str) -> bool:
        return self._layout.rooms[key].plot is None

    def fold(self, key: str) -> None:
        """Fold an open strip, open a folded one."""
        self._chosen[key] = not self.is_folded(key)
        self._lay_out()

    def sizeHint(self) -> QSize:
        return QSize(580 + sum(MARGINS), 680)

    def resizeEvent(self, event: QResizeEvent) -> None:
        self._lay_out()

    # Painting ---------------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.drawPixmap(0, 0, self._curves_drawn())
        if self.hasFocus():
            self._paint_focus(painter)
        if self._picture is None:
            self._paint_needs(painter)
        else:
            self._paint_cursor(painter)
            self._paint_values(painter)

    def _curves_drawn(self) -> QPixmap:
        """Everything that does not move with the cursor, drawn once a picture."""
        if self._curves is None:
            ratio = self.devicePixelRatioF()
            self._curves = QPixmap(self.size() * ratio)
            self._curves.setDevicePixelRatio(ratio)
            self._curves.fill(theme().ground)
            painter = QPainter(self._curves)
            paint_strips(painter, self._sheet, self._strips, self._layout, self.parts())
            painter.end()
        return self._curves

    def _paint_focus(self, painter: QPainter) -> None:
        strip = self._strips[self._current]
        room = self._layout.rooms[strip.key]
        heading = QRectF(0.0, room.whole.top(), self._layout.axis.left, HEADING)
        if strip.key != GATES:
            heading.setWidth(self.width())
        painter.fillRect(heading, theme().ground)
        paint_heading(painter, self._sheet, strip, room, accent=True)

    def _paint_needs(self, painter: QPainter) -> None:
        painter.setFont(font(TABLE))
        plots = [room.plot for room in self._layout.rooms.values() if room.plot is not None]
        room = QRectF(0, 0, painter.fontMetrics().horizontalAdvance(self._needs) + 24, 32)
        room.moveCenter(plots[len(plots) // 2].center())
        painter.fillRect(room, theme().ground)
        painter.setPen(theme().ink)
        painter.drawText(room, MIDDLE, self._needs)

    def _paint_cursor(self, painter: QPainter) -> None:
        x = self._layout.axis.x(self.angle_cursor.angle_deg)
        painter.setPen(cursor_pen())
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        for room in self._layout.rooms.values():
            if room.plot is not None:
                painter.drawLine(QPointF(x, room.plot.top()), QPointF(x, room.plot.bottom()))
        painter.setFont(font(AXIS, bold=True))
        foot = self._layout.foot
        angles = angle_places(self._sheet, foot).values()
        self._paint_tag(painter, foot.adjusted(0, 4, 0, -2), self.place_in_words(), angles)
        narrow = self._names_of_narrow_part()
        if narrow:
            parts = [self._part_room(*part) for part in self.parts()]
            self._paint_tag(painter, self._layout.head, narrow, parts)

    def _paint_tag(
        self, painter: QPainter, row: QRectF, text: str, others: Iterable[QRectF]
    ) -> None:
        """A text at the cursor in place of the others in its row that it would touch."""
        width = painter.fontMetrics().horizontalAdvance(text) + 8.0
        x = self._layout.axis.x(self.angle_cursor.angle_deg)
        left = min(max(x - width / 2, row.left()), row.right() - width)
        room = QRectF(left, row.top(), width, row.height())
        for other in others:
            if other.intersects(room):
                painter.fillRect(other, theme().ground)
        painter.fillRect(room, theme().ground)
        painter.setPen(theme().accent)
        painter.drawText(room, MIDDLE, text)

    def parts(self) -> list[tuple[float, float, str]]:
        """Start, end and names of the parts of the period that conduct alike."""
        return conduction_parts(self._picture.waveforms) if self._picture else []

    def _part_room(self, start_deg: float, end_deg: float, names: str) -> QRectF:
        """Where the names of a part stand; the separators beside them stay."""
        room = self._layout.axis.rect(start_deg, end_deg, self._layout.head)
        return room.adjusted(1.0, 0.0, -1.0, 0.0)

    def _part_at_cursor(self) -> tuple[float, float, str]:
        at_deg = self.angle_cursor.angle_deg
        here = (part for part in self.parts() if part[0] <= at_deg < part[1])
        return next(here, (0.0, 360.0, ""))

    def conducting_at_cursor(self) -> str:
        """The devices that conduct, '–' where none does."""
        return self._part_at_cursor()[2]

    def _names_of_narrow_part(self) -> str:
        """The devices at the cursor where the head has no room to name them."""
        start_deg, end_deg, names = self._part_at_cursor()
        room = self._layout.axis.rect(start_deg, end_deg, self._layout.head)
        return "" if fits(names, room.width()) else names

    def _paint_values(self, painter: QPainter) -> None:
        right, at_deg = self.width() - 2.0, self.angle_cursor.angle_deg
        for strip in self._strips:
            room = self._layout.rooms[strip.key]
            if strip.key == GATES:
                continue
            if room.plot is not None:
                labels = end_labels(self._sheet, strip, room.plot)
                paint_values(painter, self._sheet, labels, right, at_deg)
            else:
                painter.setFont(font(AXIS))
                painter.setPen(theme().stale if self._sheet.stale else theme().ink)
                values = strip.values_in_words(self._sheet.angle_deg, at_deg)
                painter.drawText(room.whole.adjusted(0, 0, -2, 0), RIGHT, values)

    # Keys and mouse ---------------------------------------------------------------------

    def keyPressEvent(self, event: QKeyEvent) -> None:
        key, modifiers = event.key(), event.modifiers()
        if key in (Key.Key_Left, Key.Key_Right):
            self._move_cursor(key == Key.Key_Right, modifiers)
        elif key in (Key.Key_Up, Key.Key_Down):
            step = 1 if key == Key.Key_Down else -1
            self._current = (self._current + step) % len(self._strips)
            self.update()
        elif key in (Key.Key_Space, Key.Key_Return, Key.Key_Enter):
            self.fold(self.current)
        elif key == Key.Key_Home:
            self.angle_cursor.move_to(0.0)
        elif key == Key.Key_End:
            self.angle_cursor.move_to(360.0)
        else:
            super().keyPressEvent(event)

    def _move_cursor(self, forwards: bool, modifiers: Qt.KeyboardModifier) -> None:
        if modifiers & Modifier.ControlModifier:
            self.to_event(forwards)
        else:
            step = LONG_STEP_DEG if modifiers & Modifier.ShiftModifier else STEP_DEG
            self.angle_cursor.move_by(step if forwards else -step)

    def to_event(self, forwards: bool) -> None:
        """Move the cursor to the next change of state of a device."""
        events = self._picture.stress.events if self._picture else ()
        self.angle_cursor.move_to_event([event.angle_deg for event in events], forwards)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        key = self._key_at(event.position())
        if key is not None:
            self._current = [strip.key for strip in self._strips].index(key)
            self.update()
        if event.button() != Qt.MouseButton.LeftButton:
            return
        if key is not None and self._is_on_heading(key, event.position()):
            self.fold(key)
        else:
            self._drag_to(event.position())

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        if event.buttons() & Qt.MouseButton.LeftButton:
            self._drag_to(event.position())

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        self.menu_asked.emit(event.globalPos())

    def _drag_to(self, point: QPointF) -> None:
        self.angle_cursor.move_to(self._layout.axis.angle_deg(point.x()))

    def _key_at(self, point: QPointF) -> str | None:
        rooms = self._layout.rooms.items()
        return next((key for key, room in rooms if room.whole.contains(point)), None)

    def _is_on_heading(self, key: str, point: QPointF) -> bool:
        room = self._layout.rooms[key]
        height = FOLDED if room.plot is None else HEADING
        inside = point.y() < room.whole.top() + height
        return inside and (key != GATES or point.x() < self._layout.axis.left)

    def focusInEvent(self, event: QFocusEvent) -> None:
        self.update()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        self.update()
