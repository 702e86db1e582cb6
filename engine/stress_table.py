"""Stresses of all positions at many operating points, as arrays.

A verdict asks for the worst of many points and six positions at once; these columns let it ask
in one numpy expression. `stacked` lays solved bridges under each other, `StressTable.at` scales
them exactly to further voltages and load factors.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from operator import attrgetter

import numpy as np
from numpy.typing import NDArray

from engine.bridge import POSITIONS
from engine.stress import BridgeStress, Kind, SwitchingEvent

Array = NDArray[np.float64]

_CURRENTS = {
    "switch_average_A": "switch.current_avg_A",
    "switch_rms_A": "switch.current_rms_A",
    "switch_peak_A": "switch.current_peak_A",
    "gate_off_A": "switch.gate_off_current_A",
    "diode_average_A": "diode.current_avg_A",
    "diode_rms_A": "diode.current_rms_A",
    "diode_peak_A": "diode.current_peak_A",
}
_VOLTAGES = {"switch_reverse_V": "switch.reverse_blocking_peak_V"}
_TIMES = {
    "dead_interval_s": "dead_interval_s",
    "overrun_s": "overrun_s",
    "forward_reapplied_s": "forward_reapplied_s",
    "turn_on_delay_s": "turn_on_delay_s",
}


@dataclass(frozen=True, slots=True, eq=False)
class Events:
    """Switching events of one kind, `(n_points, 6, most events of a position)`.

    Places without an event hold current 0, so that they cost no energy. `didt_A_per_s` is NaN
    where a jump of current leaves it to the loop inductance.
    """

    current_A: Array
    voltage_V: Array
    didt_A_per_s: Array

    def at(self, rows: NDArray[np.intp], by_current: Array, by_voltage: Array) -> Events:
        """The events of some rows, currents and voltages scaled by `(n_points, 1)` factors."""
        amperes, volts = by_current[:, :, None], by_voltage[:, :, None]
        return Events(
            self.current_A[rows] * amperes,
            self.voltage_V[rows] * volts,
            self.didt_A_per_s[rows] * amperes,
        )


@dataclass(frozen=True, slots=True, eq=False)
class OperatingPoints:
    """Link voltage, frequency and load factor of each point, all `(n_points,)`."""

    voltage_V: Array
    frequency_Hz: Array
    load_factor: Array


@dataclass(frozen=True, slots=True, eq=False)
class StressTable:
    """What each position must stand at each point: `(n_points, 6)` in SI units.

    NaN stands where a stress does not exist (`None` of `engine.stress`). `forced` and
    `natural` say how the switch turns off; neither holds for one that carries no current.
    """

    points: OperatingPoints
    switch_average_A: Array
    switch_rms_A: Array
    switch_peak_A: Array
    gate_off_A: Array
    diode_average_A: Array
    diode_rms_A: Array
    diode_peak_A: Array
    switch_reverse_V: Array
    dead_interval_s: Array
    overrun_s: Array
    forward_reapplied_s: Array
    turn_on_delay_s: Array
    forced: NDArray[np.bool_]
    natural: NDArray[np.bool_]
    turn_on: Events
    turn_off: Events
    recovery: Events

    @property
    def turn_off_time_s(self) -> Array:
        """Time a switch gets to turn off, NaN where it carries nothing.

        Forced: the dead interval. Natural: from its current zero to forward voltage.
        """
        natural = np.where(self.natural, self.forward_reapplied_s, np.nan)
        return np.where(self.forced, self.dead_interval_s, natural)

    def at(self, points: OperatingPoints) -> StressTable:
        """These bridges at other link voltages and load factors; every frequency must be there.

        Exact as long as the load has no EMF: the bridge's equations and the conditions that
        pick its conducting devices keep their form when all voltages are multiplied by one
        positive number and all currents by another, and dividing every R and L by the load
        factor is just that. Hence voltages follow V, currents V times the load factor, times
        and angles stay.
        """
        own = self.points
        rows = np.array([np.flatnonzero(own.frequency_Hz == f)[0] for f in points.frequency_Hz])
        by_voltage = (points.voltage_V / own.voltage_V[rows])[:, None]
        by_current = by_voltage * (points.load_factor / own.load_factor[rows])[:, None]
        return StressTable(
            points=points,
            **{name: getattr(self, name)[rows] * by_current for name in _CURRENTS},
            **{name: getattr(self, name)[rows] * by_voltage for name in _VOLTAGES},
            **{name: getattr(self, name)[rows] for name in _TIMES},
            forced=self.forced[rows],
            natural=self.natural[rows],
            turn_on=self.turn_on.at(rows, by_current, by_voltage),
            turn_off=self.turn_off.at(rows, by_current, by_voltage),
            recovery=self.recovery.at(rows, by_current, by_voltage),
        )


def stacked(points: OperatingPoints, stresses: Sequence[BridgeStress]) -> StressTable:
    """Solved bridges under each other, one a point."""
    paths = {**_CURRENTS, **_VOLTAGES, **_TIMES}
    turn_off = np.array([[p.turn_off for p in one.positions] for one in stresses])
    return StressTable(
        points=points,
        **{name: _column(stresses, path) for name, path in paths.items()},
        forced=turn_off == "forced",
        natural=turn_off == "natural",
        turn_on=_events(stresses, "switch", "on at current"),
        turn_off=_events(stresses, "switch", "off forced"),
        recovery=_events(stresses, "diode", "off recovery"),
    )


def _column(stresses: Sequence[BridgeStress], path: str) -> Array:
    pick = attrgetter(path)
    return np.array([[pick(p) for p in one.positions] for one in stresses], dtype=np.float64)


def _events(stresses: Sequence[BridgeStress], device: str, kind: Kind) -> Events:
    lists = [
        [
            [e for e in one.events if (e.position, e.device, e.kind) == (position, device, kind)]
            for position in POSITIONS
        ]
        for one in stresses
    ]
    return Events(
        _padded(lists, "current_A", 0.0),
        _padded(lists, "voltage_V", 0.0),
        _padded(lists, "didt_A_per_s", np.nan),
    )


def _padded(lists: list[list[list[SwitchingEvent]]], field: str, filler: float) -> Array:
    most = max(len(events) for row in lists for events in row)
    filled = np.full((len(lists), len(POSITIONS), most), filler)
    for point, row in enumerate(lists):
        for position, events in enumerate(row):
            filled[point, position, : len(events)] = [getattr(e, field) for e in events]
    return filled
