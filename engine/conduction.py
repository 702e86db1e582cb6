"""The steady state as stretches: intervals in which every leg current keeps its sign.

A gated leg's current passes from switch to diode without any change of leg state, so the
solver's pieces are cut once more there. All stresses are read from the stretches.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache

from engine.bridge import LOWER_OF_LEG, UPPER_OF_LEG
from engine.integrals import gram
from engine.leg_states import current_scale_A
from engine.pieces import Piece, terminal_voltages
from engine.roots import Coefficients, Rates, crossings, value
from engine.steady_state import SteadyState

NO_CURRENT = 1e-9
"""A current below this part of the scale of currents counts as none."""
_CROSSING = 1e-12


@dataclass(frozen=True)
class Stretch:
    """One interval with fixed conducting devices."""

    piece: Piece
    signs: tuple[int, int, int]
    """Sign of the current out of legs A, B, C, 0 where none flows."""

    @property
    def start_s(self) -> float:
        return self.piece.start_s

    @property
    def duration_s(self) -> float:
        return self.piece.duration_s

    @property
    def rates(self) -> Rates:
        return self.piece.rates

    @cached_property
    def line(self) -> tuple[Coefficients, Coefficients, Coefficients]:
        """Currents out of legs A, B, C."""
        piece = self.piece
        return piece.line_current(0), piece.line_current(1), piece.line_current(2)

    @cached_property
    def terminal(self) -> tuple[Coefficients, Coefficients, Coefficients]:
        """Terminal voltages against the negative rail."""
        return terminal_voltages(self.piece)

    @cached_property
    def gram(self) -> tuple[tuple[float, ...], ...]:
        return gram(self.rates, self.duration_s)

    def leg_current(self, leg: int, s: float) -> float:
        return value(self.line[leg], self.rates, s)

    def forward_voltage(self, leg: int, side: int) -> Coefficients:
        """Voltage across the upper (+1) or lower (-1) position of a leg, forward positive."""
        terminal = self.terminal[leg]
        if side < 0:
            return terminal
        return (self.piece.bridge.voltage_V - terminal[0], *(-c for c in terminal[1:]))

    def tail(self, s: float) -> Stretch:
        """The rest of this stretch, beginning at s."""
        return Stretch(self.piece.after(s), self.signs)

    def in_switch(self, leg: int, side: int) -> bool:
        return self.piece.legs[leg] == side and self.signs[leg] == side

    def in_diode(self, leg: int, side: int) -> bool:
        return self.piece.legs[leg] == side and self.signs[leg] == -side

    def devices(self) -> tuple[tuple[int, str], ...]:
        """Conducting devices as (position 0..5, 'switch' or 'diode'), by leg."""
        found = []
        for leg in range(3):
            conductor = self.conductor(leg)
            if conductor is not None:
                found.append(conductor)
        return tuple(found)

    def conductor(self, leg: int) -> tuple[int, str] | None:
        """The device that carries a leg's current, `None` when it carries none."""
        state, sign = self.piece.legs[leg], self.signs[leg]
        if not state or not sign:
            return None
        position = UPPER_OF_LEG[leg] if state > 0 else LOWER_OF_LEG[leg]
        return position, "switch" if sign == state else "diode"


@lru_cache(maxsize=64)
def stretches_of(state: SteadyState) -> tuple[Stretch, ...]:
    """The stretches of one period in order of time, from T1's nominal gate-on."""
    scale_A = current_scale_A(state.bridge)
    found: list[Stretch] = []
    for piece in state.pieces:
        for part in _cut(piece, _CROSSING * scale_A):
            if part.duration_s > 0.0:
                found.append(Stretch(part, _signs(part, NO_CURRENT * scale_A)))
    return tuple(found)


def _cut(piece: Piece, slack_A: float) -> list[Piece]:
    """A piece cut where the current of a gated leg changes sign."""
    times: set[float] = set()
    for leg in range(3):
        if piece.gates[leg]:
            times |= set(crossings(piece.line_current(leg), piece.rates, piece.duration_s, slack_A))
    parts = []
    done = 0.0
    for time in sorted(times):
        parts.append(piece.until(time - done))
        piece = piece.after(time - done)
        done = time
    return [*parts, piece]


def _signs(piece: Piece, nothing_A: float) -> tuple[int, int, int]:
    a, b, c = (_sign(piece, leg, nothing_A) for leg in range(3))
    return a, b, c


def _sign(piece: Piece, leg: int, nothing_A: float) -> int:
    """Sign of a leg's current over the piece: where it is largest of both ends and the middle."""
    f = piece.line_current(leg)
    h = piece.duration_s
    largest = max((value(f, piece.rates, s) for s in (0.0, 0.5 * h, h)), key=abs)
    if abs(largest) <= nothing_A:
        return 0
    return 1 if largest > 0.0 else -1
