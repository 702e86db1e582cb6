"""Moving about by keyboard: F6 between panes, and undo keys that reach the document."""

from __future__ import annotations

from collections.abc import Sequence

from PySide6.QtCore import QEvent, QObject, Qt
from PySide6.QtGui import QKeyEvent, QKeySequence
from PySide6.QtWidgets import QApplication, QWidget


def focus_next_pane(panes: Sequence[QWidget], backwards: bool = False) -> None:
    """From the pane that holds the focus to the next one that can take it."""
    shown = [pane for pane in panes if pane.isVisible()]
    focus = QApplication.focusWidget()
    here = next((i for i, pane in enumerate(shown) if _holds(pane, focus)), -1)
    order = shown[here + 1 :] + shown[: max(here, 0)]
    for pane in reversed(order) if backwards else order:
        if focus_into(pane):
            return


def focus_into(pane: QWidget) -> bool:
    """Put the focus on the pane, or on the first widget in it that takes it by Tab."""
    for widget in (pane, *pane.findChildren(QWidget)):
        takes_it = widget.focusPolicy() & Qt.FocusPolicy.TabFocus
        if takes_it and widget.isEnabled() and widget.isVisibleTo(pane.window()):
            widget.setFocus(Qt.FocusReason.TabFocusReason)
            return True
    return False


def _holds(pane: QWidget, focus: QWidget | None) -> bool:
    return focus is not None and (pane is focus or pane.isAncestorOf(focus))


class UndoKeysForDocument(QObject):
    """Keeps the undo and redo keys from a text field, whose own undo would hide the document's.

    To be installed as the event filter of the widget in focus.
    """

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        if event.type() == QEvent.Type.ShortcutOverride and isinstance(event, QKeyEvent):
            keys = QKeySequence.StandardKey
            if event.matches(keys.Undo) or event.matches(keys.Redo):
                event.ignore()
                return True
        return False
