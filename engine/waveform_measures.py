"""Averages, rms values, peaks and Fourier coefficients of one period, from exact integrals."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from math import pi, sqrt

from engine.conduction import Stretch
from engine.integrals import fourier, integral, integral_of_square
from engine.roots import Coefficients, crossings, derivative, value

Waveform = Callable[[Stretch], Coefficients | None]
"""The quantity's coefficients on a stretch; `None` where it is zero."""


def mean(stretches: Iterable[Stretch], waveform: Waveform, period_s: float) -> float:
    """Average over the period."""
    total = 0.0
    for stretch in stretches:
        f = waveform(stretch)
        if f is not None:
            total += integral(f, stretch.gram[0])
    return total / period_s


def mean_square(stretches: Iterable[Stretch], waveform: Waveform, period_s: float) -> float:
    """Average of the square over the period."""
    total = 0.0
    for stretch in stretches:
        f = waveform(stretch)
        if f is not None:
            total += integral_of_square(f, stretch.gram)
    # Rounding may leave a tiny negative sum where the quantity is zero.
    return max(0.0, total) / period_s


def rms(stretches: Iterable[Stretch], waveform: Waveform, period_s: float) -> float:
    """Root of the mean square over the period."""
    return sqrt(mean_square(stretches, waveform, period_s))


def extremes(stretch: Stretch, f: Coefficients) -> tuple[float, float]:
    """Lowest and highest value over a stretch, interior extrema included."""
    h = stretch.duration_s
    values = [f[0], value(f, stretch.rates, h)]
    if any(f[1:]):
        slope = derivative(f, stretch.rates)
        slack = 1e-13 * sum(abs(b) for b in f[1:])
        turns = crossings(slope, stretch.rates, h, slack)
        values += [value(f, stretch.rates, s) for s in turns]
    return min(values), max(values)


def peak(stretches: Iterable[Stretch], waveform: Waveform) -> float:
    """Largest absolute value in the period, both sides of every jump counted."""
    highest = 0.0
    for stretch in stretches:
        f = waveform(stretch)
        if f is not None:
            low, high = extremes(stretch, f)
            highest = max(highest, -low, high)
    return highest


def harmonic(
    stretches: Iterable[Stretch], waveform: Waveform, period_s: float, order: int
) -> complex:
    """Complex amplitude of a harmonic: the quantity's part is Re(c e^{jnωt})."""
    omega = 2.0 * pi * order / period_s
    total = 0.0 + 0.0j
    for stretch in stretches:
        f = waveform(stretch)
        if f is not None:
            total += fourier(f, stretch.rates, stretch.start_s, stretch.duration_s, omega)
    return 2.0 * total / period_s


def total_harmonic_distortion(rms_value: float, fundamental_rms: float) -> float:
    """√(rms² − fundamental²)/fundamental, a fraction (IEC 61000-4-7 without interharmonics)."""
    if fundamental_rms == 0.0:
        return 0.0
    return sqrt(max(0.0, (rms_value / fundamental_rms) ** 2 - 1.0))
