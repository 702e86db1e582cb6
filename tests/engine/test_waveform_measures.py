"""Exact measures against numerical ones from outside."""

from __future__ import annotations

from random import Random

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.optimize import minimize_scalar

from engine.conduction import Stretch, half_period
from engine.roots import value
from engine.steady_state import solve
from engine.waveform_measures import (
    LINE_CURRENT,
    LINE_VOLTAGE,
    LINK_CURRENT,
    Waveform,
    harmonic,
    mean,
    mean_square,
    peak,
    total_harmonic_distortion,
)
from tests.engine.random_bridges import random_bridge

WAVEFORMS = [*LINE_CURRENT, *LINE_VOLTAGE, LINK_CURRENT]


def integral_by_quadrature(stretch: Stretch, of) -> complex:  # type: ignore[no-untyped-def]
    parts = []
    for part in (np.real, np.imag):
        result, _ = quad(
            lambda s, part=part: float(part(of(s))), 0.0, stretch.duration_s, limit=400, epsabs=0.0
        )
        parts.append(result)
    return complex(*parts)


@pytest.mark.parametrize("seed", range(8))
def test_mean_square_and_harmonics_agree_with_quadrature(seed: int) -> None:
    """scipy's adaptive quadrature over each stretch gives the same integrals."""
    bridge = random_bridge(Random(seed), longest_periods=0.5)
    half = half_period(solve(bridge))
    for waveform in WAVEFORMS:
        size = max(peak(half, waveform), 1e-30)
        for order in (1, 5):
            _compare(half, waveform, bridge.frequency_Hz, order, size)


def _compare(
    half: tuple[Stretch, ...], waveform: Waveform, frequency: float, order: int, size: float
) -> None:
    total = square = wave = 0.0 + 0.0j
    for part in half:
        f = waveform(part)

        def now(s: float, f=f, part=part) -> float:  # type: ignore[no-untyped-def]
            return value(f, part.rates, s) / size

        turn = -2j * np.pi * order * frequency
        total += integral_by_quadrature(part, now)
        square += integral_by_quadrature(part, lambda s, now=now: now(s) ** 2)
        wave += integral_by_quadrature(
            part,
            lambda s, now=now, part=part, turn=turn: now(s) * np.exp(turn * (part.start_s + s)),
        )
    assert mean(half, waveform) / size == pytest.approx(2.0 * frequency * total.real, abs=1e-7)
    assert mean_square(half, waveform) / size**2 == pytest.approx(
        2.0 * frequency * square.real, abs=1e-7
    )
    got = harmonic(half, waveform, frequency, order) / size
    assert got == pytest.approx(4.0 * frequency * wave, abs=1e-7)


@pytest.mark.parametrize("seed", range(30))
def test_peak_is_found_inside_a_stretch(seed: int) -> None:
    """No point that scipy's minimiser finds from a dense grid exceeds the peak."""
    half = half_period(solve(random_bridge(Random(seed))))
    for waveform in LINE_CURRENT:
        top = 0.0
        for part in half:
            f, h = waveform(part), part.duration_s
            grid = np.linspace(0.0, h, 60)
            values = [abs(value(f, part.rates, s)) for s in grid]
            k = int(np.argmax(values))
            low, high = grid[max(0, k - 1)], grid[min(59, k + 1)]
            found = minimize_scalar(
                lambda s, f=f, part=part: -abs(value(f, part.rates, s)),
                bounds=(low, high),
                method="bounded",
                options={"xatol": 1e-12 * h},
            )
            top = max(top, values[k], -found.fun)
        assert peak(half, waveform) == pytest.approx(top, rel=1e-9, abs=1e-12)


def test_even_harmonics_are_absent() -> None:
    """Half-wave symmetry leaves odd orders only."""
    bridge = random_bridge(Random(3))
    half = half_period(solve(bridge))
    for order in (0, 2, 4):
        assert harmonic(half, LINE_CURRENT[0], bridge.frequency_Hz, order) == 0.0


@pytest.mark.parametrize(
    ("rms", "fundamental", "thd"), [(5.0, 3.0, 4.0 / 3.0), (1.0, 1.0, 0.0), (0.0, 0.0, 0.0)]
)
def test_distortion_from_rms_and_fundamental(rms: float, fundamental: float, thd: float) -> None:
    """THD = √(rms² − fundamental²)/fundamental; nothing distorts nothing."""
    assert total_harmonic_distortion(rms, fundamental) == pytest.approx(thd)
