"""All six positions: how each turns off, and how much time it has."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QHeaderView

from app.theme import theme
from app.verdict_sentence import rounded
from app.widgets.plain_table import PlainTable
from engine.stress import PositionStress

HEADS = (
    "",
    "turn-off",
    "gate-off\ncurrent",
    "dead\ninterval",
    "freewheel",
    "overrun",
    "forward\nafter",
    "step",
    "pulse\nneeded",
    "margin",
)
TIPS = (
    "",
    "forced: current stands at gate-off; natural: it has ended before",
    "",
    "from gate-off to the gate-on of the other switch of the leg",
    "how long the opposite diode carries the current after gate-off",
    "the part of the freewheel that outlasts the dead interval",
    "from the current's zero until forward voltage stands on the switch",
    "forward voltage that stands on the switch at once",
    "from gate-on until the current has passed I_L of the chosen candidate",
    "dead interval, or time until forward voltage, less what the chosen candidate needs",
)
ROW_HEIGHT, HEAD_HEIGHT = 24, 40
TIP_ROLE = Qt.ItemDataRole.ToolTipRole


@dataclass(frozen=True, slots=True)
class PositionRow:
    """One position, and what belongs to the chosen candidate."""

    stress: PositionStress
    pulse_needed_s: float | None
    margin_s: float | None

    def texts(self) -> tuple[str, ...]:
        stress = self.stress
        return (
            stress.position,
            stress.turn_off,
            rounded(stress.switch.gate_off_current_A, "A"),
            rounded(stress.dead_interval_s, "s"),
            rounded(stress.freewheel_s, "s"),
            rounded(stress.overrun_s, "s"),
            _figure(stress.forward_reapplied_s, "s"),
            _figure(stress.reapplied_step_V, "V"),
            _figure(self.pulse_needed_s, "s"),
            _figure(self.margin_s, "s"),
        )


class TurnOffTable(PlainTable):
    """A row a position; choosing one looks at it."""

    position_asked = Signal(int)

    def __init__(self) -> None:
        figures = range(2, len(HEADS))
        super().__init__("Turn-off of the six positions", HEADS, figures, ROW_HEIGHT)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.setVerticalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        head = self.horizontalHeader()
        head.setSectionResizeMode(QHeaderView.ResizeMode.Stretch)
        head.setSectionResizeMode(0, QHeaderView.ResizeMode.ResizeToContents)
        head.setFixedHeight(HEAD_HEIGHT)
        for column, tip in enumerate(TIPS):
            self.model().setHeaderData(column, Qt.Orientation.Horizontal, tip, TIP_ROLE)
        self.setFixedHeight(HEAD_HEIGHT + 6 * ROW_HEIGHT + 2)
        self.cellClicked.connect(lambda row, _: self.position_asked.emit(row))
        self.cellActivated.connect(lambda row, _: self.position_asked.emit(row))

    def show_rows(self, rows: Sequence[PositionRow], position: int) -> None:
        self.fill([row.texts() for row in rows])
        self.mark_bold(position)
        for number, row in enumerate(rows):
            if row.margin_s is not None and row.margin_s < 0.0:
                self.colour(number, len(HEADS) - 1, theme().verdict["undersized"])


def _figure(value: float | None, unit: str) -> str:
    return "–" if value is None else rounded(value, unit)
