"""The line at the bottom of the window: the verdict in one sentence, and the way to its cause."""

from __future__ import annotations

from PySide6.QtCore import QPoint, QRect, QRectF, QSize, Qt, Signal
from PySide6.QtGui import QFontMetrics, QPainter, QPaintEvent
from PySide6.QtWidgets import QAbstractButton

from app.picture import Picture, Problem
from app.theme import BODY, font, theme
from app.verdict_sentence import (
    Statement,
    statement_of,
    statement_of_missing,
    statement_of_problems,
)
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from app.widgets.window_width import WindowWidth

HEIGHT, NARROW_HEIGHT = 32, 28
MARGIN = 12


class VerdictLine(QAbstractButton):
    """A click, Enter or Space asks for the entry and the operating point of the sentence."""

    asked = Signal(str, object)
    """Key of the entry to go to, and the `LookedAt` of the worst corner or `None`."""

    def __init__(self) -> None:
        super().__init__()
        self._statement = Statement()
        WindowWidth(self, self._fit)
        self.setFixedHeight(HEIGHT)
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setCursor(Qt.CursorShape.PointingHandCursor)
        self.clicked.connect(self._ask)
        self.show_incomplete(())

    @property
    def statement(self) -> Statement:
        return self._statement

    def show_picture(self, picture: Picture) -> None:
        self._show(statement_of(picture))

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self._show(statement_of_problems(problems))

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self._show(statement_of_missing(missing))

    def _show(self, statement: Statement) -> None:
        self._statement = statement
        self.setAccessibleName(f"Verdict. {statement}")
        self.setToolTip(str(statement))
        self.update()

    def _ask(self) -> None:
        if self._statement.key:
            self.asked.emit(self._statement.key, self._statement.looked_at)

    def sizeHint(self) -> QSize:
        return QSize(480, self.height())

    def minimumSizeHint(self) -> QSize:
        return QSize(240, self.height())

    def _fit(self, narrow: bool) -> None:
        self.setFixedHeight(NARROW_HEIGHT if narrow else HEIGHT)

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.fillRect(self.rect(), theme().band if self.underMouse() else theme().panel)
        painter.fillRect(0, 0, self.width(), 1, theme().rule)
        if self.hasFocus():
            painter.setPen(theme().accent)
            painter.drawRect(self.rect().adjusted(0, 0, -1, -1))
        self._paint_text(painter, self._paint_mark(painter))

    def _paint_mark(self, painter: QPainter) -> int:
        """Draws the mark, if there is one; returns where the text begins."""
        verdict = self._statement.verdict
        if verdict is None:
            return MARGIN
        top = (self.height() - SIZE) // 2
        draw_verdict_mark(painter, QRectF(MARGIN, top, SIZE, SIZE), verdict)
        return MARGIN + SIZE + 8

    def _paint_text(self, painter: QPainter, left: int) -> None:
        said = self._statement
        painter.setFont(font(BODY, bold=True))
        painter.setPen(theme().ink if said.verdict is None else theme().verdict[said.verdict])
        baseline = (self.height() + QFontMetrics(painter.font()).capHeight()) // 2
        painter.drawText(QPoint(left, baseline), said.head)
        left += QFontMetrics(painter.font()).horizontalAdvance(said.head)
        painter.setFont(font(BODY))
        painter.setPen(theme().ink)
        room = QRect(left, 0, self.width() - left - MARGIN, self.height())
        text = QFontMetrics(painter.font()).elidedText(
            said.text, Qt.TextElideMode.ElideRight, room.width()
        )
        painter.drawText(QPoint(left, baseline), text)
