"""Losses: worked examples of text books, scaling laws with numbers by hand."""

from __future__ import annotations

from math import pi, sqrt

import msgspec
import numpy as np
import pytest

from engine.bridge import Bridge
from engine.device_stress import stress_of
from engine.losses import (
    commutation_didt,
    diode_loss,
    missing_for_diode_loss,
    missing_for_switch_loss,
    on_state_loss,
    recovered_charge,
    switch_loss,
)
from engine.ratings import Diode, Igbt, Thyristor
from engine.steady_state import solve
from engine.stress_table import OperatingPoints, stacked
from tests.engine.hand_made import FREEWHEEL, IGBT, THYRISTOR, event, stress

LOOP_H = 2e-7


def table(*events, positions=None, voltage_V=500.0, frequency_Hz=50.0):
    points = OperatingPoints(np.array([voltage_V]), np.array([frequency_Hz]), np.array([1.0]))
    return stacked(points, [stress(positions, events)])


def loss_of(threshold_V, slope_ohm, average_A, rms_A):
    device = Thyristor(V_T0_V=threshold_V, r_T_ohm=slope_ohm)
    return on_state_loss(device, np.float64(average_A), np.float64(rms_A)).at(np.float64(100.0))


# B. R. Gupta, V. Singhal, Power Electronics, Example 2.16 (printed 37.74 W), read in a
# transcription: half-sine of 20π A peak, 0.9 V, 20 mΩ.
def test_half_sine_loss_is_that_of_the_first_worked_example():
    peak = 20 * pi
    assert loss_of(0.9, 20e-3, peak / pi, peak / 2) == pytest.approx(37.7392, abs=1e-4)


# V. Jagannathan, Introduction to Power Electronics, Example 2.9 (printed 34.8 W), transcription.
def test_half_sine_loss_is_that_of_the_second_worked_example():
    peak = 20 * pi
    assert loss_of(1.0, 15e-3, peak / pi, peak / 2) == pytest.approx(34.8044, abs=1e-4)


# Gupta, Singhal, Example 2.16: direct current 20 A, and blocks of it over 180° and 120°.
@pytest.mark.parametrize(("conduction_deg", "printed"), [(360, 26.0), (180, 13.0), (120, 8.667)])
def test_block_loss_is_that_of_the_worked_example(conduction_deg, printed):
    share = conduction_deg / 360
    assert loss_of(0.9, 20e-3, 20 * share, 20 * sqrt(share)) == pytest.approx(printed, abs=5e-4)


# M. H. Rashid, Power Electronics, 4th ed., three-phase example (220 V, 5 Ω, 23 mH, 60 Hz, 180°);
# the switch's own average and rms derived from the closed form, hence its loss at 1 V and 10 mΩ.
def test_loss_of_a_switch_of_the_six_step_bridge():
    bridge = Bridge(220.0, 60.0, 180.0, "star", (5.0,) * 3, (23e-3,) * 3)
    points = OperatingPoints(np.array([220.0]), np.array([60.0]), np.array([1.0]))
    solved = stacked(points, [stress_of(solve(bridge))])
    switch = Thyristor(V_T0_V=1.0, r_T_ohm=10e-3)
    watts = switch_loss(switch, solved, diodes=True).at(np.full((1, 6), 25.0))
    assert watts[0] == pytest.approx([3.730780] * 6, abs=1e-6)


def test_on_state_drop_runs_straight_between_25_C_and_the_highest_temperature():
    device = Thyristor(V_T0_V=0.8, r_T_ohm=4e-3, V_T0_25C_V=1.0, r_T_25C_ohm=3e-3, Tvj_max_C=125.0)
    loss = on_state_loss(device, np.float64(10.0), np.float64(20.0))
    assert loss.at(np.float64(25.0)) == pytest.approx(1.0 * 10 + 3e-3 * 400)
    assert loss.at(np.float64(125.0)) == pytest.approx(0.8 * 10 + 4e-3 * 400)
    assert loss.at(np.float64(75.0)) == pytest.approx(0.9 * 10 + 3.5e-3 * 400)


def test_without_a_cold_value_the_hot_one_holds_at_every_temperature():
    device = Thyristor(V_T0_V=0.8, r_T_ohm=4e-3, r_T_25C_ohm=3e-3, Tvj_max_C=125.0)
    loss = on_state_loss(device, np.float64(10.0), np.float64(20.0))
    assert loss.at(np.float64(25.0)) == pytest.approx(0.8 * 10 + 3e-3 * 400)


