"""Scales of the strips: steady while a value is dragged, marked at round figures."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import ceil, floor, log10

from engine.quantities import number_shown

LEAST_FILLED = 0.6
"""A scale stands while the curves fill at least this part of it and do not leave it."""
HEADROOM = 0.08
_ROUNDING = 1e-9


@dataclass(frozen=True, slots=True)
class Scale:
    """Values at the bottom and the top of a lane."""

    low: float
    high: float

    @property
    def span(self) -> float:
        return self.high - self.low

    def holds(self, low: float, high: float) -> bool:
        """Whether curves between these values can stay on this scale."""
        inside = self.low <= low and high <= self.high
        return inside and high - low >= LEAST_FILLED * self.span


def scale_for(low: float, high: float, last: Scale | None = None) -> Scale:
    """The last scale if it still holds, else one with room above and below; zero is on it."""
    low, high = min(low, 0.0), max(high, 0.0)
    if high == low:
        return Scale(-1.0, 1.0)
    if last is not None and last.holds(low, high):
        return last
    room = HEADROOM * (high - low)
    return Scale(low - room, high + room)


def ticks(scale: Scale, height: float, apart: float) -> list[float]:
    """Multiples of 1, 2 or 5 × 10ⁿ on the scale, at least `apart` px from each other."""
    least = scale.span * apart / max(height, 1.0)
    power = 10.0 ** floor(log10(least))
    step = next(s * power for s in (1.0, 2.0, 5.0, 10.0) if s * power >= least * (1 - _ROUNDING))
    first, last = ceil(scale.low / step), floor(scale.high / step)
    return [number * step for number in range(first, last + 1)]


def roundest(scale: Scale) -> float:
    """The largest value of one digit that the curves reach, above zero if they do."""
    room = scale.span * HEADROOM / (1.0 + 2.0 * HEADROOM)
    most = scale.high - room if scale.high >= -scale.low else scale.low + room
    power = 10.0 ** floor(log10(abs(most)))
    return int(most / power * (1.0 + _ROUNDING)) * power


@dataclass(frozen=True, slots=True)
class Figures:
    """Prints all values of one lane with the same prefix of its unit."""

    unit: str
    factor: float

    def of(self, value: float, digits: int = 3) -> str:
        """Without the unit; what rounds to zero beside the lane's range prints as zero."""
        scaled = value / self.factor
        places = max(0, digits - len(f"{abs(scaled):.0f}"))
        text = f"{scaled:.{places}f}"
        if float(text) == 0.0:
            return "0"
        return text.replace("-", "−")

    def round_of(self, value: float) -> str:
        """A round figure without trailing zeros."""
        return f"{value / self.factor:.6g}".replace("-", "−")


def in_figures(value: float, unit: str) -> str:
    """A quantity in three figures, noughts at the end kept: '21.0 A'."""
    printed, prefixed = number_shown(value, unit)
    factor = value / float(printed) if value else 1.0
    return f"{Figures(prefixed, factor).of(value)} {prefixed}"


@lru_cache(maxsize=64)
def figures_for(scale: Scale, unit: str) -> Figures:
    """The prefix that suits the largest value of the scale."""
    largest = max(abs(scale.low), abs(scale.high)) / (1.0 + HEADROOM)
    printed, prefixed = number_shown(largest, unit)
    return Figures(prefixed, largest / float(printed))
