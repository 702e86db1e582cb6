"""Sections as a laid-out text document, with marks and figures drawn into it as vectors."""

from __future__ import annotations

import re

from PySide6.QtCore import QRect, QRectF, QSizeF
from PySide6.QtGui import (
    QFont,
    QPainter,
    QPyTextObject,
    QTextCharFormat,
    QTextCursor,
    QTextDocument,
    QTextFormat,
)

from app.report.blocks import Section
from app.report.html import TOKEN_END, TOKEN_START, html_of
from app.report.waveform_figure import draw_waveforms
from app.theme import LIGHT, font
from app.widgets.verdict_mark import draw_verdict_mark
from engine.checks import VERDICTS, Verdict
from engine.waveforms import Waveforms

_DRAWING = QTextFormat.ObjectTypes.UserObject + 1
_NAME = QTextFormat.Property.UserProperty + 1
_TOKEN = re.compile(f"{TOKEN_START}([^{TOKEN_END}]*){TOKEN_END}")
_OBJECT = "\ufffc"
_VERDICT_OF: dict[str, Verdict] = {verdict: verdict for verdict in VERDICTS}
_NEAR = 40.0  # px: a title needs this much of its text or table beside it


class _Drawings(QPyTextObject):
    """Draws the objects of a document by their names."""

    def __init__(self, width: float, waveforms: Waveforms | None, parent: QTextDocument) -> None:
        super().__init__(parent)
        self._width = width
        self._waveforms = waveforms

    def intrinsicSize(self, document: QTextDocument, position: int, form: QTextFormat) -> QSizeF:
        kind, _, rest = str(form.property(_NAME)).partition(" ")
        if kind == "mark":
            side = float(rest.split(",")[1])
            return QSizeF(side, side)
        return QSizeF(self._width, float(rest.split()[-1]))

    def drawObject(
        self,
        painter: QPainter,
        rect: QRectF | QRect,
        document: QTextDocument,
        position: int,
        form: QTextFormat,
    ) -> None:
        kind, _, rest = str(form.property(_NAME)).partition(" ")
        if kind == "mark":
            draw_verdict_mark(painter, QRectF(rect), _VERDICT_OF[rest.split(",")[0]], LIGHT)
        elif self._waveforms is not None:
            draw_waveforms(painter, QRectF(rect), self._waveforms)


def laid_out(
    sections: tuple[Section, ...], page: QSizeF, waveforms: Waveforms | None
) -> QTextDocument:
    """The report as pages of a size in px of 1/96 inch, without header and footer."""
    document = QTextDocument()
    document.setDefaultFont(print_font(11))
    document.setDocumentMargin(0.0)
    document.documentLayout().registerHandler(
        _DRAWING, _Drawings(page.width(), waveforms, document)
    )
    document.setHtml(html_of(sections))
    _place_drawings(document)
    document.setPageSize(page)
    _keep_titles_with_what_follows(document, page.height())
    return document


def print_font(size: int) -> QFont:
    """The font without joined letters: who searches for 'fingerprint' would not find them."""
    made = font(size)
    made.setFeature(QFont.Tag("liga"), 0)
    return made


def _keep_titles_with_what_follows(document: QTextDocument, page_height: float) -> None:
    """Begin a new page before a title that would stand alone at the foot of one."""
    layout = document.documentLayout()
    block = document.begin()
    while block.isValid():
        following = block.next()
        title = block.charFormat().fontWeight() >= QFont.Weight.Bold and block.text()
        if title and following.isValid() and QTextCursor(block).currentTable() is None:
            table = QTextCursor(following).currentTable()
            rect = (
                layout.blockBoundingRect(following)
                if table is None
                else layout.frameBoundingRect(table)
            )
            foot = rect.top() + min(rect.height(), _NEAR)
            if foot // page_height > layout.blockBoundingRect(block).top() // page_height:
                form = block.blockFormat()
                form.setPageBreakPolicy(QTextFormat.PageBreakFlag.PageBreak_AlwaysBefore)
                QTextCursor(block).setBlockFormat(form)
        block = following


def _place_drawings(document: QTextDocument) -> None:
    """Put an object in the place of every token, from the last so that positions hold."""
    cursor = QTextCursor(document)
    cursor.beginEditBlock()  # else the document is laid out anew after each
    for match in reversed(list(_TOKEN.finditer(document.toRawText()))):
        cursor.setPosition(match.start())
        cursor.setPosition(match.end(), QTextCursor.MoveMode.KeepAnchor)
        form = QTextCharFormat()
        form.setObjectType(_DRAWING)
        form.setProperty(_NAME, match[1])
        cursor.insertText(_OBJECT, form)
    cursor.endEditBlock()
