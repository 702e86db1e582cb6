"""All stresses of a balanced star of R and L in closed form, without pieces or iteration.

Over the half period that begins at the gate-off of a leg's lower switch, the leg's current is
a chain of exponentials towards V/3R, 2V/3R or V/2R. Two chains are possible.

- Continuous: the upper diode conducts until the upper switch is gated. Each leg then stands
  at one rail or the other at all times, and the waveforms are those of 180° conduction:
  −i(0°) = i(180°) = K(1 − a²)/D, i(60°) = K(1 − a)(1 − 2a)/D, i(120°) = K(1 − a)(2 − a)/D
  with K = V/3R, a = exp(−T/6τ), D = 1 − a + a².
- With a gap: the diode's current ends before. One sixth of a period after gate-on, and at two
  sixths, a leg's current is 3K(1 − a)/(2 − a), whatever the length of the gate window.

Both follow from i(t + T/6) of one leg being −i(t) of the leg 120° behind. The general solver
gives the same figures from its pieces; a test holds the two together to 1e-12.
"""

from __future__ import annotations

from cmath import exp as cexp
from dataclasses import dataclass
from math import exp, expm1, floor, log1p, pi, sqrt
from operator import itemgetter
from typing import Literal, NamedTuple

from engine.bridge import POSITIONS, Bridge
from engine.gating import gate_window_s
from engine.integrals import integral_of_product, integral_of_psi
from engine.roots import psi
from engine.stress import (
    BridgeStress,
    DiodeStress,
    Kind,
    PositionStress,
    SwitchingEvent,
    SwitchStress,
)
from engine.waveform_measures import total_harmonic_distortion

_ROUNDING = 1e-12


def has_closed_form(bridge: Bridge) -> bool:
    """Whether `closed_form_stress` holds for a bridge."""
    R, L = bridge.resistance_ohm, bridge.inductance_H
    window = gate_window_s(bridge) * bridge.frequency_Hz
    return (
        bridge.connection == "star"
        and bridge.feedback_diodes
        and R[0] == R[1] == R[2] > 0.0
        and L[0] == L[1] == L[2] > 0.0
        and not any(bridge.emf_peak_V)
        and window * (1.0 + _ROUNDING) >= 1.0 / 3.0
        and window <= 0.5 * (1.0 + _ROUNDING)
    )


class _Part(NamedTuple):
    """One exponential of a leg's half wave, in its diode or its switch."""

    duration_s: float
    begin_A: float
    level: float
    """Phase voltage in thirds of the link voltage."""


@dataclass(frozen=True, slots=True)
class _HalfWave:
    """A leg's current from the gate-off of its lower switch to that of its upper switch."""

    diode: tuple[_Part, ...]
    switch: tuple[_Part, ...]
    alone: tuple[_Part, ...]
    """The sixth of a period in which this leg carries the whole link current."""
    gate_off_A: float
    freewheel_s: float
    """How long the diode conducts."""
    delay_s: float
    """From the gate-off of the lower switch to the gate-on of the upper one."""

    @property
    def open_s(self) -> float:
        """How long the leg is open between the two gate windows."""
        return max(0.0, self.delay_s - self.freewheel_s)


def closed_form_stress(bridge: Bridge) -> BridgeStress:
    """The stresses of a bridge for which `has_closed_form` holds."""
    delay_s = max(0.0, 0.5 * bridge.period_s - gate_window_s(bridge))
    wave = _continuous(bridge, delay_s)
    if wave.freewheel_s < delay_s:
        wave = _with_gap(bridge, delay_s)
    return _stress(bridge, wave)


def _continuous(bridge: Bridge, delay_s: float) -> _HalfWave:
    sixth = bridge.period_s / 6.0
    tau = bridge.inductance_H[0] / bridge.resistance_ohm[0]
    K = bridge.voltage_V / (3.0 * bridge.resistance_ohm[0])
    a = exp(-sixth / tau)
    rest = -expm1(-sixth / tau)
    D = 1.0 - a + a * a
    gate_off = K * rest * (1.0 + a) / D
    at_60, at_120 = K * rest * (1.0 - 2.0 * a) / D, K * rest * (2.0 - a) / D
    middle, last = _Part(sixth, at_60, 2.0), _Part(sixth, at_120, 1.0)
    if at_60 >= 0.0:
        zero = min(sixth, tau * log1p(gate_off / K))
        diode: tuple[_Part, ...] = (_Part(zero, -gate_off, 1.0),)
        switch: tuple[_Part, ...] = (_Part(sixth - zero, 0.0, 1.0), middle, last)
    else:
        after = min(sixth, tau * log1p(-at_60 / (2.0 * K)))
        zero = sixth + after
        diode = (_Part(sixth, -gate_off, 1.0), _Part(after, at_60, 2.0))
        switch = (_Part(sixth - after, 0.0, 2.0), last)
    return _HalfWave(diode, switch, (middle,), gate_off, zero, delay_s)


