"""What every position and the bridge as a whole must stand over one period.

Everything is read from the first half period: what the upper position of a leg does in one
half, the lower does in the other, so that both together show the whole period of either.
"""

from __future__ import annotations

from collections.abc import Callable
from math import sqrt
from typing import NamedTuple

import msgspec

from engine.balanced_star import closed_form_stress, has_closed_form
from engine.bridge import LOWER_OF_LEG, POSITIONS, UPPER_OF_LEG, Bridge
from engine.conduction import Stretch, half_period
from engine.duty import Triple
from engine.integrals import integral, integral_of_square
from engine.roots import extremes
from engine.steady_state import SteadyState, solve
from engine.stress import BridgeStress, DiodeStress, PositionStress, SwitchStress, TurnOff
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
    BRANCH_CURRENT,
    BRANCH_VOLTAGE,
    LINE_CURRENT,
    LINE_VOLTAGE,
    LINK_CURRENT,
    Waveform,
    harmonic,
    mean,
    mean_square,
    peak,
    total_harmonic_distortion,
)

Stretches = tuple[Stretch, ...]

_NO_VOLTAGE = 1e-9  # of the link voltage


def stress_at(bridge: Bridge) -> BridgeStress:
    """All stresses of a bridge, by the closed form where there is one.

    Raises
    ------
    NoSolution
        As `solve` does.
    """
    if has_closed_form(bridge):
        return closed_form_stress(bridge)
    return stress_from_pieces(solve(bridge))


def stress_of(state: SteadyState) -> BridgeStress:
    """All stresses of a solved bridge, by the closed form where there is one."""
    if has_closed_form(state.bridge):
        return closed_form_stress(state.bridge)
    return stress_from_pieces(state)


def stress_from_pieces(state: SteadyState) -> BridgeStress:
    """All stresses of the six positions and of the bridge, from exact integrals."""
    bridge = state.bridge
    half = half_period(state)
    line_square = _squares(half, LINE_CURRENT)
    branch_square = _squares(half, BRANCH_CURRENT)
    line_V = _roots(_squares(half, LINE_VOLTAGE))
    fundamental_V = _for_each(
        lambda k: abs(harmonic(half, LINE_VOLTAGE[k], bridge.frequency_Hz, 1)) / sqrt(2.0)
    )
    link_avg, link_square = mean(half, LINK_CURRENT), mean_square(half, LINK_CURRENT)
    star = bridge.connection == "star"
    return BridgeStress(
        line_current_rms_A=_roots(line_square),
        line_current_peak_A=_for_each(lambda leg: peak(half, LINE_CURRENT[leg])),
        branch_current_rms_A=_roots(branch_square),
        line_voltage_rms_V=line_V,
        line_voltage_fundamental_rms_V=fundamental_V,
        line_voltage_thd=_for_each(
            lambda k: total_harmonic_distortion(line_V[k], fundamental_V[k])
        ),
        phase_voltage_rms_V=_roots(_squares(half, BRANCH_VOLTAGE)) if star else None,
        load_power_W=sum(
            R * square for R, square in zip(bridge.resistance_ohm, branch_square, strict=True)
        ),
        link_power_W=bridge.voltage_V * link_avg,
        link_current_avg_A=link_avg,
        link_current_rms_A=sqrt(link_square),
        link_current_ripple_rms_A=sqrt(max(0.0, link_square - link_avg * link_avg)),
        positions=_positions(state),
        events=events_of(state),
    )


def _for_each(of: Callable[[int], float]) -> Triple:
    return of(0), of(1), of(2)


def _squares(half: Stretches, waveforms: tuple[Waveform, ...]) -> Triple:
    return _for_each(lambda k: mean_square(half, waveforms[k]))


def _roots(squares: Triple) -> Triple:
    a, b, c = squares
    return sqrt(a), sqrt(b), sqrt(c)


def _positions(state: SteadyState) -> tuple[PositionStress, ...]:
    found: dict[int, PositionStress] = {}
    for leg in range(3):
        upper = found[UPPER_OF_LEG[leg]] = _upper_position(state, leg)
        lower = LOWER_OF_LEG[leg]
        found[lower] = msgspec.structs.replace(upper, position=POSITIONS[lower])
    return tuple(found[index] for index in range(6))


def _upper_position(state: SteadyState, leg: int) -> PositionStress:
    bridge = state.bridge
    half = half_period(state)
    index = UPPER_OF_LEG[leg]
    window = window_of(state, index)
    forward_V, reverse_V = _blocking_peaks(half, leg, bridge.voltage_V)
    in_switch = [part for part in half if part.signs[leg] and part.signs[leg] == part.legs[leg]]
    in_diode = [part for part in half if part.signs[leg] and part.signs[leg] == -part.legs[leg]]
    switch, diode = (
        _device_currents(parts, leg, bridge.period_s) for parts in (in_switch, in_diode)
    )
    kind = turn_off_kind(window, switch.peak_A)
    forced = kind == "forced"
    freewheel = freewheel_s(window) if forced else 0.0
    return PositionStress(
        position=POSITIONS[index],
        switch=SwitchStress(
            current_avg_A=switch.average_A,
            current_rms_A=switch.rms_A,
            current_peak_A=switch.peak_A,
            gate_off_current_A=gate_off_current_A(window) if forced else 0.0,
            forward_blocking_peak_V=forward_V,
            reverse_blocking_peak_V=reverse_V,
        ),
        diode=DiodeStress(
            current_avg_A=diode.average_A,
            current_rms_A=diode.rms_A,
            current_peak_A=diode.peak_A,
            reverse_blocking_peak_V=forward_V,
        ),
        dead_interval_s=bridge.dead_interval_s,
        freewheel_s=freewheel,
        overrun_s=max(0.0, freewheel - bridge.dead_interval_s),
        turn_off=kind,
        forward_reapplied_s=_reapplied_s(kind, window, bridge),
        reapplied_step_V=reapplied_step_V(window) if forced else None,
        turn_on_delay_s=turn_on_delay_s(window),
    )


class _DeviceCurrents(NamedTuple):
    average_A: float
    rms_A: float
    peak_A: float


def _device_currents(parts: list[Stretch], leg: int, period_s: float) -> _DeviceCurrents:
    """A device's currents over one period, from the half in which it or its opposite conducts."""
    total = square = 0.0
    for part in parts:
        f = part.line[leg]
        total += abs(integral(f, part.gram[0]))
        square += integral_of_square(f, part.gram)
    return _DeviceCurrents(
        total / period_s, sqrt(max(0.0, square) / period_s), peak(parts, LINE_CURRENT[leg])
    )


def _reapplied_s(kind: TurnOff, window: Window, bridge: Bridge) -> float | None:
    if kind == "idle":
        return None
    return 0.0 if kind == "forced" else forward_reapplied_s(window, bridge)


def _blocking_peaks(half: Stretches, leg: int, link_V: float) -> tuple[float, float]:
    """Highest forward and reverse voltage on a position, both sides of every jump counted.

    The upper position has the link voltage less the terminal's, the lower one the terminal's.
    """
    lowest, highest = link_V, 0.0
    for stretch in half:
        low, high = extremes(stretch.terminal[leg], stretch.rates, stretch.duration_s)
        lowest, highest = min(lowest, low), max(highest, high)
    forward_V, reverse_V = max(link_V - lowest, highest), max(highest - link_V, -lowest)
    # An open leg rests against a rail to within rounding: that is no reverse voltage.
    return forward_V, reverse_V if reverse_V > _NO_VOLTAGE * link_V else 0.0
