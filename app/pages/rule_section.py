"""The rule set: which one, and which of its figures this selection replaces."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import msgspec
from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QKeyEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QMenu, QPushButton, QToolButton, QWidget

from app.open_selection import OpenSelection
from app.pages.entry_section import EntrySection
from app.theme import AXIS, TABLE, font
from app.widgets.entry_row import EntryRow, Widths, indented, set_role
from app.widgets.number_entry import HOW_TO_CONFIRM, NumberEntry, underline_assumed
from app.widgets.restyle import restyle
from engine.duty import value_of
from engine.rule_sets import BUILT_IN, RuleSet
from engine.selection import RuleSetChange
from parts_library.rating_sheet import SHEETS, Kind

KEY = "rule_set"
NAMES = {
    "tq": "factor on t_q",
    "tq_low_reverse_voltage": "factor, few volts reverse",
    "tq_per_K": "t_q, share per K",
    "blanking": "factor on blanking",
    "transient_overshoot": "factor on link voltage",
    "junction_margin_K": "K below T_vj max",
    "junction_limit_C": "T_vj at most, °C",
    "V_steady": "V steady",
    "turn_off_current": "turn-off current",
    "didt_recovery": "di/dt at recovery",
}
HEADS = {"factors": "Factors and margins", "fractions": "Permitted fraction of"}
PARTS = {"diode": "diode", "igbt": "IGBT"}
"""Parts named behind a fraction; what is not named is the switch's."""
FRACTION_AT_MOST, FACTOR_AT_MOST, BAND_BELOW = 10.0, 100.0, 100.0


@dataclass(frozen=True, slots=True)
class Figure:
    """One figure of a rule set: where a change of it is kept, its own value and source."""

    block: str
    """'fractions', 'factors', or 'tight_band_pct', which is one number."""
    id: str
    value: float
    source: str

    @property
    def key(self) -> str:
        return f"{KEY}.{self.block}.{self.id}" if self.id else f"{KEY}.{self.block}"

    @property
    def name(self) -> str:
        if not self.id:
            return "Tight band"
        part, _, stem = self.id.rpartition(".")
        name = NAMES.get(stem) or _symbol(part, stem) or stem
        return f"{name}, {PARTS[part]}" if part in PARTS else name

    def fault(self, value: float) -> str | None:
        """Why the figure cannot be replaced by this one."""
        if self.block == "tight_band_pct":
            return None if 0.0 <= value < BAND_BELOW else f"at least 0, less than {BAND_BELOW:g}"
        most = FRACTION_AT_MOST if self.block == "fractions" else FACTOR_AT_MOST
        return None if 0.0 < value <= most else f"more than 0, at most {most:g}"


def _symbol(part: str, stem: str) -> str:
    kinds: tuple[Kind, ...] = ("diode",) if part == "diode" else ("thyristor", "igbt")
    ratings = (rating for kind in kinds for rating in SHEETS[kind])
    return next((rating.symbol for rating in ratings if stem in rating.checks), "")


def figures_of(rules: RuleSet) -> tuple[Figure, ...]:
    """Every figure of a rule set that a selection may replace."""
    return (
        Figure("tight_band_pct", "", rules.tight_band_pct, ""),
        *(Figure("factors", id, one.value, one.source) for id, one in rules.factors.items()),
        *(Figure("fractions", id, one.value, one.source) for id, one in rules.fractions.items()),
    )


def changed_figure(change: RuleSetChange, figure: Figure) -> float | None:
    """What the selection puts in the figure's place, if anything."""
    held = getattr(change, figure.block)
    value: float | None = held.get(figure.id) if isinstance(held, dict) else held
    return value


def with_figure(change: RuleSetChange, figure: Figure, value: float | None) -> RuleSetChange:
    """The change with one more figure replaced, or given back to the rule set."""
    if not figure.id:
        return msgspec.structs.replace(change, tight_band_pct=value)
    kept = {id: held for id, held in getattr(change, figure.block).items() if id != figure.id}
    if value is not None:
        kept[figure.id] = value
    return msgspec.structs.replace(change, **{figure.block: kept})


class FigureRow(EntryRow):
    """A long name, and a number below the column 'high'; or a head over such rows."""

    def __init__(self, name: str, fields: tuple[QWidget], unit: str = "") -> None:
        super().__init__(name, fields, unit)
        if not self.entries:
            set_role(self.label, "second")
            self.label.setFont(font(AXIS))

    def fit(self, widths: Widths) -> None:
        super().fit(widths)
        self.label.setFixedWidth(widths.label + widths.fields - widths.field)

    def size_field(self, field: QWidget, widths: Widths) -> None:
        field.setFixedSize(widths.field, widths.row - 4)


