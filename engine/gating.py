"""Which gate is on when: the commanded state of the three legs over one period."""

from __future__ import annotations

from functools import lru_cache
from itertools import pairwise
from typing import NamedTuple

from engine.bridge import LEG_OF_POSITION, UPPER, Bridge

LegGates = tuple[int, int, int]
"""Per leg A, B, C: +1 upper switch gated, -1 lower, 0 neither."""

_SAME = 1e-12  # of a period: two edges closer than this are one


class GateStep(NamedTuple):
    """An interval of constant gating."""

    start_s: float
    end_s: float
    gates: LegGates


def gate_on_s(bridge: Bridge, position: int) -> float:
    """Start of a position's gate window, s after T1's nominal gate-on."""
    return position / 6.0 * bridge.period_s + bridge.blanking_s


def gate_window_s(bridge: Bridge) -> float:
    """Length of every gate window, blanking taken off."""
    return bridge.conduction_deg / 360.0 * bridge.period_s - bridge.blanking_s


def gate_steps(bridge: Bridge, until_s: float) -> tuple[GateStep, ...]:
    """Intervals of constant gating from T1's nominal gate-on to a later instant of the period."""
    return _gate_steps(bridge.period_s, bridge.blanking_s, gate_window_s(bridge), until_s)


@lru_cache(maxsize=256)
def _gate_steps(
    period_s: float, blanking_s: float, window_s: float, until_s: float
) -> tuple[GateStep, ...]:
    edges = {0.0, until_s}
    for position in range(6):
        on_s = position / 6.0 * period_s + blanking_s
        edges |= {on_s % period_s, (on_s + window_s) % period_s}
    times = _merged(sorted(edge for edge in edges if edge <= until_s), _SAME * period_s)
    return tuple(
        GateStep(start, end, _leg_gates(period_s, blanking_s, window_s, 0.5 * (start + end)))
        for start, end in pairwise(times)
    )


def _leg_gates(period_s: float, blanking_s: float, window_s: float, time_s: float) -> LegGates:
    """Commanded state of the legs at an instant that is not an edge."""
    gates = [0, 0, 0]
    for position in range(6):
        since_s = (time_s - position / 6.0 * period_s - blanking_s) % period_s
        if since_s < window_s:
            gates[LEG_OF_POSITION[position]] = 1 if UPPER[position] else -1
    return gates[0], gates[1], gates[2]


def _merged(times: list[float], apart_s: float) -> list[float]:
    """The first and last time, and those between that stand apart from their neighbours."""
    kept = [times[0]]
    for time in times[1:-1]:
        if time - kept[-1] > apart_s and times[-1] - time > apart_s:
            kept.append(time)
    return [*kept, times[-1]]
