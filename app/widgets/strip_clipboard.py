"""Copies of the strips for other programs."""

from __future__ import annotations

from collections.abc import Collection
from functools import partial

from PySide6.QtCore import QMimeData
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QMenu

from app.widgets.strip import Strip
from app.widgets.strip_export import Format, csv_of, png_of, svg_of
from app.widgets.strip_layout import AXIS_ROW, HEAD_ROW, StripLayout, lay_out
from app.widgets.strips import Strips

FORMATS: tuple[Format, ...] = ("PNG", "SVG", "CSV")
SINGLE_HEIGHT = 160.0


def copy_strips(
    strips: Strips, key: str | None = None, formats: Collection[Format] = FORMATS
) -> None:
    """Put one strip, or all as they stand, on the clipboard; the other program takes its pick."""
    if strips.picture is not None:
        QGuiApplication.clipboard().setMimeData(strips_as_mime(strips, key, formats))


def strips_as_mime(strips: Strips, key: str | None, formats: Collection[Format]) -> QMimeData:
    """The formats side by side. Nothing may have been solved: then nothing is in it."""
    data = QMimeData()
    picture = strips.picture
    if picture is None:
        return data
    shown = [strip for strip in strips.strips if key in (None, strip.key)]
    drawn = (strips.sheet, shown, _layout(strips, shown, key), strips.parts())
    if "PNG" in formats:
        data.setImageData(png_of(*drawn))
    if "SVG" in formats:
        data.setData("image/svg+xml", svg_of(*drawn))
    if "CSV" in formats:
        table = csv_of(shown, strips.sheet.angle_deg, picture.corner.frequency_Hz)
        data.setData("text/csv", table)
        data.setText(table.decode())
    return data


def _layout(strips: Strips, shown: list[Strip], key: str | None) -> StripLayout:
    """As on the screen; a single strip is drawn open whatever it is there."""
    if key is None:
        return strips.layout_of_strips
    height = max(SINGLE_HEIGHT, strips.layout_of_strips.rooms[key].whole.height())
    return lay_out([shown[0].key], strips.width(), height + HEAD_ROW + AXIS_ROW, {key: False})


def copy_menu(strips: Strips) -> QMenu:
    """What a right click on a strip offers."""
    menu = QMenu(strips)
    key, title = strips.current, strips.current_title
    fold = "Open" if strips.is_folded(key) else "Fold"
    menu.addAction(f"{fold} {title}", partial(strips.fold, key))
    menu.addSeparator()
    for format in FORMATS:
        menu.addAction(f"Copy {title} as {format}", partial(copy_strips, strips, key, (format,)))
    menu.addSeparator()
    for format in FORMATS:
        menu.addAction(
            f"Copy All Strips as {format}", partial(copy_strips, strips, None, (format,))
        )
    return menu
