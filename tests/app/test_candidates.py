"""The Candidates page, worked by keyboard."""

from __future__ import annotations

import msgspec
import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QApplication, QWidget
from pytestqt.qtbot import QtBot

from app.open_selection import OpenSelection
from app.pages.candidates import Candidates
from app.picture import Problem
from engine.ratings import Diode, Igbt, Thyristor
from engine.selection import Candidate, Selection, new_selection
from parts_library.rating_sheet import SHEETS, Rating, sheet_number
from tests.app.assessments import (
    BLOCKING,
    DEAD_INTERVAL,
    JUNCTION,
    MISSING,
    SELECTION,
    picture,
    result,
)

ENTER, TAB = Qt.Key.Key_Return, Qt.Key.Key_Tab
CONTROL = Qt.KeyboardModifier.ControlModifier


class Desk:
    """The page in a window, and fingers on the keyboard."""

    def __init__(self, qtbot: QtBot, selection: Selection) -> None:
        self.qtbot = qtbot
        self.document = OpenSelection(selection)
        self.page = Candidates(self.document)
        qtbot.addWidget(self.page)
        self.page.resize(1304, 736)
        with qtbot.waitActive(self.page):
            self.page.show()
            self.page.activateWindow()
        self.enters = 0

    @property
    def focus(self) -> QWidget:
        widget = QApplication.focusWidget()
        assert widget is not None
        return widget

    def press(
        self, key: Qt.Key, modifier: Qt.KeyboardModifier = Qt.KeyboardModifier.NoModifier
    ) -> None:
        self.enters += key == ENTER
        self.qtbot.keyClick(self.focus, key, modifier)

    def type(self, text: str) -> None:
        """Key by key; the first one may open a field."""
        for letter in text:
            self.qtbot.keyClicks(self.focus, letter)

    def enter(self, text: str) -> None:
        self.type(text)
        self.press(ENTER)

    def at(self, column: int, key: str, section: str = "switch") -> None:
        assert self.page.sheets.go_to(column, section, key)

    def candidate(self, column: int = 0) -> Candidate:
        return self.document.selection.candidates[column]


@pytest.fixture
def empty(qtbot: QtBot) -> Desk:
    return Desk(qtbot, new_selection())


@pytest.fixture
def desk(qtbot: QtBot) -> Desk:
    return Desk(qtbot, SELECTION)


# Typing ---------------------------------------------------------------------------------


