"""What must hold for every bridge: energy, scaling, symmetry, equivalent loads."""

from __future__ import annotations

from dataclasses import replace
from random import Random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from engine.bridge import Bridge
from engine.device_stress import stress_from_pieces
from engine.duty import Triple
from engine.gating import gate_steps
from engine.period_map import Walk
from engine.steady_state import solve
from engine.stress import BridgeStress, PositionStress
from tests.engine.random_bridges import random_bridge

SEEDS = st.integers(0, 10**9)


def stress(bridge: Bridge) -> BridgeStress:
    return stress_from_pieces(solve(bridge))


def energy_error(bridge: Bridge) -> float:
    """Link power less load power, of the larger of |P| and 1 % of V·I_link,rms."""
    found = stress(bridge)
    apparent = 0.01 * bridge.voltage_V * found.link_current_rms_A
    scale = max(abs(found.load_power_W), apparent)
    return abs(found.link_power_W - found.load_power_W) / scale if scale else 0.0


def figures(position: PositionStress) -> list[float]:
    """Currents and times of a position, without its name."""
    switch, diode = position.switch, position.diode
    return [
        switch.current_avg_A,
        switch.current_rms_A,
        switch.current_peak_A,
        switch.gate_off_current_A,
        diode.current_avg_A,
        diode.current_rms_A,
        diode.current_peak_A,
        position.freewheel_s,
        position.overrun_s,
    ]


def near(expected: float, scale: float) -> object:
    return pytest.approx(expected, rel=1e-9, abs=1e-10 * scale)


@settings(max_examples=120, deadline=None)
@given(SEEDS)
def test_link_power_is_load_power(seed: int) -> None:
    """Energy balance to 1e-11 on bridges of every kind, L/R up to 100 periods."""
    assert energy_error(random_bridge(Random(seed), longest_periods=100.0)) <= 1e-11


@pytest.mark.long
@settings(max_examples=10_000, deadline=None)
@given(SEEDS)
def test_link_power_is_load_power_on_ten_thousand_duties(seed: int) -> None:
    """The reliability goal: none unsolved, energy balance to 1e-11."""
    assert energy_error(random_bridge(Random(seed), longest_periods=100.0)) <= 1e-11


@settings(max_examples=120, deadline=None)
@given(SEEDS)
def test_branches_a_million_apart_are_solved(seed: int) -> None:
    """R from 1 mΩ to 1 kΩ and L from 1 µH to 10 H, or none, in one load: energy to 1e-11."""
    random = Random(seed)
    bridge = random_bridge(random)
    R = [10.0 ** random.uniform(-3.0, 3.0) for _ in range(3)]
    L = [random.choice([0.0, 10.0 ** random.uniform(-6.0, 1.0)]) for _ in range(3)]
    apart = replace(bridge, resistance_ohm=(R[0], R[1], R[2]), inductance_H=(L[0], L[1], L[2]))
    assert energy_error(apart) <= 1e-11


@settings(max_examples=25, deadline=None)
@given(SEEDS, st.floats(0.1, 10.0))
def test_currents_scale_with_the_link_voltage(seed: int, factor: float) -> None:
    """Twice the voltage, twice every current and four times the power."""
    bridge = random_bridge(Random(seed))
    base = stress(bridge)
    other = stress(replace(bridge, voltage_V=factor * bridge.voltage_V))
    scale = max(base.line_current_rms_A)
    for one, two in zip(base.positions, other.positions, strict=True):
        assert two.switch.current_rms_A == near(factor * one.switch.current_rms_A, scale)
        assert two.diode.current_avg_A == near(factor * one.diode.current_avg_A, scale)
        assert two.freewheel_s == near(one.freewheel_s, bridge.period_s)
        assert two.turn_off == one.turn_off
    assert other.load_power_W == near(factor**2 * base.load_power_W, base.load_power_W)


