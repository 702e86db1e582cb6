"""The event list of one period: which device begins or ceases to conduct, and at what stress."""

from __future__ import annotations

from engine.bridge import LEG_OF_POSITION, POSITIONS, UPPER, Bridge
from engine.conduction import NO_CURRENT, Stretch
from engine.leg_states import current_scale_A
from engine.roots import slope, value
from engine.stress import Kind, SwitchingEvent

Conductor = tuple[int, str]


def events_of(bridge: Bridge, stretches: tuple[Stretch, ...]) -> tuple[SwitchingEvent, ...]:
    """Every change of conducting device over one period, in order of time."""
    events = []
    nothing_A = NO_CURRENT * current_scale_A(bridge)
    for index, after in enumerate(stretches):
        before = stretches[index - 1]
        for leg in range(3):
            old, new = before.conductor(leg), after.conductor(leg)
            if old == new:
                continue
            if old is not None:
                events.append(_off(before, after, old, new, nothing_A))
            if new is not None:
                events.append(_on(before, after, new, nothing_A))
    return tuple(events)


def _off(
    before: Stretch, after: Stretch, old: Conductor, new: Conductor | None, nothing_A: float
) -> SwitchingEvent:
    """A device ceases: its current just before, the voltage that then stands on it."""
    position, device = old
    leg = LEG_OF_POSITION[position]
    current_A = abs(before.leg_current(leg, before.duration_s))
    natural = current_A <= nothing_A
    kind: Kind = "off natural" if natural else "off forced"
    if not natural and device == "diode":
        kind = "off recovery"
    return _event(
        after,
        old,
        kind,
        0.0 if natural else current_A,
        value(after.forward_voltage(leg, _side(position)), after.rates, 0.0),
        abs(slope(before.line[leg], before.rates, before.duration_s)) if natural else None,
    )


def _on(before: Stretch, after: Stretch, new: Conductor, nothing_A: float) -> SwitchingEvent:
    """A device begins: its current just after, the voltage that stood on it just before."""
    position, _ = new
    leg = LEG_OF_POSITION[position]
    current_A = abs(after.leg_current(leg, 0.0))
    from_zero = current_A <= nothing_A
    return _event(
        after,
        new,
        "on at zero" if from_zero else "on at current",
        0.0 if from_zero else current_A,
        value(before.forward_voltage(leg, _side(position)), before.rates, before.duration_s),
        abs(slope(after.line[leg], after.rates, 0.0)) if from_zero else None,
    )


def _event(
    at: Stretch,
    conductor: Conductor,
    kind: Kind,
    current_A: float,
    voltage_V: float,
    didt_A_per_s: float | None,
) -> SwitchingEvent:
    position, device = conductor
    bridge = at.piece.bridge
    return SwitchingEvent(
        angle_deg=360.0 * at.start_s * bridge.frequency_Hz,
        time_s=at.start_s,
        position=POSITIONS[position],
        device="switch" if device == "switch" else "diode",
        kind=kind,
        current_A=current_A,
        voltage_V=max(0.0, voltage_V),
        didt_A_per_s=didt_A_per_s,
    )


def _side(position: int) -> int:
    return 1 if UPPER[position] else -1
