"""The extremes of a duty, and the bridge solved at all of them.

Instantaneous rows (voltages, peak and turn-off currents, times) run over low, nominal and high
supply and frequency at light, nominal and overload. Thermal rows (average and rms currents,
temperatures) run over the same supply and frequencies with the load factors of the overload
cycle, each taken as lasting. Only one solution a frequency is needed; the rest is exact
scaling (`StressTable.at`).
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import lru_cache
from itertools import product

import numpy as np

from engine.bridge import Bridge, bridge_at
from engine.device_stress import stress_of
from engine.duty import Duty, Extremes
from engine.steady_state import SteadyState, solve
from engine.stress import BridgeStress
from engine.stress_table import OperatingPoints, StressTable, stacked


@dataclass(frozen=True, slots=True, eq=False)
class SolvedDuty:
    """The bridge of a duty at every corner.

    `states` holds, by frequency, the solution at nominal link voltage and load factor 1, and
    `base` its stresses in the same order; `lightest` is lowest link voltage and light load.
    """

    duty: Duty
    states: Mapping[float, SteadyState]
    nominal: BridgeStress
    base: StressTable
    lightest: StressTable
    instantaneous: StressTable
    thermal: StressTable


@lru_cache(maxsize=8)
def solved(duty: Duty) -> SolvedDuty:
    """Solve the bridge once a frequency and lay out all corners.

    Kept for the last few duties, so that an edit of a rating solves nothing anew.

    Raises
    ------
    NoSolution
        The bridge has no unique periodic steady state.
    """
    frequencies = _nominal_first(duty.frequency_Hz)
    voltage = duty.voltage_V.nominal
    solutions = [solution(bridge_at(duty, voltage, f, 1.0)) for f in frequencies]
    stresses = [stress for _, stress in solutions]
    base = stacked(_points([voltage], frequencies, [1.0]), stresses)
    return SolvedDuty(
        duty=duty,
        states=dict(zip(frequencies, (state for state, _ in solutions), strict=True)),
        nominal=stresses[0],
        base=base,
        lightest=base.at(_points([duty.voltage_V.low], frequencies, [duty.light_factor])),
        instantaneous=base.at(instantaneous_points(duty)),
        thermal=base.at(thermal_points(duty)),
    )


@lru_cache(maxsize=64)
def solution(bridge: Bridge) -> tuple[SteadyState, BridgeStress]:
    """A solved bridge and its stresses; an edit that leaves the bridge alone finds them again.

    Raises
    ------
    NoSolution
        The bridge has no unique periodic steady state.
    """
    state = solve(bridge)
    return state, stress_of(state)


def instantaneous_points(duty: Duty) -> OperatingPoints:
    """Supply × frequency × (nominal, light, overload), nominal first."""
    return _points(
        _nominal_first(duty.voltage_V),
        _nominal_first(duty.frequency_Hz),
        _once((1.0, duty.light_factor, duty.overload_factor)),
    )


def thermal_points(duty: Duty) -> OperatingPoints:
    """Supply × frequency × the load factors of the overload cycle, nominal first."""
    return _points(
        _nominal_first(duty.voltage_V),
        _nominal_first(duty.frequency_Hz),
        _once(segment.load_factor for segment in duty.cycle),
    )


def _points(
    voltages_V: Iterable[float], frequencies_Hz: Iterable[float], load_factors: Iterable[float]
) -> OperatingPoints:
    grid = np.array(list(product(voltages_V, frequencies_Hz, load_factors)), dtype=np.float64)
    return OperatingPoints(grid[:, 0], grid[:, 1], grid[:, 2])


def _nominal_first(extremes: Extremes) -> tuple[float, ...]:
    # Of corners that are equally bad the first is named: the one nearest to nominal.
    return _once((extremes.nominal, extremes.low, extremes.high))


def _once(values: Iterable[float]) -> tuple[float, ...]:
    return tuple(dict.fromkeys(values))
