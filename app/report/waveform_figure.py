"""The waveforms of one period drawn for print: lanes over one angle axis, all lines vectors."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QPainter, QPen, QPolygonF

from app.theme import LIGHT, PHASE_DASHES, font, line_pen
from engine.quantities import shown
from engine.waveforms import Waveforms

Array = NDArray[np.float64]

_LEFT, _RIGHT, _TOP, _BOTTOM = 92.0, 34.0, 16.0, 26.0
_GAP = 15.0
_LINE = 1.1
_AXIS, _LABEL = 9, 10


@dataclass(frozen=True)
class Lane:
    """One band of the figure: curves on one scale, each with its name and line."""

    name: str
    unit: str
    curves: tuple[Array, ...]
    names: tuple[str, ...]
    phases: tuple[int | None, ...]
    weight: float = 1.0


def draw_waveforms(painter: QPainter, rect: QRectF, waveforms: Waveforms) -> None:
    """Draw one period into a rectangle: voltages in lanes of their own, currents overlaid."""
    lanes = lanes_of(waveforms)
    plot = rect.adjusted(_LEFT, _TOP, -_RIGHT, -_BOTTOM)
    painter.save()
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    room = plot.height() - _GAP * (len(lanes) - 1)
    unit = room / sum(lane.weight for lane in lanes)
    top = plot.top()
    for lane in lanes:
        band = QRectF(plot.left(), top, plot.width(), unit * lane.weight)
        _draw_lane(painter, band, lane, waveforms.angle_deg)
        top = band.bottom() + _GAP
    _draw_steps(painter, plot, waveforms)
    painter.restore()


def lanes_of(waveforms: Waveforms) -> list[Lane]:
    """What is drawn, from top to bottom."""
    phase = [
        Lane(f"{name} voltage", "V", (curve,), (name,), (index,), 0.8)
        for index, (name, curve) in enumerate(
            zip(("A", "B", "C"), waveforms.phase_voltage_V, strict=True)
        )
    ]
    line = Lane("AB voltage", "V", (waveforms.line_voltage_V[0],), ("AB",), (None,), 0.8)
    currents = Lane(
        "line currents", "A", tuple(waveforms.line_current_A), ("A", "B", "C"), (0, 1, 2), 1.4
    )
    position = Lane(
        "T1 and D1 current",
        "A",
        (waveforms.switch_current_A[0], -waveforms.diode_current_A[0]),
        ("T1", "D1"),
        (None, None),
        1.0,
    )
    blocking = Lane("T1 voltage", "V", (waveforms.position_voltage_V[0],), ("T1",), (None,), 0.7)
    link = Lane("link current", "A", (waveforms.link_current_A,), ("link",), (None,), 0.8)
    return [*phase, line, currents, position, blocking, link]


def _draw_lane(painter: QPainter, band: QRectF, lane: Lane, angle: Array) -> None:
    low, high = _ends(lane)
    span = (high - low) or 1.0

    def height(value: float) -> float:
        return band.bottom() - (value - low) / span * band.height()

    _draw_scale(painter, band, lane, height, (low, high))
    for curve, name, phase in zip(lane.curves, lane.names, lane.phases, strict=True):
        painter.setPen(_pen(phase))
        across = band.left() + angle / 360.0 * band.width()
        along = band.bottom() - (curve - low) / span * band.height()
        painter.drawPolyline(_polygon(across, along))
        if len(lane.curves) > 1:
            _draw_name(painter, band, name, phase, float(along[-1]), lane.names.index(name))


def _ends(lane: Lane) -> tuple[float, float]:
    """Lowest and highest value of a lane, zero always within; rounding is no value."""
    low = min(0.0, *(float(curve.min()) for curve in lane.curves))
    high = max(0.0, *(float(curve.max()) for curve in lane.curves))
    nothing = 1e-6 * (high - low)
    return (low if low < -nothing else 0.0), (high if high > nothing else 0.0)


def _polygon(across: Array, along: Array) -> QPolygonF:
    """The points of a curve; those that lie on a straight line between neighbours are left out."""
    keep = np.ones(len(across), dtype=bool)
    dx, dy = np.diff(across), np.diff(along)
    turn = np.abs(dx[:-1] * dy[1:] - dx[1:] * dy[:-1])
    keep[1:-1] = turn > 1e-6
    points = zip(across[keep].tolist(), along[keep].tolist(), strict=True)
    return QPolygonF([QPointF(x, y) for x, y in points])


def _pen(phase: int | None) -> QPen:
    if phase is None:
        return line_pen(LIGHT.ink, _LINE)
    return line_pen(LIGHT.phase[phase], _LINE, PHASE_DASHES[phase])


def _draw_scale(
    painter: QPainter,
    band: QRectF,
    lane: Lane,
    height: Callable[[float], float],
    ends: tuple[float, float],
) -> None:
    painter.setPen(line_pen(LIGHT.rule, 0.6))
    zero = height(0.0)
    painter.drawLine(QPointF(band.left(), zero), QPointF(band.right(), zero))
    painter.setPen(LIGHT.ink)
    painter.setFont(font(_LABEL))
    name_box = QRectF(band.left() - _LEFT, band.top(), _LEFT - 6, band.height())
    painter.drawText(
        name_box, Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter, _wrapped(lane.name)
    )
    painter.setFont(font(_AXIS))
    painter.setPen(LIGHT.second_ink)
    for value in dict.fromkeys((*ends, 0.0)):
        y = height(value)
        if value == 0.0 and any(end and abs(height(end) - y) < 9 for end in ends):
            continue
        text = "0" if value == 0.0 else shown(value, lane.unit, digits=3)
        box = QRectF(band.left() - _LEFT, y - 6, _LEFT - 5, 12)
        painter.drawText(box, Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter, text)


def _wrapped(name: str) -> str:
    first, _, rest = name.rpartition(" ")
    return f"{first}\n{rest}"


def _draw_name(
    painter: QPainter, band: QRectF, name: str, phase: int | None, y: float, place: int
) -> None:
    colour = LIGHT.ink if phase is None else LIGHT.phase[phase]
    painter.setPen(colour)
    painter.setFont(font(_AXIS, bold=True))
    y = min(max(y, band.top() + 5), band.bottom() - 5)
    box = QRectF(band.right() + 4 + 13 * (place % 2), y - 6, _RIGHT, 12)
    painter.drawText(box, Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter, name)


def _draw_steps(painter: QPainter, plot: QRectF, waveforms: Waveforms) -> None:
    """Angles of the six steps, and above them what conducts for longest in each."""
    for step in range(7):
        x = plot.left() + step / 6.0 * plot.width()
        painter.setPen(line_pen(LIGHT.rule, 0.6, (1.0, 3.0)))
        painter.drawLine(QPointF(x, plot.top()), QPointF(x, plot.bottom()))
        painter.setPen(LIGHT.second_ink)
        painter.setFont(font(_AXIS))
        box = QRectF(x - 30, plot.bottom() + 5, 60, 14)
        painter.drawText(box, Qt.AlignmentFlag.AlignHCenter, f"{60 * step}°")
        if step < 6:
            box = QRectF(x, plot.top() - 15, plot.width() / 6.0, 13)
            painter.drawText(
                box, Qt.AlignmentFlag.AlignCenter, " ".join(_longest(waveforms, 60.0 * step))
            )


def _longest(waveforms: Waveforms, start_deg: float) -> Sequence[str]:
    """The devices that conduct for the longest part of a step."""

    def length(part) -> float:  # type: ignore[no-untyped-def]
        return min(part.end_deg, start_deg + 60.0) - max(part.start_deg, start_deg)

    return max(waveforms.conduction, key=length).devices
