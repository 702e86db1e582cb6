"""The document under edit: undo, redo, merging, the clean mark."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import settings
from hypothesis import strategies as st
from hypothesis.stateful import (
    RuleBasedStateMachine,
    invariant,
    rule,
    run_state_machine_as_test,
)
from pytestqt.qtbot import QtBot

from app.looked_at import LookedAt, corner_of, looked_at_corner
from app.open_selection import OpenSelection
from app.selection_file import selection_bytes, selection_from_bytes
from engine.checks import Corner
from engine.duty import duty_of
from engine.ratings import Thyristor
from engine.selection import Candidate, Selection, entry, new_selection, with_entry

VOLTAGE, FREQUENCY = "supply.voltage_V", "gating.frequency_Hz"


@pytest.fixture
def document(qtbot: QtBot) -> OpenSelection:
    return OpenSelection()


def complete() -> Selection:
    selection = new_selection()
    for key, value in {
        VOLTAGE: 540.0,
        "supply.voltage_low_V": 486.0,
        "gating.conduction_deg": 120.0,
        FREQUENCY: 50.0,
        "load.connection": "star",
        "load.resistance_ohm": 9.0,
        "load.inductance_H": 0.012,
    }.items():
        selection = with_entry(selection, key, value)
    return selection


def typed(document: OpenSelection, key: str, *values: float) -> None:
    for value in values:
        document.set_entry(key, value, f"Edit {key}")


def test_typing_in_one_field_is_one_undo_step(document: OpenSelection) -> None:
    typed(document, VOLTAGE, 5.0, 54.0, 540.0)
    assert document.undo_stack.count() == 1
    document.undo_stack.undo()
    assert document.selection == new_selection()


def test_editing_another_field_ends_the_step(document: OpenSelection) -> None:
    typed(document, VOLTAGE, 5.0, 54.0)
    typed(document, FREQUENCY, 5.0, 50.0)
    typed(document, VOLTAGE, 541.0)
    assert document.undo_stack.count() == 3


def test_leaving_the_field_ends_the_step(document: OpenSelection) -> None:
    typed(document, VOLTAGE, 54.0)
    document.leave_field()
    typed(document, VOLTAGE, 540.0)
    assert document.undo_stack.count() == 2


def test_typing_back_to_the_old_value_leaves_no_step(document: OpenSelection) -> None:
    typed(document, VOLTAGE, 540.0)
    document.leave_field()
    typed(document, VOLTAGE, 5400.0, 540.0)
    assert document.undo_stack.count() == 1


def test_an_entry_that_changes_nothing_is_no_edit(document: OpenSelection, qtbot: QtBot) -> None:
    typed(document, VOLTAGE, 540.0)
    with qtbot.assertNotEmitted(document.changed):
        typed(document, VOLTAGE, 540.0)


def test_replacing_is_one_step_and_never_merges(document: OpenSelection) -> None:
    typed(document, VOLTAGE, 540.0)
    document.replace(complete(), "Paste")
    document.replace(with_entry(complete(), VOLTAGE, 600.0), "Paste")
    assert document.undo_stack.count() == 3


def test_every_change_is_announced(document: OpenSelection, qtbot: QtBot) -> None:
    for change in (
        lambda: typed(document, VOLTAGE, 540.0),
        document.undo_stack.undo,
        document.undo_stack.redo,
        lambda: document.open(complete(), None),
    ):
        with qtbot.waitSignal(document.changed, timeout=500):
            change()


def test_saving_marks_the_document_clean(document: OpenSelection) -> None:
    typed(document, VOLTAGE, 540.0)
    assert not document.undo_stack.isClean()
    document.saved_as(Path("a.json"))
    assert document.undo_stack.isClean()
    typed(document, VOLTAGE, 541.0)
    assert not document.undo_stack.isClean()
    document.undo_stack.undo()
    assert document.undo_stack.isClean()
    assert entry(document.selection, VOLTAGE) == 540.0


def test_a_document_opened_as_unsaved_stays_unsaved_until_saved(document: OpenSelection) -> None:
    document.open(complete(), None, unsaved=True)
    typed(document, VOLTAGE, 541.0)
    document.undo_stack.undo()
    assert not document.undo_stack.isClean()
    document.saved_as(Path("a.json"))
    assert document.undo_stack.isClean()


def test_opening_forgets_undo_steps_refusals_and_the_looked_at_point(
    document: OpenSelection,
) -> None:
    typed(document, VOLTAGE, 540.0)
    document.refuse_entry(VOLTAGE, "must be above 0")
    document.looked_at = LookedAt(voltage="high")
    document.open(complete(), Path("a.json"))
    assert document.undo_stack.count() == 0
    assert document.refusals == {}
    assert document.looked_at == LookedAt()
    assert document.path == Path("a.json")


def test_looking_elsewhere_is_no_edit(document: OpenSelection, qtbot: QtBot) -> None:
    with qtbot.waitSignal(document.looked_at_changed), qtbot.assertNotEmitted(document.changed):
        document.looked_at = LookedAt(frequency="high", position=2)
    assert document.undo_stack.count() == 0
    assert document.undo_stack.isClean()


def test_a_refused_text_leaves_the_entry_and_is_announced_once(
    document: OpenSelection, qtbot: QtBot
) -> None:
    typed(document, VOLTAGE, 540.0)
    with qtbot.waitSignal(document.refusals_changed):
        document.refuse_entry(VOLTAGE, "must be above 0")
    with qtbot.assertNotEmitted(document.refusals_changed):
        document.refuse_entry(VOLTAGE, "must be above 0")
    assert entry(document.selection, VOLTAGE) == 540.0
    document.refuse_entry(VOLTAGE, "")
    assert document.refusals == {}


def test_refusals_of_candidates_go_when_a_candidate_comes_or_goes(document: OpenSelection) -> None:
    document.refuse_entry("candidates.0.switch.tq_s", "must be above 0")
    document.refuse_entry(VOLTAGE, "must be above 0")
    typed(document, FREQUENCY, 50.0)
    assert len(document.refusals) == 2
    candidate = Candidate(name="A", switch=Thyristor())
    document.replace(with_entry(document.selection, "candidates", (candidate,)), "Add")
    assert list(document.refusals) == [VOLTAGE]


def test_looked_at_levels_stand_for_the_extremes_of_the_duty() -> None:
    duty = duty_of(complete())
    corner = corner_of(LookedAt(voltage="low", frequency=75.0, load="light"), duty)
    assert corner == Corner(voltage_V=486.0, frequency_Hz=75.0, load_factor=0.2, ambient_C=40.0)
    assert corner_of(LookedAt(load="overload"), duty).load_factor == 1.5


def test_looking_at_a_row_takes_its_corner_and_position() -> None:
    corner = Corner(voltage_V=594.0, frequency_Hz=90.0, load_factor=1.5, ambient_C=45.0)
    looked_at = looked_at_corner(corner, "T3")
    assert corner_of(looked_at, duty_of(complete())) == corner
    assert looked_at.position == 2
    assert not looked_at.is_nominal
    assert looked_at_corner(corner).position == 0


class EditsUndoAndSaves(RuleBasedStateMachine):
    """Against a plain list of snapshots: any mix of edits, undo, redo and saves gives the same."""

    def __init__(self) -> None:
        super().__init__()
        self.document = OpenSelection()
        self.snapshots = [self.document.selection]
        self.at = 0
        self.saved_at: int | None = 0

    @rule(value=st.floats(1.0, 1e4), key=st.sampled_from([VOLTAGE, FREQUENCY]))
    def edit(self, value: float, key: str) -> None:
        self.document.leave_field()
        if entry(self.document.selection, key) != value:
            self.snapshots[self.at + 1 :] = [with_entry(self.snapshots[self.at], key, value)]
            self.at += 1
            if self.saved_at is not None and self.saved_at >= self.at:
                self.saved_at = None
        self.document.set_entry(key, value, "Edit")

    @rule()
    def undo(self) -> None:
        self.document.undo_stack.undo()
        self.at = max(self.at - 1, 0)

    @rule()
    def redo(self) -> None:
        self.document.undo_stack.redo()
        self.at = min(self.at + 1, len(self.snapshots) - 1)

    @rule()
    def save(self) -> None:
        data = selection_bytes(self.document.selection)
        assert selection_from_bytes(data) == self.document.selection
        assert selection_bytes(selection_from_bytes(data)) == data
        self.document.saved_as(Path("a.json"))
        self.saved_at = self.at

    @invariant()
    def the_document_is_the_snapshot(self) -> None:
        assert self.document.selection == self.snapshots[self.at]
        assert self.document.undo_stack.isClean() == (self.at == self.saved_at)

    def teardown(self) -> None:
        while self.document.undo_stack.canUndo():
            self.document.undo_stack.undo()
        assert self.document.selection == new_selection()


TestEditsUndoAndSaves = EditsUndoAndSaves.TestCase
TestEditsUndoAndSaves.settings = settings(max_examples=30, stateful_step_count=30, deadline=None)


@pytest.mark.long
def test_two_thousand_random_sequences_end_at_the_exact_start(qtbot: QtBot) -> None:
    run_state_machine_as_test(
        EditsUndoAndSaves,
        settings=settings(max_examples=2000, stateful_step_count=50, deadline=None),
    )
