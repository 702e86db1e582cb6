"""The rating sheets as a table: rows of ratings, a column each candidate."""

from __future__ import annotations

from typing import Any

import msgspec
from PySide6.QtCore import QAbstractTableModel, QModelIndex, QPersistentModelIndex, Qt

from app.open_selection import OpenSelection
from app.pages.check_pages import deciding_check
from app.picture import Picture
from app.verdict_sentence import sentence_of
from app.widgets.sheet_rows import (
    KIND_NAMES,
    SECTION_NAMES,
    Cell,
    Section,
    SheetRow,
    cell_of,
    device_of,
    kind_of,
    sheet_rows,
)
from engine.checks import CandidateResult
from engine.ratings import Basis
from engine.selection import Candidate, entry
from parts_library.rating_sheet import sheet_number

Index = QModelIndex | QPersistentModelIndex


class SheetModel(QAbstractTableModel):
    """Shows the document's candidates with the results of the last picture beside them.

    Results are found by the candidate's name; a candidate that the picture does not know yet
    has none.
    """

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document)
        self._document = document
        self._unfolded: frozenset[Section] = frozenset()
        self._results: dict[str, CandidateResult] = {}
        self._refused: dict[str, str] = {}
        self._cells: dict[tuple[int, int], Cell] = {}
        self.stale = False
        self.rows: list[SheetRow] = []
        self.candidates: tuple[Candidate, ...] = ()
        document.changed.connect(self._on_document)
        document.opened.connect(self._forget_refused)
        document.refusals_changed.connect(self._repaint)
        self._on_document()

    def rowCount(self, parent: Index | None = None) -> int:
        return len(self.rows) if parent is None or not parent.isValid() else 0

    def columnCount(self, parent: Index | None = None) -> int:
        return len(self.candidates) if parent is None or not parent.isValid() else 0

    def flags(self, index: Index) -> Qt.ItemFlag:
        flags = Qt.ItemFlag.ItemIsEnabled | Qt.ItemFlag.ItemIsSelectable
        rating = self.cell(index).rating
        typed = rating is not None and rating.form in ("number", "text")
        return flags | Qt.ItemFlag.ItemIsEditable if typed else flags

    def data(self, index: Index, role: int = Qt.ItemDataRole.DisplayRole) -> Any:
        if role == Qt.ItemDataRole.DisplayRole:
            return self.text(index)
        if role in (Qt.ItemDataRole.AccessibleTextRole, Qt.ItemDataRole.ToolTipRole):
            return self.sentence(index)
        return None

    def headerData(
        self, section: int, orientation: Qt.Orientation, role: int = Qt.ItemDataRole.DisplayRole
    ) -> Any:
        tells = role in (Qt.ItemDataRole.ToolTipRole, Qt.ItemDataRole.AccessibleTextRole)
        across = orientation == Qt.Orientation.Horizontal
        if tells:
            return self.candidate_sentence(section) if across else self._row_sentence(section)
        if role != Qt.ItemDataRole.DisplayRole:
            return None
        return self.candidates[section].name if across else self._row_name(section)

    def _row_name(self, number: int) -> str:
        row = self.rows[number]
        if row.rating is not None:
            return f"{row.rating.symbol} {row.rating.sheet_unit}".strip()
        return "note" if row.form == "note" else SECTION_NAMES[row.section]

    def _row_sentence(self, number: int) -> str:
        rating = self.rows[number].rating
        return self._row_name(number) if rating is None else f"{rating.symbol}, {rating.name}"

    def candidate_sentence(self, column: int) -> str:
        """A candidate's verdict and what decides it, in words."""
        name, result = self.candidates[column].name, self.result(column)
        if result is None:
            return name
        if self.stale:
            return f"{name}: stale"
        decides = deciding_check(result)
        said = sentence_of(decides) if decides is not None else ""
        return "\n".join(
            part for part in (f"{name}: {result.verdict}", result.remark, said) if part
        )

    # What the cells hold ----------------------------------------------------------------

    def cell(self, index: Index) -> Cell:
        """What stands in a cell, worked out once between two changes: painting asks often."""
        place = index.row(), index.column()
        if place not in self._cells:
            candidate = self.candidates[place[1]]
            result = self._results.get(candidate.name)
            self._cells[place] = cell_of(candidate, self.rows[place[0]], result)
        return self._cells[place]

    def key(self, index: Index) -> str:
        """The dotted key of a cell's entry in the document."""
        row = self.rows[index.row()]
        parts = ["candidates", str(index.column())]
        return ".".join([*parts, row.key] if row.form == "note" else [*parts, row.section, row.key])

    def text(self, index: Index) -> str:
        """The entry as a sheet prints it, without unit."""
        cell, row = self.cell(index), self.rows[index.row()]
        if self.key(index) in self._refused:
            return self._refused[self.key(index)]
        if row.form == "heading":
            return KIND_NAMES[kind_of(device_of(self.candidates[index.column()], row.section))]
        if cell.rating is None or cell.value is None:
            return ""
        if isinstance(cell.value, bool):
            return "shared with the switch" if cell.value else "its own"
        if isinstance(cell.value, str):
            return cell.value
        return sheet_number(cell.rating, cell.value)

    def fault(self, index: Index) -> str:
        """Why the text typed into the cell cannot be used, '' where it can."""
        return self._document.refusals.get(self.key(index), "")

    def result(self, column: int) -> CandidateResult | None:
        return self._results.get(self.candidates[column].name)

    def sentence(self, index: Index) -> str:
        """The cell in words, for a reader of the screen and as a tip."""
        cell = self.cell(index)
        if cell.rating is None:
            return self.text(index)
        value = f"{self.text(index)} {cell.rating.sheet_unit}".strip() or "not entered"
        parts = [f"{cell.rating.symbol}, {cell.rating.name}: {value}"]
        if cell.assumed or cell.basis != "maximum":
            parts.append("assumed" if cell.assumed else cell.basis)
        parts += [f"{check.rating} {check.verdict}" for check in cell.checks if not self.stale]
        return "; ".join([*parts, self.fault(index)]).rstrip("; ")

    # Changes ----------------------------------------------------------------------------

    def show_picture(self, picture: Picture) -> None:
        self._results = {each.name: each for each in picture.assessment.candidates}
        self.stale = False
        self._repaint()

    def show_stale(self) -> None:
        self.stale = True
        self._repaint()

    def show_incomplete(self) -> None:
        self._results = {}
        self._repaint()

    def fold(self, section: Section) -> None:
        """Fold the refining rows of a section, or show them."""
        self._unfolded ^= {section}
        self._lay_out()

    def unfold(self, section: str) -> None:
        """Show the refining rows of a section, if there is one of that name."""
        for row in self.rows:
            if row.section == section and row.folded:
                self.fold(row.section)
                return

    def enter(self, index: Index, value: float | str | None, basis: Basis | None = None) -> None:
        """Make an entry. What was assumed is confirmed by it, unless a basis says otherwise."""
        row, name = self.rows[index.row()], self.candidates[index.column()].name
        if row.form == "note":
            self._document.set_entry(self.key(index), value or "", f"note on {name}")
            return
        device = device_of(self.candidates[index.column()], row.section)
        bases = {key: each for key, each in device.basis.items() if key != row.key}
        kept = device.basis.get(row.key, "maximum")
        new_basis = basis or ("maximum" if kept == "assumed" else kept)
        if value is not None and new_basis != "maximum":
            bases[row.key] = new_basis
        changed = msgspec.structs.replace(device, **{row.key: value}, basis=bases)
        self._document.set_entry(
            self._device_key(index), changed, f"{self._symbol(index)} of {name}"
        )

    def begin_entry(self, index: Index) -> None:
        """The field of a cell opens: what is typed is one undo step, and can be taken back."""
        self._document.leave_field()
        row = self.rows[index.row()]
        key = self.key(index) if row.form == "note" else self._device_key(index)
        self._before = (index, key, entry(self._document.selection, key))

    def take_back_entry(self) -> None:
        """Back to what stood in the cell when its field was opened."""
        index, key, before = self._before
        self.refuse(index, "", "")
        self._document.set_entry(key, before, "")

    def set_basis(self, index: Index, basis: Basis) -> None:
        """Say how sure a rating is; a usual value that is called so becomes an entry."""
        value = self.cell(index).value
        if isinstance(value, float | str) and value != "":
            self._document.leave_field()
            self.enter(index, value, basis)

    def toggle(self, index: Index) -> None:
        """The next of the choices of a cell that has some."""
        cell = self.cell(index)
        if cell.rating is None or cell.rating.form not in ("flag", "choice"):
            return
        self._document.leave_field()
        if cell.rating.form == "flag":
            self.enter(index, not cell.value)
        else:
            choices = (*cell.rating.choices,)
            self.enter(index, choices[(choices.index(str(cell.value)) + 1) % len(choices)])

    def clear(self, index: Index) -> None:
        """Take an entry out."""
        rating = self.cell(index).rating
        if rating is not None and rating.form != "flag":
            self._document.leave_field()
            self.refuse(index, "", "")
            self.enter(index, "" if rating.form == "text" else None)

    def refuse(self, index: Index, text: str, sentence: str) -> None:
        """Keep a text that is no value in its cell, with the reason; '' when it is fine again."""
        key = self.key(index)
        if sentence:
            self._refused[key] = text
        else:
            self._refused.pop(key, None)
        self._document.refuse_entry(key, sentence)

    def _device_key(self, index: Index) -> str:
        return self.key(index).rpartition(".")[0]

    def _symbol(self, index: Index) -> str:
        rating = self.cell(index).rating
        return rating.symbol if rating is not None else ""

    def confirm(self, index: Index) -> None:
        """Make an entry of a value that is only assumed."""
        cell = self.cell(index)
        if cell.assumed and isinstance(cell.value, float | str):
            self._document.leave_field()
            self.enter(index, cell.value, "maximum")

    def _on_document(self) -> None:
        before = [(each.name, kind_of(each.switch)) for each in self.candidates]
        after = self._document.selection.candidates
        if [(each.name, kind_of(each.switch)) for each in after] == before:
            self.candidates = after
            self._repaint()
        else:
            self._lay_out()
            self._forget_refused()

    def _forget_refused(self) -> None:
        """A key holds the place of a candidate, which may be another's now."""
        keys, self._refused = [*self._refused], {}
        for key in keys:
            self._document.refuse_entry(key, "")

    def _lay_out(self) -> None:
        self.beginResetModel()
        self.candidates = self._document.selection.candidates
        self.rows = sheet_rows(self.candidates, self._unfolded)
        self._cells.clear()
        self.endResetModel()

    def _repaint(self) -> None:
        self._cells.clear()
        if self.rows and self.candidates:
            last = self.index(len(self.rows) - 1, len(self.candidates) - 1)
            self.dataChanged.emit(self.index(0, 0), last)
            self.headerDataChanged.emit(Qt.Orientation.Horizontal, 0, last.column())
