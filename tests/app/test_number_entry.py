"""One number with its unit: understood while typed, refused with a reason, stepped by keys."""

from __future__ import annotations

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QWheelEvent
from PySide6.QtWidgets import QApplication, QLineEdit, QVBoxLayout, QWidget

from app.theme import apply_theme
from app.widgets.number_entry import NumberEntry, plain_number

INDUCTANCE = "load.inductance_H"
VOLTAGE = "supply.voltage_V"


class Window(QWidget):
    """An entry with the fields before and after it, and all that it says."""

    def __init__(self, entry: NumberEntry) -> None:
        super().__init__()
        self.entry = entry
        self.next = QLineEdit()
        self.entered: list[float | None] = []
        self.refused: list[str] = []
        layout = QVBoxLayout(self)
        layout.addWidget(entry)
        layout.addWidget(self.next)
        entry.entered.connect(self.entered.append)
        entry.refused.connect(self.refused.append)


def shown_window(qtbot, qapp: QApplication, entry: NumberEntry) -> Window:
    apply_theme(qapp, "light")
    window = Window(entry)
    qtbot.addWidget(window)
    window.show()
    window.activateWindow()
    qtbot.waitActive(window)
    entry.setFocus()
    return window


@pytest.fixture
def henry(qtbot, qapp: QApplication) -> Window:
    """Shows the unit in the text; a bare number is in henry."""
    return shown_window(qtbot, qapp, NumberEntry(INDUCTANCE, "Inductance", "H"))


@pytest.fixture
def millihenry(qtbot, qapp: QApplication) -> Window:
    """Shows the number alone; a bare number is in millihenry."""
    entry = NumberEntry(INDUCTANCE, "Inductance", "H", shown_in="mH", scale=1e-3)
    return shown_window(qtbot, qapp, entry)


@pytest.fixture
def volt(qtbot, qapp: QApplication) -> Window:
    return shown_window(qtbot, qapp, NumberEntry(VOLTAGE, "Link voltage", "V", shown_in="V"))


def type_into(window: Window, text: str) -> None:
    """Over what stands there, sign by sign; also signs that the test library has no key for."""
    window.entry.selectAll()
    for sign in text:
        window.entry.insert(sign)
    if not text:
        window.entry.del_()


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("35u", 35e-6),
        ("35 µH", 35e-6),
        ("35 μH", 35e-6),
        ("1,5", 1.5),
        ("1.5", 1.5),
        ("1,5 mH", 1.5e-3),
        ("0.012", 0.012),
        ("12m", 0.012),
        ("1e-3", 1e-3),
    ],
)
def test_text_is_understood(henry: Window, text: str, value: float) -> None:
    type_into(henry, text)
    assert henry.entry.value == value
    assert henry.entered[-1] == value
    assert henry.entry.fault == ""


@pytest.mark.parametrize(
    ("text", "value"),
    [("12", 0.012), ("1,5", 1.5e-3), ("35u", 35e-6), ("35", 0.035), ("0.2 H", 0.2), ("5e-1", 5e-4)],
)
def test_number_alone_counts_in_the_unit_beside_the_field(
    millihenry: Window, text: str, value: float
) -> None:
    type_into(millihenry, text)
    assert millihenry.entry.value == value


@pytest.mark.parametrize("text", ["abc", "12 V", "1.2.3", "--1", "1 000", "nan", "inf", "12 m H x"])
def test_garbage_is_refused_and_the_last_good_value_kept(henry: Window, text: str) -> None:
    type_into(henry, "12m")
    henry.entered.clear()
    henry.entry.setText(text)
    henry.entry.textEdited.emit(text)
    assert henry.entry.value == 0.012
    assert henry.entered == []
    assert henry.entry.fault == henry.refused[-1] != ""
    assert henry.entry.property("fault") is True


def test_value_out_of_range_is_refused_and_says_what_is_allowed(volt: Window) -> None:
    type_into(volt, "540")
    type_into(volt, "-3")
    assert volt.entry.value == 540.0
    assert "0" in volt.entry.fault
    assert volt.entry.accessibleDescription() == volt.entry.fault
    type_into(volt, "600")
    assert volt.entry.fault == ""
    assert volt.refused[-1] == ""
    assert volt.entry.value == 600.0


def test_refused_text_stays_for_correction_when_the_field_is_left(volt: Window) -> None:
    volt.entry.set_value(540.0)
    type_into(volt, "x5")
    volt.next.setFocus()
    assert volt.entry.text() == "x5"
    volt.entry.set_value(540.0)
    assert volt.entry.text() == "x5"


def test_escape_gives_the_last_good_value_back(volt: Window, qtbot) -> None:
    volt.entry.set_value(540.0)
    type_into(volt, "x5")
    qtbot.keyClick(volt.entry, Qt.Key.Key_Escape)
    assert volt.entry.text() == "540"
    assert volt.entry.fault == ""


def test_undo_of_the_document_replaces_what_was_typed(volt: Window) -> None:
    volt.entry.set_value(540.0)
    type_into(volt, "5400")
    volt.entry.set_value(540.0)
    assert volt.entry.text() == "540"


def test_text_under_the_cursor_is_left_alone(volt: Window) -> None:
    type_into(volt, "540.0")
    volt.entry.set_value(540.0)
    assert volt.entry.text() == "540.0"
    volt.next.setFocus()
    assert volt.entry.text() == "540"


def test_emptied_field_says_none_and_stays_empty_until_it_is_left(volt: Window) -> None:
    volt.entry.entered.connect(lambda value: volt.entry.set_value(value or 40.0, value is None))
    type_into(volt, "5")
    type_into(volt, "")
    assert volt.entered[-1] is None
    assert volt.entry.text() == ""
    volt.next.setFocus()
    assert volt.entry.text() == "40"
    assert volt.entry.assumed


