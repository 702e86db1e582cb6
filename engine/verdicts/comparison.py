"""Applied against allowed: the worst place, headroom, verdict, and the rating that would do.

A row of the verdict table hands in a `Comparison` over all points and positions; everything
that is the same for every rating happens here.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

import numpy as np

from engine.checks import Verdict
from engine.stress_table import Array, OperatingPoints

ROUNDING_PCT = 1e-9
"""Headrooms closer than this are the same."""


@dataclass(frozen=True, slots=True)
class Place:
    """A point of a table, and a position (0..5 = T1..T6)."""

    point: int
    position: int

    def of(self, values: Array) -> float:
        """The value of `(n_points, 6)` or `(n_points, 1)` at this place."""
        return float(values[self.point, self.position if values.shape[1] > 1 else 0])


@dataclass(frozen=True, slots=True, eq=False)
class Comparison:
    """One rating against what the duty applies, at all points.

    `applied` and `allowed` are `(n_points, 6)`, or `(n_points, 1)` where the position does not
    matter. NaN in `applied` leaves a place out. `at_least`: applied is what is needed, allowed
    what there is. Headroom counts from `zero` (the ambient, for a temperature).
    `rating_for` turns a value of `allowed` (for `at_least`, of `applied`) that is just adequate
    into the rating that gives it, `None` where no rating does.
    """

    points: OperatingPoints
    applied: Array
    allowed: Array
    how: Callable[[Place], str]
    rating_for: Callable[[float, Place], float | None]
    fraction: float | None = None
    at_least: bool = False
    zero: float = 0.0
    ambient: Literal["low", "nominal", "high"] = "nominal"
    unlimited: str = "has no finite value"
    """The reason where `applied` is infinite."""
    nothing_allowed: str = "the allowed value is zero"
    """The reason where `allowed` is not above `zero`."""


@dataclass(frozen=True, slots=True)
class Worst:
    """A comparison at its worst place. `headroom_pct` is `None` where nothing is allowed."""

    place: Place
    applied: float | None
    allowed: float
    headroom_pct: float | None
    reason: str | None
    would_do: float | None


def headrooms_pct(comparison: Comparison) -> Array:
    """Headroom at every place, −∞ where nothing is allowed, NaN where nothing is compared."""
    allowed = comparison.allowed - comparison.zero
    with np.errstate(divide="ignore", invalid="ignore"):
        headroom = 100.0 * (1.0 - (comparison.applied - comparison.zero) / allowed)
    headroom = np.where(allowed > 0.0, headroom, -np.inf)
    return np.where(np.isnan(comparison.applied + comparison.allowed), np.nan, headroom)


def worst_of(comparison: Comparison, adequate_share: float) -> Worst | None:
    """The place of least headroom, the first of equals; `None` where nothing is compared."""
    headrooms = headrooms_pct(comparison)
    if np.isnan(headrooms).all():
        return None
    least = np.nanmin(headrooms)
    found = np.argwhere(headrooms <= least + ROUNDING_PCT)[0]
    place = Place(int(found[0]), int(found[1]))
    applied, allowed = place.of(comparison.applied), place.of(comparison.allowed)
    return Worst(
        place=place,
        applied=applied if np.isfinite(applied) else None,
        allowed=allowed,
        headroom_pct=float(least) if np.isfinite(least) else None,
        reason=_reason(comparison, applied, allowed),
        would_do=_would_do(comparison, place, adequate_share),
    )


def _reason(comparison: Comparison, applied: float, allowed: float) -> str | None:
    if not np.isfinite(applied):
        return comparison.unlimited
    return comparison.nothing_allowed if allowed <= comparison.zero else None


def _would_do(comparison: Comparison, place: Place, adequate_share: float) -> float | None:
    applied, zero = place.of(comparison.applied), comparison.zero
    if comparison.at_least:
        target = place.of(comparison.allowed) * adequate_share
    else:
        target = zero + (applied - zero) / adequate_share
    if not np.isfinite(applied) or target <= zero:
        return None
    return comparison.rating_for(target, place)


def verdict_of_headroom(headroom_pct: float | None, tight_band_pct: float) -> Verdict:
    """Undersized below zero (and where nothing is allowed), tight below the band."""
    if headroom_pct is None or headroom_pct < -ROUNDING_PCT:
        return "undersized"
    return "tight" if headroom_pct < tight_band_pct - ROUNDING_PCT else "adequate"
