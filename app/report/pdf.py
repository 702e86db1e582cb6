"""The report as a PDF file: vectors, embedded fonts, searchable text, the inputs attached."""

from __future__ import annotations

import os
from dataclasses import dataclass
from datetime import date

from PySide6.QtCore import QBuffer, QIODevice, QMarginsF, QRectF, QSizeF, Qt, QUuid
from PySide6.QtGui import QColor, QFont, QPageLayout, QPageSize, QPainter, QPdfWriter
from PySide6.QtWidgets import QApplication

from app.export import results_json
from app.report.content import sections_of
from app.report.flow import Page
from app.report.layout import laid_out
from app.report.options import PageSize, ReportOptions, reported
from app.report.text import elided, print_font
from app.selection_file import selection_bytes
from app.theme import AXIS, LIGHT, load_fonts
from app.widgets.verdict_mark import draw_verdict_mark
from engine.checks import Assessment
from engine.selection import Selection

_DPI = 96
_SIDE, _HEAD, _FOOT = 62.0, 88.0, 62.0
"""Margins in px of 1/96 inch; header and footer lie in them."""
_SIZES = {"A4": QPageSize.PageSizeId.A4, "Letter": QPageSize.PageSizeId.Letter}
_ALL = ReportOptions()
_NAMESPACE = QUuid("{4d0f0f64-3d0f-5d4e-9a55-4f6b8a3d9d11}")
_MOST_OF_A_FACT = 180.0
_FOOT_TEXT = "Estimates from entered data: check against the maker's current data sheet."


@dataclass(frozen=True)
class Report:
    """A report ready to be painted, page by page."""

    contents: tuple[Page, ...]
    paper: QSizeF
    """px of 1/96 inch"""
    title: str
    facts: str
    mark: str
    """The fingerprint, as printed."""

    @property
    def pages(self) -> int:
        return len(self.contents)


def report_of(
    selection: Selection, assessment: Assessment, options: ReportOptions = _ALL
) -> Report:
    """Lay out the report of a finished assessment.

    Raises
    ------
    InvalidSelection, NoSolution
        There is nothing to report on.
    """
    load_fonts()
    assessment = reported(assessment, options)
    paper = QSizeF(QPageSize(_SIZES[options.paper]).size(QPageSize.Unit.Point)) * (_DPI / 72.0)
    width, height = paper.width() - 2 * _SIDE, paper.height() - _HEAD - _FOOT
    return Report(
        contents=laid_out(sections_of(selection, assessment), width, height),
        paper=paper,
        title=selection.title or "Untitled selection",
        facts=_facts(selection, assessment),
        mark=_in_fours(assessment.fingerprint),
    )


def _facts(selection: Selection, assessment: Assessment) -> str:
    """Reference, engineer, date and program in one line."""
    parts = (
        ("reference", _short(selection.reference)),
        ("engineer", _short(selection.engineer)),
        ("date", date.today().isoformat()),
        (assessment.program, assessment.version),
    )
    return "   ·   ".join(f"{name} {value}" for name, value in parts)


def _short(text: str) -> str:
    return elided(text, print_font(AXIS), _MOST_OF_A_FACT) or "–"


def _in_fours(fingerprint: str) -> str:
    groups = (fingerprint[i : i + 4] for i in range(0, len(fingerprint), 4))
    return f"fingerprint {' '.join(groups)}"


# Painting ---------------------------------------------------------------------------------


def paint_page(painter: QPainter, report: Report, number: int, marks: bool = True) -> None:
    """Paint a page (from 0) at 96 dpi: header, what stands on it, footer.

    `marks`: whether verdicts have their marks; those of stale pages have none.
    """
    painter.save()
    painter.setClipRect(QRectF(0.0, 0.0, report.paper.width(), report.paper.height()))
    _paint_margins(painter, report, number)
    painter.translate(_SIDE, _HEAD)
    for placed in report.contents[number]:
        placed.slice.paint(painter, placed.top)
        if placed.slice.mark is not None and marks:
            verdict, square = placed.slice.mark
            draw_verdict_mark(painter, square.translated(0.0, placed.top), verdict, LIGHT)
    painter.restore()


def _paint_margins(painter: QPainter, report: Report, number: int) -> None:
    width = report.paper.width() - 2 * _SIDE
    bold, plain = print_font(AXIS, bold=True), print_font(AXIS)
    mark_width = 200.0
    head = QRectF(_SIDE, 36.0, width, 15.0)
    _line(painter, head.adjusted(0, 0, -mark_width, 0), report.title, bold, LIGHT.ink)
    _line(painter, head, report.mark, plain, LIGHT.second_ink, right=True)
    _line(painter, head.translated(0, 16), report.facts, plain, LIGHT.second_ink)
    painter.fillRect(QRectF(_SIDE, 72.0, width, 0.8), LIGHT.field_edge)
    foot = QRectF(_SIDE, report.paper.height() - 44.0, width, 15.0)
    _line(painter, foot, _FOOT_TEXT, plain, LIGHT.second_ink)
    page = f"page {number + 1} of {report.pages}"
    _line(painter, foot, page, plain, LIGHT.second_ink, right=True)


def _line(
    painter: QPainter, box: QRectF, text: str, font: QFont, colour: QColor, right: bool = False
) -> None:
    side = Qt.AlignmentFlag.AlignRight if right else Qt.AlignmentFlag.AlignLeft
    painter.setFont(font)
    painter.setPen(colour)
    painter.drawText(box, side, elided(text, font, box.width()))


# The file ---------------------------------------------------------------------------------


def report_pdf(
    selection: Selection, assessment: Assessment, options: ReportOptions = _ALL
) -> bytes:
    """The report as the content of a PDF file; needs neither window nor display.

    Raises
    ------
    InvalidSelection, NoSolution
        There is nothing to report on.
    """
    application = QApplication.instance() or _offscreen_application()
    assert application is not None
    report = report_of(selection, assessment, options)
    buffer = QBuffer()
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    _paint_all(_writer(buffer, selection, reported(assessment, options), options.paper), report)
    data = bytes(buffer.data().data())
    assert data.startswith(b"%PDF")
    assert data.rstrip().endswith(b"%%EOF")
    return data


def _paint_all(writer: QPdfWriter, report: Report) -> None:
    painter = QPainter(writer)
    try:
        for number in range(report.pages):
            if number:
                writer.newPage()
            paint_page(painter, report, number)
    finally:
        painter.end()  # a painter left open takes the process down


def _offscreen_application() -> QApplication:
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    return QApplication(["switchwright"])


def _writer(
    buffer: QBuffer, selection: Selection, assessment: Assessment, paper: PageSize
) -> QPdfWriter:
    writer = QPdfWriter(buffer)
    writer.setResolution(_DPI)
    writer.setPageLayout(
        QPageLayout(
            QPageSize(_SIZES[paper]), QPageLayout.Orientation.Portrait, QMarginsF(0, 0, 0, 0)
        )
    )
    writer.setTitle(selection.title or "Selection report")
    writer.setAuthor(selection.engineer)
    writer.setCreator(f"{assessment.program} {assessment.version}")
    writer.setDocumentId(QUuid.createUuidV5(_NAMESPACE, assessment.fingerprint.encode()))
    writer.addFileAttachment("selection.json", selection_bytes(selection), "application/json")
    writer.addFileAttachment("results.json", results_json(assessment), "application/json")
    return writer
