"""Zeros and extremes of sums of exponentials."""

from __future__ import annotations

from random import Random

import mpmath
import pytest

from engine.roots import crossings, derivative, extremes, first_fall, psi, slope, value


def exact(f: tuple[float, ...], rates: tuple[float, ...], s: float) -> mpmath.mpf:
    """f(s) to 40 digits by mpmath."""
    with mpmath.workdps(40):
        total = mpmath.mpf(f[0])
        for b, rate in zip(f[1:], rates, strict=True):
            total += mpmath.mpf(b) * (mpmath.expm1(mpmath.mpf(rate) * s) / rate if rate else s)
        return total


def random_function(random: Random) -> tuple[tuple[float, ...], tuple[float, ...]]:
    n = random.choice([1, 2, 3])
    rates = tuple(random.choice([0.0, -(10.0 ** random.uniform(-4, 3))]) for _ in range(n))
    f = tuple(random.uniform(-1.0, 1.0) * 10.0 ** random.uniform(0, 2) for _ in range(n + 1))
    return f, rates


@pytest.mark.parametrize("rate", [0.0, -1e-9, -1e-3, -1.0, -1e4])
def test_psi_and_value_agree_with_mpmath(rate: float) -> None:
    """ψ and f to the last digits, however small the rate."""
    for s in (1e-6, 0.01, 1.0):
        f = (0.3, 2.0)
        assert value(f, (rate,), s) == pytest.approx(float(exact(f, (rate,), s)), rel=1e-14)
        assert psi(rate, s) == pytest.approx(float(exact((0.0, 1.0), (rate,), s)), rel=1e-14)


@pytest.mark.parametrize("seed", range(20))
def test_derivative_is_of_the_same_class(seed: int) -> None:
    """f′ from its coefficients equals the slope, and mpmath's derivative."""
    f, rates = random_function(Random(seed))
    for s in (0.0, 0.2, 1.0):
        got = value(derivative(f, rates), rates, s)
        scale = sum(map(abs, f))
        assert got == pytest.approx(slope(f, rates, s), abs=1e-12 * scale)
        reference = sum(b * mpmath.exp(rate * s) for b, rate in zip(f[1:], rates, strict=True))
        assert got == pytest.approx(float(reference), abs=1e-12 * scale)


@pytest.mark.parametrize("seed", range(150))
def test_no_fall_through_zero_is_missed(seed: int) -> None:
    """The first fall lies where 4000 samples first turn negative, and f is zero there."""
    f, rates = random_function(Random(seed))
    found = first_fall(f, rates, 1.0, 0.0)
    samples = [k / 4000.0 for k in range(1, 4001)]
    negative = next((s for s in samples if value(f, rates, s) < 0.0), None)
    if f[0] < 0.0:
        assert found == 0.0
    elif negative is None:
        assert found is None or value(f, rates, found) == pytest.approx(0.0, abs=1e-9)
    else:
        assert found is not None
        assert negative - 1.0 / 4000.0 - 1e-12 <= found <= negative
        assert abs(exact(f, rates, found)) <= 1e-11 * sum(map(abs, f))


def test_two_falls_in_one_step_are_both_found() -> None:
    """A dip narrower than a thousandth of the interval is not stepped over."""
    # (e^{-s} − 0.6)² − 1e-9: below zero for 1e-4 of a time unit around 0.51.
    f, rates = (0.16 - 1e-9, -2.0, 1.2), (-2.0, -1.0)
    zeros = crossings(f, rates, 3.0, 1e-15)
    expected = [-float(mpmath.log(0.6 + sign * mpmath.sqrt(1e-9))) for sign in (1, -1)]
    assert zeros == pytest.approx(expected, rel=1e-7)


def test_a_dip_within_the_slack_is_no_fall() -> None:
    """Rounding around a touching point does not count as an event."""
    f, rates = (0.16 - 1e-13, -2.0, 1.2), (-2.0, -1.0)
    assert first_fall(f, rates, 3.0, 1e-12) is None


def test_a_start_at_zero_is_followed_by_its_slope() -> None:
    """A current that begins at zero and rises has no fall; one that falls has it at once."""
    assert first_fall((0.0, 1.0), (-1.0,), 1.0, 1e-12) is None
    assert first_fall((0.0, -1.0), (-1.0,), 1.0, 1e-12) == pytest.approx(0.0, abs=1e-11)


@pytest.mark.parametrize("seed", range(60))
def test_extremes_bound_every_sample(seed: int) -> None:
    """No sample lies outside the extremes, and some sample comes near to each."""
    f, rates = random_function(Random(seed))
    low, high = extremes(f, rates, 1.0)
    samples = [value(f, rates, k / 3000.0) for k in range(3001)]
    scale = sum(map(abs, f))
    assert min(samples) >= low - 1e-11 * scale
    assert max(samples) <= high + 1e-11 * scale
    assert min(samples) - low <= 1e-2 * scale
    assert high - max(samples) <= 1e-2 * scale


def test_an_interior_peak_is_exact() -> None:
    """ψ₁ − 2ψ₂ with rates −1 and −4 peaks where e^{−s} = 2e^{−4s}, s = ln 2 / 3."""
    low, high = extremes((0.0, -1.0, 2.0), (-1.0, -4.0), 2.0)
    top = float(mpmath.log(2) / 3)
    assert high == pytest.approx(value((0.0, -1.0, 2.0), (-1.0, -4.0), top), rel=1e-13)
    assert low < 0.0
