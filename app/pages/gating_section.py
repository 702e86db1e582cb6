"""Gating: conduction angle, frequency, blanking, and the form of the gate pulse."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import msgspec
from PySide6.QtWidgets import QWidget

from app.open_selection import OpenSelection
from app.pages.duty_fields import BLANKING, CONDUCTION, FREQUENCY, PULSE_FORMS, SOFT_START
from app.pages.entry_section import EntrySection, fault_at
from app.widgets.choice_entry import ChoiceEntry
from app.widgets.entry_row import EntryRow
from app.widgets.number_entry import NumberEntry
from engine.duty import value_of
from engine.selection import GatePulse

KEY = "gating.pulse"


class GatingSection(EntrySection):
    """Width and interval of a pulse stand there only for the forms that have them."""

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document, "Gating")
        for field in (CONDUCTION, FREQUENCY, BLANKING):
            self.add_number(field)
        self._form = ChoiceEntry(KEY, "Gate pulse", PULSE_FORMS)
        self._form.entered.connect(lambda form: self._change(form=form))
        self.add_row(EntryRow("Gate pulse", (self._form,)))
        self._lengths = {
            "width_s": self._add_length("Pulse width", "width_s", "Width"),
            "interval_s": self._add_length("Pulse interval", "interval_s", "Interval"),
        }
        self.add_choice(SOFT_START)

    @property
    def _pulse(self) -> GatePulse:
        pulse: GatePulse = value_of(self.document.selection, KEY)
        return pulse

    def _add_length(self, name: str, part: str, short_name: str) -> EntryRow:
        number = NumberEntry(f"{KEY}.{part}", name, "s", shown_in="µs", scale=1e-6)
        number.entered.connect(lambda value: self._change(**{part: value}))
        self.listen(number, number.key)
        return self.add_row(EntryRow(name, (number,), "µs", short_name))

    def _change(self, **parts: Any) -> None:
        self.enter(KEY, msgspec.structs.replace(self._pulse, **parts))

    def refresh(self) -> None:
        super().refresh()
        pulse = self._pulse
        self._form.set_value(pulse.form, self.document.selection.gating.pulse is None)
        has = {"width_s": pulse.form != "block", "interval_s": pulse.form == "train"}
        for part, row in self._lengths.items():
            number = _number(row)
            number.set_value(getattr(pulse, part))
            row.setVisible(has[part])
            if not has[part]:
                number.discard_typing()

    def show_faults(self, faults: Mapping[str, str]) -> None:
        for row in self._lengths.values():
            number = _number(row)
            number.set_fault(None if row.isHidden() else faults.get(number.key))
        at_lengths = {_number(row).key for row in self._lengths.values() if not row.isHidden()}
        of_form = {key: text for key, text in faults.items() if key not in at_lengths}
        self._form.set_fault(fault_at(of_form, KEY))
        super().show_faults(faults)

    def field_of(self, key: str) -> QWidget | None:
        row = self._lengths.get(key.removeprefix(f"{KEY}."))
        if row is not None and not row.isHidden():
            return _number(row)
        return self._form if key.startswith(KEY) else super().field_of(key)


def _number(row: EntryRow) -> NumberEntry:
    (number,) = row.numbers
    return number
