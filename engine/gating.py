"""Which gate is on when: the commanded state of the three legs over one period."""

from __future__ import annotations

from itertools import pairwise

from engine.bridge import LEG_OF_POSITION, UPPER, Bridge

LegGates = tuple[int, int, int]
"""Per leg A, B, C: +1 upper switch gated, -1 lower, 0 neither."""

_SAME = 1e-12  # of a period: two edges closer than this are one


def gate_on_s(bridge: Bridge, position: int) -> float:
    """Start of a position's gate window, s after T1's nominal gate-on."""
    return position / 6.0 * bridge.period_s + bridge.blanking_s


def gate_window_s(bridge: Bridge) -> float:
    """Length of every gate window, blanking taken off."""
    return bridge.conduction_deg / 360.0 * bridge.period_s - bridge.blanking_s


def leg_gates(bridge: Bridge, time_s: float) -> LegGates:
    """Commanded state of the legs at an instant that is not an edge."""
    gates = [0, 0, 0]
    window_s = gate_window_s(bridge)
    for position in range(6):
        since_s = (time_s - gate_on_s(bridge, position)) % bridge.period_s
        if since_s < window_s:
            gates[LEG_OF_POSITION[position]] = 1 if UPPER[position] else -1
    return gates[0], gates[1], gates[2]


def gate_steps(bridge: Bridge) -> tuple[tuple[float, float, LegGates], ...]:
    """Intervals of constant gating over one period: (start s, end s, gates of the legs)."""
    period_s = bridge.period_s
    edges = {0.0, period_s}
    for position in range(6):
        on_s = gate_on_s(bridge, position)
        edges |= {on_s % period_s, (on_s + gate_window_s(bridge)) % period_s}
    times = _merged(sorted(edges), _SAME * period_s)
    return tuple(
        (start, end, leg_gates(bridge, 0.5 * (start + end))) for start, end in pairwise(times)
    )


def _merged(times: list[float], apart_s: float) -> list[float]:
    """The first and last time, and those between that stand apart from their neighbours."""
    kept = [times[0]]
    for time in times[1:-1]:
        if time - kept[-1] > apart_s and times[-1] - time > apart_s:
            kept.append(time)
    return [*kept, times[-1]]
