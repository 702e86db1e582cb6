"""The operating point looked at: chosen by level or typed, and said when it is off nominal."""

from __future__ import annotations

import pytest
from PySide6.QtWidgets import QApplication

from app.looked_at import LookedAt
from app.looked_at_bar import LookedAtBar, LookedAtField
from app.open_selection import OpenSelection
from app.theme import apply_theme
from engine.selection import new_selection
from tests.app.assessments import SELECTION


@pytest.fixture
def document(qapp: QApplication) -> OpenSelection:
    apply_theme(qapp, "light")
    return OpenSelection(SELECTION)


@pytest.fixture
def bar(document: OpenSelection, qtbot) -> LookedAtBar:
    bar = LookedAtBar(document)
    qtbot.addWidget(bar)
    bar.show()
    return bar


def field(bar: LookedAtBar, name: str) -> LookedAtField:
    return next(field for field in bar.fields if field.quantity.field == name)


def choose(bar: LookedAtBar, name: str, level: str) -> None:
    menu = field(bar, name).level.menu()
    menu.aboutToShow.emit()
    next(action for action in menu.actions() if action.text().startswith(level)).trigger()


def test_at_first_everything_is_nominal(bar: LookedAtBar) -> None:
    assert [each.number.text() for each in bar.fields] == ["540", "50", "1", "40"]
    assert bar.heading == "Looked at"


def test_levels_are_those_of_the_duty(bar: LookedAtBar, document: OpenSelection) -> None:
    choose(bar, "voltage", "high")
    choose(bar, "load", "overload")
    assert document.looked_at == LookedAt(voltage="high", load="overload")
    assert field(bar, "voltage").number.text() == "594"
    assert field(bar, "load").number.text() == "1.5"
    assert bar.heading == "Off nominal"


def test_menu_shows_the_value_of_each_level(bar: LookedAtBar) -> None:
    menu = field(bar, "frequency").level.menu()
    menu.aboutToShow.emit()
    assert [action.text() for action in menu.actions()] == [
        "low\t5 Hz",
        "nominal\t50 Hz",
        "high\t90 Hz",
    ]


def test_typed_value_is_looked_at_and_makes_no_undo_step(
    bar: LookedAtBar, document: OpenSelection
) -> None:
    number = field(bar, "frequency").number
    number.selectAll()
    number.insert("62.5")
    assert document.looked_at.frequency == 62.5
    assert field(bar, "frequency").level.text().startswith("typed")
    assert document.undo_stack.count() == 0


def test_refused_text_changes_nothing(bar: LookedAtBar, document: OpenSelection) -> None:
    number = field(bar, "voltage").number
    number.selectAll()
    number.insert("-")
    assert document.looked_at == LookedAt()
    assert number.fault


def test_emptied_field_shows_its_value_again_when_it_is_left(
    bar: LookedAtBar, document: OpenSelection
) -> None:
    number = field(bar, "voltage").number
    number.selectAll()
    number.del_()
    assert document.looked_at == LookedAt()
    number.editingFinished.emit()
    assert number.text() == "540"


def test_bar_follows_the_document(bar: LookedAtBar, document: OpenSelection) -> None:
    choose(bar, "voltage", "high")
    document.set_entry("supply.voltage_high_V", 610.0, "")
    assert field(bar, "voltage").number.text() == "610"
    document.looked_at = LookedAt()
    assert field(bar, "voltage").number.text() == "540"
    assert bar.heading == "Looked at"


def test_new_document_has_nothing_to_look_at(bar: LookedAtBar, document: OpenSelection) -> None:
    document.open(new_selection(), None)
    assert [each.number.text() for each in bar.fields] == ["", "", "1", "40"]


def test_every_field_is_named(bar: LookedAtBar) -> None:
    for each in bar.fields:
        assert each.quantity.name in each.number.accessibleName()
        assert each.quantity.name in each.level.accessibleName()
