"""What every position and the bridge as a whole must stand over one period."""

from __future__ import annotations

from collections.abc import Callable
from math import sqrt

from engine.bridge import LEG_OF_POSITION, POSITIONS, UPPER, Bridge
from engine.conduction import Stretch, stretches_of
from engine.duty import Triple
from engine.roots import Coefficients
from engine.steady_state import SteadyState
from engine.stress import BridgeStress, DiodeStress, PositionStress, SwitchStress
from engine.switching_events import events_of
from engine.turn_off import (
    Window,
    forward_reapplied_s,
    freewheel_s,
    gate_off_current_A,
    reapplied_step_V,
    turn_off_kind,
    turn_on_delay_s,
    window_of,
)
from engine.waveform_measures import (
    Waveform,
    extremes,
    harmonic,
    mean,
    mean_square,
    peak,
    rms,
    total_harmonic_distortion,
)

Stretches = tuple[Stretch, ...]


def stress_of(state: SteadyState) -> BridgeStress:
    """All stresses of the six positions and of the bridge, from exact integrals."""
    bridge = state.bridge
    stretches = stretches_of(state)
    period_s = bridge.period_s
    line_rms = _for_each(lambda leg: rms(stretches, _line(leg), period_s))
    branch_square = _for_each(lambda k: mean_square(stretches, _branch(k), period_s))
    voltage_rms = _for_each(lambda k: rms(stretches, _line_voltage(k), period_s))
    fundamental = _for_each(
        lambda k: abs(harmonic(stretches, _line_voltage(k), period_s, 1)) / sqrt(2.0)
    )
    link_avg = mean(stretches, _link_current, period_s)
    link_square = mean_square(stretches, _link_current, period_s)
    return BridgeStress(
        line_current_rms_A=line_rms,
        line_current_peak_A=_for_each(lambda leg: peak(stretches, _line(leg))),
        branch_current_rms_A=_for_each(lambda k: sqrt(branch_square[k])),
        line_voltage_rms_V=voltage_rms,
        line_voltage_fundamental_rms_V=fundamental,
        line_voltage_thd=_for_each(
            lambda k: total_harmonic_distortion(voltage_rms[k], fundamental[k])
        ),
        phase_voltage_rms_V=_phase_voltage_rms(bridge, stretches),
        load_power_W=sum(
            R * square for R, square in zip(bridge.resistance_ohm, branch_square, strict=True)
        ),
        link_power_W=bridge.voltage_V * link_avg,
        link_current_avg_A=link_avg,
        link_current_rms_A=sqrt(link_square),
        link_current_ripple_rms_A=sqrt(max(0.0, link_square - link_avg * link_avg)),
        positions=tuple(_position(bridge, stretches, index) for index in range(6)),
        events=events_of(bridge, stretches),
    )


def _for_each(of: Callable[[int], float]) -> Triple:
    return of(0), of(1), of(2)


def _line(leg: int) -> Waveform:
    return lambda stretch: stretch.line[leg]


def _branch(branch: int) -> Waveform:
    return lambda stretch: stretch.piece.branch_current(branch)


def _line_voltage(first: int) -> Waveform:
    def difference(stretch: Stretch) -> Coefficients:
        a, b = stretch.terminal[first], stretch.terminal[(first + 1) % 3]
        return tuple(x - y for x, y in zip(a, b, strict=True))

    return difference


def _link_current(stretch: Stretch) -> Coefficients | None:
    """Current out of the link's positive rail: the sum of the legs that stand at it."""
    upper = [stretch.line[leg] for leg in range(3) if stretch.piece.legs[leg] > 0]
    return tuple(map(sum, zip(*upper, strict=True))) if upper else None


def _phase_voltage_rms(bridge: Bridge, stretches: Stretches) -> Triple | None:
    if bridge.connection == "delta":
        return None
    return _for_each(
        lambda k: rms(stretches, lambda stretch: stretch.piece.branch_voltage(k), bridge.period_s)
    )


def _position(bridge: Bridge, stretches: Stretches, index: int) -> PositionStress:
    leg, side = LEG_OF_POSITION[index], 1 if UPPER[index] else -1
    window = window_of(bridge, stretches, index)
    forward_V, reverse_V = _blocking_peaks(stretches, leg, side)
    peak_A = peak(stretches, _in_switch(leg, side))
    kind = turn_off_kind(window, peak_A)
    freewheel = freewheel_s(window) if kind == "forced" else 0.0
    return PositionStress(
        position=POSITIONS[index],
        switch=SwitchStress(
            current_avg_A=abs(mean(stretches, _in_switch(leg, side), bridge.period_s)),
            current_rms_A=rms(stretches, _in_switch(leg, side), bridge.period_s),
            current_peak_A=peak_A,
            gate_off_current_A=gate_off_current_A(window) if kind == "forced" else 0.0,
            forward_blocking_peak_V=forward_V,
            reverse_blocking_peak_V=reverse_V,
        ),
        diode=DiodeStress(
            current_avg_A=abs(mean(stretches, _in_diode(leg, side), bridge.period_s)),
            current_rms_A=rms(stretches, _in_diode(leg, side), bridge.period_s),
            current_peak_A=peak(stretches, _in_diode(leg, side)),
            reverse_blocking_peak_V=forward_V,
        ),
        dead_interval_s=bridge.dead_interval_s,
        freewheel_s=freewheel,
        overrun_s=max(0.0, freewheel - bridge.dead_interval_s),
        turn_off=kind,
        forward_reapplied_s=_reapplied_s(kind, window, bridge),
        reapplied_step_V=reapplied_step_V(window) if kind == "forced" else None,
        turn_on_delay_s=turn_on_delay_s(window),
    )


def _reapplied_s(kind: str, window: Window, bridge: Bridge) -> float | None:
    if kind == "idle":
        return None
    return 0.0 if kind == "forced" else forward_reapplied_s(window, bridge)


def _in_switch(leg: int, side: int) -> Waveform:
    return lambda stretch: stretch.line[leg] if stretch.in_switch(leg, side) else None


def _in_diode(leg: int, side: int) -> Waveform:
    return lambda stretch: stretch.line[leg] if stretch.in_diode(leg, side) else None


def _blocking_peaks(stretches: Stretches, leg: int, side: int) -> tuple[float, float]:
    """Highest forward and reverse voltage on a position, both sides of every jump counted."""
    lowest = highest = 0.0
    for stretch in stretches:
        low, high = extremes(stretch, stretch.forward_voltage(leg, side))
        lowest, highest = min(lowest, low), max(highest, high)
    # An open leg rests against a rail to within rounding: that is no reverse voltage.
    return highest, -lowest if -lowest > 1e-9 * highest else 0.0
