"""The right column of the Duty page: the bridge, the values at the cursor, positions or events."""

from __future__ import annotations

from PySide6.QtCore import QSize, Signal
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QStackedWidget, QVBoxLayout, QWidget

from app.picture import Picture
from app.widgets.bridge_drawing import BridgeDrawing
from app.widgets.plain_table import PlainTable
from app.widgets.position_table import EventTable, PositionTable
from app.widgets.read_out import ReadOut
from app.widgets.strips import Strips

WIDTH, NARROW_WIDTH = 296, 220


class DutySide(QWidget):
    """Follows the strips' cursor. Where it is too low for all, a key puts the lists in turn."""

    position_asked = Signal(int)

    def __init__(self, strips: Strips) -> None:
        super().__init__()
        self.drawing = BridgeDrawing(strips.angle_cursor)
        self.read_out = ReadOut(strips)
        self.positions = PositionTable()
        self.events = EventTable()
        self._lists = QStackedWidget()
        self._lists.addWidget(self.positions)
        self._lists.addWidget(self.events)
        self._asked_for_list = False
        self._picture: Picture | None = None
        self._stale = False
        self._below = QVBoxLayout()
        self._below.setSpacing(4)
        self._below.addWidget(self.read_out)
        self._below.addWidget(self._lists)
        column = QVBoxLayout(self)
        column.setContentsMargins(0, 4, 0, 8)
        column.setSpacing(4)
        column.addWidget(self.drawing, 1)
        column.addLayout(self._below)
        self.drawing.position_asked.connect(self.position_asked)
        self.positions.position_asked.connect(self.position_asked)
        self.events.angle_asked.connect(strips.angle_cursor.move_to)
        self.fit(narrow=False)

    # What is shown ----------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        self._picture, self._stale = picture, False
        self.drawing.show_picture(picture)
        self.read_out.refresh()
        self._fill_list()

    def show_stale(self) -> None:
        self._stale = True
        self.drawing.show_stale()
        self.read_out.refresh()
        self._fill_list()

    def show_incomplete(self) -> None:
        self._picture = None
        self.drawing.show_incomplete()
        self.read_out.refresh()
        self._fill_list()

    def _fill_list(self) -> None:
        """The list in view; the other one waits until it is asked for."""
        picture = self._picture
        if self.list is self.events:
            self.events.show_events(picture.stress.events if picture else ())
        elif picture is None:
            self.positions.show_stress(None, 0)
        else:
            self.positions.show_stress(picture.stress, picture.looked_at.position)
        if self._stale:
            self.list.show_stale()

    # Which list, and room for it --------------------------------------------------------

    @property
    def list(self) -> PlainTable:
        """The list in view: positions or events."""
        return self.events if self._lists.currentWidget() is self.events else self.positions

    def exchange(self) -> None:
        """From positions to events and back; where room is short the bridge comes in between."""
        if self._is_low() and not self._asked_for_list:
            self._asked_for_list = True
            self._lists.setCurrentWidget(self.positions)
        elif self.list is self.positions:
            self._lists.setCurrentWidget(self.events)
        else:
            self._lists.setCurrentWidget(self.positions)
            self._asked_for_list = False
        self._fill_list()
        self._arrange()

    def fit(self, narrow: bool) -> None:
        """Take the width for a narrow or a wide window."""
        self.setFixedWidth(NARROW_WIDTH if narrow else WIDTH)
        side = 4 if narrow else 12
        self._below.setContentsMargins(side, 0, side, 0)
        self.positions.put_diodes_together(narrow)
        self.events.leave_out_voltage(narrow)
        self._arrange()

    def minimumSizeHint(self) -> QSize:
        """Low enough for any window: the lists give way."""
        return QSize(self.width(), self.drawing.minimumHeight() + self.read_out.height())

    def resizeEvent(self, event: QResizeEvent) -> None:
        self._arrange()

    def _is_low(self) -> bool:
        others = self.drawing.minimumHeight() + self.read_out.height() + 20
        return self.height() < others + self.positions.wanted_height

    def _arrange(self) -> None:
        low = self._is_low()
        self._lists.setVisible(not low or self._asked_for_list)
        self.drawing.setVisible(not low or not self._asked_for_list)
        self._lists.setFixedHeight(self._list_height(low))

    def _list_height(self, low: bool) -> int:
        if low:
            return max(80, self.height() - self.read_out.height() - 20)
        return self.positions.wanted_height
