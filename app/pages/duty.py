"""The Duty page: entries, the strips over one period, and the bridge with its figures."""

from __future__ import annotations

from dataclasses import replace

from PySide6.QtGui import QAction, QGuiApplication, QKeySequence, QResizeEvent
from PySide6.QtWidgets import QHBoxLayout, QVBoxLayout, QWidget

from app.entry_names import name_of
from app.inductive_sentence import inductive_sentence
from app.open_selection import OpenSelection
from app.pages.duty_entries import DutyEntries
from app.pages.duty_side import DutySide
from app.pages.page import Page
from app.picture import Picture, Problem
from app.theme import TABLE, font
from app.widgets.cursor import AngleCursor
from app.widgets.elided_label import ElidedLabel
from app.widgets.plain_table import PlainTable
from app.widgets.strip_clipboard import copy_menu, copy_strips
from app.widgets.strips import Strips
from app.widgets.window_width import WindowWidth

SIDE_FROM = 1100
"""Width of the window in px below which the right column hides."""
SENTENCE_HEIGHT, EDGE = 24, 8


class DutyPage(Page):
    """Entries make edits; everything else shows the picture at the looked-at point."""

    title = "Duty"

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document)
        self._picture: Picture | None = None
        self._problems: tuple[Problem, ...] = ()
        self._stale = False
        self.angle_cursor = AngleCursor(self)
        self.entries = DutyEntries(document)
        self.strips = Strips(self.angle_cursor)
        self.side = DutySide(self.strips)
        self._lay_out()
        self._make_actions()
        self._connect()

    # Results ----------------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        self._stale = False
        self._mark_entries(())
        self._show(picture)

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self._stale = True
        self._mark_entries(problems)
        self._show_stale()
        if self._picture is None and problems:
            self.strips.show_incomplete(f"No result: {problems[0].text}")

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self._picture = None
        self._mark_entries(())
        names = ", ".join(name_of(key) for key in missing)
        self.strips.show_incomplete(f"Needs {names}" if names else "Computing …")
        self.side.show_incomplete()
        self._sentence.setText("")

    def _mark_entries(self, problems: tuple[Problem, ...]) -> None:
        if problems != self._problems:
            self._problems = problems
            self.entries.show_problems(problems)

    def _show(self, picture: Picture) -> None:
        self._picture = picture
        self.strips.show_picture(picture)
        self.side.show_picture(picture)
        self._sentence.setText(inductive_sentence(picture))

    def _show_stale(self) -> None:
        self.strips.show_stale()
        self.side.show_stale()
        self._sentence.setText("")

    # The position looked at -------------------------------------------------------------

    def look_at(self, position: int) -> None:
        """Look at T1..T6 (0..5)."""
        self.document.looked_at = replace(self.document.looked_at, position=position)

    def _on_looked_at(self) -> None:
        """Another position of the same picture needs nothing new to be computed."""
        position = self.document.looked_at.position
        if self._picture is None or self._picture.looked_at.position == position:
            return
        looked_at = replace(self._picture.looked_at, position=position)
        self._show(replace(self._picture, looked_at=looked_at))
        if self._stale:
            self._show_stale()

    # What the window asks ---------------------------------------------------------------

    def go_to(self, key: str) -> bool:
        return self.entries.go_to(key)

    def panes(self) -> tuple[QWidget, ...]:
        panes = (self.entries, self.strips, self.side.drawing, self.side.list)
        return tuple(pane for pane in panes if pane is self.entries or pane.isVisible())

    def copy(self) -> None:
        focus = QGuiApplication.focusObject()
        if isinstance(focus, PlainTable):
            QGuiApplication.clipboard().setText(focus.as_text())
        elif focus is self.side.drawing:
            QGuiApplication.clipboard().setPixmap(self.side.drawing.grab())
        else:
            copy_strips(self.strips, self.strips.current if focus is self.strips else None)

    def _make_actions(self) -> None:
        exchange = QAction("Positions or &Events", self)
        exchange.setShortcut(QKeySequence("Ctrl+L"))
        exchange.triggered.connect(self.side.exchange)
        copy_all = QAction("Copy All &Strips", self)
        copy_all.setShortcut(QKeySequence("Ctrl+Shift+C"))
        copy_all.triggered.connect(lambda: copy_strips(self.strips))
        self.addActions([exchange, copy_all])

    # Layout -----------------------------------------------------------------------------

    def _lay_out(self) -> None:
        self._sentence = ElidedLabel()
        self._sentence.setFont(font(TABLE))
        self._sentence.setFixedHeight(SENTENCE_HEIGHT)
        self._sentence.setProperty("role", "second")
        self._sentence.setContentsMargins(14, 0, 0, 0)
        middle = QVBoxLayout()
        middle.setSpacing(0)
        middle.addWidget(self._sentence)
        middle.addWidget(self.strips, 1)
        self._row = row = QHBoxLayout(self)
        row.setSpacing(0)
        row.addWidget(self.entries)
        row.addLayout(middle, 1)
        row.addWidget(self.side)

    def _connect(self) -> None:
        WindowWidth(self, self.side.fit)
        self.side.position_asked.connect(self.look_at)
        self.document.looked_at_changed.connect(self._on_looked_at)
        self.strips.menu_asked.connect(lambda place: copy_menu(self.strips).exec(place))

    def resizeEvent(self, event: QResizeEvent) -> None:
        beside = self.window().width() >= SIDE_FROM
        self.side.setVisible(beside)
        self._row.setContentsMargins(0, 0, 0 if beside else EDGE, 0)
