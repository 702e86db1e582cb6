"""The segments of the overload cycle: added, changed and removed."""

from __future__ import annotations

from PySide6.QtWidgets import QPushButton, QToolButton

from app.open_selection import OpenSelection
from app.pages.cycle_section import CycleSection
from app.pages.duty_entries import DutyEntries
from engine.selection import CycleSegment
from tests.app.duty_column import (
    number,
    type_into,
)

pytest_plugins = ("tests.app.duty_fixtures",)


def cycle(entries: DutyEntries) -> CycleSection:
    return next(each for each in entries.sections if isinstance(each, CycleSection))


def test_segments_are_added_changed_and_removed(
    entries: DutyEntries, document: OpenSelection
) -> None:
    section = cycle(entries)
    section.findChild(QPushButton).click()
    type_into(number(entries, "overload_cycle.1.duration_s"), "5")
    type_into(number(entries, "overload_cycle.1.load_factor"), "1.5")
    assert document.selection.overload_cycle == (
        CycleSegment(duration_s=60.0, load_factor=1.0),
        CycleSegment(duration_s=5.0, load_factor=1.5),
    )
    section.rows[0].findChild(QToolButton).click()
    assert document.selection.overload_cycle == (CycleSegment(duration_s=5.0, load_factor=1.5),)
    assert number(entries, "overload_cycle.0.duration_s").text() == "5"


def test_the_last_segment_cannot_be_removed(entries: DutyEntries) -> None:
    assert not cycle(entries).rows[0].findChild(QToolButton).isEnabled()


def test_removing_a_segment_forgets_what_was_refused_in_it(
    entries: DutyEntries, document: OpenSelection
) -> None:
    section = cycle(entries)
    section.findChild(QPushButton).click()
    type_into(number(entries, "overload_cycle.1.duration_s"), "x")
    assert document.refusals
    section.rows[1].findChild(QToolButton).click()
    assert document.refusals == {}
