"""Averages, rms values, peaks and Fourier coefficients from exact integrals over stretches."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from math import pi, sqrt
from operator import attrgetter

from engine.conduction import Functions, Stretch
from engine.integrals import fourier, integral, integral_of_square
from engine.roots import Coefficients, extremes

Waveform = Callable[[Stretch], Coefficients]
"""A quantity's coefficients on a stretch."""


def _each(of: Callable[[Stretch], Functions]) -> tuple[Waveform, Waveform, Waveform]:
    return (
        lambda stretch: of(stretch)[0],
        lambda stretch: of(stretch)[1],
        lambda stretch: of(stretch)[2],
    )


LINE_CURRENT = _each(lambda stretch: stretch.line)
"""Of legs A, B, C."""
BRANCH_CURRENT = _each(lambda stretch: stretch.branch)
BRANCH_VOLTAGE = _each(lambda stretch: stretch.branch_voltage)
LINE_VOLTAGE = _each(lambda stretch: stretch.line_voltage)
"""AB, BC, CA."""


LINK_CURRENT: Waveform = attrgetter("link")
"""Out of the link's positive rail."""


def mean(stretches: Sequence[Stretch], waveform: Waveform) -> float:
    """Average over the stretches."""
    total = sum(integral(waveform(stretch), stretch.gram[0]) for stretch in stretches)
    return total / _length(stretches)


def mean_square(stretches: Sequence[Stretch], waveform: Waveform) -> float:
    """Average of the square over the stretches."""
    total = sum(integral_of_square(waveform(stretch), stretch.gram) for stretch in stretches)
    # Rounding may leave a tiny negative sum where the quantity is zero.
    return max(0.0, total / _length(stretches))


def _length(stretches: Sequence[Stretch]) -> float:
    return sum(stretch.duration_s for stretch in stretches)


def peak(stretches: Sequence[Stretch], waveform: Waveform) -> float:
    """Largest absolute value, both sides of every jump counted."""
    highest = 0.0
    for stretch in stretches:
        low, high = extremes(waveform(stretch), stretch.rates, stretch.duration_s)
        highest = max(highest, -low, high)
    return highest


def harmonic(
    half: Sequence[Stretch], waveform: Waveform, frequency_Hz: float, order: int
) -> complex:
    """Complex amplitude c of an odd harmonic, Re(c e^{jnωt}), from the first half period.

    The second half repeats the first with the sign changed, so even orders are zero.
    """
    if order % 2 == 0:
        return 0.0 + 0.0j
    omega = 2.0 * pi * order * frequency_Hz
    total = 0.0 + 0.0j
    for stretch in half:
        f = waveform(stretch)
        if any(f):
            total += fourier(f, stretch.rates, stretch.start_s, stretch.duration_s, omega)
    return 4.0 * total * frequency_Hz


def total_harmonic_distortion(rms_value: float, fundamental_rms: float) -> float:
    """√(rms² − fundamental²)/fundamental, a fraction (IEC 61000-4-7 without interharmonics)."""
    if fundamental_rms == 0.0:
        return 0.0
    return sqrt(max(0.0, (rms_value / fundamental_rms) ** 2 - 1.0))
