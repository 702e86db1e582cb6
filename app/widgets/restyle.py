"""Properties of widgets that the style sheet looks at."""

from __future__ import annotations

from PySide6.QtWidgets import QWidget


def restyle(widget: QWidget, name: str, value: bool | str) -> None:
    """Set the property, and have the widget dressed anew if that changes it."""
    if widget.property(name) != value:
        widget.setProperty(name, value)
        widget.style().unpolish(widget)
        widget.style().polish(widget)
