"""When a switch's current reaches a value, and the least it falls to before gate-off."""

from __future__ import annotations

from dataclasses import replace
from math import log
from random import Random

import numpy as np
import pytest

from engine.bridge import Bridge
from engine.gating import gate_on_s, gate_window_s
from engine.latching import least_current_after, time_to_reach
from engine.steady_state import solve
from engine.waveforms import sampled
from tests.engine.random_bridges import random_bridge

STAR = Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3)


def test_time_to_reach_a_current_follows_the_exponential() -> None:
    """From zero towards 2V/3R: t = −τ·ln(1 − i·3R/2V) (closed form), for all six positions."""
    state = solve(STAR)
    expected = -0.012 / 9.0 * log(1.0 - 0.5 / 40.0)
    for position in range(6):
        assert time_to_reach(state, position, 0.5) == pytest.approx(expected, rel=1e-12)


def test_the_time_counts_from_the_gate_through_the_overrun() -> None:
    """With the opposite diode still conducting at gate-on, the wait for it is counted in."""
    state = solve(replace(STAR, inductance_H=(0.12,) * 3))
    waves = sampled(state)
    reached = time_to_reach(state, 0, 1e-9)
    assert reached is not None
    assert reached * 360.0 * 50.0 == pytest.approx(waves.overrun_deg[3], rel=1e-6)


def test_a_current_never_reached_is_none() -> None:
    """More than the peak is never reached; a bridge without current reaches nothing."""
    assert time_to_reach(solve(STAR), 0, 1000.0) is None
    idle = solve(replace(STAR, blanking_s=0.02 * 70.0 / 360.0))
    assert time_to_reach(idle, 0, 0.0) is None


def test_least_current_is_zero_while_the_window_begins_at_zero() -> None:
    """From gate-on the least current is the zero it starts from; later it is what stands then."""
    state = solve(STAR)
    assert least_current_after(state, 0, 0.0) == pytest.approx(0.0, abs=1e-12)
    later = least_current_after(state, 0, 0.001)
    assert 0.0 < later < 28.8


@pytest.mark.parametrize("seed", range(25))
def test_both_agree_with_the_drawn_waveform(seed: int) -> None:
    """Least current after a third of the window, against dense samples of the switch current."""
    bridge = random_bridge(Random(seed))
    state = solve(bridge)
    waves = sampled(state, 20_000)
    window_s = gate_window_s(bridge)
    after_s = window_s / 3.0
    for position in range(6):
        since = np.mod(
            waves.angle_deg / 360.0 * bridge.period_s - gate_on_s(bridge, position),
            bridge.period_s,
        )
        margin = 1e-9 * bridge.period_s
        inside = (since >= after_s) & (since <= window_s - margin) & waves.gate[position]
        seen = waves.switch_current_A[position, inside].min()
        peak = max(waves.switch_current_A.max(), 1e-30)
        got = least_current_after(state, position, after_s)
        assert got == pytest.approx(seen, abs=2e-3 * peak)
        assert got <= seen + 1e-9 * peak