def _with_gap(bridge: Bridge, delay_s: float) -> _HalfWave:
    sixth = bridge.period_s / 6.0
    both_s = sixth - delay_s  # two legs of one rail are gated
    tau = bridge.inductance_H[0] / bridge.resistance_ohm[0]
    K = bridge.voltage_V / (3.0 * bridge.resistance_ohm[0])
    rest = -expm1(-sixth / tau)
    at_60 = 3.0 * K * rest / (1.0 + rest)
    risen = -expm1(-both_s / tau)
    gate_off = at_60 + (K - at_60) * risen
    zero = tau * log1p(gate_off / K)
    lengths = (both_s, zero, delay_s - zero) * 2 + (both_s,)
    levels = (1.0, 2.0, 1.5, 2.0, 1.0, 1.5, 1.0)
    switch = []
    current = 0.0
    for length, level in zip(lengths, levels, strict=True):
        switch.append(_Part(length, current, level))
        current += (level * K - current) * -expm1(-length / tau)
    diode = (_Part(zero, -gate_off, 1.0),)
    return _HalfWave(diode, tuple(switch), tuple(switch[1:4]), gate_off, zero, delay_s)


class _Integrals:
    """∫i and ∫i² over parts, the integrals of ψ kept by duration."""

    def __init__(self, bridge: Bridge) -> None:
        self.rate = -bridge.resistance_ohm[0] / bridge.inductance_H[0]
        self.third = bridge.voltage_V / (3.0 * bridge.inductance_H[0])
        self._of_psi: dict[float, tuple[float, float]] = {}

    def slope(self, part: _Part) -> float:
        """di/dt at the beginning of a part, A/s."""
        return part.level * self.third + self.rate * part.begin_A

    def end(self, part: _Part) -> float:
        """Current at the end of a part."""
        return part.begin_A + self.slope(part) * psi(self.rate, part.duration_s)

    def of(self, parts: tuple[_Part, ...]) -> tuple[float, float]:
        """∫i, ∫i²."""
        total = square = 0.0
        for part in parts:
            h, i, g = part.duration_s, part.begin_A, self.slope(part)
            if h not in self._of_psi:
                rate = self.rate
                self._of_psi[h] = integral_of_psi(rate, h), integral_of_product(rate, rate, h)
            first, second = self._of_psi[h]
            total += i * h + g * first
            square += i * i * h + 2.0 * i * g * first + g * g * second
        return total, square


def _stress(bridge: Bridge, wave: _HalfWave) -> BridgeStress:
    f = bridge.frequency_Hz
    integrals = _Integrals(bridge)
    in_diode, diode_square = integrals.of(wave.diode)
    in_switch, switch_square = integrals.of(wave.switch)
    _, alone_square = integrals.of(wave.alone)
    line_rms = sqrt(2.0 * f * (diode_square + switch_square))
    peak = max(wave.gate_off_A, *(integrals.end(part) for part in wave.switch))
    switch = SwitchStress(
        current_avg_A=in_switch * f,
        current_rms_A=sqrt(switch_square * f),
        current_peak_A=peak,
        gate_off_current_A=wave.gate_off_A,
        forward_blocking_peak_V=bridge.voltage_V,
        reverse_blocking_peak_V=0.0,
    )
    diode = DiodeStress(
        current_avg_A=-in_diode * f,
        current_rms_A=sqrt(diode_square * f),
        current_peak_A=wave.gate_off_A,
        reverse_blocking_peak_V=bridge.voltage_V,
    )
    line_V, phase_V, fundamental_V = _voltages(bridge, wave)
    link_avg, link_square = 3.0 * f * (in_switch + in_diode), 6.0 * f * alone_square
    return BridgeStress(
        line_current_rms_A=_three(line_rms),
        line_current_peak_A=_three(peak),
        branch_current_rms_A=_three(line_rms),
        line_voltage_rms_V=_three(line_V),
        line_voltage_fundamental_rms_V=_three(fundamental_V),
        line_voltage_thd=_three(total_harmonic_distortion(line_V, fundamental_V)),
        phase_voltage_rms_V=_three(phase_V),
        load_power_W=3.0 * bridge.resistance_ohm[0] * line_rms * line_rms,
        link_power_W=bridge.voltage_V * link_avg,
        link_current_avg_A=link_avg,
        link_current_rms_A=sqrt(link_square),
        link_current_ripple_rms_A=sqrt(max(0.0, link_square - link_avg * link_avg)),
        positions=_positions(bridge, wave, switch, diode),
        events=_events(bridge, wave, integrals),
    )


