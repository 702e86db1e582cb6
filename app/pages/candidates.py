"""The Candidates page: rating sheets side by side, all headrooms, and what is wanted."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from PySide6.QtCore import Qt
from PySide6.QtGui import QAction, QGuiApplication, QKeySequence, QResizeEvent
from PySide6.QtWidgets import (
    QHBoxLayout,
    QLabel,
    QScrollArea,
    QStackedWidget,
    QToolButton,
    QVBoxLayout,
    QWidget,
)

from app import candidate_edits
from app.entry_names import name_of
from app.open_selection import OpenSelection
from app.pages.check_pages import key_of_check
from app.pages.page import Page
from app.picture import Picture, Problem
from app.theme import BODY, NARROW_BELOW, font
from app.widgets.cell_detail import CellDetail
from app.widgets.headroom_plot import HeadroomPlot
from app.widgets.missing_line import MissingLine
from app.widgets.name_entry import NameEntry
from app.widgets.rating_sheet import RatingSheets
from app.widgets.sheet_copy import sheets_as_text
from app.widgets.sheet_paste import with_pasted
from app.widgets.wanted_table import WantedTable
from engine.errors import InvalidSelection
from engine.selection import Selection

PLOT_WIDTH, NARROW_PLOT_WIDTH = 304, 208
BAR_HEIGHT = 40


class Candidates(Page):
    """Everything on it is an edit of the document; figures come from the last picture."""

    title = "Candidates"

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document)
        self.sheets = RatingSheets(document)
        self.plot = HeadroomPlot()
        self.wanted = WantedTable()
        self.detail = CellDetail(self.sheets.sheets)
        self.missing = MissingLine()
        self._picture: Picture | None = None
        self._needs: tuple[str, ...] = ()
        self._named = -1
        self._starts_sheet = False
        self.name_entry = NameEntry(self.sheets, self._name_fault)
        self._make_actions()
        self._lay_out()
        self._connect()
        self._on_document()

    # What can be done -------------------------------------------------------------------

    def _make_actions(self) -> None:
        add = self._add
        self.new_thyristor = add("New &Thyristor", "Ctrl+T", partial(self._new, "thyristor"))
        self.new_igbt = add("New &IGBT", "Ctrl+I", partial(self._new, "igbt"))
        self.copy_candidate = add("Copy Can&didate", "Ctrl+D", self._copy_candidate)
        self.rename = add("&Rename", "Ctrl+R", lambda: self._start_naming(self.sheets.column))
        self.choose = add("C&hoose", "Ctrl+K", self._choose)
        self.remove = add("Re&move", "Ctrl+Del", self._remove)

    def _add(self, text: str, keys: str, then: Callable[[], object]) -> QAction:
        action = QAction(text, self)
        action.setShortcut(QKeySequence(keys))
        action.setToolTip(f"{text.replace('&', '')} ({keys})")
        action.triggered.connect(lambda: then())
        self.addAction(action)
        return action

    def _replace(self, selection: Selection, label: str) -> None:
        self.document.leave_field()
        self.document.replace(selection, label)

    def _new(self, kind: str) -> None:
        self._replace(candidate_edits.with_new(self.document.selection, kind), "new candidate")
        self._name_last()

    def _copy_candidate(self) -> None:
        changed = candidate_edits.with_copy(self.document.selection, self.sheets.column)
        self._replace(changed, "copy of a candidate")
        self._name_last()

    def _name_last(self) -> None:
        last = len(self.document.selection.candidates) - 1
        self.sheets.start_sheet(last)
        self._start_naming(last, starts_sheet=True)

    def _choose(self) -> None:
        changed = candidate_edits.with_chosen(self.document.selection, self.sheets.column)
        self._replace(changed, f"choose {changed.chosen}")

    def _remove(self) -> None:
        column = self.sheets.column
        name = self.document.selection.candidates[column].name
        self._replace(candidate_edits.without(self.document.selection, column), f"remove {name}")
        if self.document.selection.candidates:
            self.sheets.setFocus()

    # Names ------------------------------------------------------------------------------

    def _start_naming(self, column: int, starts_sheet: bool = False) -> None:
        self._named, self._starts_sheet = column, starts_sheet
        self.sheets.scrollTo(self.sheets.sheets.index(0, column))
        self.name_entry.setGeometry(self.sheets.name_rect(column))
        self.name_entry.start(self.document.selection.candidates[column].name)

    def _name_fault(self, name: str) -> str | None:
        if not 0 <= self._named < len(self.document.selection.candidates):
            return None
        return candidate_edits.name_fault(self.document.selection, self._named, name)

    def _take_name(self, name: str) -> None:
        changed = candidate_edits.with_name(self.document.selection, self._named, name)
        self._replace(changed, f"name of {name}")
        self._leave_name()

    def _leave_name(self) -> None:
        if self._starts_sheet:
            self.sheets.start_sheet(self._named)
        else:
            self.sheets.setFocus()

    # Results ----------------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        from engine.rule_sets import rule_set_of

        self._picture, self._needs = picture, ()
        results = picture.assessment.candidates
        self.sheets.show_picture(picture)
        tight_pct = rule_set_of(picture.selection).tight_band_pct
        self.plot.show_results(results, picture.assessment.chosen, tight_pct)
        self.wanted.show_wanted(picture.assessment.wanted)
        self._no_wanted.setVisible(False)
        self._on_cell()

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        self.sheets.show_stale()
        self.plot.show_stale()
        self.wanted.show_stale()
        self._on_cell()

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        self._picture, self._needs = None, missing
        self.sheets.show_incomplete()
        self.plot.show_results((), "", 0.0)
        self.wanted.show_wanted(())
        names = ", ".join(name_of(key) for key in missing)
        self._no_wanted.setText(f"Needs {names}." if names else "Computing …")
        self._no_wanted.setVisible(True)
        self._on_cell()

    def go_to(self, key: str) -> bool:
        parts = key.split(".")
        if parts[0] != "candidates":
            return False
        if len(parts) < 3:
            self.sheets.setFocus()
            return True
        column = int(parts[1])
        if column >= len(self.document.selection.candidates):
            return False
        if parts[2] == "name":
            self._start_naming(column)
            return True
        section, row_key = ("candidate", "note") if parts[2] == "note" else (parts[2], parts[-1])
        return self.sheets.go_to(column, section, row_key)

    def panes(self) -> tuple[QWidget, ...]:
        return (self.sheets,) if self.document.selection.candidates else (self.wanted,)

    def copy(self) -> None:
        if self.document.selection.candidates:
            QGuiApplication.clipboard().setText(sheets_as_text(self.sheets.sheets))
        else:
            QGuiApplication.clipboard().setText(self.wanted.as_text())

    def _on_asked(self, column: int, check_id: str) -> None:
        assert self._picture is not None
        result = self._picture.assessment.candidates[column]
        check = next(each for each in result.checks if each.id == check_id)
        self.go_to(key_of_check(check, self.document.selection, result.name))

    def _follow(self, key: str) -> None:
        if not self.go_to(key):
            self.asked.emit(key)

    def _on_pasted(self, text: str) -> None:
        index = self.sheets.currentIndex()
        try:
            changed = with_pasted(
                self.document.selection, self.sheets.sheets.rows, index.row(), index.column(), text
            )
        except InvalidSelection as fault:
            self.detail.say(f"Nothing was pasted: {'; '.join(map(str, fault.faults[:2]))}")
        else:
            self._replace(changed, "paste ratings")

    def _on_document(self) -> None:
        some = bool(self.document.selection.candidates)
        self._stack.setCurrentIndex(int(some))
        for action in (self.copy_candidate, self.rename, self.choose, self.remove):
            action.setEnabled(some)
        self._on_cell()

    def _on_cell(self) -> None:
        index = self.sheets.currentIndex()
        self.detail.show_cell(index)
        column = index.column()
        self.plot.set_current(column)
        candidates = self.sheets.sheets.candidates
        if self._needs:
            self.missing.show_needs(self._needs)
        elif 0 <= column < len(candidates):
            result = None if self.sheets.sheets.stale else self.sheets.sheets.result(column)
            self.missing.show_missing(column, candidates[column], result)
        else:
            self.missing.clear()

    # Layout -----------------------------------------------------------------------------

    def _lay_out(self) -> None:
        self._scroll = QScrollArea(widgetResizable=True)
        self._scroll.setWidget(self.plot)
        self._scroll.setAlignment(Qt.AlignmentFlag.AlignTop)
        self._scroll.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self._scroll.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        both = QHBoxLayout()
        both.setSpacing(12)
        both.addWidget(self.sheets, 10)
        both.addWidget(self._scroll, 1)
        whole = QVBoxLayout()
        for part in (self.missing, both, self.detail):
            whole.addLayout(part) if isinstance(part, QHBoxLayout) else whole.addWidget(part)
        self._stack = QStackedWidget()
        self._stack.addWidget(self._without_candidates())
        self._stack.addWidget(_filled(whole))
        layout = QVBoxLayout(self)
        layout.setContentsMargins(12, 0, 12, 0)
        layout.setSpacing(0)
        layout.addWidget(self._bar())
        layout.addWidget(self._stack, 1)

    def _bar(self) -> QWidget:
        row = QHBoxLayout()
        row.setSpacing(12)
        for action in self.actions():
            button = QToolButton()
            button.setDefaultAction(action)
            button.setFocusPolicy(Qt.FocusPolicy.TabFocus)
            row.addWidget(button)
        row.addStretch(1)
        bar = _filled(row)
        bar.setFixedHeight(BAR_HEIGHT)
        return bar

    def _without_candidates(self) -> QWidget:
        column = QVBoxLayout()
        column.setSpacing(8)
        head = QLabel("No candidate yet. For this duty a part must at least have:")
        head.setFont(font(BODY, bold=True))
        self._no_wanted = QLabel()
        self._no_wanted.setProperty("role", "second")
        for part in (head, self._no_wanted):
            column.addWidget(part)
        column.addWidget(self.wanted, 1)
        column.addStretch()
        return _filled(column)

    def _connect(self) -> None:
        self.document.changed.connect(self._on_document)
        self.document.refusals_changed.connect(self._on_cell)
        self.sheets.column_changed.connect(self._on_cell)
        self.sheets.rename_asked.connect(self._start_naming)
        self.sheets.pasted.connect(self._on_pasted)
        self.missing.asked.connect(self._follow)
        self.plot.asked.connect(self._on_asked)
        self.name_entry.named.connect(self._take_name)
        self.name_entry.given_up.connect(self._leave_name)

    def resizeEvent(self, event: QResizeEvent) -> None:
        super().resizeEvent(event)
        narrow = self.window().width() < NARROW_BELOW
        self._scroll.setMinimumWidth(NARROW_PLOT_WIDTH if narrow else PLOT_WIDTH)


def _filled(layout: QHBoxLayout | QVBoxLayout) -> QWidget:
    layout.setContentsMargins(0, 0, 0, 0)
    widget = QWidget()
    widget.setLayout(layout)
    return widget
