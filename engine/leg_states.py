"""Which diodes conduct: the one leg state that fits the gates and the currents.

Each ungated leg is at the positive rail (its upper diode carries current out of the load),
at the negative rail, or open with its voltage between the rails. Of the at most 27 states
exactly one is consistent; it is the solution of a linear complementarity problem. It is found
as the state of least violation a moment after the edge.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import product

from engine.bridge import Bridge
from engine.duty import Triple
from engine.pieces import Legs, Piece, piece_from, terminal_voltages
from engine.roots import value

_MOMENT = 1e-9  # of a period
_NOTHING = 1e-11  # a violation below this is rounding


def current_scale_A(bridge: Bridge) -> float:
    """A current of the order of those that flow, to measure small ones against."""
    omega = 6.283185307179586 * bridge.frequency_Hz
    return bridge.voltage_V / (sum(bridge.resistance_ohm) + omega * sum(bridge.inductance_H))


def consistent_piece(
    bridge: Bridge, start_s: float, gates: Legs, currents: Triple, last: Legs | None, left: bool
) -> Piece:
    """The piece of the leg state that holds from here on, its duration still zero.

    `last` is preferred among equals; with `left` it has just come to its end and is not taken.
    """
    best: tuple[tuple[float, bool, int], Piece] | None = None
    for legs in _candidates(bridge, gates):
        if left and legs == last:
            continue
        piece = piece_from(bridge, start_s, 0.0, legs, gates, currents)
        violation = _violation(piece, currents)
        rank = (violation if violation > _NOTHING else 0.0, legs != last, -legs.count(0))
        if best is None or rank < best[0]:
            best = rank, piece
    assert best is not None
    return best[1]


def _candidates(bridge: Bridge, gates: Legs) -> Iterator[Legs]:
    if not bridge.feedback_diodes:
        yield gates
        return
    choices = [(gate,) if gate else (1, -1, 0) for gate in gates]
    yield from product(*choices)


def _violation(piece: Piece, before: Triple) -> float:
    """How far a leg state is from fitting, as a fraction of the currents and the link voltage."""
    bridge = piece.bridge
    scale_A = current_scale_A(bridge)
    total = _lost_flux(piece, before) / scale_A
    if all(piece.gates):
        return total
    moment = _MOMENT * bridge.period_s
    voltages = None
    for leg, gate in enumerate(piece.gates):
        if gate:
            continue
        state = piece.legs[leg]
        if state:
            total += max(0.0, state * value(piece.line_current(leg), piece.rates, moment) / scale_A)
        else:
            voltages = voltages or terminal_voltages(piece)
            volts = value(voltages[leg], piece.rates, moment)
            total += max(0.0, -volts, volts - bridge.voltage_V) / bridge.voltage_V
    return total


def _lost_flux(piece: Piece, before: Triple) -> float:
    """Jump of inductive branch current that this state would force, weighted by inductance."""
    inductance = piece.bridge.inductance_H
    total = sum(inductance)
    if not total:
        return 0.0
    after = piece.currents_at(0.0)
    jumps = (abs(L * (a - b)) for L, a, b in zip(inductance, after, before, strict=True))
    return sum(jumps) / total