def test_turn_on_and_turn_off_energies_scale_with_current_voltage_and_temperature():
    switch = msgspec.structs.replace(
        IGBT, Eon_current_exponent=1.0, Eon_voltage_exponent=2.0, Eon_per_K=0.01,
        Eoff_current_exponent=2.0, Eoff_voltage_exponent=1.0, Eoff_per_K=0.0,
    )  # fmt: skip
    on = event(kind="on at current", current_A=37.5, voltage_V=300.0)
    off = event(kind="off forced", current_A=150.0, voltage_V=300.0)
    loss = switch_loss(switch, table(on, off), diodes=True)
    energy_on = 8e-3 * 0.5 * 0.25 * (1 + 0.01 * (105 - 125))
    energy_off = 7e-3 * 4.0 * 0.5
    at = loss.switching.at(np.full((1, 6), 105.0))[0]
    assert at == pytest.approx([50.0 * (energy_on + energy_off)] + [0.0] * 5)


def test_usual_exponents_are_taken_where_none_is_entered():
    off = event(kind="off forced", current_A=37.5, voltage_V=300.0)
    loss = switch_loss(IGBT, table(off), diodes=True)
    expected = 50.0 * 7e-3 * 0.5 * 0.5**1.3 * (1 + 0.003 * (25 - 125))
    assert loss.switching.at(np.full((1, 6), 25.0))[0, 0] == pytest.approx(expected)


@pytest.mark.parametrize("exponent", [0.0, 1.0])
def test_without_current_there_is_no_energy(exponent):
    switch = msgspec.structs.replace(IGBT, Eoff_current_exponent=exponent)
    forced = event(kind="off forced", current_A=30.0, position="T2")
    loss = switch_loss(switch, table(forced), diodes=True)
    watts = loss.switching.at(np.full((1, 6), 25.0))[0]
    assert watts[0] == 0.0
    assert watts[1] > 0.0


def test_a_turn_on_at_zero_current_costs_nothing():
    on = event(kind="on at zero", current_A=0.0, voltage_V=500.0)
    assert not switch_loss(IGBT, table(on), diodes=True).switching.at(np.zeros((1, 6))).any()


def test_a_thyristor_is_charged_its_entered_energy_at_every_turn_on_at_current():
    switch = msgspec.structs.replace(THYRISTOR, Eon_J=0.1)
    events = [event(kind="on at current", current_A=5.0, angle_deg=a) for a in (0.0, 60.0)]
    loss = switch_loss(switch, table(*events), diodes=True)
    assert loss.switching.at(np.zeros((1, 6)))[0, 0] == pytest.approx(2 * 0.1 * 50.0)


def test_a_thyristor_loses_half_its_charge_at_the_diodes_two_volts():
    switch = msgspec.structs.replace(THYRISTOR, Qrr_As=200e-6, Qrr_current_A=60.0)
    loss = switch_loss(switch, table(event(current_A=30.0)), diodes=True)
    assert loss.recovery.at(np.zeros((1, 6)))[0, 0] == pytest.approx(50 * 0.5 * 100e-6 * 2.0)


def test_without_feedback_diodes_the_charge_sees_the_reverse_voltage():
    switch = msgspec.structs.replace(THYRISTOR, Qrr_As=200e-6, Qrr_current_A=60.0)
    reverse = {"T1": {"switch": {"reverse_blocking_peak_V": 100.0}}}
    loss = switch_loss(switch, table(event(current_A=30.0), positions=reverse), diodes=False)
    assert loss.recovery.at(np.zeros((1, 6)))[0, 0] == pytest.approx(50 * 0.5 * 100e-6 * 100.0)


RECOVERY = event(device="diode", kind="off recovery", current_A=37.5, voltage_V=300.0)


def test_a_diode_with_recovery_energy_is_charged_it_scaled():
    watts = diode_loss(FREEWHEEL, IGBT, table(RECOVERY), LOOP_H).recovery
    expected = 50.0 * 2e-3 * 0.5**0.6 * 0.5**0.6 * (1 + 0.006 * (25 - 125))
    assert watts.at(np.full((1, 6), 25.0))[0, 0] == pytest.approx(expected)


