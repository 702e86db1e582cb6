"""The Turn-off page and what it shows of a solved bridge."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import msgspec
import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from app.looked_at import LookedAt, corner_of
from app.open_selection import OpenSelection
from app.pages.turn_off import WORST, TurnOff
from app.picture import Picture, Problem
from app.turn_off_view import (
    WITHOUT_CIRCUIT,
    lanes_of,
    position_rows,
    sentences,
    worst_position,
)
from app.widgets.check_rows import figures_of, law_of, turn_off_rows
from app.widgets.time_bar import Interval, TimeBar, ticks
from engine.bridge import bridge_at
from engine.device_stress import stress_of
from engine.duty import duty_of
from engine.ratings import Igbt, Thyristor
from engine.selection import Candidate, Gating, Load, Selection
from engine.steady_state import solve
from tests.app.assessments import DEAD_INTERVAL, SELECTION, check, picture, result

LATCHING = check("switch.I_L", "I_L", "adequate", "A", applied=0.3, allowed=1.2, at_least=True)


def solved(selection: Selection = SELECTION, *checks: Any) -> Picture:
    """A picture of the real bridge with made-up verdict rows."""
    duty = duty_of(selection)
    corner = corner_of(LookedAt(), duty)
    state = solve(bridge_at(duty, corner.voltage_V, corner.frequency_Hz, corner.load_factor))
    blank = picture(result("tight", *checks), selection=selection, chosen=selection.chosen)
    return Picture(
        selection,
        duty,
        LookedAt(),
        corner,
        state,
        stress_of(state),
        blank.waveforms,
        blank.assessment,
    )


def with_load(**load: Any) -> Selection:
    return msgspec.structs.replace(SELECTION, load=Load(connection="star", **load))


LONG = with_load(resistance_ohm=0.9, inductance_H=0.012)
"""L/R of two thirds of a period: the freewheel outlasts the dead interval."""
RESISTIVE = with_load(resistance_ohm=9.0, inductance_H=0.0)


# What is shown --------------------------------------------------------------------------


def test_the_bar_sets_what_there_is_against_what_each_candidate_needs() -> None:
    dead, freewheel, needed = lanes_of(solved(SELECTION, DEAD_INTERVAL), 0)
    assert dead.length_s == pytest.approx(1 / 300)
    assert 0 < freewheel.length_s < dead.length_s
    assert needed.name == "k·t_q second"
    assert needed.intervals == (Interval(0.0, 40e-6, "needed"),)
    assert needed.verdict == "tight"


def test_an_igbt_needs_blanking() -> None:
    blanking = check("switch.blanking", "blanking", "adequate", "s", applied=1e-6, allowed=3e-3)
    assert lanes_of(solved(SELECTION, blanking), 0)[-1].name == "blanking second"


def test_the_overrun_is_the_part_beyond_the_dead_interval() -> None:
    dead, freewheel = lanes_of(solved(LONG), 0)
    inside, overrun = freewheel.intervals
    assert (inside.pattern, overrun.pattern) == ("freewheel", "overrun")
    assert inside.end_s == overrun.start_s == pytest.approx(dead.length_s)


def test_an_inductive_load_puts_the_whole_link_voltage_on_a_forced_switch_at_once() -> None:
    forced, circuit = sentences(solved(), 0)
    assert forced.startswith("T1 has a forced turn-off, at")
    assert "540 V stand on it at once" in forced
    assert circuit == WITHOUT_CIRCUIT


def test_a_resistive_load_puts_half_of_it_there() -> None:
    assert "270 V stand on it at once" in sentences(solved(RESISTIVE), 2)[0]


def test_an_overrun_names_the_switch_that_has_to_wait() -> None:
    assert "until then T4 cannot take the current" in sentences(solved(LONG), 0)[1]


def with_turn_off(picture_: Picture, **stress: Any) -> Picture:
    """The picture with T1 turning off otherwise; the solver's loads here are all forced."""
    first, *others = picture_.stress.positions
    positions = (msgspec.structs.replace(first, **stress), *others)
    changed = msgspec.structs.replace(picture_.stress, positions=positions)
    return replace(picture_, stress=changed)


def test_a_natural_turn_off_has_until_forward_voltage_returns() -> None:
    natural = with_turn_off(
        solved(SELECTION, DEAD_INTERVAL), turn_off="natural", forward_reapplied_s=2e-4
    )
    said = sentences(natural, 0)
    assert len(said) == 1
    assert "turns off naturally" in said[0]
    assert "forward voltage stands on it 200 µs later" in said[0]
    assert "until forward voltage" in [lane.name for lane in lanes_of(natural, 0)]
    assert position_rows(natural)[0].margin_s == pytest.approx(2e-4 - 40e-6)


def test_a_position_without_current_says_so() -> None:
    idle = with_turn_off(solved(), turn_off="idle", forward_reapplied_s=None)
    assert sentences(idle, 0) == ("T1 carries no current in this period.",)


def test_igbts_need_no_commutation_circuit() -> None:
    igbt = Candidate(name="second", switch=Igbt())
    only = msgspec.structs.replace(SELECTION, candidates=(igbt,))
    assert WITHOUT_CIRCUIT not in sentences(solved(only), 0)


def test_the_worst_position_is_that_of_the_chosen_candidates_row() -> None:
    worst = msgspec.structs.replace(DEAD_INTERVAL, position="T5")
    assert worst_position(solved(SELECTION, worst)) == 4


