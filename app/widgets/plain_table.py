"""A table to read and to copy, nothing else."""

from __future__ import annotations

from collections.abc import Collection, Sequence

from PySide6.QtCore import Qt
from PySide6.QtGui import QColor
from PySide6.QtWidgets import QAbstractItemView, QTableWidget, QTableWidgetItem

from app.theme import AXIS, TABLE, font, theme

RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
PADDING = "QTableView::item { padding: 0 3px; } QHeaderView::section { padding: 2px 6px; }"


class PlainTable(QTableWidget):
    """Text at the left, figures at the right of their columns; every row of one height."""

    def __init__(
        self, name: str, heads: Sequence[str], figures: Collection[int], row_height: int
    ) -> None:
        super().__init__(0, len(heads))
        self.setAccessibleName(name)
        self._heads = tuple(heads)
        self._sides = [RIGHT if column in figures else LEFT for column in range(len(heads))]
        self._row_height = row_height
        self._set_up()
        for column, (head, side) in enumerate(zip(heads, self._sides, strict=True)):
            self.setHorizontalHeaderItem(column, self._item(head, side))

    def _set_up(self) -> None:
        self.setStyleSheet(PADDING)
        self.verticalHeader().hide()
        self.verticalHeader().setDefaultSectionSize(self._row_height)
        self.horizontalHeader().setHighlightSections(False)
        self.horizontalHeader().setFont(font(AXIS))
        self.setShowGrid(False)
        self.setTabKeyNavigation(False)
        self.setEditTriggers(QAbstractItemView.EditTrigger.NoEditTriggers)
        self.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
        self.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
        self.setVerticalScrollMode(QAbstractItemView.ScrollMode.ScrollPerPixel)

    @staticmethod
    def _item(text: str, side: Qt.AlignmentFlag) -> QTableWidgetItem:
        item = QTableWidgetItem(text)
        item.setTextAlignment(side)
        return item

    def fill(self, rows: Sequence[Sequence[str]]) -> None:
        """Show these texts in place of the last ones."""
        self.setRowCount(len(rows))
        for number, row in enumerate(rows):
            for column, text in enumerate(row):
                item = self._item(text, self._sides[column])
                item.setFont(font(TABLE))
                self.setItem(number, column, item)

    def mark_bold(self, row: int, columns: Collection[int] | None = None) -> None:
        for column in range(self.columnCount()) if columns is None else columns:
            item = self.item(row, column)
            if item is not None:
                item.setFont(font(TABLE, bold=True))

    def colour(self, row: int, column: int, colour: QColor) -> None:
        item = self.item(row, column)
        if item is not None:
            item.setForeground(colour)

    def show_stale(self) -> None:
        """The figures stay, in the stale colour."""
        for row in range(self.rowCount()):
            for column in range(self.columnCount()):
                self.colour(row, column, theme().stale)

    def texts(self, row: int) -> list[str]:
        """What stands in a row."""
        items = (self.item(row, column) for column in range(self.columnCount()))
        return [item.text() if item is not None else "" for item in items]

    def as_text(self) -> str:
        """Tabbed, for a spreadsheet; a head line first."""
        heads = [head.replace("\n", " ") for head in self._heads]
        rows = [self.texts(row) for row in range(self.rowCount())]
        return "\n".join("\t".join(row) for row in [heads, *rows])
