"""What the verdict of a candidate waits for, the figure that settles most rows first."""

from __future__ import annotations

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
        button = QPushButton(f"{name} ({rows} row{'s' if rows > 1 else ''})", flat=True)
        button.setCursor(Qt.CursorShape.PointingHandCursor)
        button.setAccessibleName(f"{name}, missing, settles {rows} rows: go there")
        whole_key = f"candidates.{column}.{key}" if own else key
        button.clicked.connect(partial(self._ask, whole_key))
        self._row.addWidget(button)

    def _ask(self, key: str, *_: object) -> None:
        self.asked.emit(key)
