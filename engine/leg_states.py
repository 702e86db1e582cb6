"""Which diodes conduct: the one leg state that fits the gates and the currents.

An ungated leg whose current cannot jump stands at the rail whose diode takes that current.
Without current it is at the positive rail, at the negative rail, or open with its voltage
between the rails; of these states exactly one is consistent, the solution of a linear
complementarity problem. It is found as the state of least violation a moment after the edge.
"""

from __future__ import annotations

from math import pi

from engine.bridge import Bridge
from engine.duty import Triple
from engine.load_network import dot, line_forms
from engine.pieces import Legs, Piece, circuit_of, piece_from, terminal_voltages
from engine.roots import value

_MOMENT = 1e-9  # of a period, but
_FAST = 1e-3  # of the shortest time constant, if that is less
_NOTHING = 1e-11  # a violation below this is rounding
_FLOWS = 1e-9  # of the scale of currents: above this an inductive current is sure to flow


def current_scale_A(bridge: Bridge) -> float:
    """A current of the order of the largest that flows, to measure small ones against.

    The link voltage over the least impedance between two terminals: one branch of a delta,
    two in series of a star.
    """
    first, second, _ = sorted(impedances_ohm(bridge))
    return bridge.voltage_V / (first + second if bridge.connection == "star" else first)


def impedances_ohm(bridge: Bridge) -> Triple:
    """R + ωL of the branches at the output frequency."""
    omega = 2.0 * pi * bridge.frequency_Hz
    a, b, c = (
        R + omega * L for R, L in zip(bridge.resistance_ohm, bridge.inductance_H, strict=True)
    )
    return a, b, c


def consistent_piece(
    bridge: Bridge, start_s: float, gates: Legs, currents: Triple, last: Legs | None, left: bool
) -> Piece:
    """The piece of the leg state that holds from here on, its duration still zero.

    Among equals a leg without current is open rather than at a rail, and the `last` state is
    kept; with `left` that one has just come to its end and is not taken.
    """
    states = _candidates(bridge, gates, currents)
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


def _candidates(bridge: Bridge, gates: Legs, currents: Triple) -> list[Legs]:
    if not bridge.feedback_diodes or all(gates):
        return [gates]
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
    return [(a, b, c) for a in choices[0] for b in choices[1] for c in choices[2]]


def _cannot_jump(bridge: Bridge, row: Triple) -> bool:
    """Whether every branch that meets at a terminal has inductance."""
    return all(L > 0.0 for L, part in zip(bridge.inductance_H, row, strict=True) if part)


def _violation(piece: Piece, before: Triple) -> float:
    """How far a leg state is from fitting, as a fraction of the currents and the link voltage."""
    bridge = piece.bridge
    scale_A = current_scale_A(bridge)
    total = _lost_flux(piece, before) / scale_A
    fastest = max((-rate for rate in piece.rates), default=0.0)
    moment = min(_MOMENT * bridge.period_s, _FAST / fastest if fastest else bridge.period_s)
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
