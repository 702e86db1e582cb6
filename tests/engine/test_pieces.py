"""One leg state in closed form, against Kirchhoff's laws and scipy's matrix exponential."""

from __future__ import annotations

from itertools import product
from random import Random

import numpy as np
import pytest
from scipy.linalg import expm

from engine.bridge import Bridge
from engine.pieces import circuit_of, piece_from, terminal_voltages
from engine.roots import value
from tests.engine.random_bridges import random_bridge
from tests.references.marched import March, incidence

LEG_STATES = [legs for legs in product((1, -1, 0), repeat=3) if any(legs)]


def bridge(connection) -> Bridge:  # type: ignore[no-untyped-def]
    return Bridge(540.0, 50.0, 150.0, connection, (9.0, 4.0, 1.0), (0.012, 0.05, 0.007))


@pytest.mark.parametrize("connection", ["star", "delta"])
@pytest.mark.parametrize("legs", LEG_STATES, ids=str)
def test_currents_follow_the_matrix_exponential(connection, legs) -> None:  # type: ignore[no-untyped-def]
    """From currents that the open legs allow, j(s) is that of the nodal equations."""
    it = bridge(connection)
    circuit = circuit_of(it, legs)
    start = piece_from(circuit, legs, 0.0, (3.0, -1.0, -2.0)).currents_at(0.0)
    piece = piece_from(circuit, legs, 0.0, start)
    equations = March(it).circuit(legs)
    system = np.zeros((4, 4))
    system[:3, :3], system[:3, 3] = equations.slope_matrix, equations.slope_offset
    for s in (0.0, 1e-4, 2e-3):
        expected = (expm(system * s) @ np.array([*start, 1.0]))[:3]
        assert np.array(piece.currents_at(s)) == pytest.approx(expected, abs=1e-10)
        volts = equations.potentials(expected)[:3]
        got = [value(f, piece.rates, s) for f in terminal_voltages(piece)]
        assert got == pytest.approx(list(volts), abs=1e-7)


@pytest.mark.parametrize("seed", range(40))
def test_branch_law_and_current_law(seed: int) -> None:
    """v = R·j + L·dj/dt between the terminals, and no current out of an open leg."""
    it = random_bridge(Random(seed))
    A = incidence(it.connection)[:3]
    for legs in LEG_STATES:
        circuit = circuit_of(it, legs)
        piece = piece_from(circuit, legs, 0.0, (0.0, 0.0, 0.0))
        drop = [piece.function(form)[0] for form in circuit.drop]
        slopes, currents = piece.slopes_at(0.0), piece.currents_at(0.0)
        for k in range(3):
            law = it.resistance_ohm[k] * currents[k] + it.inductance_H[k] * slopes[k]
            assert drop[k] == pytest.approx(law, abs=1e-9 * it.voltage_V)
        line = A @ np.array(currents)
        assert [line[leg] for leg in range(3) if not legs[leg]] == pytest.approx(
            [0.0] * legs.count(0), abs=1e-9 * it.voltage_V / min(filter(None, it.resistance_ohm))
        )


@pytest.mark.parametrize("seed", range(20))
def test_rest_and_mirror_of_a_piece(seed: int) -> None:
    """The rest of a piece runs on as the piece does; its mirror is the same with minus signs."""
    it = random_bridge(Random(seed))
    piece = piece_from(circuit_of(it, (1, -1, 0)), (1, -1, 0), 0.0, (0.0, 0.0, 0.0))
    piece = piece.until(it.period_s / 6.0)
    rest, mirror = piece.after(0.4 * piece.duration_s), piece.mirrored()
    scale = it.voltage_V / min(filter(None, it.resistance_ohm))
    for part in (0.0, 0.3, 0.6):
        s = part * piece.duration_s
        later = piece.currents_at(0.4 * piece.duration_s + s)
        assert rest.currents_at(s) == pytest.approx(later, abs=1e-12 * scale)
        opposite = tuple(-current for current in piece.currents_at(s))
        assert mirror.currents_at(s) == pytest.approx(opposite, abs=1e-12 * scale)
    assert mirror.start_s == 0.5 * it.period_s
    assert mirror.legs == (-1, 1, 0)
