"""Which diodes conduct: the one leg state that fits the gates and the currents.

An ungated leg whose current cannot jump stands at the rail whose diode takes that current.
Without current it is at the positive rail, at the negative rail, or open with its voltage
between the rails; of these states exactly one is consistent, the solution of a linear
complementarity problem. It is found as the state of least violation a moment after the edge.
"""

from __future__ import annotations

from collections.abc import Iterable
from itertools import product

from engine.bridge import Bridge
from engine.duty import Triple
from engine.load_network import dot, line_forms
from engine.pieces import Legs, Piece, circuit_of, piece_from, terminal_voltages
from engine.roots import value

_MOMENT = 1e-9  # of a period
_NOTHING = 1e-11  # a violation below this is rounding
_FLOWS = 1e-9  # of the scale of currents: above this an inductive current is sure to flow


def current_scale_A(bridge: Bridge) -> float:
    """A current of the order of those that flow, to measure small ones against."""
    omega = 6.283185307179586 * bridge.frequency_Hz
    return bridge.voltage_V / (sum(bridge.resistance_ohm) + omega * sum(bridge.inductance_H))


def consistent_piece(
    bridge: Bridge, start_s: float, gates: Legs, currents: Triple, last: Legs | None, left: bool
) -> Piece:
    """The piece of the leg state that holds from here on, its duration still zero.

    Among equals a leg without current is open rather than at a rail, and the `last` state is
    kept; with `left` that one has just come to its end and is not taken.
    """
    states = list(_candidates(bridge, gates, currents))
    if len(states) > 1:
        states.sort(key=lambda legs: (-legs.count(0), legs != last))
        if left and last in states:
            states.remove(last)
    best: Piece | None = None
    least = float("inf")
    for legs in states:
        piece = piece_from(circuit_of(bridge, legs), gates, start_s, currents)
        violation = _violation(piece, currents) if len(states) > 1 else 0.0
        if violation < least:
            best, least = piece, violation
        if violation <= _NOTHING:
            break
    assert best is not None
    return best


def _candidates(bridge: Bridge, gates: Legs, currents: Triple) -> Iterable[Legs]:
    if not bridge.feedback_diodes or all(gates):
        return (gates,)
    flows = _FLOWS * current_scale_A(bridge)
    choices: list[tuple[int, ...]] = []
    for gate, row in zip(gates, line_forms(bridge.connection), strict=True):
        current = dot(row, currents)
        if gate:
            choices.append((gate,))
        elif abs(current) > flows and _cannot_jump(bridge, row):
            choices.append((-1,) if current > 0.0 else (1,))
        else:
            choices.append((1, -1, 0))
    return product(*choices)  # type: ignore[return-value]


def _cannot_jump(bridge: Bridge, row: Triple) -> bool:
    """Whether every branch that meets at a terminal has inductance."""
    return all(L > 0.0 for L, part in zip(bridge.inductance_H, row, strict=True) if part)


def _violation(piece: Piece, before: Triple) -> float:
    """How far a leg state is from fitting, as a fraction of the currents and the link voltage."""
    bridge = piece.bridge
    scale_A = current_scale_A(bridge)
    total = _lost_flux(piece, before) / scale_A
    moment = _MOMENT * bridge.period_s
    voltages = None
    for leg, gate in enumerate(piece.gates):
        if gate:
            continue
        state = piece.legs[leg]
        if state:
            current = value(piece.function(piece.circuit.line[leg]), piece.rates, moment)
            total += max(0.0, state * current / scale_A)
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
