"""The periodic state: refusals, limits of time constants, convergence of the period map."""

from __future__ import annotations

from dataclasses import replace
from math import exp
from random import Random

import numpy as np
import pytest

from engine.bridge import Bridge
from engine.device_stress import stress_from_pieces
from engine.errors import NoSolution
from engine.gating import gate_steps
from engine.leg_states import current_scale_A
from engine.period_map import Walk
from engine.steady_state import solve
from tests.engine.random_bridges import random_bridge

STAR = Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3)
DELTA = replace(STAR, connection="delta")


@pytest.mark.parametrize(
    ("bridge", "key", "reason"),
    [
        (replace(STAR, emf_peak_V=(0.0, 1.0, 0.0)), "load.emf_peak_V", "does not solve loads"),
        (
            replace(STAR, resistance_ohm=(0.0, 1.0, 1.0), inductance_H=(0.0, 0.1, 0.1)),
            "load.resistance_ohm",
            "R and L of a branch must not both be 0",
        ),
        (
            replace(STAR, resistance_ohm=(0.0, 0.0, 1.0)),
            "load.resistance_ohm",
            "a star may have one branch without resistance, a delta none",
        ),
        (
            replace(DELTA, resistance_ohm=(0.0, 1.0, 1.0)),
            "load.resistance_ohm",
            "no unique periodic steady state",
        ),
        (replace(STAR, feedback_diodes=False), "feedback_diodes", "its current needs a path"),
        (replace(STAR, blanking_s=0.02 / 3.0), "gating.blanking_s", "shorter than the gate window"),
    ],
)
def test_refusals_name_the_entry_and_the_reason(bridge: Bridge, key: str, reason: str) -> None:
    """A bridge without a unique steady state, or beyond this version, is refused by its key."""
    with pytest.raises(NoSolution, match=reason) as caught:
        solve(bridge)
    assert caught.value.key == key


def test_one_star_branch_without_resistance_is_solved() -> None:
    """R_k = 0 in one branch of a star still has a unique state, with the energy in balance."""
    stress = stress_from_pieces(solve(replace(STAR, resistance_ohm=(0.0, 9.0, 9.0))))
    assert stress.link_power_W == pytest.approx(stress.load_power_W, rel=1e-12)


@pytest.mark.parametrize("connection", ["star", "delta"])
@pytest.mark.parametrize("conduction", [120.0, 150.0, 180.0])
@pytest.mark.parametrize("periods", [0.1, 100.0, 10_000.0])
def test_long_time_constants_close_on_themselves(
    connection, conduction: float, periods: float
) -> None:  # type: ignore[no-untyped-def]
    """With L/R of 100 and 10 000 periods the state repeats after a period to 1e-12."""
    L = 9.0 * periods * 0.02
    for factors in ((1.0, 1.0, 1.0), (1.0, 1.3, 0.8)):
        bridge = replace(
            STAR,
            connection=connection,
            conduction_deg=conduction,
            inductance_H=(L * factors[0], L * factors[1], L * factors[2]),
        )
        start = solve(bridge).pieces[0].currents_at(0.0)
        end = Walk(bridge, gate_steps(bridge, bridge.period_s), start).currents
        scale = bridge.voltage_V * bridge.period_s / L
        assert np.abs(np.subtract(end, start)).max() <= 1e-12 * scale


def test_the_limit_of_a_pure_inductance() -> None:
    """As L/R grows the ripple at 180° tends to that of V/L alone: peak V·T/9L (derived).

    The phase voltage is V/3, 2V/3, V/3 over half a period, so the flux swings by 4/3·V·T/6.
    """
    L = 9.0 * 1e5 * 0.02
    bridge = replace(STAR, conduction_deg=180.0, inductance_H=(L,) * 3)
    peak = stress_from_pieces(solve(bridge)).line_current_peak_A[0]
    assert peak == pytest.approx(540.0 * 0.02 / 9.0 / L, rel=1e-5)


def test_the_limit_of_no_inductance() -> None:
    """As L falls to nothing the stresses tend to those of the exact L = 0."""
    without = stress_from_pieces(solve(replace(STAR, inductance_H=(0.0,) * 3)))
    almost = stress_from_pieces(solve(replace(STAR, inductance_H=(1e-9,) * 3)))
    assert almost.line_current_rms_A == pytest.approx(without.line_current_rms_A, rel=1e-5)
    assert almost.load_power_W == pytest.approx(without.load_power_W, rel=1e-5)


def test_closed_form_current_at_gate_on() -> None:
    """A balanced star with a current gap: 3V/3R·(1 − a)/(2 − a) one sixth after gate-on."""
    a = exp(-0.02 / 6.0 * 9.0 / 0.012)
    current = solve(STAR).pieces[0].currents_at(0.0)
    assert current[0] == pytest.approx(0.0, abs=1e-12)
    assert current[2] == pytest.approx(3.0 * 20.0 * (1.0 - a) / (2.0 - a), rel=1e-12)


@pytest.mark.parametrize("seed", range(12))
def test_sensitivity_of_the_map_is_its_derivative(seed: int) -> None:
    """M of half a period equals central differences of the walk, events and all."""
    bridge = random_bridge(Random(seed), inductive=True)
    steps = gate_steps(bridge, 0.5 * bridge.period_s)
    start = np.array(solve(bridge).pieces[0].currents_at(0.0))
    allowed = _allowed_changes(bridge)
    # A start off the solution, with current in every leg, has no event on an edge by symmetry.
    scale = max(np.abs(start).max(), current_scale_A(bridge))
    start = start + 0.05 * scale * allowed[0] + 0.03 * scale * allowed[1]
    M = np.array(Walk(bridge, steps, tuple(start)).sensitivity)
    step = 1e-6 * scale
    for direction in allowed:
        ends = [
            np.array(Walk(bridge, steps, tuple(start + sign * step * direction)).currents)
            for sign in (1.0, -1.0)
        ]
        numeric = (ends[0] - ends[1]) / (2.0 * step)
        assert M @ direction == pytest.approx(numeric, abs=2e-4)


def _allowed_changes(bridge: Bridge) -> list[np.ndarray]:
    """Directions in which the branch currents may change: those of a star sum to zero."""
    if bridge.connection == "delta":
        return list(np.eye(3))
    return [np.array([1.0, -1.0, 0.0]), np.array([0.0, 1.0, -1.0])]
