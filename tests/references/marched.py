"""The bridge marched through time by `scipy.integrate.solve_ivp` (LSODA) with events.

Independent of the engine's modes and closed forms: Kirchhoff's laws are written out node by
node and solved as one linear system for the slopes of the branch currents and the potentials.
For loads with inductance in every branch.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise, product

import numpy as np
from scipy.integrate import solve_ivp

from engine.bridge import LEG_OF_POSITION, UPPER, Bridge

ENDS = {"star": ((0, 3), (1, 3), (2, 3)), "delta": ((0, 1), (1, 2), (2, 0))}
"""Nodes between which each branch lies: terminals 0, 1, 2 and the star point 3."""


def incidence(connection: str) -> np.ndarray:
    """(n_nodes, 3): +1 where a branch current leaves a node, -1 where it enters."""
    nodes = 4 if connection == "star" else 3
    matrix = np.zeros((nodes, 3))
    for branch, (begin, end) in enumerate(ENDS[connection]):
        matrix[begin, branch], matrix[end, branch] = 1.0, -1.0
    return matrix


def gates_at(bridge: Bridge, time_s: float) -> tuple[int, int, int]:
    """+1, -1 or 0 for each leg, straight from the definition of the gate windows."""
    gates = [0, 0, 0]
    for position in range(6):
        angle = (360.0 * bridge.frequency_Hz * time_s - 60.0 * position) % 360.0
        blanking = 360.0 * bridge.frequency_Hz * bridge.blanking_s
        if blanking <= angle < bridge.conduction_deg:
            gates[LEG_OF_POSITION[position]] = 1 if UPPER[position] else -1
    return gates[0], gates[1], gates[2]


def gate_edges(bridge: Bridge) -> list[float]:
    """Times of all gate edges in one period, both ends of the period included."""
    period = bridge.period_s
    edges = {0.0}
    for position in range(6):
        edges.add((position / 6.0 * period + bridge.blanking_s) % period)
        edges.add((position / 6.0 + bridge.conduction_deg / 360.0) % 1.0 * period)
    kept = [0.0]
    for edge in sorted(edges):
        if edge - kept[-1] > 1e-9 * period and period - edge > 1e-9 * period:
            kept.append(edge)
    return [*kept, period]


@dataclass(frozen=True)
class _Circuit:
    """One leg state: slopes of the branch currents and node potentials, affine in the currents."""

    slope_matrix: np.ndarray
    slope_offset: np.ndarray
    potential_matrix: np.ndarray
    potential_offset: np.ndarray

    def slopes(self, currents: np.ndarray) -> np.ndarray:
        return self.slope_matrix @ currents + self.slope_offset

    def potentials(self, currents: np.ndarray) -> np.ndarray:
        return self.potential_matrix @ currents + self.potential_offset


def _circuit(bridge: Bridge, legs: tuple[int, int, int]) -> _Circuit:
    """Solve L dj/dt = Aᵀφ − R j with the closed terminals fixed and KCL at all other nodes."""
    A = incidence(bridge.connection)
    nodes = A.shape[0]
    R, L = np.array(bridge.resistance_ohm), np.array(bridge.inductance_H)
    size = 3 + nodes
    left = np.zeros((size, size))
    by_current = np.zeros((size, 3))
    constant = np.zeros(size)
    left[:3, :3] = np.diag(L)
    left[:3, 3:] = -A.T
    by_current[:3] = -np.diag(R)
    for node in range(nodes):
        row = 3 + node
        if node < 3 and legs[node]:
            left[row, row] = 1.0
            constant[row] = bridge.voltage_V if legs[node] > 0 else 0.0
        else:
            left[row, :3] = A[node]
    if not any(legs):
        # Nothing fixes the potential of a floating load: name one node.
        left[3, :] = 0.0
        left[3, 3] = 1.0
    solved = np.linalg.solve(left, np.column_stack([by_current, constant]))
    return _Circuit(solved[:3, :3], solved[:3, 3], solved[3:, :3], solved[3:, 3])


class March:
    """Integrates a bridge forward in time and adds up its averages."""

    def __init__(self, bridge: Bridge, rtol: float = 1e-8, sensitive: bool = True) -> None:
        if not all(bridge.inductance_H):
            raise ValueError("the march needs inductance in every branch")
        self.bridge = bridge
        self.rtol = rtol
        self.A = incidence(bridge.connection)
        self.scale_A = bridge.voltage_V / (
            sum(bridge.resistance_ohm)
            + 2.0 * np.pi * bridge.frequency_Hz * sum(bridge.inductance_H)
        )
        self.tiny_A = 1e-9 * self.scale_A if sensitive else 1e-6 * self.scale_A
        self._circuits: dict[tuple[int, int, int], _Circuit] = {}

    def circuit(self, legs: tuple[int, int, int]) -> _Circuit:
        if legs not in self._circuits:
            self._circuits[legs] = _circuit(self.bridge, legs)
        return self._circuits[legs]

    def legs_for(self, gates: tuple[int, int, int], currents: np.ndarray) -> tuple[int, int, int]:
        """The consistent leg state: by the sign of the current, at zero by the voltages."""
        line = (self.A @ currents)[:3]
        choices = []
        for leg, gate in enumerate(gates):
            if gate:
                choices.append((gate,))
            elif abs(line[leg]) > self.tiny_A:
                choices.append((-1 if line[leg] > 0.0 else 1,))
            else:
                choices.append((0, 1, -1))
        options = list(product(*choices))
        return min(options, key=lambda legs: self._misfit(legs, gates, currents))

    def _misfit(
        self, legs: tuple[int, int, int], gates: tuple[int, int, int], currents: np.ndarray
    ) -> float:
        """How wrongly diodes would conduct or open legs stand, in volts."""
        circuit = self.circuit(legs)
        link = self.bridge.voltage_V
        line = (self.A @ currents)[:3]
        line_slope = (self.A @ circuit.slopes(currents))[:3]
        volts = circuit.potentials(currents)
        inductance = max(self.bridge.inductance_H)
        total = 0.0
        for leg, gate in enumerate(gates):
            if gate or abs(line[leg]) > self.tiny_A:
                continue
            if legs[leg]:
                total += max(0.0, legs[leg] * line_slope[leg] * inductance)
            elif any(legs):
                total += max(0.0, -volts[leg], volts[leg] - link)
        return total if total > 1e-9 * link else 1e-12 * link * sum(map(abs, legs))

    def period(self, currents: np.ndarray, measured: bool = False) -> tuple[np.ndarray, np.ndarray]:
        """Currents after one period, and the period's integrals (see `_integrands`)."""
        edges = gate_edges(self.bridge)
        sums = np.zeros(21)
        for start, end in pairwise(edges):
            gates = gates_at(self.bridge, 0.5 * (start + end))
            currents, parts = self._step(gates, currents, end - start, measured)
            sums += parts
        return currents, sums

    def _step(
        self, gates: tuple[int, int, int], currents: np.ndarray, left_s: float, measured: bool
    ) -> tuple[np.ndarray, np.ndarray]:
        sums = np.zeros(21)
        for _ in range(60):
            legs = self.legs_for(gates, currents)
            circuit = self.circuit(legs)
            events = self._events(gates, legs, circuit)
            state = np.concatenate([currents, np.zeros(21)]) if measured else currents
            solution = solve_ivp(
                lambda _, x, circuit=circuit, legs=legs: self._rates(x, circuit, legs, measured),
                (0.0, left_s),
                state,
                method="LSODA",
                rtol=self.rtol,
                atol=self.rtol * (1e-2 if measured else 1.0) * self.scale_A,
                events=events,
            )
            currents = solution.y[:3, -1]
            if measured:
                sums += solution.y[3:, -1]
            left_s -= solution.t[-1]
            if solution.status == 0:
                return currents, sums
            currents = self._cleared(gates, currents)
        raise RuntimeError("the march does not get through a gate step")

    def _cleared(self, gates: tuple[int, int, int], currents: np.ndarray) -> np.ndarray:
        """Take the last trace of a diode current that has just ended out of the currents."""
        line = (self.A @ currents)[:3]
        ended = [leg for leg in range(3) if not gates[leg] and abs(line[leg]) < 1e3 * self.tiny_A]
        rows = [self.A[leg] for leg in ended]
        if self.bridge.connection == "star":
            rows.append(self.A[3])
        if not rows:
            return currents
        # Least change of stored flux: minimise Σ L Δj² under the rows.
        inverse_L = np.diag(1.0 / np.array(self.bridge.inductance_H))
        B = np.array(rows)
        return currents - inverse_L @ B.T @ np.linalg.pinv(B @ inverse_L @ B.T) @ (B @ currents)

    def _events(self, gates, legs, circuit):  # type: ignore[no-untyped-def]
        events = []
        for leg, gate in enumerate(gates):
            if gate:
                continue
            if legs[leg]:
                events.append(self._current_event(leg, legs[leg]))
            elif any(legs):
                events += self._voltage_events(leg, circuit)
        for event in events:
            event.terminal = True
            event.direction = -1.0
        return events

    def _current_event(self, leg, side):  # type: ignore[no-untyped-def]
        row = -side * self.A[leg]
        return lambda t, x: row @ x[:3] + 1e-3 * self.tiny_A

    def _voltage_events(self, leg, circuit):  # type: ignore[no-untyped-def]
        link = self.bridge.voltage_V
        slack = 1e-9 * link
        return [
            lambda t, x: circuit.potentials(x[:3])[leg] + slack,
            lambda t, x: link - circuit.potentials(x[:3])[leg] + slack,
        ]

    def _rates(self, x, circuit, legs, measured):  # type: ignore[no-untyped-def]
        slopes = circuit.slopes(x[:3])
        return np.concatenate([slopes, self._integrands(x[:3], legs)]) if measured else slopes

    def _integrands(self, currents: np.ndarray, legs: tuple[int, int, int]) -> np.ndarray:
        """Per leg upper/lower: switch i, switch i², diode i, diode i² (A, B, C); then link i, i²...

        Order: for legs A, B, C and sides +, −: switch, switch², diode (18 numbers), then link
        current, its square, and the power in the resistors.
        """
        line = (self.A @ currents)[:3]
        parts = []
        for leg in range(3):
            for side in (1, -1):
                through = side * line[leg] if legs[leg] == side else 0.0
                switch = max(through, 0.0)
                parts += [switch, switch * switch, max(-through, 0.0)]
        link = sum(line[leg] for leg in range(3) if legs[leg] > 0)
        power = float(np.array(self.bridge.resistance_ohm) @ currents**2)
        return np.array([*parts, link, link * link, power])


def marched_start(
    bridge: Bridge, rtol: float = 1e-8, periods: int = 400, settled: float = 1e-9
) -> tuple[np.ndarray, int]:
    """Branch currents at T1's nominal gate-on after marching from rest, and the periods it took."""
    march = March(bridge, rtol)
    currents = np.zeros(3)
    for count in range(1, periods + 1):
        after, _ = march.period(currents)
        if np.abs(after - currents).max() <= settled * march.scale_A:
            return after, count
        currents = after
    raise RuntimeError(f"not steady after {periods} periods")
