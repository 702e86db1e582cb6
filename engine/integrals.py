"""Closed integrals over one piece of ψᵢ, ψᵢψⱼ and ψᵢe^{−jωs}: no quadrature.

ψ(s) = expm1(λs)/λ. Where λs is small the closed forms cancel; a power series takes over
there, so that the results keep their accuracy from L/R of nothing to any number of periods.
"""

from __future__ import annotations

from cmath import exp as cexp
from math import exp, expm1

from engine.roots import Coefficients, Rates, psi

Gram = tuple[tuple[float, ...], ...]

_SERIES_BELOW = 0.7
_NEGLIGIBLE = 1e-18
_MOST_TERMS = 40


def integral_of_psi(rate: float, s: float) -> float:
    """∫₀ˢ ψ = (ψ − s)/λ."""
    x = rate * s
    if abs(x) >= _SERIES_BELOW:
        return (psi(rate, s) - s) / rate
    term = total = 0.5
    for n in range(3, _MOST_TERMS):
        term *= x / n
        total += term
        if abs(term) < _NEGLIGIBLE:
            break
    return total * s * s


def integral_of_product(rate_a: float, rate_b: float, s: float) -> float:
    """∫₀ˢ ψₐψ_b."""
    if abs(rate_a) < abs(rate_b):
        rate_a, rate_b = rate_b, rate_a
    if abs(rate_a * s) < _SERIES_BELOW:
        return s**3 * _product_series(rate_a * s, rate_b * s)
    # ψₐ = (e^{as} − 1)/a, and the exponential part by parts.
    both = rate_a + rate_b
    weighted = (exp(rate_a * s) * psi(rate_b, s) - expm1(both * s) / both) / rate_a
    return (weighted - integral_of_psi(rate_b, s)) / rate_a


def _product_series(x: float, y: float) -> float:
    """The product's integral over s³, Σₙ Pₙ/(n + 1)! from n = 2.

    Pₙ = ((x + y)ⁿ − xⁿ − yⁿ)/xy, by Pₙ₊₁ = (x + y)Pₙ + xⁿ⁻¹ + yⁿ⁻¹ without cancellation.
    """
    both, x_power, y_power = x + y, x, y
    part, factorial, total = 2.0, 6.0, 1.0 / 3.0
    for n in range(3, _MOST_TERMS):
        part = both * part + x_power + y_power
        x_power *= x
        y_power *= y
        factorial *= n + 1
        total += part / factorial
        if abs(part) < _NEGLIGIBLE * factorial:
            break
    return total


def fourier_of_psi(rate: float, s: float, omega: float) -> complex:
    """∫₀ˢ ψ e^{−jωs} by parts, which stays exact as λ goes to zero."""
    inner = rate - 1j * omega
    exponential = (cexp(inner * s) - 1.0) / inner
    return (exponential - psi(rate, s) * cexp(-1j * omega * s)) / (1j * omega)


def gram(rates: Rates, s: float) -> Gram:
    """∫₀ˢ of every product of (1, ψ₁ … ψ_n): symmetric, (n + 1, n + 1)."""
    first = [s, *(integral_of_psi(rate, s) for rate in rates)]
    rows = [tuple(first)]
    for i, rate in enumerate(rates):
        row = [first[i + 1]]
        row += [rows[k + 1][i + 1] for k in range(i)]
        row += [integral_of_product(rate, other, s) for other in rates[i:]]
        rows.append(tuple(row))
    return tuple(rows)


def integral(f: Coefficients, moments: tuple[float, ...]) -> float:
    """∫f, with the first row of the Gram matrix."""
    total = 0.0
    for c, moment in zip(f, moments, strict=True):
        total += c * moment
    return total


def integral_of_square(f: Coefficients, gram_matrix: Gram) -> float:
    """∫f², with the Gram matrix."""
    total = 0.0
    for a, row in zip(f, gram_matrix, strict=True):
        if a:
            total += a * integral(f, row)
    return total


def fourier(f: Coefficients, rates: Rates, start_s: float, s: float, omega: float) -> complex:
    """∫f e^{−jωt} over the piece that begins at t = start."""
    total = f[0] * (1.0 - cexp(-1j * omega * s)) / (1j * omega)
    for b, rate in zip(f[1:], rates, strict=True):
        if b:
            total += b * fourier_of_psi(rate, s, omega)
    return total * cexp(-1j * omega * start_s)
