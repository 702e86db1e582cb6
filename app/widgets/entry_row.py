"""One line of a column of entries: label, up to three fields, unit; below it what is wrong."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtGui import QPainter, QPaintEvent
from PySide6.QtWidgets import QHBoxLayout, QLabel, QVBoxLayout, QWidget

from app.theme import AXIS, BODY, TABLE, font, theme
from app.widgets.choice_entry import ChoiceEntry
from app.widgets.number_entry import NumberEntry
from app.widgets.restyle import restyle

Entry = NumberEntry | ChoiceEntry

GAP = 4
PADDING = 6
"""From the right end of a number to the end of its field."""


@dataclass(frozen=True, slots=True)
class Widths:
    """Sizes of a column of entries in px."""

    column: int
    row: int
    left: int
    label: int
    field: int
    unit: int

    @property
    def fields(self) -> int:
        """Three fields with the gaps between them."""
        return 3 * self.field + 2 * GAP


WIDE = Widths(column=304, row=28, left=12, label=100, field=48, unit=24)
NARROW = Widths(column=252, row=25, left=8, label=76, field=40, unit=24)


def words(text: str, size: int = TABLE, role: str = "") -> QLabel:
    """A label of one size; `role` is one of the style sheet's."""
    label = QLabel(text)
    label.setFont(font(size))
    if role:
        set_role(label, role)
    return label


def set_role(label: QLabel, role: str) -> None:
    """Give a label one of the style sheet's colours."""
    restyle(label, "role", role)


def indented(button: QWidget) -> QWidget:
    """The button below the fields of a column; whoever holds it sets the left margin."""
    button.setFont(font(TABLE))
    foot = QWidget()
    line = QHBoxLayout(foot)
    line.setContentsMargins(GAP, 0, 0, 0)
    line.addWidget(button)
    line.addStretch(1)
    return foot


class EntryRow(QWidget):
    """One field, or three in the columns low, nominal, high; a lone one spans the columns."""

    def __init__(
        self, name: str, fields: Sequence[QWidget], unit: str = "", short_name: str = ""
    ) -> None:
        super().__init__()
        self._names = {True: short_name or name, False: name}
        self.fields = tuple(fields)
        self.label = words(name)
        self.label.setBuddy(self.fields[0])
        self._unit = words(unit, AXIS, "second")
        self._note = words("", AXIS, "fault")
        self._note.setWordWrap(True)
        self._note.hide()
        self._lay_out()
        for field in self.fields:
            if isinstance(field, NumberEntry):
                field.fault_shown.connect(lambda _: self.show_note())

    @property
    def entries(self) -> tuple[Entry, ...]:
        """The fields of the row that hold an entry."""
        return tuple(field for field in self.fields if isinstance(field, NumberEntry | ChoiceEntry))

    @property
    def numbers(self) -> tuple[NumberEntry, ...]:
        """The fields of the row that hold a number."""
        return tuple(field for field in self.fields if isinstance(field, NumberEntry))

    @property
    def note(self) -> str:
        """The sentence below the row, '' for none."""
        return "" if self._note.isHidden() else self._note.text()

    def show_note(self, text: str = "") -> None:
        """Show this, or what is wrong with the row's entries."""
        faults = dict.fromkeys(entry.fault for entry in self.entries if entry.fault)
        said = text or ". ".join(faults)
        self._note.setText(said)
        self._note.setVisible(bool(said))

    def fit(self, widths: Widths) -> None:
        self._line.setContentsMargins(widths.left, 2, 0, 2)
        self._note.setContentsMargins(widths.left, 2, 12, 4)
        self.label.setFixedWidth(widths.label)
        self.label.setText(self._names[widths is NARROW])
        self._whole.setFixedHeight(widths.row)
        for field in self.fields:
            self.size_field(field, widths)

    def size_field(self, field: QWidget, widths: Widths) -> None:
        lone = len(self.fields) == 1
        field.setFixedSize(widths.fields if lone else widths.field, widths.row - 4)

    def _lay_out(self) -> None:
        self._whole = QWidget()
        self._line = QHBoxLayout(self._whole)
        self._line.setSpacing(GAP)
        for widget in (self.label, *self.fields):
            self._line.addWidget(widget)
        self._line.addWidget(self._unit, 1)
        column = QVBoxLayout(self)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addWidget(self._whole)
        column.addWidget(self._note)


class GroupHead(QWidget):
    """The name of a group of entries, and what its three columns hold."""

    def __init__(self, name: str, columns: Sequence[str] = (), short_name: str = "") -> None:
        super().__init__()
        self._names = {True: short_name or name, False: name}
        self._columns = columns
        self._widths = WIDE

    def fit(self, widths: Widths) -> None:
        self._widths = widths
        self.setFixedHeight(widths.row)

    def paintEvent(self, event: QPaintEvent) -> None:
        """Painted, since a column's word may be wider than the column."""
        widths, painter, baseline = self._widths, QPainter(self), self.height() - 8
        painter.setPen(theme().ink)
        painter.setFont(font(BODY, bold=True))
        painter.drawText(widths.left, baseline, self._names[widths is NARROW])
        painter.setPen(theme().second_ink)
        painter.setFont(font(AXIS))
        right = widths.left + widths.label
        for column in self._columns:
            right += GAP + widths.field
            width = painter.fontMetrics().horizontalAdvance(column)
            spare = widths.field - width
            inset = PADDING if spare > PADDING else spare // 2
            painter.drawText(right - inset - width, baseline, column)
