"""A group of entries of the document: shown, edited, and marked where something is wrong."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLabel, QVBoxLayout, QWidget

from app.entry_names import name_of
from app.open_selection import OpenSelection
from app.pages.duty_fields import LEVELS, ChoiceField, NumberField
from app.theme import TABLE
from app.widgets.choice_entry import ChoiceEntry
from app.widgets.entry_row import PADDING, Entry, EntryRow, GroupHead, Widths, words
from app.widgets.number_entry import NumberEntry
from engine.duty import value_of
from engine.selection import entry


class EntrySection(QWidget):
    """A head and its rows. Every entry is written to the document while it is made."""

    def __init__(
        self,
        document: OpenSelection,
        name: str,
        columns: tuple[str, ...] = LEVELS,
        short_name: str = "",
    ) -> None:
        super().__init__()
        self.document = document
        self.setAccessibleName(name)
        self.head = GroupHead(name, columns, short_name)
        self.rows: list[EntryRow] = []
        self.entries: dict[str, Entry] = {}
        self._column = QVBoxLayout(self)
        self._column.setContentsMargins(0, 0, 0, 16)
        self._column.setSpacing(0)
        self._column.addWidget(self.head)

    # Building ---------------------------------------------------------------------------

    def add_number(self, field: NumberField) -> EntryRow:
        fields = [self._number(key, field) if key else self._one() for key in field.keys]
        return self.add_row(EntryRow(field.name, fields, field.shown_in, field.short_name))

    def add_choice(self, field: ChoiceField) -> EntryRow:
        choice = ChoiceEntry(field.key, field.name, field.choices)
        self.entries[field.key] = choice
        choice.entered.connect(lambda value: self.enter(field.key, value))
        return self.add_row(EntryRow(field.name, (choice,), short_name=field.short_name))

    def add_row(self, row: EntryRow) -> EntryRow:
        self.rows.append(row)
        self._column.addWidget(row)
        return row

    def add_widget(self, widget: QWidget) -> None:
        self._column.addWidget(widget)

    def listen(self, number: NumberEntry, key: str) -> None:
        """Tell the document what the field holds that is no value."""
        number.refused.connect(lambda text: self.document.refuse_entry(key, text))

    def _number(self, key: str, field: NumberField) -> NumberEntry:
        number = NumberEntry(
            key, _full_name(key), field.unit, shown_in=field.shown_in, scale=field.scale
        )
        self.entries[key] = number
        number.entered.connect(lambda value: self.enter(key, value))
        self.listen(number, key)
        return number

    def _one(self) -> QLabel:
        one = words("1", TABLE, "second")
        one.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        one.setContentsMargins(0, 0, PADDING, 0)
        return one

    # What the window asks ---------------------------------------------------------------

    def enter(self, key: str, value: Any) -> None:
        self.document.set_entry(key, value, f"change {name_of(key)}")

    def refresh(self) -> None:
        """Show the document as it is now."""
        selection = self.document.selection
        for key, field in self.entries.items():
            value = value_of(selection, key)
            field.set_value(value, value is not None and entry(selection, key) is None)

    def discard_typing(self) -> None:
        """Another document: forget what stands in the fields."""
        for number in self.findChildren(NumberEntry):
            number.discard_typing()

    def show_faults(self, faults: Mapping[str, str]) -> None:
        """Mark the entries that have a fault and show each sentence below its row."""
        for key, field in self.entries.items():
            field.set_fault(fault_at(faults, key))
        for row in self.rows:
            row.show_note()

    def field_of(self, key: str) -> QWidget | None:
        """The field to put the focus into for this key, if it is here."""
        return self.entries.get(key)

    def fit(self, widths: Widths) -> None:
        self.head.fit(widths)
        for row in self.rows:
            row.fit(widths)


def fault_at(faults: Mapping[str, str], key: str) -> str | None:
    """The sentence for this key or for a part of it."""
    found = (text for at, text in faults.items() if at == key or at.startswith(f"{key}."))
    return next(found, None)


def _full_name(key: str) -> str:
    name = name_of(key)
    return name[0].upper() + name[1:]
