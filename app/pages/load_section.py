"""The load: connection, R and L of the branches alike or each its own, factors, diodes."""

from __future__ import annotations

from collections.abc import Mapping

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLabel, QWidget

from app.open_selection import OpenSelection
from app.pages.duty_fields import BRANCHES, CONNECTION, DIODES, LOAD_FACTOR
from app.pages.entry_section import EntrySection, fault_at
from app.theme import AXIS, font
from app.widgets.branch_entry import BranchEntry
from app.widgets.choice_entry import ChoiceEntry
from app.widgets.entry_row import PADDING, EntryRow, set_role, words
from engine.duty import as_triple
from engine.selection import Selection, entry, with_entry

NAMES_OF_BRANCHES = {"star": ("A", "B", "C"), "delta": ("AB", "BC", "CA")}
PHASE_ROLES = ("phase_a", "phase_b", "phase_c")


class LoadSection(EntrySection):
    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document, "Load")
        self.add_choice(CONNECTION)
        self._each = ChoiceEntry("", BRANCHES.name, BRANCHES.choices)
        self._each.entered.connect(self._on_each)
        self.add_row(EntryRow(BRANCHES.name, (self._each,)))
        self._letters = tuple(_letter() for _ in range(3))
        self._letter_row = self.add_row(EntryRow("", self._letters))
        self.branches = (
            BranchEntry("load.resistance_ohm", "Resistance", "ohm", "Ω"),
            BranchEntry("load.inductance_H", "Inductance", "H", "mH", 1e-3),
        )
        for row in self.branches:
            self.add_row(row)
            row.entered.connect(lambda value, key=row.key: self.enter(key, value))
            for number in (row.alike, *row.each):
                self.listen(number, row.key)
        self.add_number(LOAD_FACTOR)
        self.add_choice(DIODES)
        self._split = False
        document.opened.connect(self._on_opened)

    def _on_opened(self) -> None:
        """Another document begins with branches alike, unless it holds three values."""
        self._split = False
        self.refresh()

    def refresh(self) -> None:
        super().refresh()
        selection = self.document.selection
        values = [entry(selection, row.key) for row in self.branches]
        entered = [value for value in values if value is not None]
        if any(isinstance(value, tuple) for value in entered):
            self._split = True
        elif entered:
            self._split = False
        self._show_split()
        for row, value in zip(self.branches, values, strict=True):
            row.set_value(value)

    def _show_split(self) -> None:
        self._each.set_value(self._split)
        self._letter_row.setVisible(self._split)
        for row in self.branches:
            row.split(self._split)
        self._name_branches()

    def _on_each(self, split: bool) -> None:
        self._split = split
        after = self.document.selection
        for row in self.branches:
            after = _spread(after, row.key) if split else _joined(after, row.key)
        self.document.replace(after, "split the branches" if split else "make the branches alike")
        self._show_split()

    def show_faults(self, faults: Mapping[str, str]) -> None:
        for row in self.branches:
            row.set_fault(fault_at(faults, row.key))
        super().show_faults(faults)

    def field_of(self, key: str) -> QWidget | None:
        for row in self.branches:
            if key == row.key or key.startswith(f"{row.key}."):
                return row.first
        return super().field_of(key)

    def _name_branches(self) -> None:
        """The letters of phases carry their colours; the pairs of a delta's branches do not."""
        connection = self.document.selection.load.connection or "star"
        names = NAMES_OF_BRANCHES[connection]
        roles = PHASE_ROLES if connection == "star" else ("second",) * 3
        for label, name, role in zip(self._letters, names, roles, strict=True):
            label.setText(name)
            set_role(label, role)
        for row in self.branches:
            row.name_branches(names)


def _letter() -> QLabel:
    label = words("", AXIS)
    label.setFont(font(AXIS, bold=True))
    label.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignBottom)
    label.setContentsMargins(0, 0, PADDING, 0)
    return label


def _spread(selection: Selection, key: str) -> Selection:
    value = entry(selection, key)
    return selection if value is None else with_entry(selection, key, as_triple(value))


def _joined(selection: Selection, key: str) -> Selection:
    value = entry(selection, key)
    return with_entry(selection, key, value[0]) if isinstance(value, tuple) else selection