class RuleSetButton(QToolButton):
    """Names the rule set and opens the list of them; Ctrl+Enter confirms an assumed one."""

    confirmed = Signal()

    def __init__(self) -> None:
        super().__init__()
        self._assumed = False
        self.setProperty("choice", True)
        self.setFont(font(TABLE))
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setPopupMode(QToolButton.ToolButtonPopupMode.InstantPopup)

    def show_choice(self, name: str, assumed: bool, note: str) -> None:
        self._assumed = assumed
        self.setText(f"{name} ▾")
        self.setAccessibleName(f"Rule set: {name}")
        self.setToolTip(HOW_TO_CONFIRM if assumed else note)
        restyle(self, "assumed", assumed)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        enter = event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter)
        if enter and event.modifiers() & Qt.KeyboardModifier.ControlModifier:
            if self._assumed:
                self.confirmed.emit()
        else:
            super().keyPressEvent(event)

    def paintEvent(self, event: QPaintEvent) -> None:
        super().paintEvent(event)
        if self._assumed:
            half, middle = self.fontMetrics().horizontalAdvance(self.text()) // 2, self.width() // 2
            painter = QPainter(self)
            underline_assumed(painter, middle - half, middle + half, self.height() // 2 + 8)


class RuleSection(EntrySection):
    """The figures stand there once they are asked for, or when one of them is changed."""

    def __init__(self, document: OpenSelection) -> None:
        super().__init__(document, "Rules", ())
        self._choice = self._make_choice()
        self.add_row(EntryRow("Rule set", (self._choice,)))
        self._open = QPushButton("Change figures", flat=True)
        self._open.setCheckable(True)
        self._open.toggled.connect(self._on_open)
        self._foot = indented(self._open)
        self.add_widget(self._foot)
        self._figures: dict[Figure, EntryRow] = {}
        self._base = ""
        self._widths: Widths | None = None

    @property
    def _change(self) -> RuleSetChange:
        """The rule set as a change of a built-in one, which may be an empty change."""
        value = value_of(self.document.selection, KEY)
        return value if isinstance(value, RuleSetChange) else RuleSetChange(based_on=value)

    def _make_choice(self) -> RuleSetButton:
        button = RuleSetButton()
        menu = QMenu(button)
        for name in BUILT_IN:
            menu.addAction(name, lambda name=name: self.enter(KEY, name))
        button.setMenu(menu)
        button.confirmed.connect(lambda: self.enter(KEY, self._change.based_on))
        return button

    def refresh(self) -> None:
        change = self._change
        assumed = self.document.selection.rule_set is None
        count = _count(change)
        name = change.based_on + (f", {count} changed" if count else "")
        self._choice.show_choice(name, assumed, self._note(change.based_on))
        if change.based_on != self._base:
            self._rebuild(change.based_on)
        for figure, row in self._figures.items():
            _show_figure(row, figure, changed_figure(change, figure))
        if count:
            self._open.setChecked(True)

    def _note(self, name: str) -> str:
        return BUILT_IN[name].note if name in BUILT_IN else ""

    def _on_open(self, opened: bool) -> None:
        self._base = ""
        self.refresh()

    def _rebuild(self, base: str) -> None:
        self._base = base
        for row in self.rows[1:]:
            row.hide()
            row.deleteLater()
        del self.rows[1:]
        self._figures = {}
        self.entries = {}
        if self._open.isChecked() and base in BUILT_IN:
            self._build(figures_of(BUILT_IN[base]))

    def _build(self, figures: tuple[Figure, ...]) -> None:
        block = ""
        for figure in figures:
            if figure.block != block and figure.block in HEADS:
                self._add(FigureRow(HEADS[figure.block], (QWidget(),)))
            block = figure.block
            self._figures[figure] = self._add_figure(figure)

    def _add_figure(self, figure: Figure) -> EntryRow:
        unit = "%" if figure.block == "tight_band_pct" else ""
        number = NumberEntry(
            figure.key, f"{figure.name}, {figure.block}", unit, shown_in=unit, fault_of=figure.fault
        )
        number.entered.connect(lambda value: self._on_entered(figure, value))
        number.editingFinished.connect(self.refresh)
        self.listen(number, figure.key)
        self.entries[figure.key] = number
        row = self._add(FigureRow(figure.name, (number,), unit))
        row.label.setToolTip(figure.source)
        return row

    def _add(self, row: EntryRow) -> EntryRow:
        if self._widths is not None:
            row.fit(self._widths)
        return self.add_row(row)

    def _on_entered(self, figure: Figure, value: float | None) -> None:
        """An emptied figure goes back to the rule set's own."""
        change = with_figure(self._change, figure, None if value == figure.value else value)
        self.enter(KEY, change if _count(change) or change.note else change.based_on)

    def show_faults(self, faults: Mapping[str, str]) -> None:
        super().show_faults(faults)
        self.rows[0].show_note(faults.get(KEY, ""))

    def field_of(self, key: str) -> QWidget | None:
        return self._choice if key == KEY else super().field_of(key)

    def fit(self, widths: Widths) -> None:
        self._widths = widths
        super().fit(widths)
        self._foot.setContentsMargins(widths.left + widths.label, 0, 0, 0)


def _show_figure(row: EntryRow, figure: Figure, changed: float | None) -> None:
    (number,) = row.numbers
    number.set_value(figure.value if changed is None else changed)
    restyle(number, "inherited", changed is None)


def _count(change: RuleSetChange) -> int:
    band = change.tight_band_pct is not None
    return len(change.fractions) + len(change.factors) + band
