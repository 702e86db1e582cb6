"""Text broken into lines for print: the shipped type, no ligatures, no hinting."""

from __future__ import annotations

import re
from functools import lru_cache
from math import ceil
from threading import get_ident

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QFont, QFontMetricsF, QPainter, QTextLayout, QTextOption

from app.theme import font

LEADING = 1.22
"""Distance of lines over the size of type."""


def print_font(size: int, bold: bool = False, italic: bool = False) -> QFont:
    """Type for print.

    Without joined letters: who searches for 'fingerprint' would not find them. Without hinting
    lines break on the screen where they do on paper.
    """
    return _print_font(size, bold, italic, get_ident())


@lru_cache(maxsize=64)
def _print_font(size: int, bold: bool, italic: bool, thread: int) -> QFont:
    # Reports are also made in the background, and threads must not share a QFont.
    made = font(size, bold, italic)
    made.setFeature(QFont.Tag("liga"), 0)
    made.setHintingPreference(QFont.HintingPreference.PreferNoHinting)
    return made


class Text:
    """A text broken into lines of a width in px."""

    def __init__(
        self, text: str, width: float, made: QFont, colour: QColor, right: bool = False
    ) -> None:
        self._colour = colour
        self._leading = ceil(made.pixelSize() * LEADING)
        self._layout = QTextLayout(_cleaned(text), made)
        option = QTextOption()
        option.setWrapMode(QTextOption.WrapMode.WrapAtWordBoundaryOrAnywhere)
        self._layout.setTextOption(option)
        self._layout.setCacheEnabled(True)
        self.lines = self._break(width, right)
        self.height = self.lines * self._leading

    def _break(self, width: float, right: bool) -> int:
        self._layout.beginLayout()
        count = 0
        while (line := self._layout.createLine()).isValid():
            line.setLineWidth(max(width, 1.0))
            left = width - line.naturalTextWidth() if right else 0.0
            line.setPosition(QPointF(left, count * self._leading))
            count += 1
        self._layout.endLayout()
        return count

    @property
    def text(self) -> str:
        """The text as it is set."""
        return self._layout.text()

    @property
    def line_height(self) -> float:
        return self._leading

    def paint(self, painter: QPainter, left: float, top: float) -> None:
        """Paint all lines."""
        painter.setPen(self._colour)
        self._layout.draw(painter, QPointF(left, top))

    def paint_line(self, number: int, left: float, painter: QPainter, top: float) -> None:
        """Paint one line, its top at a height."""
        painter.setPen(self._colour)
        line = self._layout.lineAt(number)
        line.draw(painter, QPointF(left, top - line.y()))


_UNIT = re.compile(r"(?<=[\d)²]) (?=(?:°|%|[pnµmkMG]?(?:V|A|W|Hz|s|Ω|H|F|J|K)\b))")
"""The space between a number and its unit, at which no line may break."""
_CONTROLS = dict.fromkeys((*range(32), 127), " ") | {ord("\n"): "\u2028", ord("\r"): ""}


def _cleaned(text: str) -> str:
    """Line breaks as Qt's layout wants them; other control characters as spaces."""
    return _UNIT.sub("\u00a0", text.translate(_CONTROLS))


def elided(text: str, made: QFont, width: float) -> str:
    """One line of text, shortened at its end to a width."""
    return QFontMetricsF(made).elidedText(_cleaned(text), Qt.TextElideMode.ElideRight, width)
