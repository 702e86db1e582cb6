"""The modes of the load against scipy's generalised eigenvalues."""

from __future__ import annotations

from random import Random

import numpy as np
import pytest
from scipy.linalg import eigh

from engine.load_network import line_forms, modes_of

BASES = {
    ("star", ()): [[1, 0, -1], [0, 1, -1]],
    ("star", (1,)): [[1, 0, -1]],
    ("star", (0, 1)): [],
    ("delta", ()): np.eye(3),
    ("delta", (0,)): [[1, 0, 1], [0, 1, 0]],
    ("delta", (0, 2)): [[1, 1, 1]],
    ("delta", (0, 1, 2)): [[1, 1, 1]],
}


@pytest.mark.parametrize("key", list(BASES), ids=str)
@pytest.mark.parametrize("seed", range(6))
def test_rates_are_the_eigenvalues_of_the_network(key, seed: int) -> None:  # type: ignore[no-untyped-def]
    """λ of every pattern of open legs, from scipy's pencil of resistance and inductance."""
    random = Random(seed)
    R = np.array([random.uniform(0.1, 10.0) for _ in range(3)])
    L = np.array([random.uniform(0.001, 0.1) for _ in range(3)])
    modes = modes_of(key[0], tuple(R), tuple(L), key[1])
    P = np.array(BASES[key], dtype=float).reshape(-1, 3)
    expected = (
        eigh(P @ np.diag(-R) @ P.T, P @ np.diag(L) @ P.T, eigvals_only=True) if len(P) else []
    )
    assert sorted(mode.rate for mode in modes) == pytest.approx(list(expected), rel=1e-12)


@pytest.mark.parametrize("seed", range(6))
def test_modes_share_neither_resistance_nor_inductance(seed: int) -> None:
    """cᵢᵀRcⱼ = cᵢᵀLcⱼ = 0 between different modes, with one branch without inductance too."""
    random = Random(seed)
    R = [random.uniform(0.1, 10.0) for _ in range(3)]
    L = [random.uniform(0.001, 0.1) for _ in range(3)]
    L[seed % 3] *= seed % 2
    one, two = modes_of("star", tuple(R), tuple(L), ())
    scale = sum(R)
    assert np.dot(one.shape, np.multiply(R, two.shape)) == pytest.approx(0.0, abs=1e-12 * scale)
    assert np.dot(one.shape, np.multiply(L, two.shape)) == pytest.approx(0.0, abs=1e-12)


def test_no_inductance_is_an_algebraic_mode() -> None:
    """Two branches of a star without inductance leave one dynamic and one algebraic mode."""
    modes = modes_of("star", (1.0, 2.0, 3.0), (0.0, 0.0, 0.1), ())
    assert sorted(mode.dynamic for mode in modes) == [False, True]
    assert not any(mode.dynamic for mode in modes_of("delta", (1.0, 2.0, 3.0), (0.0,) * 3, ()))


@pytest.mark.parametrize("connection", ["star", "delta"])
def test_open_legs_carry_no_line_current(connection) -> None:  # type: ignore[no-untyped-def]
    """Kirchhoff's current law at the open terminals holds in every mode."""
    forms = line_forms(connection)
    for open_legs in ((0,), (1,), (2,), (0, 1), (1, 2), (0, 2)):
        for mode in modes_of(connection, (1.0, 2.0, 3.0), (0.1, 0.2, 0.3), open_legs):
            for leg in open_legs:
                assert np.dot(forms[leg], mode.shape) == pytest.approx(0.0, abs=1e-14)
            assert sum(np.dot(form, mode.shape) for form in forms) == pytest.approx(0.0, abs=1e-14)
