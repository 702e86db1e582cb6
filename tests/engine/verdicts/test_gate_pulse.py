"""Latching, holding and gate pulse on solved bridges, against closed forms where there are any."""

from __future__ import annotations

from math import exp, log

import msgspec
import pytest

from engine.corners import solved
from engine.duty import duty_of
from engine.rule_sets import COMMON_PRACTICE
from engine.selection import GatePulse, Gating, Load, Supply
from engine.verdicts.candidate import ROWS
from engine.verdicts.case import case_of
from engine.verdicts.row import check_of
from tests.engine.hand_made import THYRISTOR, candidate, selection

IDS = ("switch.I_L", "switch.I_H", "switch.gate_pulse")


def judged(pulse=None, load=None, conduction_deg=120.0, blanking_s=0.0, voltage_V=542.0, **ratings):
    """The three rows at one link voltage, 50 Hz, and light load 0.2."""
    switch = msgspec.structs.replace(THYRISTOR, **ratings)
    document = selection(
        candidate(switch),
        supply=Supply(voltage_V=voltage_V),
        gating=Gating(
            conduction_deg=conduction_deg,
            frequency_Hz=50.0,
            blanking_s=blanking_s,
            pulse=pulse,
        ),
        load=load or Load(connection="star", resistance_ohm=9.0, inductance_H=0.012),
    )
    case = case_of(document.candidates[0], solved(duty_of(document)), COMMON_PRACTICE)
    rows = {row.id: row for row in ROWS[type(switch)]}
    return {id: check_of(rows[id], case) for id in IDS}


RESISTIVE = Load(connection="star", resistance_ohm=9.0, inductance_H=0.0)


# Star of 9 Ω, 120°: T1 carries V/(2R) throughout; two drops of 1 V leave 540 V: 30 A · 0.2 = 6 A.
def test_with_resistance_alone_the_block_current_stands_at_once():
    checks = judged(load=RESISTIVE, I_L_A=1.0, I_H_A=0.5)
    assert checks["switch.I_L"].allowed == pytest.approx(6.0)
    assert checks["switch.I_H"].allowed == pytest.approx(6.0)
    assert checks["switch.gate_pulse"].applied == pytest.approx(0.0, abs=1e-12)
    assert {check.verdict for check in checks.values()} == {"adequate"}
    assert {check.corner.load_factor for check in checks.values()} == {0.2}


def test_latching_current_needed_and_there_are_compared_the_other_way_round():
    check = judged(load=RESISTIVE, I_L_A=8.0)["switch.I_L"]
    assert check.at_least
    assert (check.applied, check.verdict) == (8.0, "undersized")
    assert check.headroom_pct == pytest.approx(100 * (1 - 8 / 6))
    assert check.would_do == pytest.approx(6.0 * 0.9)


def test_a_latching_current_that_is_never_reached_leaves_no_pulse_long_enough():
    check = judged(load=RESISTIVE, I_L_A=8.0)["switch.gate_pulse"]
    assert (check.verdict, check.applied, check.headroom_pct) == ("undersized", None, None)
    assert check.reason == "the latching current is never reached"


def test_ratings_are_looked_up_at_the_low_ambient():
    document = selection(candidate())
    case = case_of(document.candidates[0], solved(duty_of(document)), COMMON_PRACTICE)
    rows = {row.id: row for row in ROWS[type(THYRISTOR)]}
    assert {check_of(rows[id], case).corner.ambient_C for id in IDS} == {-10.0}


def test_a_drop_that_is_not_entered_is_taken_as_two_volts():
    check = judged(load=RESISTIVE, V_T0_V=None)["switch.I_L"]
    assert check.allowed == pytest.approx(0.2 * (542.0 - 4.0) / 18.0)


