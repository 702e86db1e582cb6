"""The window: head, rail, pages and verdict line around one document."""

from __future__ import annotations

import platform
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TypeVar

from PySide6.QtCore import Qt, QTimer, Signal, qVersion
from PySide6.QtGui import (
    QCloseEvent,
    QDragEnterEvent,
    QDropEvent,
    QShowEvent,
)
from PySide6.QtWidgets import (
    QApplication,
    QHBoxLayout,
    QLineEdit,
    QMainWindow,
    QPlainTextEdit,
    QStackedWidget,
    QVBoxLayout,
    QWidget,
)

from app.assessment_runner import AssessmentRunner, Compute
from app.cautions import cautions
from app.dialogs import PROGRAM, Dialogs
from app.document_files import DocumentFiles
from app.exports import Exports
from app.live_results import LiveResults, Standing
from app.looked_at import LookedAt
from app.looked_at_bar import LookedAtBar
from app.menus import Menus
from app.open_selection import OpenSelection
from app.pages.page import Page, PageType
from app.panes import UndoKeysForDocument, focus_into, focus_next_pane
from app.picture import picture_of
from app.rail import Rail
from app.report.options import ReportOptions
from app.settings import Settings
from app.theme import ThemeChoice, apply_theme
from app.verdict_line import VerdictLine
from app.widgets.cautions_band import CautionsBand
from app.widgets.elided_label import ElidedLabel
from app.widgets.progress_end import ProgressEnd
from engine.version import VERSION

MINIMUM = (1024, 640)
USUAL = (1440, 830)
MENU_HEIGHT = 26
HEAD_HEIGHT = 36
OTHER_PAGES_AFTER_MS = 500
"""The page in view is painted and filled before the others are made."""
NOTICE_MS = 4000

Layout = TypeVar("Layout", QVBoxLayout, QHBoxLayout)


