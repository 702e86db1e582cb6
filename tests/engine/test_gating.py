"""Gate windows and the steps of constant gating."""

from __future__ import annotations

from itertools import pairwise

import pytest

from engine.bridge import Bridge
from engine.gating import gate_on_s, gate_steps, gate_window_s
from tests.references.marched import gates_at


def bridge(conduction: float, blanking_s: float = 0.0) -> Bridge:
    return Bridge(1.0, 50.0, conduction, "star", (1.0,) * 3, (0.0,) * 3, blanking_s=blanking_s)


@pytest.mark.parametrize("conduction", [120.0, 137.3, 150.0, 180.0])
@pytest.mark.parametrize("blanking_s", [0.0, 1e-4, 2.9e-3])
def test_steps_follow_the_definition_of_the_windows(conduction: float, blanking_s: float) -> None:
    """Every step's gates are those of the definition, at its middle and near both ends."""
    it = bridge(conduction, blanking_s)
    steps = gate_steps(it, it.period_s)
    assert steps[0].start_s == 0.0
    assert steps[-1].end_s == it.period_s
    for before, after in pairwise(steps):
        assert before.end_s == after.start_s
    for start, end, gates in steps:
        for part in (0.01, 0.5, 0.99):
            assert gates == gates_at(it, start + part * (end - start))


@pytest.mark.parametrize(("conduction", "count"), [(120.0, 6), (150.0, 12), (180.0, 6)])
def test_coinciding_edges_make_one_step(conduction: float, count: int) -> None:
    """At 120° and 180° the edges of two positions fall together."""
    it = bridge(conduction)
    assert len(gate_steps(it, it.period_s)) == count


def test_blanking_delays_the_gate_on_and_shortens_the_window() -> None:
    """T3 at 120° with 1 ms of blanking: on at 7.667 ms, for 5.667 ms."""
    it = bridge(120.0, 1e-3)
    assert gate_on_s(it, 2) == pytest.approx(0.02 / 3.0 + 1e-3)
    assert gate_window_s(it) == pytest.approx(0.02 / 3.0 - 1e-3)


def test_never_both_switches_of_a_leg() -> None:
    """At 180° without blanking exactly one switch of every leg is gated at all times."""
    it = bridge(180.0)
    assert all(all(step.gates) for step in gate_steps(it, it.period_s))
