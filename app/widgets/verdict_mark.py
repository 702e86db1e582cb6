"""The mark of a verdict: a limit bar, and below it a stub of the applied value.

Drawn on a grid of 14 in one colour; it always stands beside the verdict's word.
"""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize
from PySide6.QtGui import QPainter, QPaintEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.theme import Theme, theme
from engine.checks import Verdict

SIZE = 14

_BAR = (0.0, 5.0, 14.0, 2.0)
_PARTS: dict[Verdict, tuple[tuple[float, float, float, float], ...]] = {
    "adequate": (_BAR, (5.0, 10.0, 4.0, 4.0)),
    "tight": (_BAR, (5.0, 7.0, 4.0, 7.0)),
    "undersized": (_BAR, (3.0, 0.0, 8.0, 14.0)),
    "not assessed": (
        (0.0, 5.0, 4.0, 2.0),
        (5.0, 5.0, 4.0, 2.0),
        (10.0, 5.0, 4.0, 2.0),
        (5.0, 12.0, 4.0, 2.0),
    ),
}
"""x, y, width, height of the filled parts, in units of the grid."""


def draw_verdict_mark(
    painter: QPainter, rect: QRectF, verdict: Verdict | None, look: Theme | None = None
) -> None:
    """Fill the mark into a square at the rect's top left; nothing for `None` (stale).

    `look` is another theme than the window's: paper is always light.
    """
    if verdict is None:
        return
    scale = min(rect.width(), rect.height()) / SIZE
    colour = (look or theme()).verdict[verdict]
    for x, y, width, height in _PARTS[verdict]:
        part = QRectF(x * scale, y * scale, width * scale, height * scale)
        painter.fillRect(part.translated(rect.topLeft()), colour)


class VerdictMark(QWidget):
    """The mark as a widget of 14 px."""

    def __init__(self, verdict: Verdict | None = None, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setSizePolicy(QSizePolicy.Policy.Fixed, QSizePolicy.Policy.Fixed)
        self.set_verdict(verdict)

    def set_verdict(self, verdict: Verdict | None) -> None:
        self._verdict = verdict
        self.setAccessibleName(verdict or "no verdict")
        self.update()

    def sizeHint(self) -> QSize:
        return QSize(SIZE, SIZE)

    def paintEvent(self, event: QPaintEvent) -> None:
        draw_verdict_mark(QPainter(self), QRectF(0, 0, SIZE, SIZE), self._verdict)
