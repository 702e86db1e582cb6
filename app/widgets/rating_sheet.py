"""Rating sheets side by side: a column each candidate, a row each rating, all by keyboard."""

from __future__ import annotations

from PySide6.QtCore import QEvent, QModelIndex, QRect, QSize, Qt, Signal
from PySide6.QtGui import QGuiApplication, QKeyEvent, QMouseEvent, QResizeEvent
from PySide6.QtWidgets import QAbstractItemView, QTableView

from app.open_selection import OpenSelection
from app.picture import Picture
from app.theme import theme_signals
from app.widgets.fault_note import FaultNote
from app.widgets.sheet_delegate import LAYOUT, SheetDelegate
from app.widgets.sheet_headers import (
    HEAD_HEIGHT,
    NARROW_SYMBOL_WIDTH,
    SYMBOL_WIDTH,
    CandidateHead,
    SymbolHead,
)
from app.widgets.sheet_model import Index, SheetModel
from engine.ratings import Basis

ROW_HEIGHT = 24
SCROLL_BAR = 10
ENTER_KEYS = (Qt.Key.Key_Return, Qt.Key.Key_Enter)
CONTROL = Qt.KeyboardModifier.ControlModifier
BASIS_KEYS: dict[int, Basis] = {
    Qt.Key.Key_M: "maximum",
    Qt.Key.Key_T: "typical",
    Qt.Key.Key_C: "read from curve",
    Qt.Key.Key_A: "assumed",
}


