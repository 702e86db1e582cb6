"""The overload cycle: segments of a duration at a load factor, repeated for ever."""

from __future__ import annotations

from collections.abc import Mapping

import msgspec
from PySide6.QtWidgets import QPushButton, QToolButton, QWidget

from app.open_selection import OpenSelection
from app.pages.entry_section import EntrySection
from app.widgets.entry_row import EntryRow, Widths, indented
from app.widgets.number_entry import NumberEntry
from engine.duty import value_of
from engine.selection import CycleSegment

KEY = "overload_cycle"


class CycleSection(EntrySection):
    """One row a segment; the last segment cannot be removed."""

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document, "Overload cycle", ("s", "× load"), "Overload")
        self._add = QPushButton("Add a segment", flat=True)
        self._add.clicked.connect(self._on_add)
        self._foot = indented(self._add)
        self.add_widget(self._foot)
        self._widths: Widths | None = None

    @property
    def _cycle(self) -> tuple[CycleSegment, ...]:
        cycle: tuple[CycleSegment, ...] = value_of(self.document.selection, KEY)
        return cycle

    def refresh(self) -> None:
        cycle = self._cycle
        assumed = self.document.selection.overload_cycle is None
        while len(self.rows) < len(cycle):
            self._add_segment_row(len(self.rows))
        while len(self.rows) > len(cycle):
            self._remove_last_row()
        for row, segment in zip(self.rows, cycle, strict=True):
            duration, load_factor = row.numbers
            duration.set_value(segment.duration_s, assumed)
            load_factor.set_value(segment.load_factor, assumed)
            row.fields[-1].setEnabled(len(cycle) > 1)

    def _add_segment_row(self, index: int) -> None:
        duration = self._segment_number(index, "duration_s", "s")
        load_factor = self._segment_number(index, "load_factor", "")
        remove = QToolButton()
        remove.setText("✕")
        remove.setToolTip("Remove this segment")
        remove.setAccessibleName(f"Remove segment {index + 1}")
        remove.clicked.connect(lambda: self._on_remove(index))
        row = EntryRow(f"Segment {index + 1}", (duration, load_factor, remove))
        self.rows.append(row)
        self._column.insertWidget(len(self.rows), row)
        if self._widths is not None:
            row.fit(self._widths)

    def _segment_number(self, index: int, part: str, unit: str) -> NumberEntry:
        name = f"Segment {index + 1} {'duration' if part == 'duration_s' else 'load factor'}"
        key = f"{KEY}.{index}.{part}"
        number = NumberEntry(key, name, unit, shown_in=unit)
        number.entered.connect(lambda value: self._on_entered(index, part, value))
        number.editingFinished.connect(self.refresh)
        self.listen(number, key)
        self.entries[key] = number
        return number

    def _remove_last_row(self) -> None:
        row = self.rows.pop()
        for number in row.entries:
            self.document.refuse_entry(number.key, "")
            del self.entries[number.key]
        row.hide()
        row.deleteLater()

    def _on_entered(self, index: int, part: str, value: float | None) -> None:
        """An emptied field keeps its value: a segment has no part that may be missing."""
        if value is None:
            return
        cycle = list(self._cycle)
        cycle[index] = msgspec.structs.replace(cycle[index], **{part: value})
        self.enter(KEY, tuple(cycle))

    def _on_add(self) -> None:
        self.document.leave_field()
        self.enter(KEY, (*self._cycle, self._cycle[-1]))
        self.rows[-1].fields[0].setFocus()

    def _on_remove(self, index: int) -> None:
        self.document.leave_field()
        cycle = self._cycle
        self.enter(KEY, cycle[:index] + cycle[index + 1 :])

    def show_faults(self, faults: Mapping[str, str]) -> None:
        super().show_faults(faults)
        self.rows[0].show_note(faults.get(KEY, ""))

    def field_of(self, key: str) -> QWidget | None:
        return self.rows[0].fields[0] if key == KEY else super().field_of(key)

    def fit(self, widths: Widths) -> None:
        self._widths = widths
        super().fit(widths)
        self._foot.setContentsMargins(widths.left + widths.label, 0, 0, 0)