class MainWindow(QMainWindow):
    """Shows one document. Pages are made when they first come into view, or when idle."""

    closing = Signal()
    """The document is saved or given up; the window goes."""

    def __init__(
        self,
        page_types: Sequence[PageType],
        settings: Settings,
        dialogs: Dialogs | None = None,
        compute: Compute = picture_of,
        log_text: Callable[[], str] = str,
    ) -> None:
        super().__init__()
        self.settings = settings
        self.dialogs = Dialogs(self) if dialogs is None else dialogs
        self.document = OpenSelection(parent=self)
        self._runner = AssessmentRunner(compute, self)
        self.results = LiveResults(self.document, self._runner, self)
        self.files = DocumentFiles(self.document, settings, self.dialogs, self)
        self.exports = Exports(self.dialogs, self)
        self._log_text = log_text
        self._page_types = page_types
        self._pages: dict[str, Page] = {}
        self._shown: dict[object, Standing] = {}
        self._undo_keys = UndoKeysForDocument(self)
        self._closed = False
        self._lay_out()
        self._menus = Menus(self)
        self._connect()
        self.show_page(self.page_titles[0])
        self._show_name()

    @property
    def page_titles(self) -> tuple[str, ...]:
        return tuple(page.title for page in self._page_types)

    @property
    def current_page(self) -> Page:
        page = self._stack.currentWidget()
        assert isinstance(page, Page)
        return page

    # Pages ----------------------------------------------------------------------------

    def show_page(self, title: str) -> None:
        self._stack.setCurrentWidget(self._page(title))
        self.rail.set_current(title)
        self._update(self.current_page)

    def go_to(self, key: str, looked_at: LookedAt | None = None) -> None:
        """Look at this operating point and put the focus into the field of this key."""
        if looked_at is not None:
            self.document.looked_at = looked_at
        title = next((t for t in self.page_titles if key and self._page(t).go_to(key)), None)
        if title is not None:
            self.show_page(title)
            self.current_page.go_to(key)

    def next_pane(self, backwards: bool = False) -> None:
        panes = (self.looked_at_bar, self.rail, *self.current_page.panes(), self.verdict_line)
        focus_next_pane(panes, backwards)

    def _page(self, title: str) -> Page:
        if title not in self._pages:
            page_type = self._page_types[self.page_titles.index(title)]
            page = self._pages[title] = page_type(self.document)
            page.asked.connect(self.go_to)
            page.report_asked.connect(self.export_report)
            self._stack.addWidget(page)
        return self._pages[title]

    def _make_next_page(self) -> None:
        """Pages not yet seen are made one at a time, while nothing else is to do."""
        title = next((t for t in self.page_titles if t not in self._pages), None)
        if title is not None:
            self._page(title)
            QTimer.singleShot(0, self, self._make_next_page)

    # Results --------------------------------------------------------------------------

    def _on_results(self, standing: Standing) -> None:
        for view in (self.current_page, self.rail, self.verdict_line):
            self._update(view)
        for action in self._menus.needs_result:
            action.setEnabled(standing.picture is not None and not standing.stale)

    def _update(self, view: Page | Rail | VerdictLine) -> None:
        standing = self.results.standing
        standing.show_on(view, self._shown.get(view))
        self._shown[view] = standing

    def look_at_nominal(self) -> None:
        self.document.looked_at = LookedAt(position=self.document.looked_at.position)

    # What the menu does ---------------------------------------------------------------

    def copy(self) -> None:
        focus = QApplication.focusWidget()
        if isinstance(focus, QLineEdit | QPlainTextEdit):
            focus.copy()
        else:
            self.current_page.copy()

    def export_report(self, options: ReportOptions | None = None) -> None:
        picture = self.results.standing.picture
        if picture is not None:
            self.exports.report(picture, self.files.name, options or ReportOptions())

    def export_tables(self) -> None:
        picture = self.results.standing.picture
        if picture is not None:
            self.exports.tables(picture)

    def set_theme(self, choice: ThemeChoice) -> None:
        self.settings.theme = choice
        apply_theme(_application(), choice)

    def show_cautions(self) -> None:
        self.dialogs.show_text("Before you rely on it", "\n\n".join(cautions()))

    def show_log(self) -> None:
        self.dialogs.show_text("What the program noted", self._log_text() or "Nothing so far.")

    def show_about(self) -> None:
        self.dialogs.show_text(
            PROGRAM,
            f"{PROGRAM} {VERSION}\nPython {platform.python_version()}\nQt {qVersion()}\n"
            f"{platform.platform()}",
        )

    def show_mistake(self, trace: str) -> None:
        """A mistake in the program: say so, with the text to copy, and go on."""
        self.dialogs.show_text(
            "A mistake in this program stopped the last action. Your work is kept; "
            "the text below helps to find the mistake.",
            trace,
        )

    # The window itself ----------------------------------------------------------------

    def _lay_out(self) -> None:
        self.setMinimumSize(*MINIMUM)
        self.resize(*USUAL)
        self.setAcceptDrops(True)
        self.menuBar().setFixedHeight(MENU_HEIGHT)
        self.rail = Rail(self.page_titles)
        self.looked_at_bar = LookedAtBar(self.document)
        self.verdict_line = VerdictLine()
        self._progress = ProgressEnd()
        self._stack = QStackedWidget()
        self._band = CautionsBand()
        self._band.setVisible(self.settings.cautions_understood != VERSION)
        body = _row(self.rail)
        body.addLayout(_column(self._band, self._stack), 1)
        column = _column(self._head())
        column.addLayout(body, 1)
        bottom = _row(self.verdict_line, self._progress)
        bottom.setStretch(0, 1)
        column.addLayout(bottom)
        whole = QWidget()
        whole.setLayout(column)
        self.setCentralWidget(whole)

    def _head(self) -> QWidget:
        head = QWidget()
        head.setObjectName("head")
        head.setFixedHeight(HEAD_HEIGHT)
        self._name = ElidedLabel()
        self._name.setObjectName("title")
        layout = QHBoxLayout(head)
        layout.setContentsMargins(12, 0, 12, 0)
        layout.setSpacing(24)
        layout.addWidget(self._name, 1)
        layout.addWidget(self.looked_at_bar)
        return head

    def _connect(self) -> None:
        self.results.changed.connect(self._on_results)
        self.results.slow.connect(self._progress.show_progress)
        self._progress.cancelled.connect(self.results.cancel)
        self.exports.busy.connect(self._set_waiting)
        self.exports.written.connect(self._on_written)
        self.rail.page_chosen.connect(self.show_page)
        self.verdict_line.asked.connect(self.go_to)
        self._band.understood.connect(self._on_understood)
        for change in (self.document.changed, self.document.saved):
            change.connect(self._show_name)
        self.document.undo_stack.cleanChanged.connect(self._show_name)
        _application().focusChanged.connect(self._on_focus_changed)

    def _show_name(self) -> None:
        name = self.files.name
        self._name.setText(self.document.selection.title or name)
        self.setWindowTitle(f"{name}[*] – {PROGRAM}")
        self.setWindowModified(not self.document.undo_stack.isClean())

    def _on_focus_changed(self, old: QWidget | None, new: QWidget | None) -> None:
        self.document.leave_field()
        if old is not None:
            old.removeEventFilter(self._undo_keys)
        if new is not None and self.isAncestorOf(new):
            new.installEventFilter(self._undo_keys)

    def _set_waiting(self, waiting: bool) -> None:
        if waiting:
            self.setCursor(Qt.CursorShape.BusyCursor)
        else:
            self.unsetCursor()

    def _on_written(self, path: Path) -> None:
        self._name.setText(f"Written: {path.name}")
        QTimer.singleShot(NOTICE_MS, self, self._show_name)

    def _on_understood(self) -> None:
        self.settings.cautions_understood = VERSION
        self._band.hide()
        focus_into(self.current_page)

    def showEvent(self, event: QShowEvent) -> None:
        super().showEvent(event)
        if not event.spontaneous():
            focus_into(self.current_page)
        QTimer.singleShot(OTHER_PAGES_AFTER_MS, self, self._make_next_page)

    def dragEnterEvent(self, event: QDragEnterEvent) -> None:
        if _dropped_file(event) is not None:
            event.acceptProposedAction()

    def dropEvent(self, event: QDropEvent) -> None:
        path = _dropped_file(event)
        if path is not None:
            event.acceptProposedAction()
            # Questions come after the drop has ended, or the other program would hang on it.
            QTimer.singleShot(0, self, lambda: self.files.open(path))

    def restore_layout(self) -> None:
        """Size and place as they were when the window was last closed."""
        stored = self.settings.window()
        if stored is not None:
            geometry, state = stored
            self.restoreGeometry(geometry)
            self.restoreState(state)

    def closeEvent(self, event: QCloseEvent) -> None:
        if self._closed:
            event.accept()
        elif self.files.may_leave():
            self._close_down()
            self.closing.emit()
            event.accept()
        else:
            event.ignore()

    def leave(self) -> None:
        """Go without a question; unsaved work stays in the recovery file."""
        if not self._closed:
            self._close_down()
        self.close()

    def _close_down(self) -> None:
        self._closed = True
        self.settings.remember_window(self.saveGeometry(), self.saveState())
        self.settings.write()
        self._runner.shut_down()
        self.exports.shut_down()


def _application() -> QApplication:
    application = QApplication.instance()
    assert isinstance(application, QApplication)
    return application


def _column(*widgets: QWidget) -> QVBoxLayout:
    return _filled(QVBoxLayout(), widgets)


def _row(*widgets: QWidget) -> QHBoxLayout:
    return _filled(QHBoxLayout(), widgets)


def _filled(layout: Layout, widgets: Sequence[QWidget]) -> Layout:
    layout.setContentsMargins(0, 0, 0, 0)
    layout.setSpacing(0)
    for widget in widgets:
        layout.addWidget(widget)
    return layout


def _dropped_file(event: QDropEvent) -> Path | None:
    urls = event.mimeData().urls()
    if len(urls) == 1 and urls[0].isLocalFile():
        return Path(urls[0].toLocalFile())
    return None
