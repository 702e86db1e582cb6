"""All six positions at the looked-at point, and the events of the period."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QHeaderView

from app.theme import AXIS
from app.widgets.plain_table import PlainTable
from engine.bridge import POSITIONS
from engine.stress import BridgeStress, DiodeStress, PositionStress, SwitchingEvent, SwitchStress

ROW_HEIGHT, HEAD_HEIGHT = 18, 20
NAME_WIDTH = 40
EVENT_WIDTHS = {0: 46, 1: 25, 3: 47, 4: 46}
DENSE = (
    "QTableView { background: transparent; } QTableView::item { padding: 0 1px; }"
    f"QHeaderView::section {{ padding: 0; font-size: {AXIS}px; }}"
)
POSITION_HEADS = ("", "avg A", "rms A", "peak A", "block V")
EVENT_HEADS = ("angle °", "", "change", "A", "V")
Row = tuple[str, ...]


def _make_dense(table: PlainTable) -> None:
    """Rows and columns as narrow as their text lets them be."""
    table.setStyleSheet(DENSE)
    table.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
    table.verticalHeader().setMinimumSectionSize(ROW_HEIGHT)
    table.verticalHeader().setDefaultSectionSize(ROW_HEIGHT)
    table.horizontalHeader().setMinimumSectionSize(20)
    table.horizontalHeader().setFixedHeight(HEAD_HEIGHT)


class PositionTable(PlainTable):
    """Average, rms, peak and blocking voltage of T1–T6 and D1–D6; a click looks at a position."""

    position_asked = Signal(int)

    def __init__(self) -> None:
        super().__init__("All positions", POSITION_HEADS, range(1, 5), ROW_HEIGHT)
        _make_dense(self)
        head = self.horizontalHeader()
        head.setSectionResizeMode(QHeaderView.ResizeMode.Stretch)
        head.setSectionResizeMode(0, QHeaderView.ResizeMode.Fixed)
        head.resizeSection(0, NAME_WIDTH)
        self.setVerticalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self._diodes_together = False
        self._stress: BridgeStress | None = None
        self._position = 0
        self.cellClicked.connect(lambda row, _: self.position_asked.emit(row % 6))
        self.cellActivated.connect(lambda row, _: self.position_asked.emit(row % 6))

    def show_stress(self, stress: BridgeStress | None, position: int) -> None:
        """`None` empties the table."""
        self._stress, self._position = stress, position
        self.fill(self.rows())
        if stress is not None:
            self.mark_bold(position)

    def put_diodes_together(self, together: bool) -> None:
        """One row for D1–D6, their highest figures, where room is short."""
        if together != self._diodes_together:
            self._diodes_together = together
            self.show_stress(self._stress, self._position)

    @property
    def wanted_height(self) -> int:
        return HEAD_HEIGHT + (7 if self._diodes_together else 12) * ROW_HEIGHT + 4

    def rows(self) -> list[Row]:
        if self._stress is None:
            return []
        positions = self._stress.positions
        switches = [_switch_row(each) for each in positions]
        diodes = [each.diode for each in positions]
        if self._diodes_together:
            return [*switches, _row("D1–6", *map(max, zip(*map(_figures, diodes), strict=True)))]
        return [*switches, *(_row(f"D{n}", *_figures(one)) for n, one in enumerate(diodes, 1))]


def _switch_row(position: PositionStress) -> Row:
    return _row(position.position, *_figures(position.switch))


def _figures(device: SwitchStress | DiodeStress) -> tuple[float, float, float, float]:
    forward_V = device.forward_blocking_peak_V if isinstance(device, SwitchStress) else 0.0
    return (
        device.current_avg_A,
        device.current_rms_A,
        device.current_peak_A,
        max(forward_V, device.reverse_blocking_peak_V),
    )


def _row(name: str, average_A: float, rms_A: float, peak_A: float, blocks_V: float) -> Row:
    return (name, *(_in(figure) for figure in (average_A, rms_A, peak_A, blocks_V)))


def _in(value: float) -> str:
    """Three figures in the unit of the column; no figure before the point is lost."""
    if value == 0.0:
        return "0"
    places = max(0, 3 - len(f"{abs(value):.0f}"))
    return f"{value:.{places}f}"


class EventTable(PlainTable):
    """Every change of state of a device; a click moves the cursor there."""

    angle_asked = Signal(float)

    def __init__(self) -> None:
        super().__init__("Events of the period", EVENT_HEADS, (0, 3, 4), ROW_HEIGHT)
        _make_dense(self)
        head = self.horizontalHeader()
        head.setSectionResizeMode(QHeaderView.ResizeMode.Fixed)
        head.setSectionResizeMode(2, QHeaderView.ResizeMode.Stretch)
        for column, width in EVENT_WIDTHS.items():
            head.resizeSection(column, width)
        self._events: Sequence[SwitchingEvent] = ()
        self.cellClicked.connect(self._ask)
        self.cellActivated.connect(self._ask)
        self.currentCellChanged.connect(lambda row, *_: self._ask(row))

    def leave_out_voltage(self, leave_out: bool) -> None:
        """Where the column is narrow."""
        self.setColumnHidden(len(EVENT_HEADS) - 1, leave_out)

    def show_events(self, events: Iterable[SwitchingEvent]) -> None:
        self._events = ()
        self.fill([event_row(event) for event in events])
        self._events = tuple(events)

    def _ask(self, row: int, column: int = 0) -> None:
        if 0 <= row < len(self._events):
            self.angle_asked.emit(self._events[row].angle_deg)


def event_row(event: SwitchingEvent) -> Row:
    """Angle, device, what happens, current in A and voltage in V."""
    number = POSITIONS.index(event.position) + 1
    return (
        f"{event.angle_deg:.1f}",
        event.position if event.device == "switch" else f"D{number}",
        event.kind,
        _in(event.current_A),
        _in(event.voltage_V),
    )
