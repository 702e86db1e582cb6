"""The Report page: what is still assumed, what stands in the head, and the pages as they print."""

from __future__ import annotations

from collections.abc import Mapping

from PySide6.QtCore import Qt, QTimer
from PySide6.QtWidgets import (
    QHBoxLayout,
    QLabel,
    QLineEdit,
    QPlainTextEdit,
    QPushButton,
    QScrollArea,
    QVBoxLayout,
    QWidget,
)

from app.entry_names import assumed_entries, name_of
from app.open_selection import OpenSelection
from app.pages.page import Page
from app.picture import Picture, Problem
from app.report.options import ReportOptions
from app.report.pdf import report_of
from app.theme import BODY, TABLE, font
from app.verdict_sentence import statement_of_problems
from app.widgets.choice_entry import ChoiceEntry
from app.widgets.entry_row import WIDE, words
from app.widgets.page_sheets import PageSheets
from engine.errors import SwitchwrightError

_TEXTS = {"title": "Title", "engineer": "Engineer", "reference": "Reference"}
_SIZES: Mapping[object, str] = {"A4": "A4", "Letter": "Letter"}
_CANDIDATES: Mapping[object, str] = {False: "all", True: "chosen only"}
_REST_MS = 150
"""The pages are laid out anew when entries have rested for so long."""


