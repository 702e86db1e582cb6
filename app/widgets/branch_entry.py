"""R or L of the load: one field while the branches are alike, or one for each of the three."""

from __future__ import annotations

from collections.abc import Sequence

from PySide6.QtCore import Signal
from PySide6.QtWidgets import QWidget

from app.widgets.entry_row import EntryRow, Widths
from app.widgets.number_entry import NumberEntry
from engine.duty import as_triple

BranchValue = float | tuple[float, float, float] | None


class BranchEntry(EntryRow):
    """Holds one value for all branches, or three."""

    entered = Signal(object)
    """One value or `None` while the branches are alike, else three values."""

    def __init__(self, key: str, name: str, unit: str, shown_in: str, scale: float = 1.0) -> None:
        self.key = key
        self._name, self._shown_in = name, shown_in
        self._value: BranchValue = None
        self._split = False
        self.alike, *self.each = (
            NumberEntry(key, f"{name}{which}", unit, shown_in=shown_in, scale=scale)
            for which in ("", " of branch 1", " of branch 2", " of branch 3")
        )
        super().__init__(name, (self.alike, *self.each), shown_in)
        self.alike.entered.connect(self._enter)
        for index, number in enumerate(self.each):
            number.entered.connect(lambda value, index=index: self._enter_one(index, value))
            number.editingFinished.connect(self._show)
        self.split(False)

    @property
    def value(self) -> BranchValue:
        return self._value

    @property
    def first(self) -> NumberEntry:
        """The field to go to."""
        return self.each[0] if self._split else self.alike

    def set_value(self, value: BranchValue) -> None:
        """Show a value of the document; three values split the row."""
        self._value = value
        if isinstance(value, tuple):
            self.split(True)
        self._show()

    def split(self, split: bool) -> None:
        """Show three fields, or one."""
        self._split = split
        self.alike.setVisible(not split)
        for number in self.each:
            number.setVisible(split)
        self._show()

    def name_branches(self, names: Sequence[str]) -> None:
        """What the three fields are called to a screen reader."""
        for number, name in zip(self.each, names, strict=True):
            number.setAccessibleName(f"{self._name} {name}, {self._shown_in}")

    def set_fault(self, text: str | None) -> None:
        self.first.set_fault(text)
        for number in (self.alike, *self.each):
            if number is not self.first:
                number.set_fault(None)

    def size_field(self, field: QWidget, widths: Widths) -> None:
        width = widths.fields if field is self.alike else widths.field
        field.setFixedSize(width, widths.row - 4)

    def _show(self) -> None:
        if self._value is None or isinstance(self._value, float):
            self.alike.set_value(self._value)
        values = (None,) * 3 if self._value is None else as_triple(self._value)
        for number, value in zip(self.each, values, strict=True):
            number.set_value(value)

    def _enter(self, value: BranchValue) -> None:
        self._value = value
        self.entered.emit(value)

    def _enter_one(self, index: int, value: float | None) -> None:
        """The first value typed stands for all three; an emptied field keeps its value."""
        if value is None:
            return
        a, b, c = (value,) * 3 if self._value is None else as_triple(self._value)
        values = [a, b, c]
        values[index] = value
        self._enter((values[0], values[1], values[2]))
