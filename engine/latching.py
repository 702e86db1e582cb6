"""Latching and holding: when a switch's current reaches a value, and how low it falls later."""

from __future__ import annotations

from engine.conduction import Stretch
from engine.roots import extremes, first_fall
from engine.steady_state import SteadyState
from engine.turn_off import Window, gate_off_current_A, rises_of, window_of


def time_to_reach(state: SteadyState, position: int, current_A: float) -> float | None:
    """From gate-on until a switch's current, after its last rise from zero, reaches a value, s.

    `None` when the switch (0..5 = T1..T6) carries nothing, or never that much before gate-off.
    """
    window = window_of(state, position)
    rises = rises_of(window)
    if not rises:
        return None
    index, time_s = rises[-1]
    for stretch in window.inside[index:]:
        found = _first_reach(stretch, window, current_A)
        if found is not None:
            return time_s + found
        time_s += stretch.duration_s
    return None


def _first_reach(stretch: Stretch, window: Window, current_A: float) -> float | None:
    """First instant in a stretch at which the current stands at or above a value."""
    line = stretch.line[window.leg]
    f = (current_A - window.side * line[0], *(-window.side * b for b in line[1:]))
    if f[0] <= 0.0:
        return 0.0
    return first_fall(f, stretch.rates, stretch.duration_s, 0.0)


def least_current_after(state: SteadyState, position: int, time_s: float) -> float:
    """Smallest current of a switch from a time after its gate-on to its gate-off, A."""
    window = window_of(state, position)
    least = gate_off_current_A(window)
    begin_s = 0.0
    for stretch in window.inside:
        end_s = begin_s + stretch.duration_s
        if end_s > time_s:
            rest = stretch.tail(max(0.0, time_s - begin_s))
            low, high = extremes(rest.line[window.leg], rest.rates, rest.duration_s)
            least = min(least, low if window.side > 0 else -high)
        begin_s = end_s
    return max(0.0, least)
