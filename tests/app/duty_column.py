"""The left column of the Duty page: hands to work it with."""

from __future__ import annotations

from PySide6.QtWidgets import QLineEdit, QPushButton

from app.pages.duty_entries import DutyEntries
from app.pages.rule_section import RuleSection
from app.widgets.choice_entry import ChoiceEntry, ChoiceWord
from app.widgets.entry_row import EntryRow
from app.widgets.number_entry import NumberEntry


def number(entries: DutyEntries, key: str) -> NumberEntry:
    found = [
        each
        for each in entries.findChildren(NumberEntry)
        if each.key == key and not each.isHidden()
    ]
    return found[0]


def choice(entries: DutyEntries, name: str) -> ChoiceEntry:
    return next(each for each in entries.findChildren(ChoiceEntry) if each.accessibleName() == name)


def click_word(entries: DutyEntries, name: str, text: str) -> None:
    words = choice(entries, name).findChildren(ChoiceWord)
    next(each for each in words if each.text() == text).click()


def type_into(field: QLineEdit, text: str) -> None:
    field.setFocus()
    field.selectAll()
    field.insert(text) if text else field.del_()


def note_at(entries: DutyEntries, key: str) -> str:
    field = number(entries, key)
    return next(row.note for row in entries.findChildren(EntryRow) if row.isAncestorOf(field))


def rules(entries: DutyEntries) -> RuleSection:
    return next(each for each in entries.sections if isinstance(each, RuleSection))


def open_figures(entries: DutyEntries) -> None:
    rules(entries).findChild(QPushButton).click()