class RatingSheets(QTableView):
    """Enter goes down and at the end of a sheet to the next; Tab goes to the next candidate.

    A digit begins an entry, Delete takes one out, Ctrl+Enter confirms an assumed one, the
    keys M, T, C, A say how sure it is, Space goes through choices and folds.
    """

    column_changed = Signal(int)
    """Another cell is current; its candidate."""
    rename_asked = Signal(int)
    pasted = Signal(str)

    def __init__(self, document: OpenSelection) -> None:
        super().__init__()
        self.sheets = SheetModel(document)
        self._document = document
        self._place: tuple[str, str, str] | None = None
        self._fault = FaultNote(self.viewport())
        self.setAccessibleName("Rating sheets of the candidates")
        self._set_up_heads()
        self._set_up_cells()
        self._on_document()

    def _set_up_heads(self) -> None:
        self.head = CandidateHead(self.sheets)
        self.symbols = SymbolHead(self.sheets)
        self.setHorizontalHeader(self.head)
        self.setVerticalHeader(self.symbols)
        self.symbols.setDefaultSectionSize(ROW_HEIGHT)
        self.symbols.setFixedWidth(SYMBOL_WIDTH)
        self.head.sectionClicked.connect(self._go_to_column)
        self.head.sectionDoubleClicked.connect(self.rename_asked)
        self.symbols.sectionClicked.connect(self._on_symbol)

    def _set_up_cells(self) -> None:
        self._delegate = SheetDelegate(self.sheets, self)
        self._delegate.down.connect(self.step_down)
        self._delegate.across.connect(self.step_across)
        self._delegate.fault_at_field.connect(self._fault.show_at)
        self.setModel(self.sheets)
        self.setItemDelegate(self._delegate)
        self.setShowGrid(False)
        self.setTabKeyNavigation(False)
        self.setCornerButtonEnabled(False)
        self.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
        self.setEditTriggers(
            QAbstractItemView.EditTrigger.AnyKeyPressed
            | QAbstractItemView.EditTrigger.DoubleClicked
            | QAbstractItemView.EditTrigger.EditKeyPressed
        )
        self.setHorizontalScrollMode(QAbstractItemView.ScrollMode.ScrollPerPixel)
        self.setVerticalScrollMode(QAbstractItemView.ScrollMode.ScrollPerPixel)
        self.sheets.modelAboutToBeReset.connect(self._keep_place)
        self.sheets.modelReset.connect(self._return_to_place)
        self._document.changed.connect(self._on_document)
        theme_signals.changed.connect(self.viewport().update)

    # Where the focus is -----------------------------------------------------------------

    @property
    def column(self) -> int:
        """The candidate whose cell is current, −1 for none."""
        return self.currentIndex().column()

    def go_to(self, column: int, section: str, key: str) -> bool:
        """Make the cell of a field current, opening its fold; `False` where there is none."""
        index = self._index_of(column, section, key)
        if not index.isValid():
            self.sheets.unfold(section)
            index = self._index_of(column, section, key)
        if index.isValid():
            self.setCurrentIndex(index)
            self.scrollTo(index)
            self.setFocus()
        return index.isValid()

    def start_sheet(self, column: int) -> None:
        """The first rating of a candidate."""
        index = self._next_entry(-1, column)
        self.setCurrentIndex(index)
        self.scrollTo(index)
        self.scrollToTop()
        self.setFocus()

    def _index_of(self, column: int, section: str, key: str) -> QModelIndex:
        for number, row in enumerate(self.sheets.rows):
            if (row.section, row.key) == (section, key):
                index = self.sheets.index(number, column)
                return index if self.sheets.cell(index).rating is not None else QModelIndex()
        return QModelIndex()

    def _next_entry(self, row: int, column: int) -> QModelIndex:
        for number in range(row + 1, len(self.sheets.rows)):
            index = self.sheets.index(number, column)
            if self.sheets.cell(index).rating is not None:
                return index
        return QModelIndex()

    def step_down(self) -> None:
        """The next entry of this candidate; after its last one, the next candidate's first."""
        row, column = self.currentIndex().row(), self.column
        index = self._next_entry(row, column)
        if not index.isValid() and column + 1 < len(self.sheets.candidates):
            index = self._next_entry(-1, column + 1)
        if index.isValid():
            self.setCurrentIndex(index)
        self.setFocus()

    def step_across(self, step: int) -> None:
        """The same row of the next candidate; past the last one, out of the table."""
        self.setFocus()
        if not self._cross(step):
            super().focusNextPrevChild(step > 0)

    def _cross(self, step: int) -> bool:
        column = self.column + step
        if not 0 <= column < len(self.sheets.candidates):
            return False
        self.setCurrentIndex(self.sheets.index(self.currentIndex().row(), column))
        return True

    def focusNextPrevChild(self, forwards: bool) -> bool:
        return self._cross(1 if forwards else -1) or super().focusNextPrevChild(forwards)

    def _go_to_column(self, column: int) -> None:
        row = max(self.currentIndex().row(), 0)
        self.setCurrentIndex(self.sheets.index(row, column))
        self.setFocus()

    def _on_symbol(self, row: int) -> None:
        if self.sheets.rows[row].form == "fold":
            self.sheets.fold(self.sheets.rows[row].section)
        elif self.column >= 0:
            self.setCurrentIndex(self.sheets.index(row, self.column))

    def currentChanged(self, current: Index, previous: Index) -> None:
        super().currentChanged(current, previous)
        self._fault.hide()
        self.column_changed.emit(current.column())

    def _keep_place(self) -> None:
        index = self.currentIndex()
        if index.isValid():
            row = self.sheets.rows[index.row()]
            name = self.sheets.candidates[index.column()].name
            self._place = (name, row.section, row.key or row.form)

    def _return_to_place(self) -> None:
        if self._place is None or not self.sheets.candidates:
            return
        name, section, key = self._place
        names = [each.name for each in self.sheets.candidates]
        column = names.index(name) if name in names else len(names) - 1
        for number, row in enumerate(self.sheets.rows):
            if (row.section, row.key or row.form) == (section, key):
                self.setCurrentIndex(self.sheets.index(number, column))

    # Keys and mouse ---------------------------------------------------------------------

    def event(self, event: QEvent) -> bool:
        if isinstance(event, QKeyEvent) and self._claims(event):
            event.accept()
            return True
        return super().event(event)

    @staticmethod
    def _claims(event: QKeyEvent) -> bool:
        """The letters that belong to the cells, not to a shortcut of the window."""
        asks = event.type() == QEvent.Type.ShortcutOverride
        return asks and event.key() in BASIS_KEYS and not event.modifiers()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() in ENTER_KEYS and not event.modifiers() & CONTROL:
            self.step_down()
        elif not self._changes_cell(event):
            super().keyPressEvent(event)

    def _changes_cell(self, event: QKeyEvent) -> bool:
        index, key = self.currentIndex(), event.key()
        if not index.isValid():
            return False
        cell = self.sheets.cell(index)
        control = bool(event.modifiers() & CONTROL)
        typed = cell.rating is not None and cell.rating.form == "text"
        if key in ENTER_KEYS and control:
            self.sheets.confirm(index)
        elif key == Qt.Key.Key_V and control:
            self.pasted.emit(QGuiApplication.clipboard().text())
        elif key in (Qt.Key.Key_Delete, Qt.Key.Key_Backspace) and not event.modifiers():
            self.sheets.clear(index)
        elif key == Qt.Key.Key_Space and not typed:
            self._toggle(index)
        elif key in BASIS_KEYS and not typed and not event.modifiers():
            self.sheets.set_basis(index, BASIS_KEYS[key])
        else:
            # A letter is no beginning of a number.
            return not typed and event.text().isalpha() and not event.modifiers()
        return True

    def _toggle(self, index: QModelIndex) -> None:
        row = self.sheets.rows[index.row()]
        if row.form == "fold":
            self.sheets.fold(row.section)
        else:
            self.sheets.toggle(index)

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        super().mouseReleaseEvent(event)
        index = self.indexAt(event.position().toPoint())
        if index.isValid() and self.sheets.rows[index.row()].form == "fold":
            self.sheets.fold(self.sheets.rows[index.row()].section)

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        index = self.indexAt(event.position().toPoint())
        cell = self.sheets.cell(index) if index.isValid() else None
        if cell is not None and cell.rating is not None and cell.rating.form in ("flag", "choice"):
            self.sheets.toggle(index)
        else:
            super().mouseDoubleClickEvent(event)

    # Look -------------------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        self.sheets.show_picture(picture)
        self.head.viewport().update()

    def show_stale(self) -> None:
        self.sheets.show_stale()
        self.head.viewport().update()

    def show_incomplete(self) -> None:
        self.sheets.show_incomplete()
        self.head.viewport().update()

    def name_rect(self, column: int) -> QRect:
        """Where the name of a candidate stands in the head."""
        left = self.symbols.width() + self.head.sectionViewportPosition(column)
        return QRect(left + 4, 4, self.head.sectionSize(column) - 8, 26)

    def _on_document(self) -> None:
        self.head.chosen = self._document.selection.chosen
        self._fit_columns()
        self.head.viewport().update()

    def resizeEvent(self, event: QResizeEvent) -> None:
        super().resizeEvent(event)
        self._fit_columns()

    def _fit_columns(self) -> None:
        count = len(self.sheets.candidates)
        if count:
            narrow = self.width() < 900
            self.symbols.setFixedWidth(NARROW_SYMBOL_WIDTH if narrow else SYMBOL_WIDTH)
            share = (self.width() - self.symbols.width() - SCROLL_BAR) // count
            self.head.setDefaultSectionSize(max(LAYOUT.width, min(share, LAYOUT.width_with_word)))
            self.setMaximumWidth(SYMBOL_WIDTH + count * LAYOUT.width_with_word + SCROLL_BAR)

    def sizeHint(self) -> QSize:
        return QSize(SYMBOL_WIDTH + 3 * LAYOUT.width, HEAD_HEIGHT + 20 * ROW_HEIGHT)
