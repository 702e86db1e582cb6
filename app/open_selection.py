"""The open document: the current selection, its undo steps, its file, and what is looked at."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QObject, Signal
from PySide6.QtGui import QUndoStack

from app.looked_at import LookedAt
from engine.selection import Selection, entry, new_selection, with_entry


class OpenSelection(QObject):
    """One selection under edit. Every edit replaces the frozen selection and can be undone.

    `undo_stack.isClean()` says whether the file on disk holds the current selection.

    The stack keeps the names of the steps only; the selection after each stands in a list.
    Commands with contents of their own would belong to Qt and to Python's garbage collector
    at once, and be freed twice.
    """

    changed = Signal()
    """After any edit, undo, redo or opening."""
    looked_at_changed = Signal()
    refusals_changed = Signal()
    opened = Signal()
    """Another document has taken the place of the last one; `changed` follows."""
    saved = Signal()

    def __init__(self, selection: Selection | None = None, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self.undo_stack = QUndoStack(self)
        self._selection = new_selection() if selection is None else selection
        self._steps = [self._selection]
        self._typing: tuple[str, int] | None = None
        self._looked_at = LookedAt()
        self._refusals: dict[str, str] = {}
        self._visit = 0
        self._path: Path | None = None
        self.undo_stack.indexChanged.connect(self._on_index)

    @property
    def selection(self) -> Selection:
        return self._selection

    @property
    def path(self) -> Path | None:
        """The document's file, `None` while it has none."""
        return self._path

    @property
    def looked_at(self) -> LookedAt:
        return self._looked_at

    @looked_at.setter
    def looked_at(self, looked_at: LookedAt) -> None:
        if looked_at != self._looked_at:
            self._looked_at = looked_at
            self.looked_at_changed.emit()

    @property
    def refusals(self) -> dict[str, str]:
        """Fields that hold a text which is no value: key and sentence. The document keeps the
        last value; results count as stale while there are any."""
        return dict(self._refusals)

    def refuse_entry(self, key: str, text: str) -> None:
        """A field holds something unusable (`text` says why), or '' when it is fine again."""
        before = dict(self._refusals)
        if text:
            self._refusals[key] = text
        else:
            self._refusals.pop(key, None)
        if self._refusals != before:
            self.refusals_changed.emit()

    def set_entry(self, key: str, value: object, label: str) -> None:
        """Replace one entry (dotted key). Typing in one field merges into one undo step."""
        if entry(self._selection, key) == value:
            return
        after = with_entry(self._selection, key, value)
        typing = (key, self._visit)
        if self._typing == typing and not (self.undo_stack.canRedo() or self.undo_stack.isClean()):
            self._merge(after)
        else:
            self._push(after, label)
            self._typing = typing

    def replace(self, selection: Selection, label: str) -> None:
        """Any other edit, as one undo step."""
        if selection != self._selection:
            self._push(selection, label)
            self._typing = None

    def leave_field(self) -> None:
        """The next edit begins a new undo step even in the same field."""
        self._visit += 1

    def open(self, selection: Selection, path: Path | None, unsaved: bool = False) -> None:
        """Take another document in place of the current one and its undo steps."""
        self._steps = [selection]
        self._typing = None
        self._selection = selection
        self.undo_stack.clear()
        if unsaved:
            self.undo_stack.resetClean()
        self._path = path
        self._refusals.clear()
        self._looked_at = LookedAt()
        self.opened.emit()
        self.looked_at_changed.emit()
        self.refusals_changed.emit()
        self.changed.emit()

    def saved_as(self, path: Path) -> None:
        """The current selection now stands in this file."""
        self._path = path
        self.leave_field()
        self.undo_stack.setClean()
        self.saved.emit()

    def _push(self, after: Selection, label: str) -> None:
        self._steps[self.undo_stack.index() + 1 :] = [after]
        self.undo_stack.beginMacro(label)
        self.undo_stack.endMacro()

    def _merge(self, after: Selection) -> None:
        """Let the last step end here, or take it back where it now changes nothing."""
        if after != self._steps[-2]:
            self._steps[-1] = after
            self._show(after)
        else:
            self.undo_stack.command(self.undo_stack.index() - 1).setObsolete(True)
            self.undo_stack.undo()
            del self._steps[-1]
            self._typing = None

    def _on_index(self, index: int) -> None:
        if self._steps[index] is not self._selection:
            self._show(self._steps[index])

    def _show(self, selection: Selection) -> None:
        moved = len(selection.candidates) != len(self._selection.candidates)
        self._selection = selection
        if moved:
            self._drop_refusals_of_candidates()
        self.changed.emit()

    def _drop_refusals_of_candidates(self) -> None:
        """Their keys count the candidates, and now name other ones or none."""
        for key in self.refusals:
            if key.startswith("candidates."):
                self.refuse_entry(key, "")
