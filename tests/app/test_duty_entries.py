"""The entries of the duty write to the document, follow it, and show what is wrong with it."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QWidget

from app.entry_names import NAMES, WITHOUT_FIELD, assumed_entries
from app.open_selection import OpenSelection
from app.pages.duty_entries import DutyEntries
from app.picture import Problem
from app.widgets.entry_row import EntryRow
from app.widgets.number_entry import NumberEntry
from engine.duty import REQUIRED
from engine.selection import entry, new_selection
from tests.app.assessments import SELECTION
from tests.app.duty_column import (
    choice,
    click_word,
    note_at,
    number,
    open_figures,
    type_into,
)

pytest_plugins = ("tests.app.duty_fixtures",)


@pytest.mark.parametrize(
    ("key", "text", "value"),
    [
        ("supply.voltage_V", "560", 560.0),
        ("supply.voltage_high_V", "0.6 kV", 600.0),
        ("supply.loop_inductance_H", "150", 150e-9),
        ("supply.loop_inductance_H", "0,15u", 150e-9),
        ("gating.conduction_deg", "150", 150.0),
        ("gating.frequency_low_Hz", "2,5", 2.5),
        ("gating.blanking_s", "35", 35e-6),
        ("load.resistance_ohm", "8.5", 8.5),
        ("load.inductance_H", "15", 0.015),
        ("load.light_factor", "0.3", 0.3),
        ("cooling.ambient_low_C", "-10", -10.0),
        ("cooling.sink_K_per_W", "0.05", 0.05),
    ],
)
def test_typing_writes_the_entry(
    entries: DutyEntries, document: OpenSelection, key: str, text: str, value: float
) -> None:
    type_into(number(entries, key), text)
    assert entry(document.selection, key) == value


def test_typing_in_one_field_is_one_undo_step(
    entries: DutyEntries, document: OpenSelection
) -> None:
    field = number(entries, "supply.voltage_V")
    field.setFocus()
    field.selectAll()
    for sign in "561":
        field.insert(sign)
    assert document.undo_stack.count() == 1
    document.undo_stack.undo()
    assert document.selection == SELECTION
    assert field.text() == "540"


def test_choices_write_the_entry(entries: DutyEntries, document: OpenSelection) -> None:
    click_word(entries, "Connection", "delta")
    click_word(entries, "Heatsink serves", "leg")
    click_word(entries, "Feedback diodes", "no")
    assert document.selection.load.connection == "delta"
    assert document.selection.cooling.sink_serves == "leg"
    assert document.selection.feedback_diodes is False


def test_bad_text_keeps_the_last_good_value_and_says_why(
    entries: DutyEntries, document: OpenSelection
) -> None:
    type_into(number(entries, "supply.voltage_V"), "-5")
    assert document.selection.supply.voltage_V == 540.0
    assert list(document.refusals) == ["supply.voltage_V"]
    assert note_at(entries, "supply.voltage_V") == document.refusals["supply.voltage_V"]
    type_into(number(entries, "supply.voltage_V"), "550")
    assert document.refusals == {}
    assert note_at(entries, "supply.voltage_V") == ""


def test_other_fields_stay_editable_while_one_is_refused(
    entries: DutyEntries, document: OpenSelection
) -> None:
    type_into(number(entries, "supply.voltage_V"), "x")
    type_into(number(entries, "gating.frequency_Hz"), "60")
    assert document.selection.gating.frequency_Hz == 60.0
    assert number(entries, "supply.voltage_V").text() == "x"


def test_problem_is_shown_below_its_row_until_it_is_gone(entries: DutyEntries) -> None:
    problem = Problem("gating.frequency_low_Hz", "must be at most the nominal 50 Hz; got 60")
    entries.show_problems((problem,))
    assert note_at(entries, "gating.frequency_low_Hz") == problem.text
    entries.show_problems(())
    assert note_at(entries, "gating.frequency_low_Hz") == ""


@pytest.mark.parametrize(
    "key",
    [
        "load.resistance_ohm",
        "load.resistance_ohm.1",
        "gating.pulse.form",
        "feedback_diodes",
        "overload_cycle",
        "overload_cycle.0.duration_s",
        "rule_set",
        "load.connection",
    ],
)
def test_every_kind_of_row_shows_a_problem(entries: DutyEntries, key: str) -> None:
    entries.show_problems((Problem(key, "cannot stand"),))
    assert [row.note for row in entries.findChildren(EntryRow) if row.note] == ["cannot stand"]


def test_entries_nobody_made_are_assumed_until_confirmed(
    entries: DutyEntries, document: OpenSelection, qtbot
) -> None:
    field = number(entries, "cooling.ambient_C")
    assert (field.text(), field.assumed) == ("40", True)
    qtbot.keyClick(field, Qt.Key.Key_Return, Qt.KeyboardModifier.ControlModifier)
    assert document.selection.cooling.ambient_C == 40.0
    assert not field.assumed


def test_emptied_optional_entry_is_assumed_again(
    entries: DutyEntries, document: OpenSelection
) -> None:
    field = number(entries, "supply.voltage_high_V")
    type_into(field, "")
    assert document.selection.supply.voltage_high_V is None
    number(entries, "supply.voltage_V").setFocus()
    assert (field.text(), field.assumed) == ("540", True)


def test_every_assumed_entry_that_is_counted_can_be_confirmed_here(
    entries: DutyEntries, document: OpenSelection
) -> None:
    for key in assumed_entries(document.selection):
        assert entries.go_to(key)
        QTest.keyClick(
            QApplication.focusWidget(), Qt.Key.Key_Return, Qt.KeyboardModifier.ControlModifier
        )
    assert assumed_entries(document.selection) == ()


def test_new_document_has_its_required_entries_empty(
    entries: DutyEntries, document: OpenSelection
) -> None:
    document.open(new_selection(), None)
    for key in REQUIRED:
        if key == "load.connection":
            assert choice(entries, "Connection").value is None
        else:
            assert number(entries, key).text() == ""


def test_another_document_forgets_what_was_refused(
    entries: DutyEntries, document: OpenSelection
) -> None:
    type_into(number(entries, "supply.voltage_V"), "x")
    document.open(SELECTION, None)
    assert number(entries, "supply.voltage_V").text() == "540"
    assert document.refusals == {}


def shown_keys() -> list[str]:
    hidden = {"gating.pulse.width_s", "gating.pulse.interval_s", *WITHOUT_FIELD}
    return [key for key in NAMES if key not in hidden]


@pytest.mark.parametrize("key", shown_keys())
def test_go_to_puts_the_focus_into_the_field(entries: DutyEntries, key: str, qtbot) -> None:
    assert entries.go_to(key)
    focus = QApplication.focusWidget()
    assert focus is not None
    assert entries.isAncestorOf(focus)
    inside = entries.viewport().rect()
    assert inside.intersects(
        focus.rect().translated(focus.mapTo(entries.viewport(), focus.rect().topLeft()))
    )


def test_go_to_knows_what_is_not_here(entries: DutyEntries) -> None:
    assert not entries.go_to("candidates.0.switch.tq_s")


def test_tab_visits_the_fields_from_top_to_bottom(entries: DutyEntries, qtbot) -> None:
    number(entries, "supply.voltage_low_V").setFocus()
    tops: list[int] = []
    for _ in range(12):
        focus = QApplication.focusWidget()
        assert focus is not None
        tops.append(focus.mapTo(entries.widget(), focus.rect().topLeft()).y())
        qtbot.keyClick(focus, Qt.Key.Key_Tab)
    assert tops == sorted(tops)


def test_every_field_is_named(entries: DutyEntries) -> None:
    open_figures(entries)
    for widget in entries.findChildren(QWidget):
        if widget.focusPolicy() & Qt.FocusPolicy.TabFocus and widget.isVisibleTo(entries):
            text = getattr(widget, "text", str)()
            assert widget.accessibleName() or text, widget


@pytest.mark.parametrize("width", [1440, 1100])
def test_no_label_or_number_is_cut_off(document: OpenSelection, qtbot, width: int) -> None:
    window = QWidget()
    qtbot.addWidget(window)
    entries = DutyEntries(document)
    entries.setParent(window)
    window.resize(width, 640)
    window.show()
    open_figures(entries)
    for row in entries.findChildren(EntryRow):
        needed = row.label.fontMetrics().horizontalAdvance(row.label.text())
        assert needed <= row.label.width(), row.label.text()
    for field in entries.findChildren(NumberEntry):
        needed = field.fontMetrics().horizontalAdvance(field.text()) + 10
        assert field.isHidden() or needed <= field.width(), field.key
