"""Closed integrals against mpmath, from almost constant to almost instantaneous exponentials."""

from __future__ import annotations

from random import Random

import mpmath
import pytest

from engine.integrals import (
    fourier,
    gram,
    integral,
    integral_of_product,
    integral_of_psi,
    integral_of_square,
)

RATES = (0.0, -1e-12, -1e-5, -0.03, -0.69, -0.71, -3.0, -80.0, -1e5)


def psi_of(rate: float):  # type: ignore[no-untyped-def]
    return lambda s: mpmath.expm1(mpmath.mpf(rate) * s) / rate if rate else s


@pytest.mark.parametrize("rate", RATES)
def test_integral_of_psi(rate: float) -> None:
    """∫ψ over one time unit to 1e-14, by mpmath's closed form in 60 digits."""
    with mpmath.workdps(60):
        exact = (psi_of(rate)(mpmath.mpf(1)) - 1) / rate if rate else mpmath.mpf("0.5")
    assert integral_of_psi(rate, 1.0) == pytest.approx(float(exact), rel=1e-14)


@pytest.mark.parametrize("a", RATES)
@pytest.mark.parametrize("b", RATES)
def test_integral_of_product(a: float, b: float) -> None:
    """∫ψₐψ_b to 1e-13 for every pair of rates."""
    with mpmath.workdps(80):
        p, q = (mpmath.mpf(rate) if rate else mpmath.mpf("1e-30") for rate in (a, b))
        terms = mpmath.expm1(p + q) / (p + q) - mpmath.expm1(p) / p - mpmath.expm1(q) / q + 1
        exact = terms / (p * q)
    assert integral_of_product(a, b, 1.0) == pytest.approx(float(exact), rel=1e-13)


@pytest.mark.parametrize("seed", range(25))
def test_square_and_fourier_of_a_sum(seed: int) -> None:
    """∫f² and ∫f·e^{−jωt} of a sum of three exponentials against mpmath's quadrature."""
    random = Random(seed)
    rates = tuple(random.choice([0.0, -(10.0 ** random.uniform(-5, 1.5))]) for _ in range(3))
    f = tuple(random.uniform(-2.0, 2.0) for _ in range(4))
    start, length, omega = random.uniform(0.0, 1.0), random.uniform(0.1, 1.0), 6.0

    def course(s):  # type: ignore[no-untyped-def]
        return f[0] + sum(b * psi_of(rate)(s) for b, rate in zip(f[1:], rates, strict=True))

    matrix = gram(rates, length)
    with mpmath.workdps(25):
        exact = mpmath.quad(course, [0, length])
        square = mpmath.quad(lambda s: course(s) ** 2, [0, length])
        wave = mpmath.quad(lambda s: course(s) * mpmath.expj(-omega * (start + s)), [0, length])
    assert integral(f, matrix[0]) == pytest.approx(float(exact), abs=1e-13)
    assert integral_of_square(f, matrix) == pytest.approx(float(square), rel=1e-12)
    assert fourier(f, rates, start, length, omega) == pytest.approx(complex(wave), abs=1e-13)
