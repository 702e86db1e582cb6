"""Which diodes conduct, where it can be said by hand."""

from __future__ import annotations

from dataclasses import replace

import pytest

from engine.bridge import Bridge
from engine.leg_states import consistent_piece
from engine.pieces import Legs, terminal_voltages

STAR = Bridge(540.0, 50.0, 150.0, "star", (9.0,) * 3, (0.012,) * 3)
RESISTIVE = replace(STAR, inductance_H=(0.0,) * 3)


def legs_at(bridge: Bridge, gates: Legs, currents: tuple[float, float, float]) -> Legs:
    return consistent_piece(bridge, 0.0, gates, currents, None, False).legs


@pytest.mark.parametrize(
    ("gates", "currents", "legs"),
    [
        ((1, -1, 0), (5.0, -15.0, 10.0), (1, -1, -1)),  # current out: lower diode
        ((1, -1, 0), (25.0, -15.0, -10.0), (1, -1, 1)),  # current in: upper diode
        ((1, -1, 0), (10.0, -10.0, 0.0), (1, -1, 0)),  # none, star point between the rails
        ((0, -1, 0), (5.0, -15.0, 10.0), (-1, -1, -1)),  # two legs freewheel at one rail
        ((0, 0, 0), (-5.0, 15.0, -10.0), (1, -1, 1)),  # all gates off: back into the link
        ((0, 0, 0), (0.0, 0.0, 0.0), (0, 0, 0)),  # nothing flows: all float
        ((1, 0, 0), (0.0, 0.0, 0.0), (1, 0, 0)),  # one gate alone draws nothing
    ],
)
def test_inductive_current_finds_its_diode(gates: Legs, currents, legs: Legs) -> None:  # type: ignore[no-untyped-def]
    """An ungated leg stands where the diode of its current puts it."""
    assert legs_at(STAR, gates, currents) == legs


def test_resistive_load_needs_no_diode() -> None:
    """Without inductance the ungated leg of a star of resistors is open at half the link."""
    piece = consistent_piece(RESISTIVE, 0.0, (1, -1, 0), (0.0, 0.0, 0.0), None, False)
    assert piece.legs == (1, -1, 0)
    assert terminal_voltages(piece)[2][0] == pytest.approx(270.0)


def test_gated_legs_are_never_chosen() -> None:
    """With all legs gated their state is the gates', whatever the currents."""
    assert legs_at(STAR, (-1, 1, -1), (5.0, -15.0, 10.0)) == (-1, 1, -1)


def test_induced_voltage_drives_a_diode_from_zero_current() -> None:
    """An open leg whose terminal would leave the rails conducts, although its current is zero.

    While the current of A and B dies away at the lower rail, unequal resistances put the star
    point below it, and C's lower diode conducts; equal ones leave C open.
    """
    uneven = replace(STAR, resistance_ohm=(90.0, 9.0, 9.0))
    gates, currents = (0, -1, 0), (10.0, -10.0, 0.0)
    assert legs_at(uneven, gates, currents) == (-1, -1, -1)
    assert legs_at(STAR, gates, currents)[:2] == (-1, -1)
