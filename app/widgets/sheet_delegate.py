"""Paints one cell of the rating sheets and opens its field.

A cell reads from left to right: the rating in the sheet's unit, its basis, what the duty
applies to it, the headroom, the verdict's mark and word.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from PySide6.QtCore import QAbstractItemModel, QEvent, QObject, QPointF, QRectF, Qt, Signal
from PySide6.QtGui import QColor, QFocusEvent, QKeyEvent, QPainter, QPen
from PySide6.QtWidgets import QLineEdit, QStyle, QStyledItemDelegate, QStyleOptionViewItem, QWidget

from app.theme import AXIS, TABLE, font, line_pen, theme
from app.widgets.number_entry import NumberEntry
from app.widgets.sheet_model import Index, SheetModel
from app.widgets.sheet_rows import Cell
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from engine.checks import Check
from engine.quantities import shown
from parts_library.rating_sheet import Rating, sheet_figure

BASIS_WORDS = {"typical": "typ.", "read from curve": "curve", "assumed": ""}
SMALL = 10
RIGHT, LEFT = Qt.AlignmentFlag.AlignRight, Qt.AlignmentFlag.AlignLeft
MIDDLE = Qt.AlignmentFlag.AlignVCenter


@dataclass(frozen=True, slots=True)
class CellLayout:
    """Where the parts of a cell stand: right edges of the figures, left edges of mark and word."""

    value: int = 56
    basis: int = 60
    applied: int = 130
    headroom: int = 170
    mark: int = 176
    word: int = 193
    width: int = 200
    width_with_word: int = 264

    def shows_word(self, width: float) -> bool:
        return width >= self.width_with_word


LAYOUT = CellLayout()


class SheetEntry(NumberEntry):
    """A number in the unit of the data sheet; what is typed takes the place of what stood there."""

    def __init__(self, key: str, rating: Rating, parent: QWidget) -> None:
        super().__init__(
            key,
            rating.name,
            rating.unit,
            parent,
            shown_in=rating.sheet_unit,
            scale=10.0**rating.exponent,
        )
        self.moves_on = False
        self.is_new = True

    def type_again(self, text: str) -> None:
        """Go on with a text that could not be used when the field was left."""
        self.setText(text)
        self.textEdited.emit(text)

    def focusInEvent(self, event: QFocusEvent) -> None:
        super().focusInEvent(event)
        self.selectAll()


class SheetDelegate(QStyledItemDelegate):
    """Typing goes into the document at once; Enter and Tab tell the view where to go."""

    down = Signal()
    across = Signal(int)
    fault_at_field = Signal(QWidget, str)

    def __init__(self, model: SheetModel, parent: QObject) -> None:
        super().__init__(parent)
        self._model = model

    # The field --------------------------------------------------------------------------

    def createEditor(self, parent: QWidget, option: QStyleOptionViewItem, index: Index) -> QWidget:
        cell = self._model.cell(index)
        assert cell.rating is not None
        self._model.begin_entry(index)
        if cell.rating.form == "text":
            return self._text_entry(parent, cell.rating, index)
        return self._number_entry(parent, cell.rating, index)

    def _text_entry(self, parent: QWidget, rating: Rating, index: Index) -> QLineEdit:
        entry = QLineEdit(parent)
        entry.setAccessibleName(rating.name)
        entry.setMaxLength(200 if rating.key == "part" else 2000)
        entry.textEdited.connect(lambda text: self._model.enter(index, text))
        return entry

    def _number_entry(self, parent: QWidget, rating: Rating, index: Index) -> SheetEntry:
        entry = SheetEntry(self._model.key(index), rating, parent)
        entry.entered.connect(lambda value: self._model.enter(index, value))
        entry.refused.connect(lambda text: self._model.refuse(index, entry.text(), text))
        entry.fault_shown.connect(lambda text: self.fault_at_field.emit(entry, text))
        return entry

    def setEditorData(self, editor: QWidget, index: Index) -> None:
        cell = self._model.cell(index)
        if isinstance(editor, SheetEntry):
            value = cell.value if isinstance(cell.value, float) else None
            editor.set_value(value, cell.assumed)
            if editor.is_new and self._model.fault(index):
                editor.type_again(self._model.text(index))
            editor.is_new = False
        elif isinstance(editor, QLineEdit) and editor.text() != (cell.value or ""):
            editor.setText(str(cell.value or ""))

    def setModelData(self, editor: QWidget, model: QAbstractItemModel, index: Index) -> None:
        """Nothing is left to do: the entry was made while it was typed."""

    def updateEditorGeometry(
        self, editor: QWidget, option: QStyleOptionViewItem, index: Index
    ) -> None:
        whole = isinstance(editor, SheetEntry)
        rect = option.rect.adjusted(2, 0, -2, -1)
        editor.setGeometry(
            rect.adjusted(0, 0, LAYOUT.value + 8 - rect.width(), 0) if whole else rect
        )

    def eventFilter(self, editor: QObject, event: QEvent) -> bool:
        if event.type() == QEvent.Type.KeyPress and isinstance(event, QKeyEvent):
            key = event.key()
            if key in (Qt.Key.Key_Return, Qt.Key.Key_Enter) and not event.modifiers():
                return self._leave(editor, self.down.emit)
            if key in (Qt.Key.Key_Tab, Qt.Key.Key_Backtab):
                step = 1 if key == Qt.Key.Key_Tab else -1
                return self._leave(editor, lambda: self.across.emit(step))
            if key == Qt.Key.Key_Escape:
                return self._give_up(editor)
            if key in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
                return False
        return super().eventFilter(editor, event)

    def _leave(self, editor: QObject, then: Callable[[], object]) -> bool:
        if isinstance(editor, NumberEntry) and editor.fault:
            return True
        self.closeEditor.emit(editor)
        then()
        return True

    def _give_up(self, editor: QObject) -> bool:
        if isinstance(editor, NumberEntry):
            editor.discard_typing()
        self._model.take_back_entry()
        self.closeEditor.emit(editor)
        return True

    # Painting ---------------------------------------------------------------------------

    def paint(self, painter: QPainter, option: QStyleOptionViewItem, index: Index) -> None:
        painter.save()
        rect = QRectF(option.rect)
        row = self._model.rows[index.row()]
        current = bool(option.state & QStyle.StateFlag.State_HasFocus)
        self._ground(painter, rect, index, current)
        if row.form in ("heading", "fold"):
            self._aside(painter, rect, index)
        elif (cell := self._model.cell(index)).rating is not None:
            self._entry(painter, rect, cell, index)
            if cell.checks:
                self._check(painter, rect, cell.rating, cell.checks[0])
        painter.restore()

    def _ground(self, painter: QPainter, rect: QRectF, index: Index, current: bool) -> None:
        look, row = theme(), self._model.rows[index.row()]
        given = self._model.cell(index).rating is not None
        ground = look.panel if given else look.ground
        painter.fillRect(rect, look.band if row.form == "heading" else ground)
        painter.fillRect(QRectF(rect.right(), rect.top(), 1, rect.height()), look.rule)
        if current:
            painter.fillRect(rect.adjusted(0, 0, -1, 0), look.shade)
            painter.fillRect(QRectF(rect.left(), rect.bottom() - 1, rect.width(), 2), look.accent)

    def _aside(self, painter: QPainter, rect: QRectF, index: Index) -> None:
        painter.setFont(font(AXIS))
        painter.setPen(theme().second_ink)
        painter.drawText(rect.adjusted(8, 0, -8, 0), LEFT | MIDDLE, self._model.text(index))

    def _entry(self, painter: QPainter, rect: QRectF, cell: Cell, index: Index) -> None:
        fault = self._model.fault(index)
        painter.setFont(font(TABLE, italic=cell.assumed))
        painter.setPen(self._ink(cell, fault))
        text = self._model.text(index)
        if cell.rating is not None and cell.rating.form != "number":
            room = rect.adjusted(8, 0, -8, 0)
            shown = painter.fontMetrics().elidedText(
                text, Qt.TextElideMode.ElideRight, int(room.width())
            )
            painter.drawText(room, LEFT | MIDDLE, shown)
            span = QRectF(
                room.left(),
                rect.top(),
                painter.fontMetrics().horizontalAdvance(shown),
                rect.height(),
            )
        elif text:
            span = self._figure(painter, rect, LAYOUT.value, text)
        else:
            span = self._nothing(painter, rect, cell)
        if cell.assumed and not fault:
            self._underline(painter, span, line_pen(theme().second_ink, 1.0, (1.0, 2.0)))
        if fault:
            self._underline(painter, span, line_pen(theme().verdict["undersized"], 2.0))
        self._basis(painter, rect, cell)

    def _ink(self, cell: Cell, fault: str) -> QColor:
        look = theme()
        if fault:
            return look.verdict["undersized"]
        condition = cell.rating is not None and bool(cell.rating.condition_of)
        return look.second_ink if cell.assumed or condition else look.ink

    def _nothing(self, painter: QPainter, rect: QRectF, cell: Cell) -> QRectF:
        if not cell.missing:
            return QRectF()
        painter.setFont(font(AXIS))
        painter.setPen(theme().verdict["not assessed"])
        return self._figure(painter, rect, LAYOUT.value, "missing")

    def _basis(self, painter: QPainter, rect: QRectF, cell: Cell) -> None:
        word = BASIS_WORDS.get(cell.basis, "")
        if word and cell.value is not None:
            painter.setFont(font(SMALL))
            painter.setPen(theme().second_ink)
            painter.drawText(rect.adjusted(LAYOUT.basis, 0, 0, 0), LEFT | MIDDLE, word)

    def _check(self, painter: QPainter, rect: QRectF, rating: Rating, check: Check) -> None:
        stale = self._model.stale
        painter.setFont(font(TABLE))
        painter.setPen(theme().stale if stale else theme().second_ink)
        if check.applied is not None:
            self._figure(
                painter, rect, LAYOUT.applied, applied_text(rating, check.applied, check.unit)
            )
        painter.setPen(theme().stale if stale else theme().ink)
        if check.headroom_pct is not None:
            self._figure(painter, rect, LAYOUT.headroom, headroom_text(check.headroom_pct))
        if not stale:
            self._verdict(painter, rect, check)

    def _verdict(self, painter: QPainter, rect: QRectF, check: Check) -> None:
        top = rect.center().y() - SIZE / 2
        draw_verdict_mark(
            painter, QRectF(rect.left() + LAYOUT.mark, top, SIZE, SIZE), check.verdict
        )
        if LAYOUT.shows_word(rect.width()):
            painter.setFont(font(SMALL))
            painter.setPen(theme().verdict[check.verdict])
            painter.drawText(rect.adjusted(LAYOUT.word, 0, 0, 0), LEFT | MIDDLE, check.verdict)

    def _figure(self, painter: QPainter, rect: QRectF, right: int, text: str) -> QRectF:
        """Right-aligned; returns the room that the text takes."""
        room = QRectF(rect.left() + 4, rect.top(), right - 4, rect.height())
        painter.drawText(room, RIGHT | MIDDLE, text)
        width = min(painter.fontMetrics().horizontalAdvance(text), room.width())
        return QRectF(room.right() - width, room.top(), width, room.height())

    def _underline(self, painter: QPainter, span: QRectF, pen: QPen) -> None:
        painter.setPen(pen)
        below = span.center().y() + 8
        painter.drawLine(QPointF(span.left(), below), QPointF(span.right(), below))


def applied_text(rating: Rating, applied: float, unit: str) -> str:
    """In the sheet's unit; a row of another unit beside a rating (a pulse at I_L) keeps its own."""
    if unit != rating.unit:
        return shown(applied, unit, digits=3)
    return f"{sheet_figure(rating, applied):g}"


def headroom_text(headroom_pct: float) -> str:
    """'34', '1.1', '−10': one decimal where it matters, a true minus; never a negative zero."""
    if headroom_pct < -999.0:
        return "<−999"
    text = f"{headroom_pct:.1f}" if abs(headroom_pct) < 10.0 else f"{headroom_pct:.0f}"
    return "<0" if text == "-0.0" else text.replace("-", "−")
