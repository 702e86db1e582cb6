"""One leg state held over one interval, in closed form.

Mode i runs as yᵢ(s) = y₀ᵢ + gᵢ ψᵢ(s): start value plus start slope times ψ, which stays exact
however long the time constant is. Every current and voltage of the bridge is linear in the
modes; it is described by a form (constant, weight per mode) of the leg state, and on a piece
becomes a function of the class in `engine.roots` with coefficients (constant, one per mode).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache
from math import exp

import msgspec

from engine.bridge import Bridge
from engine.duty import Triple
from engine.load_network import Mode, dot, line_forms, modes_of
from engine.roots import Coefficients, Rates, added, difference, psi, scaled

Legs = tuple[int, int, int]
"""State of legs A, B, C: +1 at the positive rail, -1 at the negative, 0 open."""

Form = tuple[float, ...]
"""A quantity as constant + Σ weightᵢ yᵢ: (constant, weight₁ … weight_n)."""

Forms = tuple[Form, Form, Form]


@dataclass(frozen=True, eq=False)
class Circuit:
    """The bridge with its legs in one state: modes, what drives them, and what they make."""

    bridge: Bridge
    legs: Legs
    modes: tuple[Mode, ...]
    rates: Rates
    terminal_V: Triple
    """Terminal voltages of the closed legs; 0 stands in for an open one."""
    source_V: Triple
    """What the closed legs put across the branches; floating potentials drop out."""
    settled: tuple[float, ...]
    """Value that an algebraic mode takes at once; 0 for a dynamic one."""
    forcing: tuple[float, ...]
    """Constant part of a dynamic mode's ẏ; 0 for an algebraic one."""

    @cached_property
    def branch(self) -> Forms:
        """Branch currents."""
        a, b, c = ((0.0, *(mode.shape[k] for mode in self.modes)) for k in range(3))
        return a, b, c

    @cached_property
    def line(self) -> Forms:
        """Currents out of legs A, B, C into the load."""
        rows = line_forms(self.bridge.connection)
        a, b, c = ((0.0, *(dot(row, mode.shape) for mode in self.modes)) for row in rows)
        return a, b, c

    @cached_property
    def drop(self) -> Forms:
        """Branch voltages R j + L dj/dt."""
        a, b, c = (self._drop(branch) for branch in range(3))
        return a, b, c

    def _drop(self, branch: int) -> Form:
        R, L = self.bridge.resistance_ohm[branch], self.bridge.inductance_H[branch]
        constant = 0.0
        weights = []
        for mode, forcing in zip(self.modes, self.forcing, strict=True):
            shape = mode.shape[branch]
            weights.append(shape * (R + L * mode.rate))
            constant += shape * L * forcing
        return (constant, *weights)

    @cached_property
    def terminal(self) -> Forms:
        """Voltages of terminals A, B, C against the negative rail; see `terminal_voltages`."""
        voltages = [self.constant(volts) for volts in self.terminal_V]
        if self.bridge.connection == "star":
            for leg in range(3):
                if not self.legs[leg]:
                    voltages[leg] = self.star_point
        else:
            self._walk_ring(voltages)
        return voltages[0], voltages[1], voltages[2]

    @cached_property
    def star_point(self) -> Form:
        """Voltage of the star point against the negative rail."""
        for leg in range(3):
            if self.legs[leg]:
                return difference(self.constant(self.terminal_V[leg]), self.drop[leg])
        return self.constant(0.5 * self.bridge.voltage_V)

    def _walk_ring(self, voltages: list[Form]) -> None:
        """Fill in the open terminals of a delta; branch k lies between terminals k and k + 1."""
        start = next((leg for leg in range(3) if self.legs[leg]), 0)
        for step in range(2):
            here, there = (start + step) % 3, (start + step + 1) % 3
            if not self.legs[there]:
                voltages[there] = difference(voltages[here], self.drop[here])

    def constant(self, volts: float) -> Form:
        """A quantity that does not depend on the modes."""
        return (volts, *([0.0] * len(self.modes)))


@lru_cache(maxsize=4096)
def circuit_of(bridge: Bridge, legs: Legs) -> Circuit:
    """The bridge with its legs in this state."""
    open_legs = tuple(leg for leg in range(3) if not legs[leg])
    modes = modes_of(bridge.connection, bridge.resistance_ohm, bridge.inductance_H, open_legs)
    a, b, c = (bridge.voltage_V if leg > 0 else 0.0 for leg in legs)
    source_V = (a, b, c) if bridge.connection == "star" else (a - b, b - c, c - a)
    return Circuit(
        bridge=bridge,
        legs=legs,
        modes=modes,
        rates=tuple(mode.rate for mode in modes),
        terminal_V=(a, b, c),
        source_V=source_V,
        settled=tuple(0.0 if mode.dynamic else dot(mode.drive, source_V) for mode in modes),
        forcing=tuple(dot(mode.drive, source_V) if mode.dynamic else 0.0 for mode in modes),
    )


