"""Sizes that depend on the width of the whole window, not of the widget itself."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import QEvent, QObject
from PySide6.QtWidgets import QWidget

from app.theme import NARROW_BELOW


class WindowWidth(QObject):
    """Tells a widget whether its window is narrow, when it is shown and at each change."""

    def __init__(self, widget: QWidget, tell: Callable[[bool], None]) -> None:
        super().__init__(widget)
        self._widget, self._tell = widget, tell
        self._narrow: bool | None = None
        widget.installEventFilter(self)

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        if watched is self._widget and event.type() == QEvent.Type.Show:
            self._widget.window().installEventFilter(self)
            self._look()
        elif event.type() == QEvent.Type.Resize and watched is self._widget.window():
            self._look()
        return False

    def _look(self) -> None:
        narrow = self._widget.window().width() < NARROW_BELOW
        if narrow != self._narrow:
            self._narrow = narrow
            self._tell(narrow)
