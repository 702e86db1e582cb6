"""The sentence at a field that says why its text cannot be used."""

from __future__ import annotations

from PySide6.QtCore import QPoint
from PySide6.QtGui import QPainter, QPaintEvent
from PySide6.QtWidgets import QLabel, QWidget

from app.theme import theme

WIDTH = 240


class FaultNote(QLabel):
    """Lies over its parent, just below a field, inside what can be seen."""

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent, wordWrap=True)
        self._over = parent
        self.setProperty("role", "fault")
        self.setContentsMargins(8, 4, 8, 4)
        self.setFixedWidth(WIDTH)
        self.hide()

    def show_at(self, field: QWidget, sentence: str) -> None:
        """Show a sentence at a field of the same parent; '' hides the note."""
        self.setText(sentence)
        self.setVisible(bool(sentence))
        if sentence:
            self.setFixedHeight(self.heightForWidth(WIDTH))
            self.move(self._place(field))
            self.raise_()

    def _place(self, field: QWidget) -> QPoint:
        room = self._over.size() - self.size()
        below, above = field.geometry().bottom() + 3, field.geometry().top() - 3 - self.height()
        x = max(0, min(field.x(), room.width()))
        return QPoint(x, below if below <= room.height() else above)

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.fillRect(self.rect(), theme().shade)
        painter.fillRect(0, 0, 2, self.height(), theme().verdict["undersized"])
        painter.end()
        super().paintEvent(event)
