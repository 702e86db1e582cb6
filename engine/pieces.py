"""One leg state held over one interval, in closed form.

Mode i runs as yᵢ(s) = y₀ᵢ + gᵢ ψᵢ(s): start value plus start slope times ψ, which stays exact
however long the time constant is. Every current and voltage of the bridge is then a function
of the class in `engine.roots`, and is kept as its coefficients (constant, then one per mode).
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import exp

from engine.bridge import Bridge
from engine.duty import Triple
from engine.load_network import Mode, Pattern, dot, pattern_of
from engine.roots import Coefficients, Rates, psi

Legs = tuple[int, int, int]
"""State of legs A, B, C: +1 at the positive rail, -1 at the negative, 0 open."""


@dataclass(frozen=True, slots=True)
class Piece:
    """A leg state from `start_s` on: the modes' start values and slopes at its beginning."""

    bridge: Bridge
    start_s: float
    duration_s: float
    legs: Legs
    gates: Legs
    pattern: Pattern
    rates: Rates
    begin: tuple[float, ...]
    slopes: tuple[float, ...]
    terminal_V: Triple
    """Terminal voltages of the closed legs; 0 stands in for an open one."""

    def mode_value(self, index: int, s: float) -> float:
        return self.begin[index] + self.slopes[index] * psi(self.rates[index], s)

    def combined(self, weights: tuple[float, ...], constant: float = 0.0) -> Coefficients:
        """Coefficients of constant + Σ weightᵢ yᵢ(s)."""
        parts = [w * g for w, g in zip(weights, self.slopes, strict=True)]
        constant += sum(w * y for w, y in zip(weights, self.begin, strict=True))
        return (constant, *parts)

    def branch_current(self, branch: int) -> Coefficients:
        return self.combined(tuple(mode.shape[branch] for mode in self.pattern.modes))

    def line_current(self, leg: int) -> Coefficients:
        """Current out of the leg into the load."""
        return self.combined(line_weights(self.pattern, leg))

    def branch_voltage(self, branch: int) -> Coefficients:
        """R j + L dj/dt of a branch."""
        return self.combined(*self.drop_weights(branch))

    def drop_weights(self, branch: int) -> tuple[tuple[float, ...], float]:
        """A branch's voltage as a form in the modes, and its constant."""
        R = self.bridge.resistance_ohm[branch]
        L = self.bridge.inductance_H[branch]
        weights = []
        constant = 0.0
        for mode in self.pattern.modes:
            shape = mode.shape[branch]
            weights.append(shape * (R + L * mode.rate))
            if mode.dynamic:
                constant += shape * L * dot(mode.drive, self.source_V)
        return tuple(weights), constant

    @property
    def source_V(self) -> Triple:
        """u: terminal voltages of a star, their differences over a delta's branches."""
        return source_voltages(self.bridge, self.terminal_V)

    def currents_at(self, s: float) -> Triple:
        """Branch currents."""
        values = [self.mode_value(i, s) for i in range(len(self.rates))]
        return _from_modes(self.pattern.modes, values)

    def slopes_at(self, s: float) -> Triple:
        """Rate of change of the branch currents, A/s."""
        values = [g * exp(rate * s) for g, rate in zip(self.slopes, self.rates, strict=True)]
        return _from_modes(self.pattern.modes, values)

    def until(self, s: float) -> Piece:
        return replace(self, duration_s=s)

    def after(self, s: float) -> Piece:
        """The rest of this piece, beginning at s."""
        indices = range(len(self.rates))
        return replace(
            self,
            start_s=self.start_s + s,
            duration_s=self.duration_s - s,
            begin=tuple(self.mode_value(i, s) for i in indices),
            slopes=tuple(self.slopes[i] * exp(self.rates[i] * s) for i in indices),
        )


