"""The waveforms to draw."""

from __future__ import annotations

from dataclasses import replace
from itertools import pairwise
from random import Random

import numpy as np
import pytest

from engine.bridge import LEG_OF_POSITION, UPPER, Bridge
from engine.device_stress import stress_from_pieces
from engine.steady_state import solve
from engine.waveforms import sampled
from tests.engine.random_bridges import random_bridge

STAR = Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3)
RESISTIVE = replace(STAR, inductance_H=(0.0,) * 3)


@pytest.mark.parametrize("seed", range(40))
def test_kirchhoff_holds_at_every_sample(seed: int) -> None:
    """Currents sum to zero, devices carry the line current, voltages close their loops."""
    bridge = random_bridge(Random(seed))
    waves = sampled(solve(bridge))
    amperes = max(np.abs(waves.branch_current_A).max(), 1e-30)
    volts = bridge.voltage_V
    switch, diode = waves.switch_current_A, waves.diode_current_A
    assert (switch >= 0.0).all()
    assert (diode >= 0.0).all()
    assert np.abs(waves.line_current_A.sum(axis=0)).max() <= 1e-9 * amperes
    assert np.abs(waves.line_voltage_V.sum(axis=0)).max() <= 1e-9 * volts
    legs = np.zeros_like(waves.line_current_A)
    for position in range(6):
        sign = 1.0 if UPPER[position] else -1.0
        legs[LEG_OF_POSITION[position]] += sign * (switch[position] - diode[position])
    assert np.abs(legs - waves.line_current_A).max() <= 1e-8 * amperes
    upper = switch[[0, 2, 4]].sum(axis=0) - diode[[0, 2, 4]].sum(axis=0)
    assert np.abs(upper - waves.link_current_A).max() <= 1e-8 * amperes
    both = waves.position_voltage_V[[0, 2, 4]] + waves.position_voltage_V[[3, 5, 1]]
    assert both == pytest.approx(volts, rel=1e-9)
    if bridge.connection == "delta":
        assert waves.phase_voltage_V == pytest.approx(waves.line_voltage_V, abs=1e-6 * volts)


@pytest.mark.parametrize("seed", range(40))
def test_the_branch_law_holds_between_samples(seed: int) -> None:
    """∫v dt = L·Δi + R∫i dt over every branch and the whole period (trapezoidal rule)."""
    bridge = random_bridge(Random(seed))
    waves = sampled(solve(bridge), 8000)
    seconds = waves.angle_deg / 360.0 * bridge.period_s
    for k in range(3):
        v, i = waves.phase_voltage_V[k], waves.branch_current_A[k]
        R, L = bridge.resistance_ohm[k], bridge.inductance_H[k]
        flux = np.concatenate([[0.0], np.cumsum(np.diff(seconds) * (v[1:] + v[:-1]) / 2.0)])
        drop = np.concatenate([[0.0], np.cumsum(np.diff(seconds) * (i[1:] + i[:-1]) / 2.0)])
        error = np.abs(flux - L * (i - i[0]) - R * drop).max()
        assert error <= 2e-5 * bridge.voltage_V * bridge.period_s


@pytest.mark.parametrize("bridge", [STAR, RESISTIVE, replace(STAR, conduction_deg=150.0)])
def test_angles_rise_and_stand_twice_at_every_jump(bridge: Bridge) -> None:
    """From 0° to 360°, never back; a voltage changes by a jump only within one angle."""
    waves = sampled(solve(bridge))
    steps = np.diff(waves.angle_deg)
    assert waves.angle_deg[0] == 0.0
    assert waves.angle_deg[-1] == 360.0
    assert (steps >= 0.0).all()
    jumps = np.abs(np.diff(waves.line_voltage_V, axis=1)).max(axis=0) > 0.2 * bridge.voltage_V
    assert jumps.sum() >= 5  # a sixth may lie between 360° and 0°
    assert (steps[jumps] == 0.0).all()


def test_every_edge_and_event_is_among_the_samples() -> None:
    """Gate edges and switching events fall on sample angles."""
    bridge = replace(STAR, conduction_deg=137.0, blanking_s=3e-4)
    state = solve(bridge)
    waves = sampled(state, 100)
    angles = [*waves.gate_on_deg, *waves.gate_off_deg]
    angles += [event.angle_deg for event in stress_from_pieces(state).events]
    for angle in angles:
        assert np.abs(waves.angle_deg - angle).min() <= 1e-9


def test_gates_of_the_six_positions() -> None:
    """T1 is gated from 5.4° of blanking to 120°; each further position 60° later."""
    waves = sampled(solve(replace(STAR, blanking_s=3e-4)))
    assert waves.gate_on_deg == pytest.approx([5.4, 65.4, 125.4, 185.4, 245.4, 305.4])
    assert waves.gate_off_deg == pytest.approx([120.0, 180.0, 240.0, 300.0, 0.0, 60.0])
    middle = np.interp([3.0, 60.0, 130.0], waves.angle_deg, waves.gate[0].astype(float))
    assert list(middle) == [0.0, 1.0, 0.0]


def test_conducting_devices_are_named_step_by_step() -> None:
    """120° with a current gap: T6 T1 with D2 of the outgoing T5, then T6 and T1 alone."""
    conduction = sampled(solve(STAR)).conduction
    assert conduction[0].devices == ("T1", "T6", "D2")
    assert conduction[1].devices == ("T1", "T6")
    assert (conduction[0].start_deg, conduction[-1].end_deg) == (0.0, 360.0)
    for before, after in pairwise(conduction):
        assert before.end_deg == after.start_deg
        assert before.devices != after.devices


def test_freewheel_and_overrun_are_those_of_the_stresses() -> None:
    """The lengths drawn are the times of the position stresses."""
    state = solve(replace(STAR, inductance_H=(0.12,) * 3))
    waves, stress = sampled(state), stress_from_pieces(state)
    for k, position in enumerate(stress.positions):
        assert waves.freewheel_deg[k] == pytest.approx(18000.0 * position.freewheel_s)
        assert waves.overrun_deg[k] == pytest.approx(18000.0 * position.overrun_s)


def test_the_number_of_samples_follows_the_wish() -> None:
    """About as many samples as asked for, more only for the ends of stretches."""
    state = solve(STAR)
    assert 700 <= len(sampled(state).angle_deg) <= 800
    assert 2000 <= len(sampled(state, 2001).angle_deg) <= 2100