def test_each_position_has_its_margin_and_the_pulse_it_needs() -> None:
    latching = Candidate(name="second", switch=Thyristor(I_L_A=0.5))
    selection = msgspec.structs.replace(SELECTION, candidates=(latching,))
    rows = position_rows(solved(selection, DEAD_INTERVAL))
    assert len(rows) == 6
    for row in rows:
        assert row.margin_s == pytest.approx(1 / 300 - 40e-6)
        assert row.pulse_needed_s is not None
        assert 0 < row.pulse_needed_s < 1e-3


def test_the_pulse_has_to_outlast_the_overrun() -> None:
    latching = Candidate(name="second", switch=Thyristor(I_L_A=0.5))
    picture_ = solved(msgspec.structs.replace(LONG, candidates=(latching,)))
    for row in position_rows(picture_):
        assert row.pulse_needed_s is not None
        assert row.pulse_needed_s > row.stress.overrun_s > 0


def test_rows_of_turn_off_come_chosen_first_and_only_they() -> None:
    other = msgspec.structs.replace(result("tight", LATCHING), name="first")
    volts = check("switch.V_DRM", "V_DRM", "adequate")
    blocks = turn_off_rows([other, result("tight", LATCHING, volts, DEAD_INTERVAL)], "second")
    assert [block.name for block in blocks] == ["second", "first"]
    assert blocks[0].checks == (DEAD_INTERVAL, LATCHING)


def test_a_row_says_what_is_needed_what_there_is_and_where() -> None:
    assert figures_of(DEAD_INTERVAL)[1:] == ("40 µs needed", "43 µs there", "7.0 %")
    explained = msgspec.structs.replace(DEAD_INTERVAL, how="1.5 × 26.7 µs = 40 µs")
    assert law_of(explained) == "T1, 594 V, 90 Hz, 45 °C: 1.5 × 26.7 µs = 40 µs"


@pytest.mark.parametrize("span_s", [1e-7, 84e-6, 3.3e-3, 0.2, 5.0])
def test_ticks_are_round_few_and_within_the_axis(span_s: float) -> None:
    found = ticks(span_s)
    assert 2 <= len(found) <= 6
    assert found[0] == 0.0
    assert found[-1] <= span_s * (1 + 1e-9)


def test_the_bar_is_to_scale(qtbot: QtBot) -> None:
    bar = TimeBar()
    qtbot.addWidget(bar)
    bar.resize(1000, 200)
    bar.show_lanes(lanes_of(solved(LONG), 0))
    half, whole = bar._x(bar.span_s / 2) - bar._x(0), bar._x(bar.span_s) - bar._x(0)
    assert whole == pytest.approx(2 * half)
    assert "overrun" in bar.accessibleDescription()


# The page -------------------------------------------------------------------------------


@pytest.fixture
def page(qtbot: QtBot) -> TurnOff:
    page = TurnOff(OpenSelection(SELECTION))
    qtbot.addWidget(page)
    page.resize(1304, 736)
    with qtbot.waitActive(page):
        page.show()
        page.activateWindow()
    page.show_picture(solved(SELECTION, DEAD_INTERVAL))
    return page


def test_the_worst_position_is_in_view_until_another_is_chosen(page: TurnOff) -> None:
    assert page.position_choice.value == WORST
    page.table.position_asked.emit(4)
    assert page.position == 4
    assert page.document.looked_at.position == 4


def test_a_position_looked_at_elsewhere_is_followed(page: TurnOff) -> None:
    page.document.looked_at = LookedAt(position=3)
    assert page.position_choice.value == 3
    assert "T4" in page._place.text()


def test_another_operating_point_keeps_the_worst_position_in_view(page: TurnOff) -> None:
    page.show_picture(solved(SELECTION, msgspec.structs.replace(DEAD_INTERVAL, position="T5")))
    page.document.looked_at = LookedAt(frequency="high")
    assert page.position_choice.value == WORST
    assert page.position == 4


def test_blanking_is_edited_here(qtbot: QtBot, page: TurnOff) -> None:
    assert page.go_to("gating.blanking_s")
    field = QApplication.focusWidget()
    field.selectAll()  # type: ignore[union-attr]
    qtbot.keyClicks(field, "20")
    assert page.document.selection.gating.blanking_s == 20e-6
    page.document.undo_stack.undo()
    assert page.document.selection == SELECTION


def test_the_gate_pulse_is_edited_here(qtbot: QtBot, page: TurnOff) -> None:
    assert page.go_to("gating.pulse.form")
    qtbot.keyClick(QApplication.focusWidget(), Qt.Key.Key_Right)
    pulse = page.document.selection.gating.pulse
    assert pulse is not None
    assert pulse.form == "single"
    assert page.go_to("gating.pulse.width_s")
    qtbot.keyClicks(QApplication.focusWidget(), "150")
    pulse = page.document.selection.gating.pulse
    assert pulse is not None
    assert pulse.width_s == 150e-6


def test_stale_is_said_and_no_verdict_stands(page: TurnOff) -> None:
    page.show_stale((Problem("gating.blanking_s", "must be shorter than the gate window"),))
    assert page._place.text() == "stale"
    assert page.bar._stale
    assert page.rows._stale


def test_an_incomplete_duty_says_what_it_needs(page: TurnOff) -> None:
    page.show_incomplete(("supply.voltage_V",))
    assert page._said.text() == "Needs link voltage."
    assert page.bar.span_s == 0.0


def test_another_document_begins_at_its_worst_position(page: TurnOff) -> None:
    page.table.position_asked.emit(4)
    other = msgspec.structs.replace(
        SELECTION, gating=Gating(conduction_deg=150.0, frequency_Hz=50.0)
    )
    page.document.open(other, None)
    assert page.position_choice.value == WORST
