"""The verdict in one sentence, in every state, and where a click on it leads."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication

from app.looked_at import LookedAt
from app.picture import Problem
from app.theme import LIGHT, apply_theme
from app.verdict_line import VerdictLine
from app.verdict_sentence import corner_in_words, rounded, sentence_of, told_apart
from engine.checks import Corner
from tests.app.assessments import (
    BLOCKING,
    DEAD_INTERVAL,
    JUNCTION,
    MISSING,
    WAITING,
    check,
    picture,
    result,
)


@pytest.fixture
def line(qtbot, qapp: QApplication) -> VerdictLine:
    apply_theme(qapp, "light")
    line = VerdictLine()
    qtbot.addWidget(line)
    line.resize(1400, 32)
    line.show()
    return line


def test_undersized_names_position_rating_figures_and_corner(line: VerdictLine) -> None:
    line.show_picture(picture(result("undersized", BLOCKING, JUNCTION)))
    assert str(line.statement) == (
        "T3 undersized: junction 131 °C, 125 °C allowed, at 594 V, 90 Hz, 45 °C"
    )
    assert line.accessibleName() == f"Verdict. {line.statement}"


def test_weakest_basis_and_remark_stand_beside_the_word(line: VerdictLine) -> None:
    said = result(
        "adequate",
        BLOCKING,
        WAITING,
        remark="without its commutation circuit; 1 not assessed: I_TSM",
        weakest_basis="a typical t_q",
    )
    line.show_picture(picture(said))
    assert str(line.statement) == (
        "T1 adequate without its commutation circuit, on a typical t_q: "
        "V_DRM 594 V, 720 V allowed, at 594 V, 90 Hz, 45 °C; 1 not assessed: I_TSM"
    )


def test_ratings_that_must_be_reached_say_needed_and_there() -> None:
    assert sentence_of(DEAD_INTERVAL) == (
        "dead interval 40 µs needed, 43 µs there, at 594 V, 90 Hz, 45 °C"
    )


def test_not_assessed_names_what_is_missing(line: VerdictLine) -> None:
    line.show_picture(picture(result("not assessed", BLOCKING, MISSING)))
    assert str(line.statement) == "not assessed: T_vj needs R_th(j-c) of the switch"
    assert line.statement.key == "candidates.1.switch.Rth_jc_K_per_W"


def test_without_a_candidate_it_says_what_is_wanted(line: VerdictLine) -> None:
    line.show_picture(picture(chosen=""))
    assert str(line.statement) == (
        "No candidate yet. Wanted: V_DRM ≥ 1200 V, I_T(AV) ≥ 16 A, t_q ≤ 1.2 ms"
    )
    assert line.statement.verdict is None


def test_candidates_of_which_none_is_chosen(line: VerdictLine) -> None:
    line.show_picture(picture(result("tight", DEAD_INTERVAL), chosen=""))
    assert line.statement.head == "No candidate chosen."


def test_incomplete_names_the_entries(line: VerdictLine) -> None:
    line.show_incomplete(("supply.voltage_V", "load.resistance_ohm", "load.inductance_H"))
    assert str(line.statement) == "Not assessed: needs link voltage, R, L"
    assert line.statement.key == "supply.voltage_V"


def test_stale_gives_the_reason_and_no_verdict(line: VerdictLine) -> None:
    line.show_picture(picture(result("adequate", BLOCKING)))
    line.show_stale((Problem("load.resistance_ohm", "must be at least 0; got -1"),))
    assert str(line.statement) == "Stale – R: must be at least 0; got -1"
    assert line.statement.verdict is None
    line.show_stale((Problem("a", "one"), Problem("b", "two"), Problem("c", "three")))
    assert str(line.statement).endswith("one (and 2 more)")
    line.show_stale(())
    assert "adequate" not in str(line.statement)


def test_a_click_asks_for_the_entry_and_the_corner(line: VerdictLine, qtbot) -> None:
    line.show_picture(picture(result("undersized", JUNCTION)))
    with qtbot.waitSignal(line.asked) as asked:
        qtbot.mouseClick(line, Qt.MouseButton.LeftButton)
    assert asked.args == [
        "candidates.1.switch.Tvj_max_C",
        LookedAt(voltage=594.0, frequency=90.0, load=1.0, ambient=45.0, position=2),
    ]


def test_space_asks_like_a_click(line: VerdictLine, qtbot) -> None:
    line.show_incomplete(("gating.frequency_Hz",))
    with qtbot.waitSignal(line.asked) as asked:
        qtbot.keyClick(line, Qt.Key.Key_Space)
    assert asked.args == ["gating.frequency_Hz", None]


def test_mark_is_drawn_for_a_verdict_and_not_when_stale(line: VerdictLine) -> None:
    line.show_picture(picture(result("undersized", JUNCTION)))
    middle = (19, 15)
    assert line.grab().toImage().pixelColor(*middle) == LIGHT.verdict["undersized"]
    line.show_stale(())
    assert line.grab().toImage().pixelColor(*middle) != LIGHT.verdict["undersized"]


def test_two_figures_are_told_apart() -> None:
    assert told_apart(720.4, 720.0, "V") == ("720.4 V", "720 V")
    assert told_apart(131.2, 125.0, "C") == ("131 °C", "125 °C")
    assert told_apart(5.0, 5.0, "A") == ("5 A", "5 A")


def test_figures_are_rounded_to_three_but_never_in_the_thousands() -> None:
    assert rounded(1188.4, "V") == "1188 V"
    assert rounded(15.96, "A") == "16 A"
    assert rounded(4.321e-5, "s") == "43.2 µs"


def test_the_corner_names_a_load_factor_that_is_not_one() -> None:
    corner = Corner(voltage_V=594.0, frequency_Hz=90.0, load_factor=1.5, ambient_C=45.0)
    assert corner_in_words(corner) == "594 V, 90 Hz, 1.5 × load, 45 °C"


def test_a_reason_is_printed_where_there_are_no_figures() -> None:
    runaway = check("switch.Tvj", "T_vj", "undersized", "C", reason="does not come to rest")
    assert sentence_of(runaway) == "T_vj does not come to rest"