def piece_from(
    bridge: Bridge, start_s: float, duration_s: float, legs: Legs, gates: Legs, currents: Triple
) -> Piece:
    """The piece that a leg state makes of the branch currents at its start.

    Flux is carried over; the current of a branch without inductance may jump.
    """
    open_legs = tuple(leg for leg in range(3) if legs[leg] == 0)
    pattern = pattern_of(bridge.connection, bridge.resistance_ohm, bridge.inductance_H, open_legs)
    terminals = tuple(bridge.voltage_V if leg > 0 else 0.0 for leg in legs)
    terminal_V = (terminals[0], terminals[1], terminals[2])
    source = source_voltages(bridge, terminal_V)
    begin = []
    slopes = []
    for mode in pattern.modes:
        if mode.dynamic:
            y = dot(mode.take, currents)
            slopes.append(mode.rate * y + dot(mode.drive, source))
        else:
            y = dot(mode.drive, source)
            slopes.append(0.0)
        begin.append(y)
    return Piece(
        bridge=bridge,
        start_s=start_s,
        duration_s=duration_s,
        legs=legs,
        gates=gates,
        pattern=pattern,
        rates=tuple(mode.rate for mode in pattern.modes),
        begin=tuple(begin),
        slopes=tuple(slopes),
        terminal_V=terminal_V,
    )


def source_voltages(bridge: Bridge, terminal_V: Triple) -> Triple:
    """What the closed legs put across the branches; floating potentials drop out."""
    if bridge.connection == "star":
        return terminal_V
    a, b, c = terminal_V
    return a - b, b - c, c - a


def line_weights(pattern: Pattern, leg: int) -> tuple[float, ...]:
    """A leg's line current as a form in the modes."""
    return tuple(dot(pattern.line[leg], mode.shape) for mode in pattern.modes)


def _from_modes(modes: tuple[Mode, ...], values: list[float]) -> Triple:
    a = b = c = 0.0
    for mode, y in zip(modes, values, strict=True):
        a += mode.shape[0] * y
        b += mode.shape[1] * y
        c += mode.shape[2] * y
    return a, b, c


def terminal_voltages(piece: Piece) -> tuple[Coefficients, Coefficients, Coefficients]:
    """Voltage of terminals A, B, C against the negative rail.

    When every leg is open the load floats: its highest and lowest terminal then stand
    symmetric about half the link voltage.
    """
    size = 1 + len(piece.rates)
    fixed = [_constant(volts, size) for volts in piece.terminal_V]
    closed = [leg for leg in range(3) if piece.legs[leg]]
    if len(closed) == 3:
        return fixed[0], fixed[1], fixed[2]
    if piece.bridge.connection == "star":
        voltages = _star_terminals(piece, fixed, closed)
    else:
        voltages = _delta_terminals(piece, fixed, closed)
    if not closed:
        voltages = _centred(voltages, piece.bridge.voltage_V)
    return voltages[0], voltages[1], voltages[2]


def star_point_voltage(piece: Piece) -> Coefficients:
    """Voltage of the star point against the negative rail."""
    closed = [leg for leg in range(3) if piece.legs[leg]]
    if not closed:
        return _constant(0.5 * piece.bridge.voltage_V, 1 + len(piece.rates))
    leg = closed[0]
    return _minus(_constant(piece.terminal_V[leg], 1 + len(piece.rates)), piece.branch_voltage(leg))


def _star_terminals(
    piece: Piece, fixed: list[Coefficients], closed: list[int]
) -> list[Coefficients]:
    star_point = star_point_voltage(piece)
    return [fixed[leg] if leg in closed else star_point for leg in range(3)]


def _delta_terminals(
    piece: Piece, fixed: list[Coefficients], closed: list[int]
) -> list[Coefficients]:
    """Walk the ring from a closed leg; branch k lies between terminals k and k + 1."""
    start = closed[0] if closed else 0
    voltages = list(fixed)
    for step in range(2):
        here, there = (start + step) % 3, (start + step + 1) % 3
        if there not in closed:
            voltages[there] = _minus(voltages[here], piece.branch_voltage(here))
    return voltages


def _centred(voltages: list[Coefficients], link_V: float) -> list[Coefficients]:
    highest = max(voltages, key=lambda v: v[0])
    lowest = min(voltages, key=lambda v: v[0])
    shift = tuple(-0.5 * (h + l) for h, l in zip(highest, lowest, strict=True))
    shift = (shift[0] + 0.5 * link_V, *shift[1:])
    return [tuple(v + d for v, d in zip(voltage, shift, strict=True)) for voltage in voltages]


def _constant(volts: float, size: int) -> Coefficients:
    return (volts, *([0.0] * (size - 1)))


def _minus(a: Coefficients, b: Coefficients) -> Coefficients:
    return tuple(x - y for x, y in zip(a, b, strict=True))