@settings(max_examples=25, deadline=None)
@given(SEEDS, st.floats(0.1, 10.0))
def test_currents_scale_with_the_load_factor(seed: int, factor: float) -> None:
    """R and L over m give m times every current, and the same times."""
    bridge = random_bridge(Random(seed))
    heavier = replace(
        bridge,
        resistance_ohm=_times(bridge.resistance_ohm, 1.0 / factor),
        inductance_H=_times(bridge.inductance_H, 1.0 / factor),
    )
    base, other = stress(bridge), stress(heavier)
    scale = max(base.line_current_rms_A)
    for one, two in zip(base.positions, other.positions, strict=True):
        assert two.switch.current_rms_A == near(factor * one.switch.current_rms_A, scale)
        assert two.switch.current_peak_A == near(factor * one.switch.current_peak_A, scale)
        assert two.overrun_s == near(one.overrun_s, bridge.period_s)
    assert other.line_voltage_rms_V == pytest.approx(base.line_voltage_rms_V, rel=1e-9)


def _times(values: Triple, by: float) -> Triple:
    a, b, c = values
    return a * by, b * by, c * by


@settings(max_examples=25, deadline=None)
@given(
    st.floats(120.0, 180.0), st.floats(0.01, 20.0), st.floats(0.0, 1.0), st.sampled_from([0.0, 0.4])
)
def test_delta_is_a_star_of_a_third(
    conduction: float, time_constant: float, position: float, blanking: float
) -> None:
    """A balanced delta of Z has the line currents and device stresses of a star of Z/3."""
    R, period = 10.0, 0.02
    L = R * time_constant * period if position else 0.0
    blanking_s = blanking * (conduction - 60.0) / 360.0 * period
    delta = Bridge(500.0, 50.0, conduction, "delta", (R,) * 3, (L,) * 3, blanking_s=blanking_s)
    star = replace(
        delta, connection="star", resistance_ohm=(R / 3.0,) * 3, inductance_H=(L / 3.0,) * 3
    )
    one, two = stress(delta), stress(star)
    scale = max(two.line_current_rms_A)
    assert one.line_current_rms_A == pytest.approx(two.line_current_rms_A, rel=1e-9)
    for p, q in zip(one.positions, two.positions, strict=True):
        for got, expected in zip(figures(p), figures(q), strict=True):
            assert got == near(expected, scale)


@settings(max_examples=30, deadline=None)
@given(SEEDS)
def test_a_balanced_bridge_repeats_every_sixth(seed: int) -> None:
    """Equal branches give equal stresses in all six positions."""
    random = Random(seed)
    bridge = random_bridge(random)
    even = replace(
        bridge,
        resistance_ohm=(max(bridge.resistance_ohm),) * 3,
        inductance_H=(max(bridge.inductance_H),) * 3,
    )
    found = stress(even)
    scale = max(*found.line_current_rms_A, 1e-300)
    first = figures(found.positions[0])
    for position in found.positions[1:]:
        for got, expected in zip(figures(position), first, strict=True):
            assert got == near(expected, scale)


@settings(max_examples=30, deadline=None)
@given(SEEDS)
def test_shifted_branches_shift_the_stresses(seed: int) -> None:
    """Branch values handed on by one phase move every stress on by two positions."""
    bridge = random_bridge(Random(seed))
    shifted = replace(
        bridge,
        resistance_ohm=_handed_on(bridge.resistance_ohm),
        inductance_H=_handed_on(bridge.inductance_H),
    )
    one, two = stress(bridge), stress(shifted)
    scale = max(*one.line_current_rms_A, 1e-300)
    for index in range(6):
        got = figures(two.positions[(index + 2) % 6])
        for value, expected in zip(got, figures(one.positions[index]), strict=True):
            assert value == near(expected, scale)


def _handed_on(values: Triple) -> Triple:
    a, b, c = values
    return c, a, b


@settings(max_examples=40, deadline=None)
@given(SEEDS)
def test_the_second_half_period_mirrors_the_first(seed: int) -> None:
    """A walk over a whole period, which assumes no symmetry, ends where it began."""
    bridge = random_bridge(Random(seed), longest_periods=20.0)
    state = solve(bridge)
    start = state.pieces[0].currents_at(0.0)
    whole = Walk(bridge, gate_steps(bridge, bridge.period_s), start)
    scale = max(*map(abs, start), *map(abs, whole.currents), 1e-300)
    L = bridge.inductance_H
    for k in range(3):
        if L[k]:
            assert abs(whole.currents[k] - start[k]) <= 1e-10 * scale
