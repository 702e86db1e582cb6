"""The operating point that every picture shows. It is no part of the document."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from engine.bridge import POSITIONS
from engine.checks import Corner
from engine.duty import Duty, Extremes

Level = Literal["low", "nominal", "high"]
LoadLevel = Literal["light", "nominal", "overload"]


@dataclass(frozen=True, slots=True)
class LookedAt:
    """One of the duty's extremes or a typed value for each quantity (SI), and one position.

    `position` is an index into `POSITIONS`.
    """

    voltage: Level | float = "nominal"
    frequency: Level | float = "nominal"
    load: LoadLevel | float = "nominal"
    ambient: Level | float = "nominal"
    position: int = 0

    @property
    def is_nominal(self) -> bool:
        """Whether all four quantities are nominal; the position does not count."""
        return (self.voltage, self.frequency, self.load, self.ambient) == ("nominal",) * 4


def looked_at_corner(corner: Corner, position: str | None = None) -> LookedAt:
    """Look at the corner of a verdict row, and at its position where it has one."""
    return LookedAt(
        voltage=corner.voltage_V,
        frequency=corner.frequency_Hz,
        load=corner.load_factor,
        ambient=corner.ambient_C,
        position=POSITIONS.index(position) if position in POSITIONS else 0,
    )


def corner_of(looked_at: LookedAt, duty: Duty) -> Corner:
    """The looked-at point in figures."""
    return Corner(
        voltage_V=_figure(looked_at.voltage, duty.voltage_V),
        frequency_Hz=_figure(looked_at.frequency, duty.frequency_Hz),
        load_factor=_load_factor(looked_at.load, duty),
        ambient_C=_figure(looked_at.ambient, duty.ambient_C),
    )


def _figure(choice: Level | float, extremes: Extremes) -> float:
    return float(getattr(extremes, choice)) if isinstance(choice, str) else choice


def _load_factor(choice: LoadLevel | float, duty: Duty) -> float:
    levels = {"light": duty.light_factor, "nominal": 1.0, "overload": duty.overload_factor}
    return levels[choice] if isinstance(choice, str) else choice
