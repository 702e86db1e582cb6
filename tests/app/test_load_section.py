"""R and L of the branches: alike, or each its own, named by the connection."""

from __future__ import annotations

from app.open_selection import OpenSelection
from app.pages.duty_entries import DutyEntries
from app.widgets.branch_entry import BranchEntry
from engine.selection import new_selection
from tests.app.duty_column import (
    click_word,
    number,
    type_into,
)

pytest_plugins = ("tests.app.duty_fixtures",)


def branch(entries: DutyEntries, key: str) -> BranchEntry:
    return next(each for each in entries.findChildren(BranchEntry) if each.key == key)


def test_branches_split_and_join(entries: DutyEntries, document: OpenSelection) -> None:
    click_word(entries, "Branches", "differ")
    assert document.selection.load.resistance_ohm == (9.0, 9.0, 9.0)
    assert document.selection.load.inductance_H == (0.012, 0.012, 0.012)
    type_into(branch(entries, "load.resistance_ohm").each[2], "10")
    assert document.selection.load.resistance_ohm == (9.0, 9.0, 10.0)
    click_word(entries, "Branches", "alike")
    assert document.selection.load.resistance_ohm == 9.0
    document.undo_stack.undo()
    assert document.selection.load.resistance_ohm == (9.0, 9.0, 10.0)
    assert [field.text() for field in branch(entries, "load.resistance_ohm").each] == [
        "9",
        "9",
        "10",
    ]


def test_emptied_branch_keeps_its_value(entries: DutyEntries, document: OpenSelection) -> None:
    click_word(entries, "Branches", "differ")
    field = branch(entries, "load.resistance_ohm").each[1]
    type_into(field, "")
    assert document.selection.load.resistance_ohm == (9.0, 9.0, 9.0)
    number(entries, "supply.voltage_V").setFocus()
    assert field.text() == "9"


def test_branches_of_an_empty_load_may_be_entered_one_by_one(
    entries: DutyEntries, document: OpenSelection
) -> None:
    document.open(new_selection(), None)
    click_word(entries, "Branches", "differ")
    row = branch(entries, "load.inductance_H")
    for field, text in zip(row.each, ("1", "2", "3"), strict=True):
        type_into(field, text)
    assert document.selection.load.inductance_H == (0.001, 0.002, 0.003)


def test_branches_are_named_by_the_connection(entries: DutyEntries) -> None:
    click_word(entries, "Branches", "differ")
    click_word(entries, "Connection", "delta")
    names = [field.accessibleName() for field in branch(entries, "load.resistance_ohm").each]
    assert names == ["Resistance AB, Ω", "Resistance BC, Ω", "Resistance CA, Ω"]
