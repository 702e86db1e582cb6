"""Below the rating sheets: the current cell in full, with the law of every row it enters."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLabel, QVBoxLayout, QWidget

from app.theme import AXIS, BODY, font
from app.verdict_sentence import sentence_of
from app.widgets.sheet_model import Index, SheetModel
from app.widgets.sheet_rows import Cell, SheetRow
from engine.checks import Check

LINES, LINE = 4, 14
HEIGHT = 34 + LINES * LINE
HINT = "keys: M maximum, T typical, C read from curve, A assumed"


class CellDetail(QWidget):
    """Name and basis of a rating, then a line for each verdict row that compares it."""

    def __init__(self, model: SheetModel) -> None:
        super().__init__()
        self._model = model
        self.setFixedHeight(HEIGHT)
        self._head = QLabel()
        self._head.setFont(font(BODY, bold=True))
        self._lines = QLabel(wordWrap=True)
        self._lines.setFixedHeight(LINES * LINE)
        self._lines.setAlignment(Qt.AlignmentFlag.AlignTop)
        self._lines.setFont(font(AXIS))
        self._lines.setProperty("role", "second")
        self._lines.setTextInteractionFlags(Qt.TextInteractionFlag.TextSelectableByMouse)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(12, 6, 12, 4)
        layout.setSpacing(2)
        layout.addWidget(self._head)
        layout.addWidget(self._lines)
        layout.addStretch(1)

    def show_cell(self, index: Index) -> None:
        cell = self._model.cell(index) if index.isValid() else Cell(None)
        if cell.rating is None:
            self._head.clear()
            self._lines.clear()
            return
        self._head.setText(self._title(cell, self._model.rows[index.row()]))
        text = "\n".join(self._text(index, cell))
        self._lines.setText(text)
        self._lines.setToolTip(text)

    def say(self, sentence: str) -> None:
        """Say why the last thing asked for could not be done."""
        self._head.setText(sentence)
        self._lines.clear()

    @staticmethod
    def _title(cell: Cell, row: SheetRow) -> str:
        assert cell.rating is not None
        of_diode = " of the diode" if row.section == "diode" else ""
        return f"{cell.rating.symbol}{of_diode} – {cell.rating.name}"

    def _text(self, index: Index, cell: Cell) -> list[str]:
        fault = self._model.fault(index)
        lines = [fault] if fault else []
        laws = [] if self._model.stale else [_law(check) for check in cell.checks]
        return [line for line in dict.fromkeys([*lines, _basis(cell), *laws]) if line]


def _law(check: Check) -> str:
    said = check.how or sentence_of(check)
    return f"{check.verdict}{f', {check.position}' if check.position else ''}: {said}"


def _basis(cell: Cell) -> str:
    if cell.rating is None or cell.rating.form != "number" or cell.value is None:
        return ""
    if cell.assumed:
        return f"Basis: assumed – type a value, or confirm it with Ctrl+Enter ({HINT})"
    return f"Basis: {cell.basis} ({HINT})"
