"""The waveforms of one period drawn for print: lanes over one angle axis, all of it vectors."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QPainter, QPen, QPolygonF

from app.report.blocks import Figure
from app.report.text import print_font
from app.report.wording import amount
from app.theme import LIGHT, PHASE_DASHES, line_pen
from engine.bridge import PHASES, POSITIONS
from engine.waveforms import Waveforms

Array = NDArray[np.float64]

_LEFT, _RIGHT, _BOTTOM = 104.0, 34.0, 22.0
_GAP = 20.0
_LINE = 1.2
_AXIS, _LABEL = 9, 11
_BAR, _GATE, _PITCH = 5.0, 1.2, 12.0
_ABOVE_BARS = 14.0
_OPPOSITE = 3
"""Index of the position that shares position 1's leg."""


@dataclass(frozen=True)
class Curve:
    """One line of a lane; `phase` gives its colour and dashes, `None` is plain ink."""

    values: Array
    phase: int | None = None
    name: str = ""
    """Stands at the line's end where a lane holds more than one."""


@dataclass(frozen=True)
class Lane:
    """One band of the figure: curves on one scale. `shaded`: shows the dead interval."""

    name: str
    unit: str
    curves: tuple[Curve, ...]
    weight: float
    shaded: bool = False


def draw_waveforms(painter: QPainter, rect: QRectF, figure: Figure) -> None:
    """Draw one period into a rectangle: voltages in lanes of their own, currents overlaid."""
    lanes = lanes_of(figure.waveforms, figure.delta)
    plot = rect.adjusted(_LEFT, 0.0, -_RIGHT, -_BOTTOM)
    painter.save()
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    bars = QRectF(plot.left(), plot.top() + _ABOVE_BARS, plot.width(), 6 * _PITCH)
    bands = list(_bands(plot, bars.bottom() + _GAP, lanes))
    _shade_dead_interval(painter, bands, lanes, figure.waveforms)
    _draw_steps(painter, plot, figure.waveforms)
    _draw_conduction(painter, bars, figure.waveforms)
    for band, lane in zip(bands, lanes, strict=True):
        _draw_lane(painter, band, lane, figure.waveforms.angle_deg)
    painter.restore()


def lanes_of(waveforms: Waveforms, delta: bool) -> list[Lane]:
    """What is drawn below the conduction, from top to bottom."""
    names = ("AB", "BC", "CA") if delta else PHASES
    what = "branch" if delta else "phase"
    voltages = [
        Lane(f"{what} voltage\n{name}", "V", (Curve(values, index),), 0.75)
        for index, (name, values) in enumerate(zip(names, waveforms.phase_voltage_V, strict=True))
    ]
    line = Lane("line voltage\nAB", "V", (Curve(waveforms.line_voltage_V[0]),), 0.85)
    currents = tuple(
        Curve(values, index, name)
        for index, (name, values) in enumerate(zip(PHASES, waveforms.line_current_A, strict=True))
    )
    position = waveforms.switch_current_A[0] - waveforms.diode_current_A[0]
    # A delta's branch voltages are the line voltages.
    return [
        *voltages,
        *([] if delta else [line]),
        Lane("line currents\nA, B, C", "A", currents, 1.5),
        Lane("current\nT1 (+), D1 (−)", "A", (Curve(position),), 1.0, shaded=True),
        Lane("voltage\nT1", "V", (Curve(waveforms.position_voltage_V[0]),), 0.7, shaded=True),
        Lane("link current", "A", (Curve(waveforms.link_current_A),), 0.85),
    ]


def _bands(plot: QRectF, top: float, lanes: Sequence[Lane]) -> Iterator[QRectF]:
    room = plot.bottom() - top - _GAP * (len(lanes) - 1)
    unit = room / sum(lane.weight for lane in lanes)
    for lane in lanes:
        yield QRectF(plot.left(), top, plot.width(), unit * lane.weight)
        top += unit * lane.weight + _GAP


# The frame --------------------------------------------------------------------------------


def _draw_steps(painter: QPainter, plot: QRectF, waveforms: Waveforms) -> None:
    """Limits and angles of the six steps, and above each what conducts longest in it."""
    painter.setFont(print_font(_AXIS))
    for step in range(7):
        x = plot.left() + step / 6.0 * plot.width()
        painter.setPen(line_pen(LIGHT.rule, 0.6))
        painter.drawLine(QPointF(x, plot.top() + _ABOVE_BARS), QPointF(x, plot.bottom()))
        painter.setPen(LIGHT.second_ink)
        box = QRectF(x - 30, plot.bottom() + 4, 60, 14)
        painter.drawText(box, Qt.AlignmentFlag.AlignHCenter, f"{60 * step}°")
        if step < 6:
            box = QRectF(x, plot.top(), plot.width() / 6.0, 12)
            devices = " ".join(_longest(waveforms, 60.0 * step))
            painter.drawText(box, Qt.AlignmentFlag.AlignCenter, devices)


def _longest(waveforms: Waveforms, start_deg: float) -> Sequence[str]:
    """The devices that conduct for the longest part of a step."""
    parts = waveforms.conduction
    lengths = [
        min(part.end_deg, start_deg + 60.0) - max(part.start_deg, start_deg) for part in parts
    ]
    return parts[int(np.argmax(lengths))].devices


