"""Zeros of f(s) = a + Σ bᵢ ψᵢ(s), ψᵢ(s) = expm1(λᵢ s)/λᵢ, λᵢ ≤ 0, that cannot be missed.

All waveforms of one piece are functions of this class, and so are their derivatives.
A function is a tuple of coefficients (a, b₁ … b_n) beside the tuple of rates λ.
"""

from __future__ import annotations

from math import exp, expm1, sqrt

Coefficients = tuple[float, ...]
Rates = tuple[float, ...]

_MOST_STEPS = 400
_ROUNDED = 1e3  # of the slack: how far below zero a start may lie by rounding


def psi(rate: float, s: float) -> float:
    """ψ(s) = (e^{λs} − 1)/λ, which is s where λ = 0."""
    return expm1(rate * s) / rate if rate else s


def scaled(f: Coefficients, by: float) -> Coefficients:
    """f times a factor."""
    return tuple(by * c for c in f)


def added(f: Coefficients, g: Coefficients) -> Coefficients:
    """f + g."""
    return tuple(a + b for a, b in zip(f, g, strict=True))


def difference(f: Coefficients, g: Coefficients) -> Coefficients:
    """f − g."""
    return tuple(a - b for a, b in zip(f, g, strict=True))


def value(f: Coefficients, rates: Rates, s: float) -> float:
    """f(s)."""
    total = f[0]
    for b, rate in zip(f[1:], rates, strict=True):
        if b:
            total += b * psi(rate, s)
    return total


def derivative(f: Coefficients, rates: Rates) -> Coefficients:
    """f′ as a function of the same class: e^{λs} = 1 + λψ(s)."""
    slopes = f[1:]
    return (sum(slopes), *(b * rate for b, rate in zip(slopes, rates, strict=True)))


def slope(f: Coefficients, rates: Rates, s: float) -> float:
    """f′(s)."""
    total = 0.0
    for b, rate in zip(f[1:], rates, strict=True):
        if b:
            total += b * exp(rate * s)
    return total


def first_fall(
    f: Coefficients, rates: Rates, end: float, slack: float, start: float = 0.0
) -> float | None:
    """First instant in (start, end) at which f falls through zero, `None` when it does not.

    `slack` is the size below which a value counts as zero: f may start there, and a dip that
    stays above −slack is no fall. A start a little further below zero that rises at once is
    rounding, and the search begins where f has come up.
    """
    s = _risen(f, rates, end, slack, start)
    for _ in range(_MOST_STEPS):
        height, step = _safe_step(f, rates, s, slack)
        if height <= 0.0 or (step is not None and step <= 4e-16 * s):
            return _polished(f, rates, s, start)
        if step is None or s + step >= end:
            return None
        s += step
    return _polished(f, rates, s, start)


def _risen(f: Coefficients, rates: Rates, end: float, slack: float, start: float) -> float:
    """Where a function that starts just below zero and rises has come up, else the start."""
    depth = -value(f, rates, start)
    if not slack < depth < _ROUNDED * slack or slope(f, rates, start) <= 0.0:
        return start
    below = first_fall(scaled(f, -1.0), rates, end, 0.0, start)
    return start if below is None else below


def _safe_step(f: Coefficients, rates: Rates, s: float, slack: float) -> tuple[float, float | None]:
    """Height f + slack at s, and a step that cannot pass a zero of it, `None`: there is none.

    With |f″| ≤ B on all that follows (the exponentials only decay) the height stays positive
    for (f′ + √(f′² + 2B·height))/B, a step that is quadratic at a simple zero.
    """
    height = f[0] + slack
    rise = bend = 0.0
    for b, rate in zip(f[1:], rates, strict=True):
        if not b:
            continue
        grown = expm1(rate * s)
        height += b * (grown / rate if rate else s)
        now = b * (grown + 1.0)
        rise += now
        bend += abs(now * rate)
    if height <= 0.0:
        return height, 0.0
    if bend == 0.0:
        return height, -height / rise if rise < 0.0 else None
    reach = sqrt(rise * rise + 2.0 * bend * height)
    return height, (rise + reach) / bend if rise >= 0.0 else 2.0 * height / (reach - rise)


def _polished(f: Coefficients, rates: Rates, s: float, start: float) -> float:
    """Newton from the zero of f + slack to that of f itself."""
    for _ in range(3):
        rate_of_fall = slope(f, rates, s)
        if rate_of_fall >= 0.0:
            return s
        nearer = s - value(f, rates, s) / rate_of_fall
        if not start <= nearer <= s:
            return s
        s = nearer
    return s


def crossings(f: Coefficients, rates: Rates, end: float, slack: float) -> list[float]:
    """Every instant in (0, end) at which f changes sign, in order."""
    found: list[float] = []
    if not any(f[1:]):
        return found
    s = 0.0
    while len(found) <= 2 * len(f):
        sign = _sign_after(f, rates, s, end, slack)
        if sign == 0:
            return found
        g = f if sign > 0 else tuple(-c for c in f)
        s_next = first_fall(g, rates, end, slack, s)
        if s_next is None:
            return found
        found.append(s_next)
        s = s_next
    return found


def _sign_after(f: Coefficients, rates: Rates, s: float, end: float, slack: float) -> int:
    """Sign that f takes on after s: of its value, else of its lowest derivative there."""
    g = f
    scale = 1.0
    for _ in range(1 + len(f)):
        here = value(g, rates, s) * scale
        if abs(here) > slack:
            return 1 if here > 0.0 else -1
        g = derivative(g, rates)
        scale *= end
    return 0


def extremes(f: Coefficients, rates: Rates, end: float) -> tuple[float, float]:
    """Lowest and highest value on [0, end], interior extrema included."""
    if not any(f[1:]):
        return f[0], f[0]
    values = [f[0], value(f, rates, end)]
    if len(f) > 2:  # a single exponential has no turn
        slack = 1e-13 * sum(abs(b) for b in f[1:])
        turns = crossings(derivative(f, rates), rates, end, slack)
        values += [value(f, rates, s) for s in turns]
    return min(values), max(values)
