"""What the verdict of a candidate waits for, the figure that settles most rows first."""

from __future__ import annotations

from collections.abc import Sequence
from functools import partial

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QHBoxLayout, QLabel, QPushButton, QWidget

from app.entry_names import name_of
from app.widgets.sheet_rows import most_wanted, symbol_of
from engine.checks import CandidateResult
from engine.selection import Candidate

HEIGHT = 28
SHOWN = 4


class MissingLine(QWidget):
    """A sentence whose parts lead to the entries."""

    asked = Signal(str)
    """Key of the entry that was clicked."""

    def __init__(self) -> None:
        super().__init__()
        self.setFixedHeight(HEIGHT)
        self._row = QHBoxLayout(self)
        self._row.setContentsMargins(0, 0, 0, 4)
        self._row.setSpacing(4)
        self._shown: object = None

    def show_missing(
        self, column: int, candidate: Candidate, result: CandidateResult | None
    ) -> None:
        waits = most_wanted(result) if result is not None else []
        shown = (column, candidate.name, tuple(waits))
        if shown == self._shown:
            return
        self.clear()
        self._shown = shown
        if waits:
            self._say(f"{candidate.name} lacks most of all:")
            for key, rows in waits[:SHOWN]:
                self._offer(column, candidate, key, rows)
            if len(waits) > SHOWN:
                self._say(f"and {len(waits) - SHOWN} more")
        self._row.addStretch(1)

    def show_needs(self, missing: Sequence[str]) -> None:
        """What the duty lacks before anything can be assessed."""
        if tuple(missing) == self._shown:
            return
        self.clear()
        self._shown = tuple(missing)
        self._say("Not assessed: needs")
        for key in missing:
            self._link(key, name_of(key), f"{name_of(key)}, missing: go there")
        self._row.addStretch(1)

    def clear(self) -> None:
        self._shown = None
        while (item := self._row.takeAt(0)) is not None:
            if (widget := item.widget()) is not None:
                widget.hide()
                widget.deleteLater()

    def _say(self, text: str) -> None:
        label = QLabel(text)
        label.setProperty("role", "second")
        self._row.addWidget(label)

    def _offer(self, column: int, candidate: Candidate, key: str, rows: int) -> None:
        own = key.startswith(("switch.", "diode."))
        name = symbol_of(candidate, key) if own else name_of(key)
        counted = f"{rows} row{'s' if rows > 1 else ''}"
        whole_key = f"candidates.{column}.{key}" if own else key
        said = f"{name}, missing, settles {counted}: go there"
        self._link(whole_key, f"{name} ({counted})", said)

    def _link(self, key: str, text: str, said: str) -> None:
        button = QPushButton(text, flat=True)
        button.setCursor(Qt.CursorShape.PointingHandCursor)
        button.setAccessibleName(said)
        button.clicked.connect(partial(self._ask, key))
        self._row.addWidget(button)

    def _ask(self, key: str, *_: object) -> None:
        self.asked.emit(key)