def test_typing_fills_the_field_in_the_sheets_unit_and_enter_goes_down(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.enter("1200")
    desk.enter("1,3 kV")
    assert desk.candidate().switch == Thyristor(V_DRM_V=1200.0, V_RRM_V=1300.0)
    assert desk.page.sheets.sheets.key(desk.page.sheets.currentIndex()).endswith("I_TAV_A")


def test_the_document_follows_while_typing(desk: Desk) -> None:
    desk.at(0, "tq_s")
    desk.type("35")
    assert desk.candidate().switch == Thyristor(tq_s=35e-6)


def test_tab_goes_to_the_same_rating_of_the_next_candidate_and_back(desk: Desk) -> None:
    desk.at(0, "tq_s")
    desk.type("35")
    desk.press(TAB)
    desk.enter("40")
    assert desk.candidate(1).switch == Thyristor(tq_s=40e-6)
    desk.at(1, "tq_s")
    desk.press(Qt.Key.Key_Backtab, Qt.KeyboardModifier.ShiftModifier)
    assert desk.page.sheets.column == 0


def test_tab_leaves_the_sheets_behind_the_last_candidate(desk: Desk) -> None:
    desk.at(1, "tq_s")
    desk.press(TAB)
    assert not desk.page.sheets.hasFocus()


def test_one_field_is_one_undo_step(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.enter("1200")
    desk.enter("1300")
    assert desk.document.undo_stack.count() == 2
    desk.document.undo_stack.undo()
    assert desk.candidate().switch == Thyristor(V_DRM_V=1200.0)
    desk.document.undo_stack.undo()
    assert desk.document.selection == SELECTION


def test_escape_takes_back_what_was_typed(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.enter("1200")
    desk.at(0, "V_DRM_V")
    desk.type("99")
    desk.press(Qt.Key.Key_Escape)
    assert desk.candidate().switch == Thyristor(V_DRM_V=1200.0)


def test_delete_takes_an_entry_out(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.enter("1200")
    desk.at(0, "V_DRM_V")
    desk.press(Qt.Key.Key_Delete)
    assert desk.candidate().switch == Thyristor()


@pytest.mark.parametrize("text", ["12x", "-5", "1e9"])
def test_a_text_that_is_no_rating_is_explained_at_the_field_and_changes_nothing(
    desk: Desk, text: str
) -> None:
    desk.at(0, "V_RRM_V")
    desk.enter("1")
    desk.at(0, "V_DRM_V")
    before = desk.candidate()
    desk.press(Qt.Key.Key_F2)
    desk.focus.insert(text)  # type: ignore[attr-defined]
    desk.focus.textEdited.emit(text)  # type: ignore[attr-defined]
    desk.press(ENTER)
    assert desk.candidate() == before
    assert desk.page.sheets._fault.isVisible()
    assert list(desk.document.refusals) == ["candidates.0.switch.V_DRM_V"]
    desk.press(Qt.Key.Key_Escape)
    assert not desk.document.refusals
    assert not desk.page.sheets._fault.isVisible()


def test_a_text_left_behind_stays_with_its_fault_until_it_is_mended(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.type("12x")
    left = desk.page.sheets.currentIndex()
    desk.at(1, "tq_s")
    assert desk.page.sheets.sheets.text(left) == "12x"
    assert desk.document.refusals
    desk.at(0, "V_DRM_V")
    desk.press(Qt.Key.Key_F2)
    desk.press(Qt.Key.Key_End)
    desk.press(Qt.Key.Key_Backspace)
    desk.press(ENTER)
    assert not desk.document.refusals
    assert desk.candidate().switch == Thyristor(V_DRM_V=12.0)


def test_folding_keeps_a_fault_and_another_document_drops_it(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.type("12x")
    desk.at(1, "tq_s")
    desk.page.sheets.sheets.fold("switch")
    assert desk.document.refusals
    desk.document.open(SELECTION, None)
    desk.at(0, "V_DRM_V")
    assert desk.page.sheets.sheets.text(desk.page.sheets.currentIndex()) == ""


def test_a_fault_does_not_outlive_its_candidate(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.type("12x")
    desk.page.remove.trigger()
    assert not desk.document.refusals


def test_notes_are_typed_in_the_sheets_too(desk: Desk) -> None:
    desk.at(0, "note", "candidate")
    desk.enter("from the shelf")
    desk.at(0, "part", "diode")
    desk.enter("none yet")
    assert desk.candidate().note == "from the shelf"
    assert desk.candidate().diode.part == "none yet"


# How sure -------------------------------------------------------------------------------


def test_letters_say_how_sure_a_rating_is(desk: Desk) -> None:
    desk.at(0, "tq_s")
    desk.enter("35")
    for key, basis in (("t", "typical"), ("c", "read from curve"), ("a", "assumed")):
        desk.at(0, "tq_s")
        desk.type(key)
        assert desk.candidate().switch.basis == {"tq_s": basis}
    desk.type("m")
    assert desk.candidate().switch.basis == {}


def test_an_assumed_condition_is_confirmed_by_control_and_enter(desk: Desk) -> None:
    desk.at(0, "tq_reverse_V")
    index = desk.page.sheets.currentIndex()
    usual = desk.page.sheets.sheets.cell(index).value
    assert desk.page.sheets.sheets.cell(index).assumed
    desk.press(ENTER, CONTROL)
    assert desk.candidate().switch == Thyristor(tq_reverse_V=usual)
    assert not desk.page.sheets.sheets.cell(index).assumed


def test_typing_confirms_what_was_assumed(desk: Desk) -> None:
    desk.at(0, "tq_s")
    desk.enter("35")
    desk.at(0, "tq_s")
    desk.type("a")
    desk.enter("36")
    assert desk.candidate().switch == Thyristor(tq_s=36e-6)


def test_space_goes_through_choices_and_folds(desk: Desk) -> None:
    desk.at(0, "co_packed", "diode")
    desk.press(Qt.Key.Key_Space)
    assert desk.candidate().diode.co_packed
    rows = len(desk.page.sheets.sheets.rows)
    assert desk.page.go_to("candidates.0.switch.I_GT_A")
    assert len(desk.page.sheets.sheets.rows) > rows


# Candidates -----------------------------------------------------------------------------


def test_a_new_candidate_is_named_first_and_the_first_one_is_chosen(empty: Desk) -> None:
    empty.press(Qt.Key.Key_T, CONTROL)
    empty.enter("Anker 40")
    empty.enter("1200")
    assert empty.candidate() == Candidate(name="Anker 40", switch=Thyristor(V_DRM_V=1200.0))
    assert empty.document.selection.chosen == "Anker 40"
    empty.press(Qt.Key.Key_I, CONTROL)
    empty.enter("Boje")
    assert isinstance(empty.candidate(1).switch, Igbt)
    assert empty.document.selection.chosen == "Anker 40"


def test_a_duplicate_name_is_refused_at_the_field(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.press(Qt.Key.Key_R, CONTROL)
    desk.enter("second")
    assert desk.page.name_entry.isVisible()
    assert "must differ" in desk.page.name_entry.fault
    assert desk.document.selection == SELECTION
    desk.press(Qt.Key.Key_Escape)
    assert desk.page.sheets.hasFocus()


def test_choosing_copying_and_removing_can_be_undone(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.press(Qt.Key.Key_K, CONTROL)
    assert desk.document.selection.chosen == "first"
    desk.press(Qt.Key.Key_D, CONTROL)
    desk.enter("third")
    assert [each.name for each in desk.document.selection.candidates] == [
        "first",
        "second",
        "third",
    ]
    desk.press(Qt.Key.Key_Delete, CONTROL)
    assert len(desk.document.selection.candidates) == 2
    while desk.document.undo_stack.canUndo():
        desk.document.undo_stack.undo()
    assert desk.document.selection == SELECTION


def test_twelve_candidates_lay_out_with_the_symbols_in_view(qtbot: QtBot) -> None:
    many = tuple(Candidate(name=f"part {n}", switch=Thyristor()) for n in range(12))
    desk = Desk(qtbot, msgspec.structs.replace(SELECTION, candidates=many, chosen="part 0"))
    desk.at(11, "V_DRM_V")
    assert desk.page.sheets.horizontalScrollBar().maximum() > 0
    assert desk.page.sheets.symbols.isVisible()
    assert desk.page.sheets.columnWidth(0) >= 200


def test_one_candidate_may_be_the_only_one_to_go(qtbot: QtBot) -> None:
    one = msgspec.structs.replace(SELECTION, candidates=SELECTION.candidates[1:])
    desk = Desk(qtbot, one)
    desk.at(0, "V_DRM_V")
    desk.press(Qt.Key.Key_Delete, CONTROL)
    assert desk.document.selection.candidates == ()
    assert desk.page.wanted.isVisible()


# Forty-two fields -----------------------------------------------------------------------

THYRISTOR_FIGURES = {
    "V_DRM_V": 1200.0, "V_RRM_V": 1200.0, "I_TAV_A": 41.0, "I_TAV_case_C": 85.0, "I_TRMS_A": 64.0,
    "I_TSM_A": 900.0, "I2t_A2s": 4050.0, "didt_A_per_s": 2e8, "dvdt_V_per_s": 1e9, "tq_s": 35e-6,
    "I_L_A": 0.3, "I_H_A": 0.15, "V_T0_V": 1.05, "r_T_ohm": 0.0065, "Tvj_max_C": 125.0,
    "Rth_jc_K_per_W": 0.55,
}  # fmt: skip
DIODE_FIGURES = {
    "V_RRM_V": 1200.0, "I_FAV_A": 30.0, "I_FRMS_A": 50.0, "I_FRM_A": 100.0, "I_FSM_A": 450.0,
    "V_F0_V": 0.85, "r_F_ohm": 0.008, "I2t_A2s": 1010.0, "Tvj_max_C": 150.0,
    "Rth_jc_K_per_W": 0.9,
}  # fmt: skip


def test_two_thyristor_sheets_and_a_diode_sheet_by_keyboard_with_one_enter_a_field(
    empty: Desk,
) -> None:
    """42 fields; a rating that the data sheet does not state is passed by with the arrow key."""
    for name in ("Anker", "Boje"):
        empty.press(Qt.Key.Key_T, CONTROL)
        empty.enter(name)
        type_sheet(empty, "thyristor", THYRISTOR_FIGURES)
    for _ in ("the row that folds", "the heading"):
        empty.press(Qt.Key.Key_Down)
    type_sheet(empty, "diode", DIODE_FIGURES)
    assert 2 * len(THYRISTOR_FIGURES) + len(DIODE_FIGURES) == 42
    assert empty.enters == 42 + len(("Anker", "Boje"))
    assert empty.candidate(0).switch == Thyristor(**THYRISTOR_FIGURES)
    assert empty.candidate(1) == Candidate(
        name="Boje", switch=Thyristor(**THYRISTOR_FIGURES), diode=Diode(**DIODE_FIGURES)
    )


def type_sheet(desk: Desk, kind: str, figures: dict[str, float]) -> None:
    for rating in needed(kind):
        if rating.key in figures:
            desk.enter(sheet_number(rating, figures[rating.key]))
        else:
            desk.press(Qt.Key.Key_Down)


def needed(kind: str) -> list[Rating]:
    return [rating for rating in SHEETS[kind] if rating.needed]  # type: ignore[index]


# Results --------------------------------------------------------------------------------


def test_a_result_stands_beside_its_rating(desk: Desk) -> None:
    desk.page.show_picture(picture(result("adequate", BLOCKING), selection=SELECTION))
    desk.at(1, "V_DRM_V")
    cell = desk.page.sheets.sheets.cell(desk.page.sheets.currentIndex())
    assert cell.checks == (BLOCKING,)
    assert "V_DRM adequate" in desk.page.sheets.sheets.sentence(desk.page.sheets.currentIndex())


def test_stale_results_carry_no_verdict(desk: Desk) -> None:
    desk.page.show_picture(picture(result("adequate", BLOCKING)))
    desk.page.show_stale((Problem("supply.voltage_V", "needed, not given"),))
    desk.at(1, "V_DRM_V")
    assert "adequate" not in desk.page.sheets.sheets.sentence(desk.page.sheets.currentIndex())
    desk.page.show_picture(picture(result("adequate", BLOCKING)))
    assert "adequate" in desk.page.sheets.sheets.sentence(desk.page.sheets.currentIndex())


def test_what_a_verdict_waits_for_leads_to_its_field(desk: Desk) -> None:
    desk.page.show_picture(picture(result("not assessed", MISSING)))
    desk.at(1, "V_DRM_V")
    (button,) = [w for w in desk.page.missing.children() if hasattr(w, "click")]
    assert button.text() == "R_th(j-c) (1 row)"
    button.click()
    assert desk.page.sheets.sheets.key(desk.page.sheets.currentIndex()).endswith("Rth_jc_K_per_W")


def test_a_mark_of_the_plot_leads_to_its_rating(desk: Desk) -> None:
    desk.page.show_picture(picture(result("undersized", JUNCTION, DEAD_INTERVAL)))
    desk.page.plot.asked.emit(0, "switch.tq_dead")
    assert (
        desk.page.sheets.sheets.key(desk.page.sheets.currentIndex()) == "candidates.1.switch.tq_s"
    )


def test_without_candidates_the_wanted_ratings_are_shown(empty: Desk) -> None:
    empty.page.show_picture(picture(chosen="", selection=empty.document.selection))
    table = empty.page.wanted
    assert table.texts(0)[1] == "V_DRM"
    assert table.texts(0)[3:5] == ["≥ 1188 V", "1200 V"]
    assert table.texts(2)[3] == "≤ 1200 µs"


def test_an_incomplete_duty_is_named_above_the_sheets(desk: Desk) -> None:
    desk.page.show_incomplete(("supply.voltage_V",))
    (button,) = [w for w in desk.page.missing.children() if hasattr(w, "click")]
    with desk.qtbot.waitSignal(desk.page.asked) as asked:
        button.click()
    assert asked.args == ["supply.voltage_V"]


def test_an_incomplete_duty_says_what_it_needs(empty: Desk) -> None:
    empty.page.show_incomplete(("supply.voltage_V", "gating.frequency_Hz"))
    assert empty.page._no_wanted.text() == "Needs link voltage, frequency."
    assert empty.page.wanted.rowCount() == 0


# Clipboard ------------------------------------------------------------------------------


def test_numbers_from_a_spreadsheet_go_down_and_across(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    QGuiApplication.clipboard().setText("1200\t1400\r\n1200\t–\r\n41,5\t60\r\n")
    desk.press(Qt.Key.Key_V, CONTROL)
    assert desk.candidate(0).switch == Thyristor(V_DRM_V=1200.0, V_RRM_V=1200.0, I_TAV_A=41.5)
    assert desk.candidate(1).switch == Thyristor(V_DRM_V=1400.0, I_TAV_A=60.0)
    desk.document.undo_stack.undo()
    assert desk.document.selection == SELECTION


def test_numbers_beside_symbols_go_to_their_ratings(desk: Desk) -> None:
    desk.at(1, "V_DRM_V")
    QGuiApplication.clipboard().setText("t_q\t35\nr_T\t6,5\nnonsense\t3")
    desk.press(Qt.Key.Key_V, CONTROL)
    assert desk.candidate(1).switch == Thyristor(tq_s=35e-6, r_T_ohm=6.5e-3)


def test_a_block_with_a_fault_is_not_taken_at_all(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    QGuiApplication.clipboard().setText("1200\nabc")
    desk.press(Qt.Key.Key_V, CONTROL)
    assert desk.document.selection == SELECTION
    assert "line 2" in desk.page.detail._head.text()


def test_the_sheets_copy_as_a_table(desk: Desk) -> None:
    desk.at(0, "V_DRM_V")
    desk.enter("1200")
    desk.page.copy()
    lines = QGuiApplication.clipboard().text().splitlines()
    assert lines[0] == "\t\tfirst\tsecond"
    assert "V_DRM\tV\t1200\t" in lines
