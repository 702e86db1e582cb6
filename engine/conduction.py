"""The steady state as stretches: intervals in which every leg current keeps its sign.

A gated leg's current passes from switch to diode without any change of leg state, so the
solver's pieces are cut once more there. All stresses are read from the stretches.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache

from engine.bridge import LOWER_OF_LEG, UPPER_OF_LEG
from engine.integrals import Gram, gram
from engine.leg_states import current_scale_A
from engine.pieces import Legs, Piece, opposite, terminal_voltages
from engine.roots import Coefficients, Rates, added, crossings, difference, extremes, value
from engine.steady_state import SteadyState

Functions = tuple[Coefficients, Coefficients, Coefficients]

NO_CURRENT = 1e-9
"""A current below this part of the scale of currents counts as none."""
_CROSSING = 1e-12


@dataclass(frozen=True, eq=False)
class Stretch:
    """One interval with fixed conducting devices."""

    piece: Piece
    signs: Legs
    """Sign of the current out of legs A, B, C, 0 where none flows."""

    @property
    def start_s(self) -> float:
        return self.piece.start_s

    @property
    def duration_s(self) -> float:
        return self.piece.duration_s

    @property
    def legs(self) -> Legs:
        return self.piece.circuit.legs

    @property
    def rates(self) -> Rates:
        return self.piece.circuit.rates

    @cached_property
    def line(self) -> Functions:
        """Currents out of legs A, B, C."""
        a, b, c = (self.piece.function(form) for form in self.piece.circuit.line)
        return a, b, c

    @cached_property
    def branch(self) -> Functions:
        """Branch currents; a star's are its line currents."""
        if self.piece.bridge.connection == "star":
            return self.line
        a, b, c = (self.piece.function(form) for form in self.piece.circuit.branch)
        return a, b, c

    @cached_property
    def branch_voltage(self) -> Functions:
        """Voltages across the branches: a star's phases, a delta's lines."""
        a, b, c = (self.piece.function(form) for form in self.piece.circuit.drop)
        return a, b, c

    @cached_property
    def terminal(self) -> Functions:
        """Terminal voltages against the negative rail."""
        return terminal_voltages(self.piece)

    @cached_property
    def line_voltage(self) -> Functions:
        """Voltages AB, BC, CA."""
        a, b, c = self.terminal
        return difference(a, b), difference(b, c), difference(c, a)

    @cached_property
    def link(self) -> Coefficients:
        """Current out of the link's positive rail: the sum of the legs that stand at it."""
        total = self.piece.circuit.constant(0.0)
        for leg in range(3):
            if self.legs[leg] > 0:
                total = added(total, self.line[leg])
        return total

    @cached_property
    def gram(self) -> Gram:
        return gram(self.rates, self.duration_s)

    def leg_current(self, leg: int, s: float) -> float:
        """Current out of a leg."""
        return value(self.line[leg], self.rates, s)

    def forward_voltage(self, leg: int, side: int) -> Coefficients:
        """Voltage across the upper (+1) or lower (-1) position of a leg, forward positive."""
        if side < 0:
            return self.terminal[leg]
        link_V = self.piece.circuit.constant(self.piece.bridge.voltage_V)
        return difference(link_V, self.terminal[leg])

    def tail(self, s: float) -> Stretch:
        """The rest of this stretch, beginning at s."""
        return Stretch(self.piece.after(s), self.signs)

    def mirrored(self) -> Stretch:
        """The same stretch half a period later, plus and minus changed."""
        return Stretch(self.piece.mirrored(), opposite(self.signs))

    def in_switch(self, leg: int, side: int) -> bool:
        """Whether the upper (+1) or lower (-1) switch of a leg conducts."""
        return self.legs[leg] == side and self.signs[leg] == side

    def in_diode(self, leg: int, side: int) -> bool:
        """Whether the upper (+1) or lower (-1) diode of a leg conducts."""
        return self.legs[leg] == side and self.signs[leg] == -side

    def devices(self) -> tuple[tuple[int, str], ...]:
        """Conducting devices as (position 0..5, 'switch' or 'diode'), by leg."""
        conductors = (self.conductor(leg) for leg in range(3))
        return tuple(conductor for conductor in conductors if conductor is not None)

    def conductor(self, leg: int) -> tuple[int, str] | None:
        """The device that carries a leg's current, `None` when it carries none."""
        state, sign = self.legs[leg], self.signs[leg]
        if not state or not sign:
            return None
        position = UPPER_OF_LEG[leg] if state > 0 else LOWER_OF_LEG[leg]
        return position, "switch" if sign == state else "diode"


@lru_cache(maxsize=64)
def half_period(state: SteadyState) -> tuple[Stretch, ...]:
    """The stretches of the first half period, in which every pair of opposites shows itself."""
    scale_A = current_scale_A(state.bridge)
    found: list[Stretch] = []
    for piece in state.half:
        for part in _cut(piece, _CROSSING * scale_A):
            if part.duration_s > 0.0:
                found.append(Stretch(part, _signs(part, NO_CURRENT * scale_A)))
    return tuple(found)


@lru_cache(maxsize=64)
def stretches_of(state: SteadyState) -> tuple[Stretch, ...]:
    """The stretches of one period in order of time, from T1's nominal gate-on."""
    half = half_period(state)
    return half + tuple(stretch.mirrored() for stretch in half)


def _cut(piece: Piece, slack_A: float) -> list[Piece]:
    """A piece cut where the current of a gated leg changes sign."""
    times: set[float] = set()
    for leg in range(3):
        if piece.gates[leg]:
            current = piece.function(piece.circuit.line[leg])
            times |= set(crossings(current, piece.rates, piece.duration_s, slack_A))
    if not times:
        return [piece]
    parts = []
    done = 0.0
    for time in sorted(times):
        parts.append(piece.until(time - done))
        piece = piece.after(time - done)
        done = time
    return [*parts, piece]


def _signs(piece: Piece, nothing_A: float) -> Legs:
    a, b, c = (_sign(piece, leg, nothing_A) for leg in range(3))
    return a, b, c


def _sign(piece: Piece, leg: int, nothing_A: float) -> int:
    """Sign of a leg's current over a piece in which it does not change."""
    if not piece.legs[leg]:
        return 0
    f = piece.function(piece.circuit.line[leg])
    if abs(f[0]) > nothing_A:
        return 1 if f[0] > 0.0 else -1
    # It may rise from zero and be back at zero before the end.
    lowest, highest = extremes(f, piece.rates, piece.duration_s)
    if max(highest, -lowest) <= nothing_A:
        return 0
    return 1 if highest > -lowest else -1
