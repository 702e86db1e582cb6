"""How each position's current begins and ends: turn-off kind, freewheel, overrun, latching."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

from engine.bridge import LEG_OF_POSITION, UPPER, Bridge
from engine.conduction import NO_CURRENT, Stretch, stretches_of
from engine.gating import gate_on_s, gate_window_s
from engine.roots import value
from engine.steady_state import SteadyState
from engine.stress import TurnOff

_NO_VOLTAGE = 1e-9  # of the link voltage


@dataclass(frozen=True)
class Window:
    """A position's gate window and what follows it, as stretches over one period from gate-on."""

    leg: int
    side: int
    inside: tuple[Stretch, ...]
    after: tuple[Stretch, ...]

    def carries(self, stretch: Stretch) -> bool:
        return stretch.in_switch(self.leg, self.side)


@lru_cache(maxsize=256)
def window_of(state: SteadyState, position: int) -> Window:
    """The stretches of one period, begun at this position's gate-on and parted at its gate-off."""
    bridge, stretches = state.bridge, stretches_of(state)
    period_s = bridge.period_s
    on_s = gate_on_s(bridge, position) % period_s
    off_s = (on_s + gate_window_s(bridge)) % period_s
    first = _index_at(stretches, on_s, period_s)
    turned = stretches[first:] + stretches[:first]
    last = _index_at(turned, off_s, period_s)
    side = 1 if UPPER[position] else -1
    return Window(LEG_OF_POSITION[position], side, turned[:last], turned[last:])


def _index_at(stretches: tuple[Stretch, ...], time_s: float, period_s: float) -> int:
    """The stretch that begins at an instant of the period."""

    def apart(index: int) -> float:
        gap = abs(stretches[index].start_s - time_s)
        return min(gap, period_s - gap)

    return min(range(len(stretches)), key=apart)


def gate_off_current_A(window: Window) -> float:
    """Current in the switch just before its gate-off."""
    last = window.inside[-1]
    if not window.carries(last):
        return 0.0
    return abs(last.leg_current(window.leg, last.duration_s))


def turn_off_kind(window: Window, peak_A: float) -> TurnOff:
    """Forced: current stands at gate-off. Natural: it has ended before. Idle: there is none."""
    if not any(window.carries(stretch) for stretch in window.inside):
        return "idle"
    return "forced" if gate_off_current_A(window) > NO_CURRENT * peak_A else "natural"


def freewheel_s(window: Window) -> float:
    """How long the opposite diode carries the leg's current after gate-off."""
    total = 0.0
    for stretch in window.after + window.inside:
        if not stretch.in_diode(window.leg, -window.side):
            break
        total += stretch.duration_s
    return total


def forward_reapplied_s(window: Window, bridge: Bridge) -> float:
    """From the last current zero of a naturally turned-off switch to forward voltage on it."""
    last = max(i for i, stretch in enumerate(window.inside) if window.carries(stretch))
    following = window.inside[last + 1 :] + window.after + window.inside[: last + 1]
    total = 0.0
    for stretch in following:
        f = stretch.forward_voltage(window.leg, window.side)
        if value(f, stretch.rates, 0.5 * stretch.duration_s) > _NO_VOLTAGE * bridge.voltage_V:
            break
        total += stretch.duration_s
    return total


def reapplied_step_V(window: Window) -> float:
    """Forward voltage on the switch just after its gate-off."""
    return window.after[0].forward_voltage(window.leg, window.side)[0]


def turn_on_delay_s(window: Window) -> float | None:
    """From gate-on to the last rise of the switch's current from zero, `None` without current."""
    rises = rises_of(window)
    return rises[-1][1] if rises else None


def rises_of(window: Window) -> list[tuple[int, float]]:
    """Index and time since gate-on of every stretch in which the switch begins to carry."""
    found = []
    time_s = 0.0
    carried = False
    for index, stretch in enumerate(window.inside):
        carries = window.carries(stretch)
        if carries and not carried:
            found.append((index, time_s))
        carried = carries
        time_s += stretch.duration_s
    return found