# Star R-L at 120°: until the current of leg C has died out in D2 after 0.916 τ, leg A stands
# alone at +, and T1's current rises from 0 as 2V/(3R)·(1 − e^(−t/τ)), here towards 8 A.
def test_time_to_latch_follows_the_exponential_rise():
    load = Load(connection="star", resistance_ohm=9.0, inductance_H=0.0012)
    check = judged(load=load, I_L_A=2.0)["switch.gate_pulse"]
    tau = 0.0012 / 9.0
    assert check.applied == pytest.approx(-tau * log(1.0 - 2.0 / 8.0), rel=1e-6)


def test_holding_counts_from_the_end_of_the_pulse():
    load = Load(connection="star", resistance_ohm=9.0, inductance_H=0.0012)
    tau, width = 0.0012 / 9.0, 50e-6
    check = judged(GatePulse(form="single", width_s=width), load)["switch.I_H"]
    assert check.allowed == pytest.approx(8.0 * (1.0 - exp(-width / tau)), rel=1e-6)


def test_a_block_is_as_long_as_the_window_whatever_width_stands_beside_it():
    check = judged(GatePulse(form="block", width_s=1e-5))["switch.gate_pulse"]
    assert check.allowed == pytest.approx(1 / 3 / 50.0)


def test_blanking_shortens_the_window():
    check = judged(blanking_s=1e-3)["switch.gate_pulse"]
    assert check.allowed == pytest.approx(1 / 3 / 50.0 - 1e-3)
    assert check.at_least


# 1.5 V less two drops of 1 V leave nothing, 2.5 V leave 0.5 V: 0.2 · 0.5/18 A.
def test_a_link_voltage_below_the_drops_latches_nothing():
    none = judged(load=RESISTIVE, voltage_V=1.5)
    assert none["switch.I_L"].allowed == 0.0
    assert none["switch.I_L"].verdict == "undersized"
    assert none["switch.gate_pulse"].reason == "the latching current is never reached"
    some = judged(load=RESISTIVE, voltage_V=2.5, I_L_A=1e-3)
    assert some["switch.I_L"].allowed == pytest.approx(0.2 * 0.5 / 18.0)
    assert some["switch.gate_pulse"].verdict == "adequate"


def test_a_pulse_longer_than_the_window_lasts_no_longer_than_it():
    check = judged(GatePulse(form="single", width_s=1.0))["switch.gate_pulse"]
    assert check.allowed == pytest.approx(1 / 3 / 50.0)


def test_a_single_pulse_must_outlast_the_overrun_and_a_train_need_not():
    lagging = Load(connection="star", resistance_ohm=1.0, inductance_H=0.02)
    single = judged(GatePulse(form="single", width_s=5e-4), lagging)["switch.gate_pulse"]
    train = GatePulse(form="train", width_s=5e-4, interval_s=1e-3)
    repeated = judged(train, lagging)["switch.gate_pulse"]
    assert single.verdict == "undersized"
    assert repeated.verdict == "adequate"
    assert single.applied > repeated.applied + 5e-4


def test_the_pulse_that_would_do_leaves_just_the_band():
    lagging = Load(connection="star", resistance_ohm=1.0, inductance_H=0.02)
    single = judged(GatePulse(form="single", width_s=5e-4), lagging)["switch.gate_pulse"]
    wide = judged(GatePulse(form="single", width_s=single.would_do), lagging)["switch.gate_pulse"]
    assert wide.headroom_pct == pytest.approx(10.0)
    assert wide.verdict == "adequate"


def test_after_the_pulse_of_a_train_that_latched_the_least_current_counts():
    lagging = Load(connection="star", resistance_ohm=1.0, inductance_H=0.02)
    train = GatePulse(form="train", width_s=5e-4, interval_s=1e-3)
    single = judged(GatePulse(form="single", width_s=5e-4), lagging)["switch.I_H"]
    repeated = judged(train, lagging)["switch.I_H"]
    assert single.verdict == "undersized"
    assert single.reason == "the current falls to zero after the gate pulse"
    assert repeated.allowed > 0.0
