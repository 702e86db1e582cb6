"""The two heads of the rating sheets: candidates above, symbols at the left."""

from __future__ import annotations

from PySide6.QtCore import QPoint, QRect, QRectF, QSize, Qt
from PySide6.QtGui import QFontMetrics, QPainter
from PySide6.QtWidgets import QHeaderView

from app.pages.check_pages import deciding_check
from app.theme import AXIS, BODY, TABLE, font, theme
from app.verdict_sentence import sentence_of
from app.widgets.sheet_delegate import LAYOUT, LEFT, MIDDLE, RIGHT, SMALL
from app.widgets.sheet_model import SheetModel
from app.widgets.sheet_rows import SECTION_NAMES, SheetRow, most_wanted, symbol_of
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from engine.checks import CandidateResult

HEAD_HEIGHT = 92
SYMBOL_WIDTH, NARROW_SYMBOL_WIDTH = 160, 128
LINES = (8, 28, 48)
"""Tops of the name, the verdict and its worst check; the captions stand at the bottom."""
LINE_HEIGHT = 18


class CandidateHead(QHeaderView):
    """Name, verdict and worst check of each candidate, and what its figures are."""

    def __init__(self, model: SheetModel) -> None:
        super().__init__(Qt.Orientation.Horizontal)
        self._sheets = model
        self.chosen = ""
        self.setSectionsClickable(True)
        self.setHighlightSections(False)
        self.setFixedHeight(HEAD_HEIGHT)
        self.setSectionResizeMode(QHeaderView.ResizeMode.Fixed)

    def sizeHint(self) -> QSize:
        return QSize(super().sizeHint().width(), HEAD_HEIGHT)

    def paintSection(self, painter: QPainter, rect: QRect, column: int) -> None:
        painter.save()
        look = theme()
        painter.fillRect(rect, look.panel)
        painter.fillRect(rect.right(), rect.top(), 1, rect.height(), look.rule)
        painter.fillRect(rect.left(), rect.bottom(), rect.width(), 1, look.field_edge)
        self._name(painter, rect, column)
        result = self._sheets.result(column)
        if result is not None:
            self._verdict(painter, rect, result)
            self._worst(painter, rect, column, result)
        self._captions(painter, rect)
        painter.restore()

    def _name(self, painter: QPainter, rect: QRect, column: int) -> None:
        line = _line(rect, 0)
        name = self._sheets.candidates[column].name
        if name == self.chosen:
            painter.setFont(font(AXIS))
            painter.setPen(theme().accent)
            painter.drawText(line, RIGHT | MIDDLE, "chosen")
            line.setRight(line.right() - painter.fontMetrics().horizontalAdvance("chosen") - 8)
        painter.setPen(theme().ink)
        painter.setFont(font(BODY, bold=True))
        _elided(painter, line, f"{column + 1}  {name}")

    def _verdict(self, painter: QPainter, rect: QRect, result: CandidateResult) -> None:
        line = _line(rect, 1)
        if self._sheets.stale:
            painter.setFont(font(TABLE))
            painter.setPen(theme().stale)
            painter.drawText(line, LEFT | MIDDLE, "stale")
            return
        colour = theme().verdict[result.verdict]
        draw_verdict_mark(painter, QRectF(line.left(), line.top() + 2, SIZE, SIZE), result.verdict)
        painter.setPen(colour)
        painter.setFont(font(TABLE, bold=True))
        line.setLeft(line.left() + SIZE + 6)
        painter.drawText(line, LEFT | MIDDLE, result.verdict)
        line.setLeft(line.left() + painter.fontMetrics().horizontalAdvance(result.verdict) + 6)
        painter.setPen(theme().second_ink)
        painter.setFont(font(AXIS))
        _elided(painter, line, result.remark)

    def _worst(self, painter: QPainter, rect: QRect, column: int, result: CandidateResult) -> None:
        painter.setFont(font(AXIS))
        painter.setPen(theme().stale if self._sheets.stale else theme().second_ink)
        _elided(painter, _line(rect, 2), self._reason(column, result))

    def _reason(self, column: int, result: CandidateResult) -> str:
        """What decides the verdict; where nothing does yet, what is lacking."""
        lacking = [key for key, _ in most_wanted(result) if key.startswith(("switch.", "diode."))]
        if result.verdict == "not assessed" and lacking:
            symbols = [symbol_of(self._sheets.candidates[column], key) for key in lacking]
            return f"needs {', '.join(symbols)}"
        worst = deciding_check(result)
        return f"{worst.position or ''} {sentence_of(worst)}".strip() if worst is not None else ""

    def _captions(self, painter: QPainter, rect: QRect) -> None:
        painter.setFont(font(SMALL))
        painter.setPen(theme().second_ink)
        line = QRect(rect.left(), rect.bottom() - 20, rect.width(), LINE_HEIGHT)
        for right, caption in ((LAYOUT.value, "rating"), (LAYOUT.applied, "applied")):
            room = QRect(line.left(), line.top(), right, LINE_HEIGHT)
            painter.drawText(room, RIGHT | MIDDLE, caption)
        caption = "headroom %" if LAYOUT.shows_word(rect.width()) else "headroom"
        painter.drawText(line.adjusted(LAYOUT.applied + 6, 0, 0, 0), LEFT | MIDDLE, caption)


