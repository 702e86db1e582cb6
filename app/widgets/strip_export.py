"""Strips as files and on the clipboard: SVG, PNG, CSV; the report draws them from here too."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Literal

import numpy as np
from PySide6.QtCore import QBuffer, QIODevice, QRectF, QSize
from PySide6.QtGui import QImage, QPainter
from PySide6.QtSvg import QSvgGenerator

from app.export import table_bytes
from app.theme import LIGHT, Theme
from app.widgets.strip import STRIPS, Connection, Strip, strips_of
from app.widgets.strip_labels import (
    end_labels,
    paint_angles,
    paint_conduction,
    paint_heading,
    paint_names,
)
from app.widgets.strip_layout import StripLayout, lay_out
from app.widgets.strip_painting import Sheet, paint_strip
from app.widgets.strip_sheet import conduction_parts, intervals_of, scales_of
from engine.stress import BridgeStress
from engine.waveforms import Waveforms

Parts = Sequence[tuple[float, float, str]]
"""Start, end and names of the parts of the period that conduct alike."""
Format = Literal["PNG", "SVG", "CSV"]
DOTS_PER_INCH = 96
PNG_SCALE = 2


def strip_svg(
    waveforms: Waveforms,
    theme: Theme = LIGHT,
    width: float = 704.0,
    height: float = 700.0,
    which: Sequence[str] = STRIPS,
    connection: Connection = "star",
    position: int = 0,
    stress: BridgeStress | None = None,
) -> bytes:
    """The named strips of `app.widgets.strip.STRIPS` as a vector drawing, none of them folded.

    `width` and `height` in px of 96 to the inch; `position` is the position looked at. With
    `stress` the headings name rms and peak.
    """
    strips = [s for s in strips_of(waveforms, connection, position, stress) if s.key in which]
    layout = lay_out([strip.key for strip in strips], width, height, _all_open(strips))
    sheet = Sheet(
        theme,
        layout.axis,
        waveforms.angle_deg,
        scales_of(strips),
        intervals_of(waveforms, position),
    )
    return svg_of(sheet, strips, layout, conduction_parts(waveforms))


def svg_of(sheet: Sheet, strips: Sequence[Strip], layout: StripLayout, parts: Parts) -> bytes:
    """Strips at their places as SVG."""
    buffer = QBuffer()
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    size = size_of(layout)
    generator = QSvgGenerator()
    generator.setOutputDevice(buffer)
    generator.setResolution(DOTS_PER_INCH)
    generator.setSize(size)
    generator.setViewBox(QRectF(0, 0, size.width(), size.height()))
    generator.setTitle(", ".join(strip.title for strip in strips))
    painter = QPainter(generator)
    paint_strips(painter, sheet, strips, layout, parts)
    painter.end()
    return bytes(buffer.data().data())


def png_of(sheet: Sheet, strips: Sequence[Strip], layout: StripLayout, parts: Parts) -> QImage:
    """Strips at their places as a picture of twice the resolution."""
    image = QImage(size_of(layout) * PNG_SCALE, QImage.Format.Format_RGB32)
    image.fill(sheet.look.ground)
    image.setDevicePixelRatio(PNG_SCALE)
    painter = QPainter(image)
    paint_strips(painter, sheet, strips, layout, parts)
    painter.end()
    return image


def csv_of(strips: Iterable[Strip], angle_deg: np.ndarray, frequency_Hz: float) -> bytes:
    """A row a sample: angle, time, then each curve with its unit in the column's name."""
    curves = [(lane, curve) for strip in strips for lane, curve in strip.curves()]
    heads = [curve.column + (f"_{lane.unit}" if lane.unit else "") for lane, curve in curves]
    time_s = angle_deg / (360.0 * frequency_Hz)
    columns = [angle_deg, time_s, *(curve.values for _, curve in curves)]
    rows = zip(*(column.tolist() for column in columns), strict=True)
    return table_bytes([("angle_deg", "time_s", *heads), *rows])


def paint_strips(
    painter: QPainter,
    sheet: Sheet,
    strips: Sequence[Strip],
    layout: StripLayout,
    parts: Parts,
) -> None:
    """Everything that does not move with the cursor."""
    paint_conduction(painter, sheet, layout.head, parts)
    for strip in strips:
        room = layout.rooms[strip.key]
        paint_strip(painter, sheet, strip, room)
        paint_heading(painter, sheet, strip, room)
        if room.plot is not None:
            paint_names(painter, sheet, end_labels(sheet, strip, room.plot))
    paint_angles(painter, sheet, layout.foot)


def size_of(layout: StripLayout) -> QSize:
    widest = max(room.whole.right() for room in layout.rooms.values())
    return QSize(round(widest), round(layout.foot.bottom()))


def _all_open(strips: Sequence[Strip]) -> dict[str, bool]:
    return {strip.key: False for strip in strips}
