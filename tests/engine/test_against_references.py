"""The engine against two independent solvers, on bridges of every kind drawn at random."""

from __future__ import annotations

from random import Random

import numpy as np
import pytest

from engine.bridge import LEG_OF_POSITION, UPPER, Bridge
from engine.device_stress import stress_from_pieces
from engine.steady_state import solve
from engine.stress import BridgeStress
from tests.engine.random_bridges import random_bridge
from tests.references.marched import March, marched_start
from tests.references.stepper import averages_by_steps


def scale_A(bridge: Bridge, stress: BridgeStress) -> float:
    """Largest line current, and where hardly any flows a current of that order."""
    omega = 2.0 * np.pi * bridge.frequency_Hz
    usual = bridge.voltage_V / (sum(bridge.resistance_ohm) + omega * sum(bridge.inductance_H))
    return max(*stress.line_current_rms_A, usual)


@pytest.mark.parametrize("seed", range(70))
def test_brute_force_steps_give_the_same_averages(seed: int) -> None:
    """One period of implicit Euler steps from the solved state comes back with its averages."""
    bridge = random_bridge(Random(seed))
    state = solve(bridge)
    stress = stress_from_pieces(state)
    amperes = scale_A(bridge, stress)
    start = np.array(state.pieces[-1].currents_at(state.pieces[-1].duration_s))
    found = averages_by_steps(bridge, start, 800)

    def near(got: np.ndarray, expected: object, scale: float) -> None:
        assert np.abs(got - np.array(expected)).max() <= 2e-3 * scale

    near(found["end"], start, amperes)
    near(np.sqrt(found["line_square"].clip(0.0)), stress.line_current_rms_A, amperes)
    near(np.sqrt(found["branch_square"].clip(0.0)), stress.branch_current_rms_A, amperes)
    near(np.sqrt(found["voltage_square"].clip(0.0)), stress.line_voltage_rms_V, bridge.voltage_V)
    near(found["link"], stress.link_current_avg_A, amperes)
    near(found["link_square"], stress.link_current_rms_A**2, amperes**2)
    for index, position in enumerate(stress.positions):
        slot = LEG_OF_POSITION[index], 0 if UPPER[index] else 1
        near(found["switch"][slot], position.switch.current_avg_A, amperes)
        near(found["switch_square"][slot], position.switch.current_rms_A**2, amperes**2)
        near(found["diode"][slot], position.diode.current_avg_A, amperes)
        near(found["diode_square"][slot], position.diode.current_rms_A**2, amperes**2)


@pytest.mark.parametrize("seed", range(40))
def test_integration_with_events_retraces_the_period(seed: int) -> None:
    """`solve_ivp` from the solved state comes back to it, with the same averages, to 1e-8."""
    bridge = random_bridge(Random(1000 + seed), inductive=True)
    state = solve(bridge)
    stress = stress_from_pieces(state)
    amperes = scale_A(bridge, stress)
    start = np.array(state.pieces[0].currents_at(0.0))
    end, sums = March(bridge, 1e-10).period(start, measured=True)
    averages = sums * bridge.frequency_Hz
    assert np.abs(end - start).max() <= 1e-8 * amperes
    for index, position in enumerate(stress.positions):
        first = 6 * LEG_OF_POSITION[index] + (0 if UPPER[index] else 3)
        switch, switch_square, diode = averages[first : first + 3]
        assert abs(switch - position.switch.current_avg_A) <= 1e-8 * amperes
        assert abs(switch_square - position.switch.current_rms_A**2) <= 1e-8 * amperes**2
        assert abs(diode - position.diode.current_avg_A) <= 1e-8 * amperes
    link, link_square, power = averages[18:]
    assert abs(link - stress.link_current_avg_A) <= 1e-8 * amperes
    assert abs(link_square - stress.link_current_rms_A**2) <= 1e-8 * amperes**2
    assert abs(power - stress.load_power_W) <= 1e-8 * bridge.voltage_V * amperes


@pytest.mark.parametrize(
    "bridge",
    [
        Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3),
        Bridge(540.0, 50.0, 180.0, "star", (9.0,) * 3, (0.012,) * 3),
        Bridge(540.0, 50.0, 150.0, "delta", (9.0, 7.0, 5.0), (0.012, 0.01, 0.1), blanking_s=1e-3),
        Bridge(540.0, 50.0, 135.0, "star", (9.0, 7.0, 5.0), (0.012, 0.02, 0.03), blanking_s=5e-3),
    ],
)
def test_marching_from_rest_arrives_at_the_solved_state(bridge: Bridge) -> None:
    """Without being told the answer, the march settles where the solver says."""
    settled, _ = marched_start(bridge, rtol=1e-9, settled=1e-8)
    solved = np.array(solve(bridge).pieces[0].currents_at(0.0))
    assert np.abs(settled - solved).max() <= 1e-6 * np.abs(solved).max()
