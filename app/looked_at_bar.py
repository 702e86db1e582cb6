"""The operating point that every picture shows, chosen or typed."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QAction
from PySide6.QtWidgets import QHBoxLayout, QLabel, QMenu, QToolButton, QWidget

from app.looked_at import LookedAt
from app.open_selection import OpenSelection
from app.theme import AXIS, font
from app.widgets.entry_row import set_role, words
from app.widgets.number_entry import NumberEntry, plain_number
from app.widgets.window_width import WindowWidth
from engine.duty import value_of
from engine.selection import Selection


@dataclass(frozen=True, slots=True)
class Quantity:
    """One of the four quantities: field of `LookedAt`, its levels, and the entries they show."""

    field: str
    name: str
    short_name: str
    unit: str
    shown_in: str
    levels: dict[str, str]
    """Name of each level, and the key of its entry; '' for the figure 1."""

    def figure(self, selection: Selection, choice: str | float) -> float | None:
        """The value of a level, or the typed one."""
        if not isinstance(choice, str):
            return choice
        key = self.levels[choice]
        value: float | None = value_of(selection, key) if key else 1.0
        return value


def _extremes(stem: str, unit: str) -> dict[str, str]:
    return {
        "low": f"{stem}_low_{unit}",
        "nominal": f"{stem}_{unit}",
        "high": f"{stem}_high_{unit}",
    }


QUANTITIES = (
    Quantity("voltage", "Link voltage", "Link", "V", "V", _extremes("supply.voltage", "V")),
    Quantity("frequency", "Frequency", "Freq.", "Hz", "Hz", _extremes("gating.frequency", "Hz")),
    Quantity(
        "load",
        "Load factor",
        "Load",
        "",
        "×",
        {"light": "load.light_factor", "nominal": "", "overload": "load.overload_factor"},
    ),
    Quantity("ambient", "Ambient", "Amb.", "C", "°C", _extremes("cooling.ambient", "C")),
)


class LookedAtBar(QWidget):
    """Four fields in a row, and whether they stand at nominal."""

    def __init__(self, document: OpenSelection) -> None:
        super().__init__()
        self._document = document
        self.setAccessibleName("Operating point looked at")
        self._heading = QLabel()
        self._heading.setFont(font(AXIS, bold=True))
        self.fields = tuple(LookedAtField(quantity) for quantity in QUANTITIES)
        self._layout = QHBoxLayout(self)
        self._layout.setContentsMargins(0, 0, 0, 0)
        self._layout.addWidget(self._heading)
        for field in self.fields:
            self._layout.addWidget(field)
            field.chosen.connect(self._on_chosen)
        WindowWidth(self, self._fit)
        document.changed.connect(self._show)
        document.looked_at_changed.connect(self._show)
        self._show()

    @property
    def heading(self) -> str:
        return self._heading.text()

    def _on_chosen(self, name: str, choice: Any) -> None:
        self._document.looked_at = replace(self._document.looked_at, **{name: choice})

    def _show(self) -> None:
        looked_at = self._document.looked_at
        self._show_heading(looked_at)
        for field in self.fields:
            field.show_choice(self._document.selection, looked_at)

    def _show_heading(self, looked_at: LookedAt) -> None:
        self._heading.setText("Looked at" if looked_at.is_nominal else "Off nominal")
        self._heading.setToolTip("" if looked_at.is_nominal else "Ctrl+0 returns to nominal")
        set_role(self._heading, "second" if looked_at.is_nominal else "accent")

    def _fit(self, narrow: bool) -> None:
        self._layout.setSpacing(8 if narrow else 12)
        for field in self.fields:
            field.fit(narrow)


class LookedAtField(QWidget):
    """Name, value, unit and level of one quantity."""

    chosen = Signal(str, object)
    """Field of `LookedAt`, and a level or a value in SI."""

    def __init__(self, quantity: Quantity) -> None:
        super().__init__()
        self.quantity = quantity
        self._selection: Selection | None = None
        self._choice: str | float = "nominal"
        self._name = words(quantity.name, AXIS, "second")
        self.number = self._make_number()
        unit = words(quantity.shown_in, AXIS, "second")
        self.level = self._make_level()
        layout = QHBoxLayout(self)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(4)
        for widget in (self._name, self.number, unit, self.level):
            layout.addWidget(widget)

    def _make_number(self) -> NumberEntry:
        quantity = self.quantity
        key = next(key for level, key in quantity.levels.items() if key)
        number = NumberEntry(
            key, f"{quantity.name} looked at", quantity.unit, shown_in=quantity.shown_in
        )
        number.setFixedSize(44, 24)
        number.entered.connect(self._on_typed)
        number.editingFinished.connect(self._show)
        return number

    def _make_level(self) -> QToolButton:
        button = QToolButton()
        button.setFont(font(AXIS))
        button.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        button.setPopupMode(QToolButton.ToolButtonPopupMode.InstantPopup)
        button.setFixedHeight(24)
        menu = QMenu(button)
        menu.aboutToShow.connect(self._fill)
        self._actions = {level: QAction(menu) for level in self.quantity.levels}
        for level, action in self._actions.items():
            menu.addAction(action)
            action.triggered.connect(lambda _=False, level=level: self._choose(level))
        button.setMenu(menu)
        return button

    def show_choice(self, selection: Selection, looked_at: LookedAt) -> None:
        self._selection, self._choice = selection, getattr(looked_at, self.quantity.field)
        self._show()

    def _show(self) -> None:
        if self._selection is None:
            return
        self.number.set_value(self.quantity.figure(self._selection, self._choice))
        word = self._choice if isinstance(self._choice, str) else "typed"
        self.level.setText(f"{word} ▾")
        self.level.setAccessibleName(f"{self.quantity.name} level: {word}")

    def fit(self, narrow: bool) -> None:
        self._name.setText(self.quantity.short_name if narrow else self.quantity.name)
        self.level.setFixedWidth(66)

    def _fill(self) -> None:
        assert self._selection is not None
        for level, action in self._actions.items():
            value = self.quantity.figure(self._selection, level)
            text = "" if value is None else f"\t{plain_number(value)} {self.quantity.shown_in}"
            action.setText(f"{level}{text}")

    def _choose(self, level: str) -> None:
        self.chosen.emit(self.quantity.field, level)

    def _on_typed(self, value: float | None) -> None:
        if value is not None:
            self.chosen.emit(self.quantity.field, value)
