"""Gating: the lengths of a pulse stand there for the forms that have them."""

from __future__ import annotations

from app.open_selection import OpenSelection
from app.pages.duty_entries import DutyEntries
from app.widgets.number_entry import NumberEntry
from engine.selection import GatePulse
from tests.app.duty_column import (
    click_word,
    number,
    type_into,
)

pytest_plugins = ("tests.app.duty_fixtures",)


def test_pulse_lengths_stand_there_for_the_forms_that_have_them(
    entries: DutyEntries, document: OpenSelection
) -> None:
    def shown(key: str) -> bool:
        return any(
            each.key == key and each.isVisible() for each in entries.findChildren(NumberEntry)
        )

    assert not shown("gating.pulse.width_s")
    click_word(entries, "Gate pulse", "train")
    type_into(number(entries, "gating.pulse.width_s"), "50")
    type_into(number(entries, "gating.pulse.interval_s"), "200")
    assert document.selection.gating.pulse == GatePulse(
        form="train", width_s=50e-6, interval_s=200e-6
    )
    click_word(entries, "Gate pulse", "single")
    assert shown("gating.pulse.width_s")
    assert not shown("gating.pulse.interval_s")
