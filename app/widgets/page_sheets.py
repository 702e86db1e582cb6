"""The pages of a report as they will print, one below the other."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QPainter, QPaintEvent, QPixmap, QResizeEvent
from PySide6.QtWidgets import QScrollArea, QVBoxLayout, QWidget

from app.report.pdf import Report, paint_page
from app.theme import LIGHT, TITLE, font, theme

GAP = 12
WIDEST = 760
_FADED = 0.45
_TOP_CENTRE = Qt.AlignmentFlag.AlignTop | Qt.AlignmentFlag.AlignHCenter


class Sheet(QWidget):
    """One page, drawn when it first comes into view."""

    def __init__(self, report: Report, number: int, width: int) -> None:
        super().__init__()
        self._report, self._number = report, number
        height = round(width * report.paper.height() / report.paper.width())
        self.setFixedSize(QSize(width, height))
        self.setAccessibleName(f"page {number + 1} of {report.pages}")
        self._stale = False
        self._picture: QPixmap | None = None

    def set_stale(self) -> None:
        """Fade the page, take the marks off its verdicts, and say what it is."""
        self._stale = True
        self._picture = None
        self.update()

    def paintEvent(self, event: QPaintEvent) -> None:
        if self._picture is None:
            self._picture = self._drawn()
        painter = QPainter(self)
        painter.drawPixmap(0, 0, self._picture)
        if self._stale:
            painter.setPen(LIGHT.stale)
            painter.setFont(font(TITLE, bold=True))
            painter.drawText(self.rect().adjusted(0, 8, 0, 0), _TOP_CENTRE, "stale")

    def _drawn(self) -> QPixmap:
        ratio = self.devicePixelRatioF()
        picture = QPixmap(self.size() * ratio)
        picture.setDevicePixelRatio(ratio)
        picture.fill(LIGHT.panel)
        painter = QPainter(picture)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        scale = self.width() / self._report.paper.width()
        painter.scale(scale, scale)
        painter.setOpacity(_FADED if self._stale else 1.0)
        paint_page(painter, self._report, self._number, marks=not self._stale)
        painter.end()
        return picture


class PageSheets(QScrollArea):
    """All pages of a report; faded, and without the marks of verdicts, while they are stale."""

    def __init__(self) -> None:
        super().__init__()
        self.setWidgetResizable(True)
        self.setFrameShape(QScrollArea.Shape.NoFrame)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.setAccessibleName("pages of the report")
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self._report: Report | None = None
        self._stale = False
        self._column = _Column()

    def show_report(self, report: Report | None) -> None:
        """Show other pages, at the place in them where the last ones were looked at."""
        self._report = report
        self._stale = False
        self._fill()

    def show_stale(self) -> None:
        self._stale = True
        for sheet in self.sheets:
            sheet.set_stale()

    @property
    def sheets(self) -> list[Sheet]:
        return self._column.findChildren(Sheet)

    def resizeEvent(self, event: QResizeEvent) -> None:
        super().resizeEvent(event)
        if self._report is not None and self._width() != self._filled_at:
            self._fill()

    def _width(self) -> int:
        return max(240, min(WIDEST, self.viewport().width() - 2 * GAP))

    def _fill(self) -> None:
        place = self.verticalScrollBar().value()
        self._filled_at = self._width()
        self._column = _Column()
        layout = QVBoxLayout(self._column)
        layout.setContentsMargins(GAP, GAP, GAP, GAP)
        layout.setSpacing(GAP)
        if self._report is not None:
            for number in range(self._report.pages):
                sheet = Sheet(self._report, number, self._filled_at)
                layout.addWidget(sheet, 0, Qt.AlignmentFlag.AlignHCenter)
        layout.addStretch(1)
        self.setWidget(self._column)
        self._column.adjustSize()
        self.verticalScrollBar().setValue(place)

    @property
    def stale(self) -> bool:
        return self._stale


class _Column(QWidget):
    """The ground under the sheets."""

    def paintEvent(self, event: QPaintEvent) -> None:
        QPainter(self).fillRect(event.rect(), theme().shade)
