"""The field in the head of a rating sheet in which a candidate is renamed."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QFocusEvent, QKeyEvent
from PySide6.QtWidgets import QLineEdit, QWidget

from app.widgets.fault_note import FaultNote


class NameEntry(QLineEdit):
    """Enter takes the name, Esc leaves the old one; a name that cannot be is refused here."""

    named = Signal(str)
    given_up = Signal()

    def __init__(self, parent: QWidget, fault_of: Callable[[str], str | None]) -> None:
        super().__init__(parent)
        self._fault_of = fault_of
        self.setAccessibleName("Name of the candidate")
        self.setAcceptDrops(False)  # a file dropped here is for the window
        self._note = FaultNote(parent)
        self.textChanged.connect(self._look)
        self.hide()

    @property
    def fault(self) -> str:
        return self._fault_of(self.text().strip()) or ""

    def start(self, name: str) -> None:
        """Open on a name, all of it selected."""
        self.setText(name)
        self.show()
        self.raise_()
        self.selectAll()
        self.setFocus()
        self._look()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self._take()
        elif event.key() == Qt.Key.Key_Escape:
            self._close()
            self.given_up.emit()
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        super().focusOutEvent(event)
        if self.isVisible() and event.reason() != Qt.FocusReason.PopupFocusReason:
            fault, name = self.fault, self.text().strip()
            self._close()
            if not fault:
                self.named.emit(name)

    def _take(self) -> None:
        if not self.fault:
            name = self.text().strip()
            self._close()
            self.named.emit(name)

    def _close(self) -> None:
        self.hide()
        self._note.hide()

    def _look(self) -> None:
        fault = self.fault
        self._note.show_at(self, fault if self.isVisible() else "")
        self.setAccessibleDescription(fault)
        self.setProperty("fault", bool(fault))
        self.style().unpolish(self)
        self.style().polish(self)