def _draw_conduction(painter: QPainter, bars: QRectF, waveforms: Waveforms) -> None:
    """Per position: filled while the switch conducts, outlined for its diode, a line gated."""
    for index, name in enumerate(POSITIONS):
        top = bars.top() + _PITCH * index
        painter.setFont(print_font(_AXIS))
        painter.setPen(LIGHT.second_ink)
        box = QRectF(bars.left() - 34, top - 3, 29, 12)
        painter.drawText(box, Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter, name)
        for start, end in _spans(waveforms.gate_on_deg[index], waveforms.gate_off_deg[index]):
            line = _across(bars, start, end, top + _BAR + 2.0, _GATE)
            painter.fillRect(line, LIGHT.field_edge)
        for part in waveforms.conduction:
            bar = _across(bars, part.start_deg, part.end_deg, top, _BAR)
            if name in part.devices:
                painter.fillRect(bar, LIGHT.ink)
            elif f"D{name[1:]}" in part.devices:
                painter.setPen(line_pen(LIGHT.ink, 0.8))
                painter.drawRect(bar.adjusted(0.4, 0.4, -0.4, -0.4))
    _draw_lane_name(painter, bars, "conduction\nand gates")


def _spans(start_deg: float, end_deg: float) -> tuple[tuple[float, float], ...]:
    """A stretch of the period as parts that do not pass 360°."""
    if start_deg < end_deg:
        return ((start_deg, end_deg),)
    return ((start_deg, 360.0), (0.0, end_deg))


def _across(band: QRectF, start_deg: float, end_deg: float, top: float, height: float) -> QRectF:
    left = band.left() + start_deg / 360.0 * band.width()
    return QRectF(left, top, (end_deg - start_deg) / 360.0 * band.width(), height)


def _shade_dead_interval(
    painter: QPainter, bands: Sequence[QRectF], lanes: Sequence[Lane], waveforms: Waveforms
) -> None:
    """The dead interval after position 1's gate-off, in the lanes that show that position."""
    start, end = waveforms.gate_off_deg[0], waveforms.gate_on_deg[_OPPOSITE]
    if abs((end - start) % 360.0) < 1e-9:
        return
    for band, lane in zip(bands, lanes, strict=True):
        for span in _spans(start, end) if lane.shaded else ():
            painter.fillRect(_across(band, *span, band.top(), band.height()), LIGHT.shade)


# Lanes ------------------------------------------------------------------------------------


def _draw_lane(painter: QPainter, band: QRectF, lane: Lane, angle_deg: Array) -> None:
    low, high = _ends(lane)
    span = (high - low) or 1.0

    def height(value: float) -> float:
        return band.bottom() - (value - low) / span * band.height()

    _draw_scale(painter, band, lane, height, (low, high))
    across = band.left() + angle_deg / 360.0 * band.width()
    for curve in lane.curves:
        painter.setPen(_pen(curve.phase))
        along = band.bottom() - (curve.values - low) / span * band.height()
        painter.drawPolyline(_polygon(across, along))
    if len(lane.curves) > 1:
        _draw_names(painter, band, lane, [height(float(c.values[-1])) for c in lane.curves])


def _ends(lane: Lane) -> tuple[float, float]:
    """Lowest and highest value of a lane, zero always within; rounding is no value."""
    low = min(0.0, *(float(curve.values.min()) for curve in lane.curves))
    high = max(0.0, *(float(curve.values.max()) for curve in lane.curves))
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
    painter.setPen(line_pen(LIGHT.field_edge, 0.6))
    zero = height(0.0)
    painter.drawLine(QPointF(band.left(), zero), QPointF(band.right(), zero))
    _draw_lane_name(painter, band, lane.name)
    painter.setFont(print_font(_AXIS))
    painter.setPen(LIGHT.second_ink)
    for value in dict.fromkeys((*ends, 0.0)):
        y = height(value)
        if value == 0.0 and any(end and abs(height(end) - y) < 9 for end in ends):
            continue
        text = "0" if value == 0.0 else amount(value, lane.unit, 3)
        box = QRectF(band.left() - _LEFT, y - 6, _LEFT - 5, 12)
        painter.drawText(box, Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter, text)


def _draw_lane_name(painter: QPainter, band: QRectF, name: str) -> None:
    painter.setPen(LIGHT.ink)
    painter.setFont(print_font(_LABEL))
    box = QRectF(band.left() - _LEFT, band.center().y() - 16, _LEFT - 40, 32)
    flags = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
    painter.drawText(box, flags | Qt.TextFlag.TextDontClip, name)


def _draw_names(
    painter: QPainter, band: QRectF, lane: Lane, heights: Sequence[float], apart: float = 11.0
) -> None:
    """Names at the ends of the curves, moved apart, each with a leader to its curve."""
    order = sorted(range(len(heights)), key=heights.__getitem__)
    places = spread([heights[index] for index in order], apart, band.top() + 5, band.bottom() - 5)
    painter.setFont(print_font(_AXIS, bold=True))
    for index, y in zip(order, places, strict=True):
        curve = lane.curves[index]
        colour = LIGHT.ink if curve.phase is None else LIGHT.phase[curve.phase]
        painter.setPen(line_pen(colour, 0.6))
        painter.drawLine(QPointF(band.right() + 1, heights[index]), QPointF(band.right() + 9, y))
        painter.setPen(colour)
        box = QRectF(band.right() + 12, y - 6, _RIGHT - 12, 12)
        flags = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
        painter.drawText(box, flags | Qt.TextFlag.TextDontClip, curve.name)


def spread(rising: Sequence[float], apart: float, low: float, high: float) -> list[float]:
    """Heights moved as little as needed to lie `apart`, in their order, from low to high."""
    places = [min(max(value, low), high) for value in rising]
    for index in range(1, len(places)):
        places[index] = max(places[index], places[index - 1] + apart)
    places[-1] = min(places[-1], high)
    for index in range(len(places) - 2, -1, -1):
        places[index] = min(places[index], places[index + 1] - apart)
    return places
