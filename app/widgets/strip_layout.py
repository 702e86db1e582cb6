"""Where each strip stands: the shared angle axis, and which strips are folded to one line."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from PySide6.QtCore import QRectF

from app.widgets.strip import (
    GATES,
    LINE_CURRENTS,
    LINE_VOLTAGES,
    LINK_CURRENT,
    PHASE_VOLTAGES,
    POSITION,
)

HEAD_ROW, AXIS_ROW = 20, 20
"""Rows of the conducting devices above, and of the angles and the cursor's read-out below."""
FOLDED, HEADING, GAP = 20, 18, 4
LEAST, COMFORTABLE = 72, 92
GATES_HEIGHT, LOW_GATES_HEIGHT = 66, 62
LOW_BELOW = 560
MARGINS, NARROW_MARGINS = (56, 68), (42, 60)
"""Left and right of the plots, for the scale and for the names at the lines' ends."""
NARROW_BELOW = 600

FOLDS_FIRST = (
    PHASE_VOLTAGES,
    GATES,
    LINK_CURRENT,
    LINE_VOLTAGES,
    LINE_CURRENTS,
    POSITION,
)
"""The order in which strips fold when room shrinks."""


@dataclass(frozen=True, slots=True)
class AngleAxis:
    """The angle axis that all strips share, in px."""

    left: float
    right: float

    def x(self, angle_deg: float) -> float:
        return self.left + angle_deg / 360.0 * (self.right - self.left)

    def angle_deg(self, x: float) -> float:
        """The angle at a place, 0 or 360 beyond the ends."""
        return min(max((x - self.left) / (self.right - self.left), 0.0), 1.0) * 360.0

    def rect(self, start_deg: float, end_deg: float, room: QRectF) -> QRectF:
        """The part of a room between two angles."""
        left = self.x(start_deg)
        return QRectF(left, room.top(), self.x(end_deg) - left, room.height())


@dataclass(frozen=True, slots=True)
class StripRoom:
    """One strip's place: the whole, and the plot in it; `plot` is `None` when folded."""

    whole: QRectF
    plot: QRectF | None


@dataclass(frozen=True, slots=True)
class StripLayout:
    """Places of everything on the strips."""

    axis: AngleAxis
    head: QRectF
    foot: QRectF
    rooms: Mapping[str, StripRoom]


def lay_out(
    keys: Sequence[str], width: float, height: float, chosen: Mapping[str, bool]
) -> StripLayout:
    """Share the height among the strips; `chosen` holds those the user folded or opened."""
    left, right = NARROW_MARGINS if width < NARROW_BELOW else MARGINS
    axis = AngleAxis(left, max(width - right, left + 60.0))
    heights = strip_heights(keys, height - HEAD_ROW - AXIS_ROW, chosen)
    top = float(HEAD_ROW)
    rooms = {}
    for key in keys:
        whole = QRectF(0.0, top, width, heights[key])
        rooms[key] = StripRoom(whole, _plot(key, whole, axis))
        top += heights[key] + GAP
    head = QRectF(axis.left, 0.0, axis.right - axis.left, HEAD_ROW)
    foot = QRectF(axis.left, top - GAP, axis.right - axis.left, AXIS_ROW)
    return StripLayout(axis, head, foot, rooms)


def strip_heights(
    keys: Sequence[str], available: float, chosen: Mapping[str, bool]
) -> dict[str, float]:
    """Height of each strip: folded, the gates', or an equal share of what is left."""
    available -= GAP * (len(keys) - 1)
    folded = {key for key in keys if chosen.get(key, False)}
    gates = LOW_GATES_HEIGHT if available < LOW_BELOW else GATES_HEIGHT
    for key in _folding_order(keys, chosen):
        wanted = COMFORTABLE if key == PHASE_VOLTAGES and key not in chosen else LEAST
        if _share(keys, available, folded, gates) < wanted:
            folded.add(key)
    share = max(LEAST, _share(keys, available, folded, gates))
    return {
        key: FOLDED if key in folded else gates if key == GATES else float(int(share))
        for key in keys
    }


def _folding_order(keys: Sequence[str], chosen: Mapping[str, bool]) -> list[str]:
    """What the user opened folds last; one strip always stays open."""
    candidates = [key for key in FOLDS_FIRST if key in keys and not chosen.get(key, False)]
    return sorted(candidates, key=lambda key: key in chosen)[:-1]


def _share(keys: Sequence[str], available: float, folded: set[str], gates: float) -> float:
    """Height of each open strip other than the gates."""
    open_keys = [key for key in keys if key not in folded and key != GATES]
    room = available - FOLDED * len(folded)
    if GATES in keys and GATES not in folded:
        room -= gates
    return room / len(open_keys) if open_keys else float(LEAST)


def _plot(key: str, whole: QRectF, axis: AngleAxis) -> QRectF | None:
    if whole.height() <= FOLDED:
        return None
    heading = 0.0 if key == GATES else HEADING
    width = axis.right - axis.left
    return QRectF(axis.left, whole.top() + heading, width, whole.height() - heading)
