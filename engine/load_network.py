"""The load of one leg state as decoupled modes.

A pattern is the set of open legs. For each, P is a basis of the branch currents that
Kirchhoff's current law at the floating nodes allows, and the symmetric pencil
PᵀLP w = μ Pᵀ(R + σL)P w, σ = ΣR/ΣL, is diagonalised: c = Pw with cᵀ(R + σL)c = 1.
μ > 0 is a dynamic mode ẏ = λy + F·u, λ = −cᵀRc/μ, F = c/μ; μ = 0 (all its branches without
inductance) an algebraic one, y = c·u. Branch currents are j = Σ c y. Floating potentials
drop out of c·u. The method is modal analysis of a symmetric definite pencil
(Golub and Van Loan, Matrix Computations, §8.7).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import sqrt
from typing import Literal

from engine.duty import Triple

_NO_INDUCTANCE = 1e-14  # μσ below this is rounding, not inductance


@dataclass(frozen=True, slots=True)
class Mode:
    """One decoupled mode: its rate λ (1/s), and what it takes from and gives to the branches."""

    rate: float
    shape: Triple
    """c: branch currents for y = 1 A."""
    drive: Triple
    """F of a dynamic mode; c of an algebraic one, whose y is drive·u."""
    take: Triple
    """D = cᵀL/μ: y₀ = take·j carries the flux over a change of pattern."""
    dynamic: bool


def line_forms(connection: Literal["star", "delta"]) -> tuple[Triple, Triple, Triple]:
    """Line currents A, B, C as linear forms in the branch currents."""
    if connection == "star":
        return (1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0)
    return (1.0, 0.0, -1.0), (-1.0, 1.0, 0.0), (0.0, -1.0, 1.0)


@lru_cache(maxsize=4096)
def modes_of(
    connection: Literal["star", "delta"],
    resistance_ohm: Triple,
    inductance_H: Triple,
    open_legs: tuple[int, ...],
) -> tuple[Mode, ...]:
    """The modes of the load when these legs (0, 1, 2) are open."""
    basis = _basis(connection, open_legs)
    total_L = sum(inductance_H)
    sigma = sum(resistance_ohm) / total_L if total_L else 1.0
    return tuple(
        _mode(shape, resistance_ohm, inductance_H, sigma)
        for shape in _decoupled(basis, resistance_ohm, inductance_H, sigma)
    )


def _basis(connection: str, open_legs: tuple[int, ...]) -> tuple[Triple, ...]:
    closed = [leg for leg in range(3) if leg not in open_legs]
    if connection == "star":
        return _star_basis(closed)
    if not open_legs:
        return (1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0)
    if len(open_legs) == 1:
        series = [1.0, 1.0, 1.0]
        alone = [0.0, 0.0, 0.0]
        opposite = (open_legs[0] + 1) % 3
        series[opposite] = 0.0
        alone[opposite] = 1.0
        return _triple(series), _triple(alone)
    return ((1.0, 1.0, 1.0),)


def _star_basis(closed: list[int]) -> tuple[Triple, ...]:
    if len(closed) == 3:
        return (1.0, 0.0, -1.0), (0.0, 1.0, -1.0)
    if len(closed) < 2:
        return ()
    through = [0.0, 0.0, 0.0]
    through[closed[0]], through[closed[1]] = 1.0, -1.0
    return (_triple(through),)


def _decoupled(basis: tuple[Triple, ...], R: Triple, L: Triple, sigma: float) -> tuple[Triple, ...]:
    """The basis turned so that its members share neither resistance nor inductance."""
    if len(basis) != 2:
        return basis
    K = _plus(R, L, sigma)
    first, second = basis
    k11, k12, k22 = _form(first, K, first), _form(first, K, second), _form(second, K, second)
    # Orthogonalise in K, then one rotation makes the pencil's L-part diagonal too.
    second = _combined(second, first, -k12 / k11)
    k22 -= k12 * k12 / k11
    first, second = _times(first, 1.0 / sqrt(k11)), _times(second, 1.0 / sqrt(k22))
    m11, m12, m22 = _form(first, L, first), _form(first, L, second), _form(second, L, second)
    cosine, sine = _diagonalising(m11, m12, m22)
    return (
        _combined(_times(first, cosine), second, sine),
        _combined(_times(second, cosine), first, -sine),
    )


def _diagonalising(m11: float, m12: float, m22: float) -> tuple[float, float]:
    """Cosine and sine of the rotation that makes a symmetric 2×2 matrix diagonal (Jacobi)."""
    if m12 == 0.0:
        return 1.0, 0.0
    theta = (m11 - m22) / (2.0 * m12)
    tangent = (1.0 if theta >= 0.0 else -1.0) / (abs(theta) + sqrt(theta * theta + 1.0))
    cosine = 1.0 / sqrt(1.0 + tangent * tangent)
    return cosine, cosine * tangent


def _mode(shape: Triple, R: Triple, L: Triple, sigma: float) -> Mode:
    shape = _times(shape, 1.0 / sqrt(_form(shape, _plus(R, L, sigma), shape)))
    mu = _form(shape, L, shape)
    if mu * sigma <= _NO_INDUCTANCE:
        # cᵀRc = 1 here, so y = c·u.
        return Mode(0.0, shape, shape, (0.0, 0.0, 0.0), dynamic=False)
    take = (shape[0] * L[0] / mu, shape[1] * L[1] / mu, shape[2] * L[2] / mu)
    return Mode(-_form(shape, R, shape) / mu, shape, _times(shape, 1.0 / mu), take, dynamic=True)


def dot(a: Triple, b: Triple) -> float:
    return a[0] * b[0] + a[1] * b[1] + a[2] * b[2]


def _form(a: Triple, weight: Triple, b: Triple) -> float:
    return a[0] * weight[0] * b[0] + a[1] * weight[1] * b[1] + a[2] * weight[2] * b[2]


def _plus(R: Triple, L: Triple, sigma: float) -> Triple:
    return R[0] + sigma * L[0], R[1] + sigma * L[1], R[2] + sigma * L[2]


def _times(a: Triple, by: float) -> Triple:
    return a[0] * by, a[1] * by, a[2] * by


def _combined(a: Triple, b: Triple, by: float) -> Triple:
    return a[0] + b[0] * by, a[1] + b[1] * by, a[2] + b[2] * by


def _triple(values: list[float]) -> Triple:
    return values[0], values[1], values[2]
