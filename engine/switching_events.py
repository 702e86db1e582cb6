"""The event list of one period: which device begins or ceases to conduct, and at what stress."""

from __future__ import annotations

from collections.abc import Iterator

import msgspec

from engine.bridge import LEG_OF_POSITION, POSITIONS, UPPER, Bridge
from engine.conduction import NO_CURRENT, Stretch, half_period
from engine.leg_states import current_scale_A
from engine.roots import slope, value
from engine.steady_state import SteadyState
from engine.stress import Kind, SwitchingEvent

Conductor = tuple[int, str]


def events_of(state: SteadyState) -> tuple[SwitchingEvent, ...]:
    """Every change of conducting device over one period, in order of time."""
    half = half_period(state)
    first: list[SwitchingEvent] = []
    before = half[-1].mirrored()  # what precedes the first stretch, half a period early
    for after in half:
        first += _changes(before, after)
        before = after
    return (*first, *(_opposite(event, state.bridge) for event in first))


def _changes(before: Stretch, after: Stretch) -> Iterator[SwitchingEvent]:
    if before.legs == after.legs and before.signs == after.signs:
        return
    nothing_A = NO_CURRENT * current_scale_A(after.piece.bridge)
    for leg in range(3):
        old, new = before.conductor(leg), after.conductor(leg)
        if old == new:
            continue
        if old is not None:
            yield _off(before, after, old, nothing_A)
        if new is not None:
            yield _on(before, after, new, nothing_A)


def _opposite(event: SwitchingEvent, bridge: Bridge) -> SwitchingEvent:
    """The same event of the opposite position, half a period later."""
    return msgspec.structs.replace(
        event,
        angle_deg=event.angle_deg + 180.0,
        time_s=event.time_s + 0.5 * bridge.period_s,
        position=POSITIONS[(POSITIONS.index(event.position) + 3) % 6],
    )


def _off(before: Stretch, after: Stretch, old: Conductor, nothing_A: float) -> SwitchingEvent:
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
