"""The waveforms of one period as arrays to draw: both sides of every jump, nothing smoothed."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from engine.bridge import LEG_OF_POSITION, POSITIONS, UPPER, Bridge
from engine.conduction import Stretch, stretches_of
from engine.gating import gate_on_s, gate_window_s
from engine.roots import Coefficients
from engine.steady_state import SteadyState
from engine.turn_off import freewheel_s, window_of

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Conduction:
    """The devices that conduct between two angles."""

    start_deg: float
    end_deg: float
    devices: tuple[str, ...]


@dataclass(frozen=True, eq=False)
class Waveforms:
    """One period, n samples rising from 0° to 360°; an angle of a jump stands twice.

    Currents in A, voltages in V. Line voltages are AB, BC, CA; line currents flow into the
    load; a position's voltage is forward positive.
    """

    angle_deg: Array
    """(n,)"""
    gate: NDArray[np.bool_]
    """(6, n)"""
    phase_voltage_V: Array
    """(3, n): phases of a star against its star point, branches of a delta."""
    line_voltage_V: Array
    """(3, n)"""
    line_current_A: Array
    """(3, n)"""
    branch_current_A: Array
    """(3, n)"""
    link_current_A: Array
    """(n,)"""
    switch_current_A: Array
    """(6, n)"""
    diode_current_A: Array
    """(6, n)"""
    position_voltage_V: Array
    """(6, n)"""
    conduction: tuple[Conduction, ...]
    gate_on_deg: tuple[float, ...]
    gate_off_deg: tuple[float, ...]
    freewheel_deg: tuple[float, ...]
    overrun_deg: tuple[float, ...]


def sampled(state: SteadyState, points: int = 721) -> Waveforms:
    """Sample the exact solution at about `points` angles and at both sides of every event."""
    bridge = state.bridge
    stretches = stretches_of(state)
    counts = [
        max(2, 1 + round(points * stretch.duration_s / bridge.period_s)) for stretch in stretches
    ]
    edges_deg = [360.0 * bridge.frequency_Hz * stretch.start_s for stretch in stretches]
    edges_deg.append(360.0)
    columns = np.concatenate(
        [_samples(stretch, count) for stretch, count in zip(stretches, counts, strict=True)],
        axis=1,
    )
    owner = np.repeat(np.arange(len(stretches)), counts)
    freewheel = tuple(
        freewheel_s(window_of(state, position)) * 360.0 * bridge.frequency_Hz
        for position in range(6)
    )
    dead_deg = 360.0 * bridge.frequency_Hz * bridge.dead_interval_s
    switch, diode = _device_currents(stretches, owner, columns[6:9])
    return Waveforms(
        angle_deg=_angles(edges_deg, counts),
        gate=_gates(stretches, owner),
        phase_voltage_V=columns[0:3],
        line_voltage_V=columns[3:6],
        line_current_A=columns[6:9],
        branch_current_A=columns[9:12],
        link_current_A=columns[12],
        switch_current_A=switch,
        diode_current_A=diode,
        position_voltage_V=_position_voltages(bridge, columns[13:16]),
        conduction=_conduction(stretches, edges_deg),
        gate_on_deg=tuple(_gate_edge_deg(bridge, position, 0.0) for position in range(6)),
        gate_off_deg=tuple(
            _gate_edge_deg(bridge, position, gate_window_s(bridge)) for position in range(6)
        ),
        freewheel_deg=freewheel,
        overrun_deg=tuple(max(0.0, degrees - dead_deg) for degrees in freewheel),
    )


def _angles(edges_deg: list[float], counts: list[int]) -> Array:
    """Evenly spaced angles of every stretch, both its ends included: (n,)."""
    parts = (
        np.linspace(start, end, count)
        for (start, end), count in zip(pairwise(edges_deg), counts, strict=True)
    )
    return np.concatenate(list(parts))


def _samples(stretch: Stretch, count: int) -> Array:
    """16 rows of voltages and currents over one stretch: (16, count)."""
    s = np.linspace(0.0, stretch.duration_s, count)
    basis = np.ones((1 + len(stretch.rates), count))
    for row, rate in enumerate(stretch.rates, start=1):
        basis[row] = np.expm1(rate * s) / rate if rate else s
    return np.array(_quantities(stretch)) @ basis


def _quantities(stretch: Stretch) -> list[Coefficients]:
    """Coefficients of what is drawn, in the order of the rows."""
    return [
        *stretch.branch_voltage,
        *stretch.line_voltage,
        *stretch.line,
        *stretch.branch,
        stretch.link,
        *stretch.terminal,
    ]


def _device_currents(
    stretches: tuple[Stretch, ...], owner: NDArray[np.intp], line: Array
) -> tuple[Array, Array]:
    switch = np.zeros((6, line.shape[1]))
    diode = np.zeros((6, line.shape[1]))
    for position in range(6):
        leg, side = LEG_OF_POSITION[position], 1 if UPPER[position] else -1
        in_switch = np.array([stretch.in_switch(leg, side) for stretch in stretches])[owner]
        in_diode = np.array([stretch.in_diode(leg, side) for stretch in stretches])[owner]
        switch[position, in_switch] = side * line[leg, in_switch]
        diode[position, in_diode] = -side * line[leg, in_diode]
    return np.maximum(switch, 0.0), np.maximum(diode, 0.0)


def _gates(stretches: tuple[Stretch, ...], owner: NDArray[np.intp]) -> NDArray[np.bool_]:
    legs = np.array([stretch.piece.gates for stretch in stretches])[owner]
    return np.array([legs[:, LEG_OF_POSITION[n]] == (1 if UPPER[n] else -1) for n in range(6)])


def _position_voltages(bridge: Bridge, terminal: Array) -> Array:
    rows = [
        bridge.voltage_V - terminal[LEG_OF_POSITION[n]]
        if UPPER[n]
        else terminal[LEG_OF_POSITION[n]]
        for n in range(6)
    ]
    return np.array(rows)


def _gate_edge_deg(bridge: Bridge, position: int, later_s: float) -> float:
    """Angle of an instant after a position's gate-on, in [0°, 360°)."""
    angle = 360.0 * bridge.frequency_Hz * (gate_on_s(bridge, position) + later_s) % 360.0
    return angle if angle < 360.0 - 1e-9 else 0.0


def _conduction(stretches: tuple[Stretch, ...], edges_deg: list[float]) -> tuple[Conduction, ...]:
    """Conducting devices over the period, neighbours with the same devices made one."""
    found: list[Conduction] = []
    for stretch, (start, end) in zip(stretches, pairwise(edges_deg), strict=True):
        names = _device_names(stretch)
        if found and found[-1].devices == names:
            found[-1] = Conduction(found[-1].start_deg, end, names)
        else:
            found.append(Conduction(start, end, names))
    return tuple(found)


def _device_names(stretch: Stretch) -> tuple[str, ...]:
    names = (
        POSITIONS[position] if device == "switch" else "D" + POSITIONS[position][1:]
        for position, device in stretch.devices()
    )
    return tuple(sorted(names, key=lambda name: (name[0] != "T", name)))