class ReportPage(Page):
    """Entries of the head at the left, the pages at the right."""

    title = "Report"

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document)
        self.texts = {key: QLineEdit() for key in _TEXTS}
        self.notes = QPlainTextEdit()
        self.paper = ChoiceEntry("", "Paper", _SIZES)
        self.paper.set_value("A4")
        self.candidates = ChoiceEntry("", "Candidates in the report", _CANDIDATES)
        self.candidates.set_value(False)
        self.save = QPushButton("Save as PDF …")
        self.sheets = PageSheets()
        self._missing = QWidget()
        self._missing_place = QVBoxLayout()
        self.said = words("", TABLE, "second")
        self._picture: Picture | None = None
        self._timer = QTimer(self, singleShot=True, interval=_REST_MS)
        self._timer.timeout.connect(self._lay_out_pages)
        self._build()
        self._connect()
        self._refresh()

    # Results ----------------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        same = self._picture is not None and (
            picture.selection == self._picture.selection
            and picture.assessment == self._picture.assessment
        )
        self._picture = picture
        self.save.setEnabled(True)
        self.said.setText("")
        if not same or self.sheets.stale:
            self._timer.start()
        self._list_missing(picture)

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self.save.setEnabled(False)
        self.said.setText(str(statement_of_problems(problems)))
        self.sheets.show_stale()

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self._picture = None
        self._timer.stop()
        self.save.setEnabled(False)
        self.sheets.show_report(None)
        names = ", ".join(name_of(key) for key in missing)
        self.said.setText(f"Needs {names}." if names else "Computing …")
        self._show_lines({})

    def go_to(self, key: str) -> bool:
        field = {**self.texts, "notes": self.notes}.get(key)
        if field is not None:
            field.setFocus()
        return field is not None

    def panes(self) -> tuple[QWidget, ...]:
        return self.texts["title"], self.sheets

    # Pages ------------------------------------------------------------------------------

    def _lay_out_pages(self) -> None:
        if self._picture is None:
            return
        selection, assessment = self._picture.selection, self._picture.assessment
        try:
            report = report_of(selection, assessment, self._options())
        except SwitchwrightError as error:
            self.said.setText(str(error))
        else:
            self.sheets.show_report(report)
            self.said.setText(f"{report.pages} pages")

    # Assumed and missing ----------------------------------------------------------------

    def _show_lines(self, lines: Mapping[str, str]) -> None:
        """Replace the list by lines that lead to their keys."""
        before, self._missing = self._missing, QWidget()
        layout = QVBoxLayout(self._missing)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(0)
        for key, text in lines.items():
            layout.addWidget(self._line(key, text))
        self._missing_place.replaceWidget(before, self._missing)
        before.deleteLater()

    def _list_missing(self, picture: Picture) -> None:
        """One line for each assumed entry and each rating that a row waits for."""
        lines = {key: f"{name_of(key)}: assumed" for key in assumed_entries(picture.selection)}
        for index, result in enumerate(picture.assessment.candidates):
            for need in dict.fromkeys(need for check in result.checks for need in check.needs):
                of_candidate = need.split(".")[0] in {"switch", "diode"}
                key = f"candidates.{index}.{need}" if of_candidate else need
                lines[key] = (
                    f"{result.name}: {name_of(key)} missing"
                    if of_candidate
                    else (f"{name_of(key)} missing")
                )
        self._show_lines(lines)

    def _line(self, key: str, text: str) -> QPushButton:
        button = QPushButton(text)
        button.setFlat(True)
        button.setFont(font(TABLE))
        button.setStyleSheet("text-align: left; padding: 2px 0;")
        button.setToolTip(text)
        button.clicked.connect(lambda: self.asked.emit(key))
        return button

    # Set-up -----------------------------------------------------------------------------

    def _refresh(self) -> None:
        selection = self.document.selection
        for key, field in self.texts.items():
            if field.text() != getattr(selection, key):
                field.setText(getattr(selection, key))
                field.setCursorPosition(0)
        if self.notes.toPlainText() != selection.notes:
            self.notes.setPlainText(selection.notes)

    def _connect(self) -> None:
        self.document.changed.connect(self._refresh)
        for key, field in self.texts.items():
            field.textEdited.connect(
                lambda text, key=key: self.document.set_entry(key, text, _TEXTS[key])
            )
            field.editingFinished.connect(self.document.leave_field)
        self.notes.textChanged.connect(
            lambda: self.document.set_entry("notes", self.notes.toPlainText(), "Notes")
        )
        self.paper.entered.connect(self._lay_out_pages)
        self.candidates.entered.connect(self._lay_out_pages)
        self.save.clicked.connect(lambda: self.report_asked.emit(self._options()))

    def _options(self) -> ReportOptions:
        return ReportOptions(
            paper="Letter" if self.paper.value == "Letter" else "A4",
            only_chosen=bool(self.candidates.value),
        )

    def _build(self) -> None:
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(0)
        row.addWidget(self._column())
        row.addWidget(self.sheets, 1)

    def _column(self) -> QWidget:
        column = QWidget()
        layout = QVBoxLayout(column)
        layout.setContentsMargins(12, 12, 12, 12)
        layout.setSpacing(4)
        layout.addWidget(_head("In the report's head"))
        for key, field in self.texts.items():
            label = words(_TEXTS[key])
            label.setBuddy(field)
            field.setAccessibleName(_TEXTS[key])
            field.setMaxLength(400)
            field.setAcceptDrops(False)  # a file dropped here is for the window
            layout.addWidget(label)
            layout.addWidget(field)
        label = words("Notes")
        label.setBuddy(self.notes)
        self.notes.setAccessibleName("Notes")
        self.notes.setTabChangesFocus(True)
        self.notes.setAcceptDrops(False)
        self.notes.setFixedHeight(72)
        layout.addWidget(label)
        layout.addWidget(self.notes)
        layout.addSpacing(12)
        layout.addWidget(_head("Paper"))
        layout.addWidget(self.paper)
        layout.addWidget(_head("Candidates"))
        layout.addWidget(self.candidates)
        layout.addWidget(self.save)
        layout.addWidget(self.said)
        self.said.setWordWrap(True)
        layout.addSpacing(12)
        layout.addWidget(_head("Assumed or missing"))
        self._missing_place.addWidget(self._missing)
        layout.addLayout(self._missing_place)
        layout.addStretch(1)
        return _scrolled(column)


def _head(text: str) -> QLabel:
    label = QLabel(text)
    label.setFont(font(BODY, bold=True))
    return label


def _scrolled(column: QWidget) -> QScrollArea:
    area = QScrollArea()
    area.setAccessibleName("Entries of the report")
    area.setWidgetResizable(True)
    area.setFrameShape(QScrollArea.Shape.NoFrame)
    area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
    area.setFixedWidth(WIDE.column)
    area.setWidget(column)
    return area