class Piece(msgspec.Struct, frozen=True, eq=False):
    """A leg state from `start_s` on: the modes' start values and slopes at its beginning."""

    circuit: Circuit
    gates: Legs
    start_s: float
    duration_s: float
    begin: tuple[float, ...]
    slopes: tuple[float, ...]

    @property
    def bridge(self) -> Bridge:
        return self.circuit.bridge

    @property
    def legs(self) -> Legs:
        return self.circuit.legs

    @property
    def rates(self) -> Rates:
        return self.circuit.rates

    def function(self, form: Form) -> Coefficients:
        """A form's course over the piece."""
        constant = form[0]
        parts = []
        for weight, y, slope in zip(form[1:], self.begin, self.slopes, strict=True):
            constant += weight * y
            parts.append(weight * slope)
        return (constant, *parts)

    def currents_at(self, s: float) -> Triple:
        """Branch currents."""
        a = b = c = 0.0
        for mode, y, slope in zip(self.circuit.modes, self.begin, self.slopes, strict=True):
            y += slope * psi(mode.rate, s)
            a += mode.shape[0] * y
            b += mode.shape[1] * y
            c += mode.shape[2] * y
        return a, b, c

    def slopes_at(self, s: float) -> Triple:
        """Rate of change of the branch currents, A/s."""
        a = b = c = 0.0
        for mode, slope in zip(self.circuit.modes, self.slopes, strict=True):
            slope *= exp(mode.rate * s)
            a += mode.shape[0] * slope
            b += mode.shape[1] * slope
            c += mode.shape[2] * slope
        return a, b, c

    def until(self, s: float) -> Piece:
        """The first part of this piece."""
        return Piece(self.circuit, self.gates, self.start_s, s, self.begin, self.slopes)

    def after(self, s: float) -> Piece:
        """The rest of this piece, beginning at s."""
        begin = []
        slopes = []
        for rate, y, slope in zip(self.rates, self.begin, self.slopes, strict=True):
            begin.append(y + slope * psi(rate, s))
            slopes.append(slope * exp(rate * s))
        return Piece(
            self.circuit,
            self.gates,
            self.start_s + s,
            self.duration_s - s,
            tuple(begin),
            tuple(slopes),
        )

    def mirrored(self) -> Piece:
        """The same piece half a period later, when plus and minus have changed places."""
        return Piece(
            circuit_of(self.bridge, opposite(self.legs)),
            opposite(self.gates),
            self.start_s + 0.5 * self.bridge.period_s,
            self.duration_s,
            tuple(-y for y in self.begin),
            tuple(-slope for slope in self.slopes),
        )


def opposite(legs: Legs) -> Legs:
    """Every leg at the other rail."""
    return -legs[0], -legs[1], -legs[2]


def piece_from(circuit: Circuit, gates: Legs, start_s: float, currents: Triple) -> Piece:
    """The piece that a leg state makes of the branch currents at its start, its length still 0.

    Flux is carried over; the current of a branch without inductance may jump.
    """
    begin = []
    slopes = []
    for mode, settled, forcing in zip(circuit.modes, circuit.settled, circuit.forcing, strict=True):
        y = settled + dot(mode.take, currents)
        begin.append(y)
        slopes.append(mode.rate * y + forcing)
    return Piece(circuit, gates, start_s, 0.0, tuple(begin), tuple(slopes))


def terminal_voltages(piece: Piece) -> tuple[Coefficients, Coefficients, Coefficients]:
    """Voltage of terminals A, B, C against the negative rail.

    When every leg is open the load floats: its highest and lowest terminal then stand
    symmetric about half the link voltage.
    """
    a, b, c = (piece.function(form) for form in piece.circuit.terminal)
    if any(piece.legs) or piece.bridge.connection == "star":
        return a, b, c
    # One circulating mode decays: the order of the terminals stays as it is.
    middle = scaled(added(max(a, b, c), min(a, b, c)), 0.5)
    shift = difference(piece.circuit.constant(0.5 * piece.bridge.voltage_V), middle)
    return added(a, shift), added(b, shift), added(c, shift)
