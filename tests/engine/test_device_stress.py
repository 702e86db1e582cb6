"""Stresses of single positions where they can be said by hand."""

from __future__ import annotations

from dataclasses import replace
from random import Random

import numpy as np
import pytest

from engine.bridge import Bridge
from engine.device_stress import stress_from_pieces
from engine.steady_state import solve
from engine.stress import BridgeStress
from engine.waveforms import sampled
from tests.engine.random_bridges import random_bridge

STAR = Bridge(600.0, 50.0, 120.0, "star", (15.0,) * 3, (0.0,) * 3)


def stress(bridge: Bridge) -> BridgeStress:
    return stress_from_pieces(solve(bridge))


def test_resistive_load_is_turned_off_at_full_current() -> None:
    """120°, star of resistors: 20 A cut at gate-off, half the link voltage reapplied at once."""
    for position in stress(STAR).positions:
        assert position.turn_off == "forced"
        assert position.switch.gate_off_current_A == pytest.approx(20.0)
        assert position.reapplied_step_V == pytest.approx(300.0)
        assert position.forward_reapplied_s == 0.0
        assert position.freewheel_s == position.overrun_s == 0.0
        assert position.turn_on_delay_s == 0.0
        assert position.dead_interval_s == pytest.approx(0.02 / 6.0)


def test_jumping_currents_count_both_sides_of_the_jump() -> None:
    """180°, star of resistors: the peak is 2V/3R, between jumps from and to V/3R."""
    found = stress(replace(STAR, conduction_deg=180.0))
    assert found.line_current_peak_A == pytest.approx((2.0 * 600.0 / 45.0,) * 3)
    assert found.positions[0].switch.gate_off_current_A == pytest.approx(600.0 / 45.0)


def test_inductive_load_hands_its_current_to_the_opposite_diode() -> None:
    """R-L star: the whole link voltage is reapplied, the diode's first current is the last."""
    for position in stress(replace(STAR, inductance_H=(0.012,) * 3)).positions:
        assert position.turn_off == "forced"
        assert position.reapplied_step_V == pytest.approx(600.0)
        assert position.diode.current_peak_A == pytest.approx(position.switch.gate_off_current_A)
        assert 0.0 < position.freewheel_s < position.dead_interval_s


def test_long_time_constant_overruns_the_incoming_gate() -> None:
    """ωL/R of 3: the diode outlasts the dead interval, and the switch waits for it."""
    found = stress(replace(STAR, inductance_H=(3.0 * 15.0 / 314.16,) * 3))
    for position in found.positions:
        assert position.overrun_s == pytest.approx(
            position.freewheel_s - position.dead_interval_s, rel=1e-12
        )
        assert position.turn_on_delay_s == pytest.approx(position.overrun_s, rel=1e-9)


def test_window_shorter_than_a_sixth_leaves_every_position_idle() -> None:
    """With one gate at a time no current flows: idle, and nothing is said of reapplied voltage."""
    found = stress(replace(STAR, blanking_s=0.02 * 70.0 / 360.0))
    for position in found.positions:
        assert position.turn_off == "idle"
        assert position.forward_reapplied_s is None
        assert position.reapplied_step_V is None
        assert position.turn_on_delay_s is None
        assert position.switch.current_rms_A == 0.0
    assert found.line_voltage_thd == (0.0,) * 3
    assert found.events == ()


def test_floating_load_stands_in_the_middle_of_the_link() -> None:
    """All gates off between windows: every switch then blocks V/2, and V while one is on."""
    bridge = replace(STAR, blanking_s=0.02 * 70.0 / 360.0)
    waves = sampled(solve(bridge))
    floating = ~waves.gate.any(axis=0)
    assert floating.any()
    assert waves.position_voltage_V[:, floating] == pytest.approx(300.0, rel=1e-12)
    assert stress(bridge).positions[0].switch.forward_blocking_peak_V == pytest.approx(600.0)


def test_current_that_has_turned_round_before_gate_off_is_a_natural_turn_off() -> None:
    """Leg C without resistance takes leg B's current over while both stand at one rail.

    T3's current falls through zero before its gate-off, D3 goes on, and T3 stays reversed
    until T6 is gated after the dead interval.
    """
    bridge = Bridge(
        voltage_V=1931.0,
        frequency_Hz=23.65,
        conduction_deg=164.4,
        connection="star",
        resistance_ohm=(8.624, 8.624, 0.0),
        inductance_H=(3.276e-4, 2.884e-4, 2.667e-4),
    )
    position = stress(bridge).positions[2]
    assert position.turn_off == "natural"
    assert position.switch.gate_off_current_A == 0.0
    assert position.freewheel_s == 0.0
    assert position.reapplied_step_V is None
    assert position.forward_reapplied_s is not None
    assert position.forward_reapplied_s > position.dead_interval_s


@pytest.mark.parametrize("seed", range(40))
def test_stresses_are_those_of_the_waveforms(seed: int) -> None:
    """Averages and peaks from 20 000 samples of the drawn waveforms."""
    bridge = random_bridge(Random(seed))
    state = solve(bridge)
    found, waves = stress_from_pieces(state), sampled(state, 20_000)
    seconds = waves.angle_deg / 360.0 * bridge.period_s
    amperes = max(*found.line_current_peak_A, 1e-30)
    for k, position in enumerate(found.positions):
        for device, current in (
            (position.switch, waves.switch_current_A[k]),
            (position.diode, waves.diode_current_A[k]),
        ):
            average = np.trapezoid(current, seconds) / bridge.period_s
            square = np.trapezoid(current**2, seconds) / bridge.period_s
            assert average == pytest.approx(device.current_avg_A, abs=1e-5 * amperes)
            assert square == pytest.approx(device.current_rms_A**2, abs=1e-5 * amperes**2)
            assert current.max() == pytest.approx(device.current_peak_A, abs=1e-4 * amperes)
        forward = waves.position_voltage_V[k]
        volts = 1e-4 * bridge.voltage_V
        assert forward.max() == pytest.approx(position.switch.forward_blocking_peak_V, abs=volts)
        assert max(0.0, -forward.min()) == pytest.approx(
            position.switch.reverse_blocking_peak_V, abs=volts
        )