def test_a_diode_with_recovered_charge_loses_half_of_it_at_the_voltage_it_blocks():
    diode = msgspec.structs.replace(
        FREEWHEEL, Err_J=None, Qrr_As=100e-6, Qrr_current_A=75.0, Qrr_didt_A_per_s=400e6
    )
    slow = msgspec.structs.replace(IGBT, tr_s=3.75e-7)  # 37.5 A in 375 ns: 100 A/µs
    watts = diode_loss(diode, slow, table(RECOVERY), LOOP_H).recovery.at(np.zeros((1, 6)))
    assert watts[0, 0] == pytest.approx(50.0 * 0.5 * (100e-6 * 0.5 * 0.5) * 300.0)


def test_hard_commutation_is_limited_by_the_loop_and_by_an_igbts_rise_time():
    hard = table(RECOVERY).recovery
    assert commutation_didt(hard, LOOP_H, THYRISTOR)[0, 0, 0] == pytest.approx(300.0 / LOOP_H)
    assert commutation_didt(hard, LOOP_H, IGBT)[0, 0, 0] == pytest.approx(37.5 / 5e-8)
    assert commutation_didt(hard, 0.0, THYRISTOR)[0, 0, 0] == np.inf


def test_where_the_load_sets_the_slope_the_loop_does_not():
    soft = table(msgspec.structs.replace(RECOVERY, didt_A_per_s=-2e4)).recovery
    assert commutation_didt(soft, LOOP_H, IGBT)[0, 0, 0] == 2e4


def test_recovered_charge_goes_with_current_and_the_root_of_the_slope():
    diode = Diode(Qrr_As=100e-6, Qrr_current_A=50.0, Qrr_didt_A_per_s=100e6)
    charge = recovered_charge(diode, np.array([25.0, 0.0]), np.array([400e6, 400e6]))
    assert charge == pytest.approx([100e-6, 0.0])


def test_a_reference_that_is_not_entered_scales_nothing():
    diode = Diode(Qrr_As=100e-6)
    charge = recovered_charge(diode, np.array([25.0, 0.0]), np.array([400e6, 400e6]))
    assert charge == pytest.approx([100e-6, 0.0])


def test_leakage_doubles_every_ten_kelvin():
    switch = msgspec.structs.replace(THYRISTOR, leakage_A=20e-3)
    loss = switch_loss(switch, table(), diodes=True)
    at = [loss.leakage_at(np.full((1, 6), T))[0, 0] for T in (125.0, 115.0, 135.0)]
    assert at == pytest.approx([10.0, 5.0, 20.0])


def test_the_slope_of_the_loss_is_its_derivative():
    switch = msgspec.structs.replace(
        IGBT, leakage_A=20e-3, V_CE0_25C_V=1.1, r_CE_25C_ohm=10e-3, Eoff_per_K=0.01
    )
    loss = switch_loss(switch, table(event()), diodes=True)
    T = np.linspace(20.0, 160.0, 6)[None, :]
    step = 1e-3
    assert loss.slope_at(T) == pytest.approx(
        (loss.at(T + step) - loss.at(T - step)) / (2 * step), rel=1e-6
    )


def test_an_igbt_needs_its_energies_only_where_current_is_switched():
    bare = Igbt(V_CE0_V=1.0)
    assert list(missing_for_switch_loss(bare, table())) == ["r_CE_ohm"]
    assert list(missing_for_switch_loss(bare, table(event()))) == [
        "r_CE_ohm",
        "Eoff_J",
        "E_current_A",
        "E_voltage_V",
    ]


@pytest.mark.parametrize(
    ("diode", "missing"),
    [
        (Diode(V_F0_V=1.0, r_F_ohm=1e-3), ["Err_J", "E_current_A", "E_voltage_V"]),
        (Diode(V_F0_V=1.0, r_F_ohm=1e-3, Qrr_As=1e-4), []),
        (Diode(V_F0_V=1.0, r_F_ohm=1e-3, Qrr_As=1e-4, Err_J=1e-3), ["E_current_A", "E_voltage_V"]),
        (Diode(Qrr_As=1e-4), ["V_F0_V", "r_F_ohm"]),
    ],
)
def test_a_diode_that_recovers_needs_its_energy_or_its_charge(diode, missing):
    assert list(missing_for_diode_loss(diode, table(RECOVERY))) == missing


def test_a_diode_that_never_recovers_needs_neither():
    assert list(missing_for_diode_loss(Diode(V_F0_V=1.0, r_F_ohm=1e-3), table())) == []
