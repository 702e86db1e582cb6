"""The cursor on the angle axis, shared by the strips, the bridge drawing and the read-out."""

from __future__ import annotations

from collections.abc import Sequence

from PySide6.QtCore import QObject, Signal

STEP_DEG, LONG_STEP_DEG = 1.0, 10.0
START_DEG = 30.0
_SAME_DEG = 1e-6


class AngleCursor(QObject):
    """An angle from 0° to 360°."""

    moved = Signal()

    def __init__(self, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._angle_deg = START_DEG

    @property
    def angle_deg(self) -> float:
        return self._angle_deg

    def move_to(self, angle_deg: float) -> None:
        """Stand at this angle, kept between the ends of the axis."""
        angle_deg = min(max(angle_deg, 0.0), 360.0)
        if angle_deg != self._angle_deg:
            self._angle_deg = angle_deg
            self.moved.emit()

    def move_by(self, step_deg: float) -> None:
        """Go on around the period."""
        target = self._angle_deg + step_deg
        self.move_to(target if 0.0 <= target <= 360.0 else target % 360.0)

    def move_to_event(self, angles_deg: Sequence[float], forwards: bool) -> None:
        """Go to the next of these angles, around the period."""
        ordered = sorted({angle % 360.0 for angle in angles_deg})
        if not ordered:
            return
        here = self._angle_deg
        if forwards:
            later = [angle for angle in ordered if angle > here + _SAME_DEG]
            self.move_to(later[0] if later else ordered[0])
        else:
            earlier = [angle for angle in ordered if angle < here - _SAME_DEG]
            self.move_to(earlier[-1] if earlier else ordered[-1])
