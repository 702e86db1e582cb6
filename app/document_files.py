"""New, open, save: the document's way to and from the disk, never at the cost of work."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QObject, Signal

from app.dialogs import Dialogs
from app.open_selection import OpenSelection
from app.safe_write import write_atomically
from app.selection_file import read_selection, selection_bytes
from app.settings import Settings
from engine.errors import InvalidSelection
from engine.selection import new_selection


class DocumentFiles(QObject):
    """File actions of one window. Whatever fails leaves the open document as it is."""

    recent_changed = Signal()

    def __init__(
        self,
        document: OpenSelection,
        settings: Settings,
        dialogs: Dialogs,
        parent: QObject | None = None,
    ) -> None:
        super().__init__(parent)
        self._document = document
        self._settings = settings
        self._dialogs = dialogs

    @property
    def name(self) -> str:
        """What the document is called: its file, else its title."""
        path = self._document.path
        return path.stem if path else self._document.selection.title or "Untitled"

    def new(self) -> None:
        if self.may_leave():
            self._document.open(new_selection(), None)
            self._settings.last_file = None

    def choose_and_open(self) -> None:
        path = self._dialogs.file_to_open()
        if path is not None:
            self.open(path)

    def open(self, path: Path) -> bool:
        """Open a file, after the question about unsaved changes. Says whether it is open."""
        try:
            opened = read_selection(path)
        except InvalidSelection as error:
            self._dialogs.tell(f"{path.name} cannot be opened.", _in_lines(error))
            return False
        if not self.may_leave():
            return False
        self._document.open(opened.selection, opened.path and opened.path.absolute())
        self._remember(path.absolute())
        return True

    def save(self) -> bool:
        """Save into the document's file, or ask for one. Says whether it is saved."""
        path = self._document.path
        return self.save_as() if path is None else self._write(path)

    def save_as(self) -> bool:
        suggested = self._document.path or Path(_file_name(self.name))
        path = self._dialogs.file_to_save(suggested)
        if path is None:
            return False
        return self._write((path if path.suffix else path.with_suffix(".json")).absolute())

    def may_leave(self) -> bool:
        """Whether the open document may go: it is saved, or the user gives the changes up."""
        if self._document.undo_stack.isClean():
            return True
        answer = self._dialogs.ask_unsaved(self.name)
        return self.save() if answer == "save" else answer == "discard"

    def _write(self, path: Path) -> bool:
        try:
            write_atomically(path, selection_bytes(self._document.selection))
        except OSError as error:
            self._dialogs.tell(f"{path.name} cannot be saved.", error.strerror or str(error))
            return False
        self._document.saved_as(path)
        self._remember(path)
        return True

    def _remember(self, path: Path) -> None:
        self._settings.remember_file(path)
        self._settings.last_file = path
        self.recent_changed.emit()


def _in_lines(error: InvalidSelection, most: int = 12) -> str:
    lines = [str(fault) for fault in error.faults]
    more = [f"… and {len(lines) - most} more"] if len(lines) > most else []
    return "\n".join(lines[:most] + more)


def _file_name(title: str) -> str:
    """A file name that every system takes."""
    kept = "".join(letter if letter.isalnum() or letter in " -_" else " " for letter in title)
    return f"{' '.join(kept.split())[:80] or 'Untitled'}.json"
