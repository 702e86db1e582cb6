"""Stretches: where each switch and each diode conducts."""

from __future__ import annotations

from dataclasses import replace
from random import Random

import numpy as np
import pytest

from engine.bridge import Bridge
from engine.conduction import half_period, stretches_of
from engine.device_stress import stress_from_pieces
from engine.roots import extremes
from engine.steady_state import solve
from tests.engine.random_bridges import random_bridge
from tests.references.marched import March

STAR = Bridge(540.0, 50.0, 180.0, "star", (9.0,) * 3, (0.05,) * 3)


@pytest.mark.parametrize("seed", range(60))
def test_no_current_changes_its_sign_within_a_stretch(seed: int) -> None:
    """Over each stretch every leg current is of the sign that is noted, or nothing."""
    bridge = random_bridge(Random(seed))
    stretches = stretches_of(solve(bridge))
    amperes = max(abs(part.line[leg][0]) for part in stretches for leg in range(3))
    for part in stretches:
        for leg in range(3):
            low, high = extremes(part.line[leg], part.rates, part.duration_s)
            assert part.signs[leg] >= 0 or high <= 1e-8 * amperes
            assert part.signs[leg] <= 0 or low >= -1e-8 * amperes


@pytest.mark.parametrize("seed", range(30))
def test_stretches_fill_the_period(seed: int) -> None:
    """One after another without gap from 0 to T, the second half as the first."""
    bridge = random_bridge(Random(seed))
    stretches = stretches_of(solve(bridge))
    ends = np.array([part.start_s + part.duration_s for part in stretches])
    starts = np.array([part.start_s for part in stretches])
    assert starts[0] == 0.0
    assert ends[-1] == pytest.approx(bridge.period_s, rel=1e-12)
    assert starts[1:] == pytest.approx(ends[:-1], rel=1e-12, abs=1e-13 * bridge.period_s)


def test_a_gated_leg_passes_from_diode_to_switch() -> None:
    """At 180° no leg state changes at the current zero, yet switch and diode are told apart."""
    upper = [part.conductor(0) for part in half_period(solve(STAR))]
    assert upper[0] == (0, "diode")
    assert upper[-1] == (0, "switch")


def test_a_current_that_comes_and_goes_between_two_edges_is_seen() -> None:
    """A delta's leg carries a short pulse from zero back to zero within a long blanking.

    Its diode's average agrees with integration by `solve_ivp`.
    """
    bridge = Bridge(
        voltage_V=2072.4,
        frequency_Hz=1.6886,
        conduction_deg=120.0,
        connection="delta",
        resistance_ohm=(0.2021, 0.6779, 0.4350),
        inductance_H=(3.647e-3, 2.143e-4, 2.452e-4),
        blanking_s=0.0378,
    )
    state = solve(bridge)
    start = np.array(state.pieces[0].currents_at(0.0))
    _, sums = March(bridge, 1e-10).period(start, measured=True)
    diode = stress_from_pieces(state).positions[1].diode.current_avg_A
    assert diode == pytest.approx(sums[17] * bridge.frequency_Hz, rel=1e-8)


def test_two_switches_conduct_in_the_gap_of_a_resistive_star() -> None:
    """120° without inductance: exactly one upper and one lower switch at any time."""
    bridge = replace(STAR, conduction_deg=120.0, inductance_H=(0.0,) * 3)
    for part in stretches_of(solve(bridge)):
        assert [device for _, device in part.devices()] == ["switch", "switch"]
