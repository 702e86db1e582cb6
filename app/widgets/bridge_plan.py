"""Where the parts of the bridge drawing stand, and what current each of its lines carries."""

from __future__ import annotations

from dataclasses import dataclass
from math import floor

from PySide6.QtCore import QPointF, QRectF

from app.widgets.strip import Array, value_at
from engine.bridge import LEG_OF_POSITION, LOWER_OF_LEG, UPPER, UPPER_OF_LEG
from engine.waveforms import Waveforms

MARGIN, HALF = 18.0, 8.0
PHASE_APART = 12.0
"""Between the lines of phases A, B, C where they cross the legs."""
REACH = 17.0
"""From the centre of a position to where switch and diode join."""


@dataclass(frozen=True, slots=True)
class BridgePlan:
    """Places in px for a drawing of this size."""

    width: float
    height: float

    @property
    def is_narrow(self) -> bool:
        return self.width < 260.0

    @property
    def top(self) -> float:
        return _crisp(MARGIN)

    @property
    def bottom(self) -> float:
        return _crisp(self.height - MARGIN)

    @property
    def middle(self) -> float:
        return _crisp(self.height / 2.0)

    @property
    def link_x(self) -> float:
        return 14.5

    @property
    def load_x(self) -> float:
        """Where the lines of the phases leave the legs and spread to the load."""
        return self.width - (60.0 if self.is_narrow else 88.0)

    @property
    def diode_apart(self) -> float:
        return 14.0 if self.is_narrow else 18.0

    def leg_x(self, leg: int) -> float:
        """The switches of a leg."""
        pitch = (self.load_x - self.link_x - 12.0) / 3.0
        right = self.link_x + 12.0 + (leg + 1) * pitch
        return _crisp(right - self.diode_apart - HALF - 6.0)

    def diode_x(self, leg: int) -> float:
        return self.leg_x(leg) + self.diode_apart

    def phase_y(self, leg: int) -> float:
        """A phase's line among the legs."""
        return self.middle + (leg - 1) * PHASE_APART

    def terminal_y(self, leg: int) -> float:
        """A phase's line at the load."""
        return self.middle + (leg - 1) * min(round(0.2 * self.height), 56)

    def centre(self, position: int) -> QPointF:
        """The middle of a position's switch."""
        edge = PHASE_APART + 2.0
        upper = (self.top + self.middle - edge) / 2.0
        y = _crisp(upper if UPPER[position] else self.height - upper)
        return QPointF(self.leg_x(LEG_OF_POSITION[position]), y)

    def room(self, position: int) -> QRectF:
        """All that belongs to a position: label, mark, switch, diode."""
        centre = self.centre(position)
        label = 22.0 if self.is_narrow else 30.0
        return QRectF(centre.x() - label, centre.y() - 24.0, label + self.diode_apart + 10.0, 48.0)

    def position_at(self, point: QPointF) -> int | None:
        found = (n for n in range(6) if self.room(n).contains(point))
        return next(found, None)


def _crisp(place: float) -> float:
    """The middle of a pixel, where a thin line is sharp."""
    return floor(place) + 0.5


@dataclass(frozen=True, slots=True)
class Currents:
    """Currents at one angle, in A."""

    switch: tuple[float, ...]
    diode: tuple[float, ...]
    line: tuple[float, ...]
    """Out of legs A, B, C."""
    branch: tuple[float, ...]
    largest: float
    """The highest of the period, for the weight of the lines."""

    def through(self, position: int) -> float:
        """Downwards through switch and diode together."""
        return self.switch[position] - self.diode[position]

    def upper_rail(self, leg: int) -> float:
        """On the positive rail, just before this leg: what this leg and those behind it take."""
        return sum(self.through(UPPER_OF_LEG[n]) for n in range(leg, 3))

    def lower_rail(self, leg: int) -> float:
        return sum(self.through(LOWER_OF_LEG[n]) for n in range(leg, 3))

    def part(self, current_A: float) -> float:
        """A current as a part of the largest, 0 where none flows."""
        part = abs(current_A) / self.largest if self.largest > 0.0 else 0.0
        return part if part > 1e-6 else 0.0


NO_CURRENTS = Currents((0.0,) * 6, (0.0,) * 6, (0.0,) * 3, (0.0,) * 3, 0.0)


def currents_at(waveforms: Waveforms, angle_deg: float) -> Currents:
    """All currents at an angle, just after it where they jump."""

    def at(rows: Array) -> tuple[float, ...]:
        return tuple(value_at(waveforms.angle_deg, row, angle_deg) for row in rows)

    return Currents(
        at(waveforms.switch_current_A),
        at(waveforms.diode_current_A),
        at(waveforms.line_current_A),
        at(waveforms.branch_current_A),
        float(abs(waveforms.line_current_A).max()),
    )
