"""The menu bar: every action of the window with its shortcut."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import TYPE_CHECKING, get_args

from PySide6.QtCore import Qt
from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QMenu

from app.theme import ThemeChoice

if TYPE_CHECKING:
    from app.main_window import MainWindow

Keys = QKeySequence.StandardKey


class Menus:
    """Fills the menu bar of a window and keeps the changing entries up to date."""

    def __init__(self, window: MainWindow) -> None:
        self._window = window
        self._add_file()
        self._add_edit()
        self._add_view()
        self._add_help()

    def _menu(self, title: str) -> QMenu:
        return self._window.menuBar().addMenu(title)

    def _add(
        self, menu: QMenu, text: str, then: Callable[[], object], *keys: Keys | str
    ) -> QAction:
        action = QAction(text, self._window)
        action.triggered.connect(lambda: then())
        action.setShortcuts([shortcut for key in keys if (shortcut := QKeySequence(key))])
        menu.addAction(action)
        return action

    def _add_file(self) -> None:
        window, menu = self._window, self._menu("&File")
        self._add(menu, "&New", window.files.new, Keys.New)
        self._add(menu, "&Open …", window.files.choose_and_open, Keys.Open)
        self._recent = menu.addMenu("Open &Recent")
        self._recent.aboutToShow.connect(self._fill_recent)
        menu.addSeparator()
        self._add(menu, "&Save", window.files.save, Keys.Save)
        self._add(menu, "Save &As …", window.files.save_as, "Ctrl+Shift+S")
        menu.addSeparator()
        self.needs_result = (
            self._add(menu, "&Export Report as PDF …", window.export_report, "Ctrl+E"),
            self._add(menu, "Export &Tables as CSV …", window.export_tables, "Ctrl+Shift+E"),
        )
        for action in self.needs_result:
            action.setEnabled(False)
        menu.addSeparator()
        self._add(menu, "&Quit", window.close, "Ctrl+Q")

    def _fill_recent(self) -> None:
        self._recent.clear()
        for path in self._window.settings.recent_files:
            action = self._add(self._recent, str(path), partial(self._window.files.open, path))
            action.setEnabled(path.exists())
        self._recent.addSeparator()
        self._add(self._recent, "&Clear List", self._window.settings.clear_recent_files)

    def _add_edit(self) -> None:
        window, menu = self._window, self._menu("&Edit")
        stack = window.document.undo_stack
        undo = stack.createUndoAction(window, "&Undo")
        undo.setShortcuts([QKeySequence(Keys.Undo)])
        redo = stack.createRedoAction(window, "&Redo")
        redo.setShortcuts([QKeySequence("Ctrl+Shift+Z"), QKeySequence("Ctrl+Y")])
        menu.addActions([undo, redo])
        menu.addSeparator()
        self._add(menu, "&Copy", window.copy, Keys.Copy)

    def _add_view(self) -> None:
        window, menu = self._window, self._menu("&View")
        self.view = menu
        for number, title in enumerate(window.page_titles, start=1):
            self._add(menu, f"&{title}", partial(window.show_page, title), f"Ctrl+{number}")
        menu.addSeparator()
        self._add(menu, "Look at &Nominal", window.look_at_nominal, "Ctrl+0")
        self._add(menu, "Compute A&new", window.results.compute_anew, "F5")
        menu.addSeparator()
        self._add(menu, "Next &Pane", window.next_pane, "F6")
        self._add(menu, "Pre&vious Pane", partial(window.next_pane, True), "Shift+F6")
        self._add_themes(menu.addMenu("&Theme"))
        self._page_part = menu.addSeparator()
        menu.aboutToShow.connect(self._fill_page_part)

    def _add_themes(self, menu: QMenu) -> None:
        group = QActionGroup(menu)
        names = {"system": "&As the System", "light": "&Light", "dark": "&Dark"}
        for choice in get_args(ThemeChoice):
            action = self._add(menu, names[choice], partial(self._window.set_theme, choice))
            action.setCheckable(True)
            action.setChecked(choice == self._window.settings.theme)
            group.addAction(action)

    def _fill_page_part(self) -> None:
        actions = self.view.actions()
        for action in actions[actions.index(self._page_part) + 1 :]:
            self.view.removeAction(action)
        self.view.addActions(self._window.current_page.actions())

    def _add_help(self) -> None:
        window, menu = self._window, self._menu("&Help")
        self._add(menu, "&Cautions", window.show_cautions, "F1")
        self._add(menu, "&Log", window.show_log)
        self._add(menu, "&About", window.show_about)
        for action in menu.actions():
            action.setMenuRole(QAction.MenuRole.NoRole)
        self._window.menuBar().setContextMenuPolicy(Qt.ContextMenuPolicy.PreventContextMenu)