def _three(value: float) -> tuple[float, float, float]:
    return value, value, value


def _voltages(bridge: Bridge, wave: _HalfWave) -> tuple[float, float, float]:
    """Rms of line and phase voltage, and of the line voltage's fundamental.

    With three closed legs the line voltages are V, V, 0 and the phases V/3, V/3, 2V/3; with
    one leg open V, V/2, V/2 and V/2, V/2, 0. A leg's voltage against the middle of the link
    is a half wave of ±V/2 with the gap cut out of it.
    """
    V = bridge.voltage_V
    gap = 6.0 * wave.open_s * bridge.frequency_Hz
    line = V * sqrt((2.0 - 0.5 * gap) / 3.0)
    phase = V / 3.0 * sqrt((6.0 - 1.5 * gap) / 3.0)
    turn = -2j * pi * bridge.frequency_Hz
    cut = cexp(turn * wave.freewheel_s) - cexp(turn * wave.delay_s) if gap else 0.0
    return line, phase, V / pi * abs(2.0 - cut) * sqrt(1.5)


def _positions(
    bridge: Bridge, wave: _HalfWave, switch: SwitchStress, diode: DiodeStress
) -> tuple[PositionStress, ...]:
    late = max(0.0, wave.freewheel_s - wave.delay_s)
    return tuple(
        PositionStress(
            position=position,
            switch=switch,
            diode=diode,
            dead_interval_s=bridge.dead_interval_s,
            freewheel_s=wave.freewheel_s,
            overrun_s=late,
            turn_off="forced",
            forward_reapplied_s=0.0,
            reapplied_step_V=bridge.voltage_V,
            turn_on_delay_s=late,
        )
        for position in POSITIONS
    )


class _Change(NamedTuple):
    """One device of one leg begins or ceases to conduct."""

    time_s: float
    """After T1's nominal gate-on."""
    position: int
    device: Literal["switch", "diode"]
    kind: Kind
    current_A: float
    voltage_V: float
    didt_A_per_s: float | None


def _changes(bridge: Bridge, wave: _HalfWave, integrals: _Integrals) -> tuple[_Change, ...]:
    """What happens in T4, D1 and T1 from the gate-off of T4 on."""
    V = bridge.voltage_V
    off = bridge.blanking_s - wave.delay_s
    gap = wave.open_s > 0.0
    last = wave.diode[-1]
    falls = integrals.slope(last) * exp(integrals.rate * last.duration_s)
    rises = integrals.slope(next(part for part in wave.switch if part.duration_s > 0.0))
    zero = off + wave.freewheel_s
    on = bridge.blanking_s if gap else zero
    open_V = 0.5 * V if gap else 0.0
    return (
        _Change(off, 3, "switch", "off forced", wave.gate_off_A, V, None),
        _Change(off, 0, "diode", "on at current", wave.gate_off_A, V, None),
        _Change(zero, 0, "diode", "off natural", 0.0, open_V, falls),
        _Change(on, 0, "switch", "on at zero", 0.0, open_V, rises),
    )


def _events(bridge: Bridge, wave: _HalfWave, integrals: _Integrals) -> tuple[SwitchingEvent, ...]:
    """The changes of one leg, repeated for all six sixths of the period, in order of time."""
    sixth = bridge.period_s / 6.0
    within: list[tuple[float, int, _Change]] = []
    for change in _changes(bridge, wave, integrals):
        sixths = floor(change.time_s / sixth + _ROUNDING)
        within.append((max(0.0, change.time_s - sixths * sixth), sixths, change))
    within.sort(key=itemgetter(0))
    return tuple(
        SwitchingEvent(
            angle_deg=360.0 * bridge.frequency_Hz * (number * sixth + time_s),
            time_s=number * sixth + time_s,
            position=POSITIONS[(number - sixths + change.position) % 6],
            device=change.device,
            kind=change.kind,
            current_A=change.current_A,
            voltage_V=change.voltage_V,
            didt_A_per_s=change.didt_A_per_s,
        )
        for number in range(6)
        for time_s, sixths, change in within
    )
