"""The report as a PDF file: vectors, embedded fonts, searchable text, the inputs attached."""

from __future__ import annotations

import os
from dataclasses import dataclass
from datetime import date
from typing import Literal

from PySide6.QtCore import QBuffer, QIODevice, QMarginsF, QRectF, QSizeF, Qt, QUuid
from PySide6.QtGui import (
    QAbstractTextDocumentLayout,
    QPageLayout,
    QPageSize,
    QPainter,
    QPalette,
    QPdfWriter,
    QTextDocument,
)
from PySide6.QtWidgets import QApplication

from app.export import results_json
from app.report.content import sections_of
from app.report.document import laid_out, print_font
from app.selection_file import selection_bytes
from app.theme import LIGHT, line_pen, load_fonts
from engine.bridge import nominal_bridge
from engine.checks import Assessment
from engine.duty import duty_of
from engine.selection import Selection
from engine.steady_state import solve
from engine.waveforms import sampled

PageSize = Literal["A4", "Letter"]

_DPI = 96
_SIDE, _HEAD, _FOOT = 62.0, 84.0, 62.0
_SIZES = {"A4": QPageSize.PageSizeId.A4, "Letter": QPageSize.PageSizeId.Letter}
_NAMESPACE = QUuid("{4d0f0f64-3d0f-5d4e-9a55-4f6b8a3d9d11}")


def paper_size(name: object) -> PageSize:
    """The size that a name means; A4 where it means none."""
    return "Letter" if name == "Letter" else "A4"


@dataclass(frozen=True)
class Report:
    """A report ready to be painted, page by page."""

    document: QTextDocument
    paper: QSizeF
    """px of 1/96 inch"""
    head: tuple[str, str]

    @property
    def pages(self) -> int:
        return self.document.pageCount()


def report_of(selection: Selection, assessment: Assessment, size: PageSize = "A4") -> Report:
    """Lay out the report of a finished assessment."""
    load_fonts()
    paper = QSizeF(QPageSize(_SIZES[size]).size(QPageSize.Unit.Point)) * (_DPI / 72.0)
    body = QSizeF(paper.width() - 2 * _SIDE, paper.height() - _HEAD - _FOOT)
    waveforms = sampled(solve(nominal_bridge(duty_of(selection))))
    document = laid_out(sections_of(selection, assessment), body, waveforms)
    return Report(document, paper, _head_lines(selection, assessment))


def paint_page(painter: QPainter, report: Report, number: int) -> None:
    """Paint a page (from 0) at 96 dpi: header, its part of the document, footer."""
    paper = report.paper
    body = QRectF(0, 0, paper.width() - 2 * _SIDE, paper.height() - _HEAD - _FOOT)
    painter.save()
    painter.translate(_SIDE, _HEAD - number * body.height())
    context = QAbstractTextDocumentLayout.PaintContext()
    context.clip = body.translated(0, number * body.height())
    context.palette.setColor(QPalette.ColorRole.Text, LIGHT.ink)
    painter.setClipRect(context.clip)
    report.document.documentLayout().draw(painter, context)
    painter.restore()
    _paint_margins(painter, report, number)


def _paint_margins(painter: QPainter, report: Report, number: int) -> None:
    paper = report.paper
    width = paper.width() - 2 * _SIDE
    painter.save()
    painter.setPen(LIGHT.second_ink)
    painter.setFont(print_font(9))
    for line, text in enumerate(report.head):
        box = QRectF(_SIDE, 34 + 14 * line, width, 14)
        elided = painter.fontMetrics().elidedText(text, Qt.TextElideMode.ElideRight, int(width))
        painter.drawText(box, Qt.AlignmentFlag.AlignLeft, elided)
    foot = QRectF(_SIDE, paper.height() - 42, width, 14)
    painter.drawText(foot, Qt.AlignmentFlag.AlignRight, f"page {number + 1} of {report.pages}")
    painter.drawText(
        foot,
        Qt.AlignmentFlag.AlignLeft,
        "Estimates from entered data: check against the maker's current data sheet.",
    )
    painter.setPen(line_pen(LIGHT.rule, 0.8))
    painter.drawLine(int(_SIDE), 66, int(_SIDE + width), 66)
    painter.restore()


def report_pdf(selection: Selection, assessment: Assessment, size: PageSize = "A4") -> bytes:
    """The report as the content of a PDF file.

    Raises
    ------
    InvalidSelection, NoSolution
        There is nothing to report on.
    """
    application = QApplication.instance() or _offscreen_application()
    assert application is not None
    report = report_of(selection, assessment, size)
    buffer = QBuffer()
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    writer = _writer(buffer, selection, assessment, size)
    painter = QPainter(writer)
    try:
        for number in range(report.pages):
            if number:
                writer.newPage()
            paint_page(painter, report, number)
    finally:
        painter.end()
    data = bytes(buffer.data().data())
    assert data.startswith(b"%PDF")
    assert data.rstrip().endswith(b"%%EOF")
    return data


def _offscreen_application() -> QApplication:
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    return QApplication(["switchwright"])


def _writer(
    buffer: QBuffer, selection: Selection, assessment: Assessment, size: PageSize
) -> QPdfWriter:
    writer = QPdfWriter(buffer)
    writer.setResolution(_DPI)
    writer.setPageLayout(
        QPageLayout(
            QPageSize(_SIZES[size]), QPageLayout.Orientation.Portrait, QMarginsF(0, 0, 0, 0)
        )
    )
    writer.setTitle(selection.title or "Selection report")
    writer.setAuthor(selection.engineer)
    writer.setCreator(f"{assessment.program} {assessment.version}")
    writer.setDocumentId(QUuid.createUuidV5(_NAMESPACE, assessment.fingerprint.encode()))
    writer.addFileAttachment("selection.json", selection_bytes(selection), "application/json")
    writer.addFileAttachment("results.json", results_json(assessment), "application/json")
    return writer


def _head_lines(selection: Selection, assessment: Assessment) -> tuple[str, str]:
    mark = assessment.fingerprint
    groups = " ".join(mark[i : i + 4] for i in range(0, len(mark), 4))
    first = selection.title or "Untitled selection"
    parts = (
        ("reference", selection.reference),
        ("engineer", selection.engineer),
        ("date", date.today().isoformat()),
        (assessment.program, assessment.version),
        ("fingerprint", groups),
    )
    return first, "   ·   ".join(f"{name} {value}" for name, value in parts if value)
