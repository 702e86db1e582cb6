"""The Turn-off page: the time that each position has, and the time that the switch needs."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QHBoxLayout, QLabel, QScrollArea, QVBoxLayout, QWidget

from app.entry_names import name_of
from app.open_selection import OpenSelection
from app.pages.gating_section import GatingSection
from app.pages.page import Page
from app.picture import Picture, Problem
from app.theme import BODY, font
from app.turn_off_view import lanes_of, position_rows, sentences, worst_position
from app.verdict_sentence import corner_in_words
from app.widgets.check_rows import CheckRows, turn_off_rows
from app.widgets.choice_entry import ChoiceEntry
from app.widgets.entry_row import NARROW, WIDE, set_role
from app.widgets.time_bar import TimeBar
from app.widgets.turn_off_table import TurnOffTable
from app.widgets.window_width import WindowWidth
from engine.bridge import POSITIONS

WORST = -1
CHOICES: Mapping[object, str] = {WORST: "worst", **dict(enumerate(POSITIONS))}


class TurnOff(Page):
    """Picture and table show the looked-at point, the rows below them their worst corner."""

    title = "Turn-off"

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document)
        self.gating = GatingSection(document)
        self.position_choice = ChoiceEntry("", "Position looked at", CHOICES)
        self.position_choice.set_value(WORST)
        self.bar = TimeBar()
        self.table = TurnOffTable()
        self.rows = CheckRows()
        self._said = QLabel(wordWrap=True)
        self._place = _second()
        self._picture: Picture | None = None
        self._position = document.looked_at.position
        self._lay_out()
        self._connect()
        self.gating.refresh()

    @property
    def position(self) -> int:
        """Index of the position in view."""
        choice = self.position_choice.value
        if choice != WORST or self._picture is None:
            return int(choice) if isinstance(choice, int) and choice != WORST else 0
        return worst_position(self._picture)

    # Results ----------------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        self._picture = picture
        self.gating.show_faults({})
        self._show_position()
        assessment = picture.assessment
        self.rows.show_rows(turn_off_rows(assessment.candidates, assessment.chosen))
        self._rows_head.setVisible(bool(assessment.candidates))

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self.gating.show_faults({problem.key: problem.text for problem in problems})
        self._place.setText("stale")
        set_role(self._said, "second")
        for part in (self.bar, self.table, self.rows):
            part.show_stale()

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self._picture = None
        self.bar.show_lanes(())
        self.table.fill(())
        self.rows.show_rows(())
        self._rows_head.hide()
        names = ", ".join(name_of(key) for key in missing)
        self._said.setText(f"Needs {names}." if names else "Computing …")
        self._place.clear()

    def _show_position(self) -> None:
        picture = self._picture
        if picture is None:
            return
        self.bar.show_lanes(lanes_of(picture, self.position))
        self.table.show_rows(position_rows(picture), self.position)
        self._said.setText(" ".join(sentences(picture, self.position)))
        set_role(self._said, "")
        off = "" if picture.looked_at.is_nominal else ", not nominal"
        point = f"{POSITIONS[self.position]} at {corner_in_words(picture.corner)}{off}"
        judged = "; verdicts at their worst corner" if picture.assessment.candidates else ""
        self._place.setText(point + judged)

    # Choices ----------------------------------------------------------------------------

    def _choose(self, position: int) -> None:
        self.position_choice.set_value(position)
        self._show_position()
        if position != WORST:
            self.document.looked_at = replace(self.document.looked_at, position=position)

    def _on_looked_at(self) -> None:
        """Follow a position that was chosen elsewhere; another point keeps the choice."""
        before, self._position = self._position, self.document.looked_at.position
        if self._position != before and self._position != self.position:
            self._choose(self._position)

    def _on_opened(self) -> None:
        self.gating.discard_typing()
        self.position_choice.set_value(WORST)

    def go_to(self, key: str) -> bool:
        field = self.gating.field_of(key)
        if field is not None:
            field.setFocus()
        return field is not None

    def panes(self) -> tuple[QWidget, ...]:
        return self.gating, self.table

    def copy(self) -> None:
        QGuiApplication.clipboard().setText(f"{self.table.as_text()}\n\n{self.rows.as_text()}")

    # Layout -----------------------------------------------------------------------------

    def _lay_out(self) -> None:
        self._left = QScrollArea(widgetResizable=True)
        self._left.setWidget(self._entries())
        self._left.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        self._left.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        right = QScrollArea(widgetResizable=True)
        right.setWidget(self._results())
        right.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        layout = QHBoxLayout(self)
        layout.setContentsMargins(0, 8, 0, 0)
        layout.setSpacing(12)
        layout.addWidget(self._left)
        layout.addWidget(right, 1)

    def _entries(self) -> QWidget:
        entries = QWidget()
        column = QVBoxLayout(entries)
        column.setContentsMargins(0, 0, 0, 0)
        column.addWidget(self.gating)
        column.addStretch(1)
        return entries

    def _results(self) -> QWidget:
        self._rows_head = _bold("Rows of turn-off, each at its worst corner")
        head = QHBoxLayout()
        head.setSpacing(12)
        head.addWidget(_bold("Position"))
        head.addWidget(self.position_choice)
        head.addWidget(self._place, 1)
        results = QWidget()
        column = QVBoxLayout(results)
        column.setContentsMargins(0, 0, 12, 12)
        column.setSpacing(8)
        column.addLayout(head)
        for part in (self._said, self.bar, self.table, self._rows_head, self.rows):
            column.addWidget(part)
        column.addStretch(1)
        return results

    def _connect(self) -> None:
        WindowWidth(self, self._fit)
        self.document.changed.connect(self.gating.refresh)
        self.document.opened.connect(self._on_opened)
        self.document.looked_at_changed.connect(self._on_looked_at)
        self.position_choice.entered.connect(self._choose)
        self.table.position_asked.connect(self._choose)

    def _fit(self, narrow: bool) -> None:
        widths = NARROW if narrow else WIDE
        self.gating.fit(widths)
        self._left.setFixedWidth(widths.column + 12)


def _bold(text: str) -> QLabel:
    label = QLabel(text)
    label.setFont(font(BODY, bold=True))
    return label


def _second() -> QLabel:
    label = QLabel()
    label.setProperty("role", "second")
    return label
