"""The bridge by brute force: implicit Euler steps, the diodes by trying every leg state.

Independent of the engine: no modes, no events, no closed forms. At every step Kirchhoff's
equations of the candidate leg states are solved and the state is kept in which every diode
and every open leg obeys its law (a linear complementarity problem, solved by enumeration).
Branches without inductance need no special case. First order in the step; the averages of
two step lengths are extrapolated to second order.
"""

from __future__ import annotations

from itertools import pairwise, product

import numpy as np

from engine.bridge import Bridge
from tests.references.marched import gate_edges, gates_at, incidence

Legs = tuple[int, int, int]
SLACK = 1e-9


class Stepper:
    """Steps of one length through one bridge."""

    def __init__(self, bridge: Bridge, step_s: float) -> None:
        self.bridge = bridge
        self.step_s = step_s
        self.A = incidence(bridge.connection)
        self.R = np.array(bridge.resistance_ohm)
        self.L = np.array(bridge.inductance_H)
        self.scale_A = bridge.voltage_V / (self.R.sum() + self.L.sum() * bridge.frequency_Hz)
        self._maps: dict[Legs, tuple[np.ndarray, np.ndarray]] = {}

    def map_of(self, legs: Legs) -> tuple[np.ndarray, np.ndarray]:
        """(matrix, offset) from the currents before a step to (currents, potentials) after it."""
        if legs not in self._maps:
            self._maps[legs] = self._solved(legs)
        return self._maps[legs]

    def _solved(self, legs: Legs) -> tuple[np.ndarray, np.ndarray]:
        nodes = self.A.shape[0]
        left = np.zeros((3 + nodes, 3 + nodes))
        right = np.zeros((3 + nodes, 4))
        left[:3, :3] = np.diag(self.R + self.L / self.step_s)
        left[:3, 3:] = -self.A.T
        right[:3, :3] = np.diag(self.L / self.step_s)
        for node in range(nodes):
            if node < 3 and legs[node]:
                left[3 + node, 3 + node] = 1.0
                right[3 + node, 3] = self.bridge.voltage_V if legs[node] > 0 else 0.0
            elif node == 0 and not any(legs):
                left[3, 3] = 1.0
            else:
                left[3 + node, :3] = self.A[node]
        solved = np.linalg.solve(left, right)
        return solved[:, :3], solved[:, 3]

    def step(self, gates: Legs, currents: np.ndarray, last: Legs) -> tuple[np.ndarray, Legs]:
        """(currents and potentials after one step, leg state during it)."""
        best, best_misfit = None, np.inf
        for legs in self._in_turn(gates, last):
            matrix, offset = self.map_of(legs)
            after = matrix @ currents + offset
            misfit = self._misfit(gates, legs, after)
            if misfit < best_misfit:
                best, best_misfit = (after, legs), misfit
            if misfit <= SLACK:
                break
        assert best is not None
        return best

    def _in_turn(self, gates: Legs, last: Legs) -> list[Legs]:
        if not self.bridge.feedback_diodes:
            return [gates]
        options = list(product(*[(gate,) if gate else (0, 1, -1) for gate in gates]))
        return [last, *options] if last in options else options

    def _misfit(self, gates: Legs, legs: Legs, after: np.ndarray) -> float:
        if not self.bridge.feedback_diodes:
            return 0.0
        line = (self.A @ after[:3])[:3] / self.scale_A
        volts = after[3:6] / self.bridge.voltage_V
        if not any(legs):
            return max(0.0, volts.max() - volts.min() - 1.0)
        total = 0.0
        for leg, gate in enumerate(gates):
            if gate:
                continue
            if legs[leg]:
                total += max(0.0, legs[leg] * line[leg])
            else:
                total += max(0.0, -volts[leg], volts[leg] - 1.0)
        return total


def averages_by_steps(bridge: Bridge, start: np.ndarray, steps: int) -> dict[str, np.ndarray]:
    """Averages over one period from the given branch currents, and the currents at its end.

    Extrapolated from about `steps` and twice as many steps.
    """
    coarse = _averages(bridge, start, steps)
    fine = _averages(bridge, start, 2 * steps)
    return {name: 2.0 * fine[name] - coarse[name] for name in fine}


def _averages(bridge: Bridge, start: np.ndarray, steps: int) -> dict[str, np.ndarray]:
    period = bridge.period_s
    currents = np.array(start)
    sums = {
        "line_square": np.zeros(3),
        "branch_square": np.zeros(3),
        "voltage_square": np.zeros(3),
        "switch": np.zeros((3, 2)),
        "switch_square": np.zeros((3, 2)),
        "diode": np.zeros((3, 2)),
        "diode_square": np.zeros((3, 2)),
        "link": np.zeros(1),
        "link_square": np.zeros(1),
    }
    legs: Legs = (0, 0, 0)
    edges = gate_edges(bridge)
    for begin, end in pairwise(edges):
        count = max(4, round(steps * (end - begin) / period))
        stepper = Stepper(bridge, (end - begin) / count)
        gates = gates_at(bridge, 0.5 * (begin + end))
        for _ in range(count):
            after, legs = stepper.step(gates, currents, legs)
            currents = after[:3]
            _add(sums, stepper, legs, after, stepper.step_s / period)
    return {**sums, "end": currents}


def _add(
    sums: dict[str, np.ndarray], stepper: Stepper, legs: Legs, after: np.ndarray, weight: float
) -> None:
    line = (stepper.A @ after[:3])[:3]
    a, b, c = after[3:6]
    sums["line_square"] += weight * line**2
    sums["branch_square"] += weight * after[:3] ** 2
    sums["voltage_square"] += weight * np.array([a - b, b - c, c - a]) ** 2
    link = 0.0
    for leg, state in enumerate(legs):
        if not state:
            continue
        side = 0 if state > 0 else 1
        name = "switch" if state * line[leg] > 0.0 else "diode"
        sums[name][leg, side] += weight * abs(line[leg])
        sums[name + "_square"][leg, side] += weight * line[leg] ** 2
        link += line[leg] if state > 0 else 0.0
    sums["link"] += weight * link
    sums["link_square"] += weight * link**2