class SymbolHead(QHeaderView):
    """Symbol and sheet unit of each row; a test condition stands indented below its rating."""

    def __init__(self, model: SheetModel) -> None:
        super().__init__(Qt.Orientation.Vertical)
        self._sheets = model
        self.setSectionsClickable(True)
        self.setHighlightSections(False)
        self.setSectionResizeMode(QHeaderView.ResizeMode.Fixed)

    def paintSection(self, painter: QPainter, rect: QRect, index: int) -> None:
        painter.save()
        row, look = self._sheets.rows[index], theme()
        painter.fillRect(rect, look.band if row.form == "heading" else look.ground)
        painter.fillRect(rect.right(), rect.top(), 1, rect.height(), look.field_edge)
        inner = rect.adjusted(12, 0, -8, 0)
        if row.form == "heading":
            self._words(painter, inner, SECTION_NAMES[row.section], bold=True)
        elif row.form == "fold":
            painter.setPen(look.accent)
            self._words(painter, inner, fold_text(row), pen=False)
        elif row.rating is None:
            self._words(painter, inner, "note")
        else:
            self._symbol(painter, inner, row)
        painter.restore()

    def _words(
        self, painter: QPainter, rect: QRect, text: str, bold: bool = False, pen: bool = True
    ) -> None:
        if pen:
            painter.setPen(theme().ink)
        painter.setFont(font(TABLE, bold=bold))
        painter.drawText(rect, LEFT | MIDDLE, text)

    def _symbol(self, painter: QPainter, rect: QRect, row: SheetRow) -> None:
        rating = row.rating
        assert rating is not None
        condition = bool(rating.condition_of)
        painter.setFont(font(AXIS if condition else TABLE))
        painter.setPen(theme().second_ink if condition else theme().ink)
        text = f"at {rating.symbol}" if condition else rating.symbol
        painter.drawText(rect.adjusted(12 if condition else 0, 0, 0, 0), LEFT | MIDDLE, text)
        painter.setFont(font(AXIS))
        painter.setPen(theme().second_ink)
        painter.drawText(rect, RIGHT | MIDDLE, rating.sheet_unit)


def fold_text(row: SheetRow) -> str:
    """Says what a click on a fold does."""
    return f"{'▸' if row.folded else '▾'} refines"


def _line(rect: QRect, number: int) -> QRect:
    return QRect(rect.left() + 12, rect.top() + LINES[number], rect.width() - 20, LINE_HEIGHT)


def _elided(painter: QPainter, rect: QRect, text: str) -> None:
    metrics = QFontMetrics(painter.font())
    shown = metrics.elidedText(text, Qt.TextElideMode.ElideRight, rect.width())
    baseline = rect.top() + (rect.height() + metrics.capHeight()) // 2
    painter.drawText(QPoint(rect.left(), baseline), shown)
