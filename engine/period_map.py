"""From the branch currents at one instant to those at a later one, piece by piece.

Each gate step is walked through its pieces: the consistent leg state, its closed form, and the
first diode current or open-leg voltage that ends it. Beside the currents goes their
sensitivity to those at the start, M: within a piece M ← C e^{λs} D M; where the end of a piece
moves with the state, δt = −(∇g·δx)/ġ and M += (f⁻ − f⁺) ⊗ δt. Gate edges stand still.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from functools import lru_cache
from itertools import permutations
from math import exp

from engine.bridge import Bridge
from engine.duty import Triple
from engine.errors import NoSolution
from engine.gating import GateStep
from engine.leg_states import consistent_piece, current_scale_A
from engine.pieces import Circuit, Form, Legs, Piece
from engine.roots import difference, first_fall, scaled

Matrix = tuple[Triple, Triple, Triple]

UNIT: Matrix = ((1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0))

_MOST_PIECES = 64  # in one gate step
_ZERO_CURRENT = 1e-12  # of the current scale
_ZERO_VOLTAGE = 1e-11  # of the link voltage


class Walk:
    """The pieces from some branch currents on, the currents at the end, and their sensitivity."""

    def __init__(self, bridge: Bridge, steps: Iterable[GateStep], currents: Triple) -> None:
        """
        Raises
        ------
        NoSolution
            The diodes change state without end.
        """
        self.bridge = bridge
        self.pieces: list[Piece] = []
        self.currents = currents
        self.sensitivity = UNIT
        self._kink: tuple[Triple, Triple] | None = None
        for step in steps:
            self._through(step)

    def _through(self, step: GateStep) -> None:
        now_s = step.start_s
        ended = False
        for _ in range(_MOST_PIECES):
            last = self.pieces[-1].legs if self.pieces else None
            piece = consistent_piece(self.bridge, now_s, step.gates, self.currents, last, ended)
            self._bend(piece)
            length_s, form = _first_event(piece, step.end_s - now_s)
            piece = piece.until(length_s)
            self.pieces.append(piece)
            self._carry(piece, form)
            self.currents = piece.currents_at(length_s)
            ended = form is not None
            if not ended:
                return
            now_s += length_s
        raise NoSolution("load", "the diodes change state without end within one gate step")

    def _carry(self, piece: Piece, event: Form | None) -> None:
        """Take the sensitivity to the end of a piece, and note how an event moves that end."""
        before = self.sensitivity
        rows: list[Triple] = []
        a = b = c = (0.0, 0.0, 0.0)
        for mode in piece.circuit.modes:
            row = _decayed(mode.take, before, exp(mode.rate * piece.duration_s))
            rows.append(row)
            p, q, r = mode.shape
            a = _plus(a, row, p)
            b = _plus(b, row, q)
            c = _plus(c, row, r)
        self.sensitivity = a, b, c
        self._kink = _kink(piece, rows, event) if event else None

    def _bend(self, after: Piece) -> None:
        """M + (f⁻ − f⁺) ⊗ δt, where the last piece ended with an event."""
        if self._kink is None:
            return
        before, shift = self._kink
        slopes = after.slopes_at(0.0)
        a, b, c = (
            _plus(row, shift, x - y)
            for row, x, y in zip(self.sensitivity, before, slopes, strict=True)
        )
        self.sensitivity = a, b, c


def _decayed(take: Triple, m: Matrix, decay: float) -> Triple:
    """(take · M) · decay."""
    x, y, z = take[0] * decay, take[1] * decay, take[2] * decay
    a, b, c = m
    return (
        x * a[0] + y * b[0] + z * c[0],
        x * a[1] + y * b[1] + z * c[1],
        x * a[2] + y * b[2] + z * c[2],
    )


def _plus(row: Triple, other: Triple, by: float) -> Triple:
    return row[0] + other[0] * by, row[1] + other[1] * by, row[2] + other[2] * by


def _kink(piece: Piece, rows: list[Triple], event: Form) -> tuple[Triple, Triple] | None:
    """Slopes f⁻ at the end of a piece and the shift δt of that end with the starting state."""
    s = piece.duration_s
    speed = 0.0
    shift = (0.0, 0.0, 0.0)
    for weight, rate, slope, row in zip(event[1:], piece.rates, piece.slopes, rows, strict=True):
        speed += weight * slope * exp(rate * s)
        shift = _plus(shift, row, weight)
    if speed == 0.0:
        return None
    return piece.slopes_at(s), _plus((0.0, 0.0, 0.0), shift, -1.0 / speed)


def _first_event(piece: Piece, length_s: float) -> tuple[float, Form | None]:
    """When the piece ends, and the form whose fall through zero ends it, `None` at a gate edge."""
    found: Form | None = None
    for form, slack in _guards(piece.circuit, piece.gates):
        s = first_fall(piece.function(form), piece.rates, length_s, slack)
        if s is not None:
            length_s, found = s, form
    return length_s, found


@lru_cache(maxsize=4096)
def _guards(circuit: Circuit, gates: Legs) -> tuple[tuple[Form, float], ...]:
    """Forms that must stay positive for the leg state to hold, and what counts as zero."""
    if not circuit.bridge.feedback_diodes:
        return ()
    nothing_A = _ZERO_CURRENT * current_scale_A(circuit.bridge)
    nothing_V = _ZERO_VOLTAGE * circuit.bridge.voltage_V
    found: list[tuple[Form, float]] = []
    for leg, (gate, state) in enumerate(zip(gates, circuit.legs, strict=True)):
        if state and not gate:
            found.append((scaled(circuit.line[leg], -state), nothing_A))
        elif not state and any(circuit.legs):
            found += [(form, nothing_V) for form in _between_rails(circuit, leg)]
    if not any(circuit.legs):
        found += [(form, nothing_V) for form in _within_link(circuit)]
    return tuple(found)


def _between_rails(circuit: Circuit, leg: int) -> Iterator[Form]:
    volts = circuit.terminal[leg]
    yield volts
    yield difference(circuit.constant(circuit.bridge.voltage_V), volts)


def _within_link(circuit: Circuit) -> Iterator[Form]:
    """A floating load: no two of its terminals may be further apart than the rails."""
    link = circuit.constant(circuit.bridge.voltage_V)
    for high, low in permutations(circuit.terminal, 2):
        yield difference(link, difference(high, low))