def test_assumed_value_is_confirmed_by_control_enter(volt: Window, qtbot) -> None:
    volt.entry.set_value(40.0, assumed=True)
    assert volt.entry.property("assumed") is True
    assert volt.entry.font().italic()
    qtbot.keyClick(volt.entry, Qt.Key.Key_Return, Qt.KeyboardModifier.ControlModifier)
    assert volt.entered == [40.0]
    assert not volt.entry.assumed
    assert not volt.entry.font().italic()


def test_typing_the_assumed_value_confirms_it(volt: Window) -> None:
    volt.entry.set_value(4.0, assumed=True)
    type_into(volt, "4")
    assert volt.entered == [4.0]


def test_setting_a_value_says_nothing(volt: Window) -> None:
    volt.entry.set_value(540.0)
    volt.entry.set_value(None)
    assert volt.entered == []


@pytest.mark.parametrize(
    ("before", "key", "after"),
    [
        (540.0, Qt.Key.Key_Up, "541"),
        (540.0, Qt.Key.Key_Down, "539"),
        (12.5, Qt.Key.Key_Up, "12.6"),
        (9.9, Qt.Key.Key_Up, "10.0"),
        (0.02, Qt.Key.Key_Down, "0.01"),
    ],
)
def test_arrow_keys_step_the_last_digit(
    volt: Window, qtbot, before: float, key: Qt.Key, after: str
) -> None:
    volt.entry.set_value(before)
    qtbot.keyClick(volt.entry, key)
    assert volt.entry.text() == after
    assert volt.entered == [float(after)]


def test_step_keeps_the_prefix(henry: Window, qtbot) -> None:
    type_into(henry, "35u")
    qtbot.keyClick(henry.entry, Qt.Key.Key_Up)
    assert henry.entry.value == 36e-6


def test_step_out_of_range_is_not_taken(volt: Window, qtbot) -> None:
    volt.entry.set_value(1.0)
    qtbot.keyClick(volt.entry, Qt.Key.Key_Down)
    assert volt.entry.value == 1.0
    assert volt.entry.fault == ""


def turn_wheel(entry: NumberEntry) -> bool:
    event = QWheelEvent(
        QPointF(5, 5),
        QPointF(5, 5),
        QPoint(),
        QPoint(0, 120),
        Qt.MouseButton.NoButton,
        Qt.KeyboardModifier.NoModifier,
        Qt.ScrollPhase.NoScrollPhase,
        False,
    )
    QApplication.sendEvent(entry, event)
    return event.isAccepted()


def test_wheel_changes_only_the_field_in_focus(volt: Window) -> None:
    volt.entry.set_value(540.0)
    volt.next.setFocus()
    turn_wheel(volt.entry)
    assert volt.entered == []
    volt.entry.setFocus()
    turn_wheel(volt.entry)
    assert volt.entered == [541.0]


def test_enter_goes_on_unless_the_text_is_refused(volt: Window, qtbot) -> None:
    type_into(volt, "x5")
    qtbot.keyClick(volt.entry, Qt.Key.Key_Return)
    assert volt.entry.hasFocus()
    type_into(volt, "5")
    qtbot.keyClick(volt.entry, Qt.Key.Key_Return)
    assert volt.next.hasFocus()


def test_fault_of_the_document_is_shown_until_it_is_taken_back(volt: Window) -> None:
    said: list[str] = []
    volt.entry.fault_shown.connect(said.append)
    volt.entry.set_fault("must be at most the nominal 50 Hz")
    volt.entry.set_fault(None)
    assert said == ["must be at most the nominal 50 Hz", ""]


def test_field_is_named_with_its_unit(millihenry: Window) -> None:
    assert millihenry.entry.accessibleName() == "Inductance, mH"


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (540.0, "540"),
        (0.08, "0.08"),
        (1e-7, "0.0000001"),
        (2_200_000.0, "2200000"),
        (1 / 3, "0.333333"),
        (-10.0, "-10"),
        (0.0, "0"),
    ],
)
def test_plain_number_is_short_and_has_no_exponent(value: float, text: str) -> None:
    assert plain_number(value) == text


def test_a_narrow_field_rounds_what_it_shows_until_it_is_in_focus(volt: Window) -> None:
    volt.next.setFocus()
    volt.entry.setFixedWidth(40)
    volt.entry.set_value(10.254)
    assert volt.entry.text() == "10.3"
    assert volt.entry.toolTip() == "10.254 V"
    assert volt.entry.value == 10.254
    volt.entry.setFocus()
    assert volt.entry.text() == "10.254"
    assert volt.entered == []


def test_figures_before_the_point_are_never_rounded_away(volt: Window) -> None:
    volt.next.setFocus()
    volt.entry.setFixedWidth(40)
    volt.entry.set_value(12345.0)
    assert volt.entry.text() == "12345"


def test_range_is_told_in_the_unit_beside_the_field(millihenry: Window) -> None:
    """The file allows 0 to 1000 H."""
    type_into(millihenry, "-5")
    assert millihenry.entry.fault == "must be a number at least 0 and at most 1e+06; got -5"


def test_range_is_the_one_of_the_file(volt: Window) -> None:
    type_into(volt, "200000")
    assert volt.entry.fault == "must be a number above 0 and at most 100000; got 200000"


def test_refused_text_is_not_stepped(volt: Window, qtbot) -> None:
    volt.entry.set_value(540.0)
    volt.entry.setText("5x")
    volt.entry.textEdited.emit("5x")
    qtbot.keyClick(volt.entry, Qt.Key.Key_Up)
    assert volt.entry.text() == "5x"
    assert volt.entry.value == 540.0
