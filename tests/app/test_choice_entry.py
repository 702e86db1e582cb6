"""One of a few words, chosen by mouse or keyboard, assumed until it is confirmed."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication, QLineEdit, QVBoxLayout, QWidget

from app.theme import apply_theme
from app.widgets.choice_entry import ChoiceEntry, ChoiceWord

CHOICES = {"all": "all", "leg": "leg", "position": "position"}


@pytest.fixture
def entry(qtbot, qapp: QApplication) -> ChoiceEntry:
    apply_theme(qapp, "light")
    window = QWidget()
    qtbot.addWidget(window)
    entry = ChoiceEntry("cooling.sink_serves", "Heatsink serves", CHOICES)
    layout = QVBoxLayout(window)
    layout.addWidget(entry)
    layout.addWidget(QLineEdit())
    window.show()
    window.activateWindow()
    qtbot.waitActive(window)
    entry.window_of_test = window
    return entry


def word(entry: ChoiceEntry, text: str) -> ChoiceWord:
    return next(each for each in entry.findChildren(ChoiceWord) if each.text() == text)


def entered_of(entry: ChoiceEntry) -> list[object]:
    entered: list[object] = []
    entry.entered.connect(entered.append)
    return entered


def test_a_click_chooses(entry: ChoiceEntry, qtbot) -> None:
    entry.set_value("all")
    entered = entered_of(entry)
    qtbot.mouseClick(word(entry, "leg"), Qt.MouseButton.LeftButton)
    assert entered == ["leg"]
    assert word(entry, "leg").isChecked()
    assert not word(entry, "all").isChecked()


def test_setting_a_value_says_nothing(entry: ChoiceEntry) -> None:
    entered = entered_of(entry)
    entry.set_value("position")
    assert entered == []
    assert entry.value == "position"


def test_arrow_keys_go_through_the_words_and_stop_at_the_ends(entry: ChoiceEntry, qtbot) -> None:
    entry.set_value("all")
    entered = entered_of(entry)
    word(entry, "all").setFocus()
    qtbot.keyClick(word(entry, "all"), Qt.Key.Key_Left)
    qtbot.keyClick(word(entry, "all"), Qt.Key.Key_Right)
    qtbot.keyClick(word(entry, "leg"), Qt.Key.Key_Right)
    qtbot.keyClick(word(entry, "position"), Qt.Key.Key_Right)
    assert entered == ["leg", "position"]


def test_control_enter_confirms_what_is_assumed(entry: ChoiceEntry, qtbot) -> None:
    entry.set_value("all", assumed=True)
    assert word(entry, "all").property("assumed") is True
    entered = entered_of(entry)
    word(entry, "all").setFocus()
    qtbot.keyClick(word(entry, "all"), Qt.Key.Key_Return, Qt.KeyboardModifier.ControlModifier)
    assert entered == ["all"]
    assert not entry.assumed


def test_a_click_on_the_assumed_word_confirms_it(entry: ChoiceEntry, qtbot) -> None:
    entry.set_value("all", assumed=True)
    entered = entered_of(entry)
    qtbot.mouseClick(word(entry, "all"), Qt.MouseButton.LeftButton)
    qtbot.mouseClick(word(entry, "all"), Qt.MouseButton.LeftButton)
    assert entered == ["all"]


def test_tab_stops_once(entry: ChoiceEntry, qtbot) -> None:
    entry.set_value("leg")
    word(entry, "leg").setFocus()
    qtbot.keyClick(word(entry, "leg"), Qt.Key.Key_Tab)
    assert isinstance(QApplication.focusWidget(), QLineEdit)


def test_no_value_chooses_no_word(entry: ChoiceEntry) -> None:
    entry.set_value("leg")
    entry.set_value(None)
    assert not any(each.isChecked() for each in entry.findChildren(ChoiceWord))


def test_every_word_is_named_with_the_entry(entry: ChoiceEntry) -> None:
    assert word(entry, "leg").accessibleName() == "Heatsink serves: leg"
