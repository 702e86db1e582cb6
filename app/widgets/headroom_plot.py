"""All headrooms of all candidates on one scale, the worst row first, a number a candidate."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtCore import QEvent, QPointF, QRectF, QSize, Qt, Signal
from PySide6.QtGui import QColor, QHelpEvent, QMouseEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QSizePolicy, QToolTip, QWidget

from app.theme import AXIS, TABLE, font, limit_pen, theme
from app.verdict_sentence import sentence_of
from app.widgets.sheet_delegate import LEFT, MIDDLE, RIGHT, headroom_text
from app.widgets.sheet_rows import severity
from engine.checks import CandidateResult, Check

HEAD = 44
ROW = 20
LABELS = 108
RANGE_PCT = (-50.0, 100.0)
"""What lies beyond stands at the edge, with an arrow."""
TICKS_PCT, FEW_TICKS_PCT = (-50, 0, 50, 100), (0, 100)
MARK = 15.0
"""Width of a numbered mark; those that would lie on each other stand side by side."""
NUMBERED = 4
"""With more candidates than these only the chosen and the current one keep their numbers."""
TICK = 3.0


Mark = tuple[int, Check, QRectF]
"""Candidate, check, and the room of its mark."""

_SECOND_ROWS = {"tq_commutation": "circuit", "turn_off_current": "off"}
"""What tells two rows of one rating apart."""


@dataclass(frozen=True, slots=True)
class HeadroomRow:
    """One rating: the candidates' checks of it, `None` where a candidate has no headroom there."""

    id: str
    label: str
    checks: tuple[Check | None, ...]

    @property
    def worst(self) -> tuple[float, float]:
        return min(severity(check) for check in self.checks if check is not None)


def headroom_rows(results: Sequence[CandidateResult]) -> list[HeadroomRow]:
    """The rows that were assessed for at least one candidate, the worst first."""
    by_id: dict[str, list[Check | None]] = {}
    for column, result in enumerate(results):
        for check in result.checks:
            if check.verdict != "not assessed":
                by_id.setdefault(check.id, [None] * len(results))[column] = check
    rows = [HeadroomRow(id, _label(checks), tuple(checks)) for id, checks in by_id.items()]
    return sorted(rows, key=lambda row: row.worst)


def _label(checks: Sequence[Check | None]) -> str:
    check = next(each for each in checks if each is not None)
    device, _, stem = check.id.partition(".")
    more = [word for word in (_SECOND_ROWS.get(stem), "D" if device == "diode" else "") if word]
    return " ".join([check.rating, *more])


class HeadroomPlot(QWidget):
    """Zero is the limit; left of it a rating does not do. A click goes to the rating."""

    asked = Signal(int, str)
    """Candidate and check id."""

    def __init__(self) -> None:
        super().__init__()
        self._results: tuple[CandidateResult, ...] = ()
        self._rows: list[HeadroomRow] = []
        self._chosen = ""
        self._tight_pct = 0.0
        self._current = -1
        self._stale = False
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.setAccessibleName("Headroom of every rating")

    def show_results(
        self, results: Sequence[CandidateResult], chosen: str, tight_pct: float
    ) -> None:
        """The chosen candidate's marks are filled; headroom under `tight_pct` is shaded."""
        self._results, self._chosen = tuple(results), chosen
        self._tight_pct, self._stale = tight_pct, False
        self._rows = headroom_rows(results)
        self.setFixedHeight(HEAD + ROW * len(self._rows) + 8)
        self.setAccessibleDescription(self.in_words())
        self.update()

    def set_current(self, column: int) -> None:
        """The candidate whose sheet is in use."""
        self._current = column
        self.update()

    def show_stale(self) -> None:
        self._stale = True
        self.update()

    def in_words(self) -> str:
        """A line a rating, as the plot shows them."""
        return "\n".join(f"{row.label}: {self._row_in_words(row)}" for row in self._rows)

    def _row_in_words(self, row: HeadroomRow) -> str:
        return ", ".join(
            f"{result.name} {_figure(check)} {check.verdict}"
            for result, check in zip(self._results, row.checks, strict=True)
            if check is not None
        )

    def sizeHint(self) -> QSize:
        return QSize(320, self.height())

    # Places -----------------------------------------------------------------------------

    def _x(self, headroom_pct: float) -> float:
        low, high = RANGE_PCT
        left, right = LABELS + MARK, self.width() - 8 - MARK
        inside = min(max(headroom_pct, low), high)
        return left + (inside - low) / (high - low) * (right - left)

    def _marks(self, number: int) -> list[Mark]:
        """The marks of a row; numbered ones last, none on another."""
        checks = [(i, c) for i, c in enumerate(self._rows[number].checks) if c is not None]
        checks.sort(key=lambda each: _position(each[1]))
        top = HEAD + ROW * number + (ROW - MARK) / 2
        ticks: list[Mark] = []
        placed: list[Mark] = []
        for column, check in checks:
            centre = self._x(_position(check))
            if self._is_numbered(column):
                left = max(centre - MARK / 2, placed[-1][2].right() + 1 if placed else 0.0)
                placed.append((column, check, QRectF(left, top, MARK, MARK)))
            else:
                ticks.append((column, check, QRectF(centre - TICK / 2, top, TICK, MARK)))
        return [*ticks, *_pushed_back(placed, self.width() - 4)]

    def _is_numbered(self, column: int) -> bool:
        chosen = self._results[column].name == self._chosen
        return len(self._results) <= NUMBERED or chosen or column == self._current

    def _mark_at(self, point: QPointF) -> tuple[int, Check] | None:
        number = int((point.y() - HEAD) // ROW)
        if 0 <= number < len(self._rows):
            for column, check, room in reversed(self._marks(number)):
                if room.adjusted(-2, 0, 2, 0).contains(point):
                    return column, check
        return None

    # Painting ---------------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        self._axis(painter)
        for number, row in enumerate(self._rows):
            self._row(painter, number, row)

    def _axis(self, painter: QPainter) -> None:
        look, bottom = theme(), HEAD + ROW * len(self._rows)
        title = f"Headroom %, worst first{', stale' if self._stale else ''}"
        painter.setFont(font(TABLE, bold=True))
        painter.setPen(look.ink)
        painter.drawText(QRectF(8, 0, self.width() - 16, 22), LEFT | MIDDLE, title)
        if not self._rows:
            return
        tight = QRectF(self._x(0), HEAD, self._x(self._tight_pct) - self._x(0), bottom - HEAD)
        painter.fillRect(tight, look.shade)
        painter.setFont(font(AXIS))
        for tick in TICKS_PCT if self.width() > 260 else FEW_TICKS_PCT:
            painter.setPen(look.second_ink)
            room = QRectF(self._x(tick) - 24, 22, 48, HEAD - 24)
            painter.drawText(room, Qt.AlignmentFlag.AlignCenter, str(tick).replace("-", "−"))
            painter.setPen(limit_pen() if tick == 0 else look.rule)
            painter.drawLine(QPointF(self._x(tick), HEAD), QPointF(self._x(tick), bottom))

    def _row(self, painter: QPainter, number: int, row: HeadroomRow) -> None:
        look, top = theme(), HEAD + ROW * number
        painter.setFont(font(AXIS))
        painter.setPen(look.stale if self._stale else look.ink)
        painter.drawText(QRectF(8, top, LABELS - 12, ROW), RIGHT | MIDDLE, row.label)
        for column, check, room in self._marks(number):
            colour = look.stale if self._stale else look.verdict[check.verdict]
            if self._is_numbered(column):
                self._numbered(painter, column, check, room, colour)
            else:
                painter.fillRect(room, colour)

    def _numbered(
        self, painter: QPainter, column: int, check: Check, room: QRectF, colour: QColor
    ) -> None:
        look = theme()
        chosen = self._results[column].name == self._chosen
        painter.fillRect(room, colour if chosen else look.panel)
        painter.setPen(colour)
        painter.drawRect(room.adjusted(0.5, 0.5, -0.5, -0.5))
        self._arrow(painter, check, room)
        painter.setPen(look.panel if chosen else colour)
        painter.drawText(room, Qt.AlignmentFlag.AlignCenter, str(column + 1))

    def _arrow(self, painter: QPainter, check: Check, room: QRectF) -> None:
        if _position(check) < RANGE_PCT[0]:
            beside = QRectF(room.left() - 12, room.top(), 11, room.height())
            painter.drawText(beside, Qt.AlignmentFlag.AlignCenter, "◂")

    # Pointing ---------------------------------------------------------------------------

    def event(self, event: QEvent) -> bool:
        if event.type() == QEvent.Type.ToolTip and isinstance(event, QHelpEvent):
            found = self._mark_at(QPointF(event.pos()))
            text = f"{self._results[found[0]].name}: {sentence_of(found[1])}" if found else ""
            QToolTip.showText(event.globalPos(), text, self)
            return True
        return super().event(event)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        found = self._mark_at(event.position())
        if found is not None:
            self.asked.emit(found[0], found[1].id)


def _position(check: Check) -> float:
    """Where a mark stands; a row that fails without a headroom stands left of all."""
    return float("-inf") if check.headroom_pct is None else check.headroom_pct


def _figure(check: Check) -> str:
    return f"{headroom_text(check.headroom_pct)} %" if check.headroom_pct is not None else "–"


def _pushed_back(placed: list[Mark], right: float) -> list[Mark]:
    """Moves marks left from the right edge on, as far as they need."""
    moved = []
    for column, check, room in reversed(placed):
        room = room.translated(min(0.0, right - room.right()), 0)
        right = room.left() - 1
        moved.append((column, check, room))
    return moved[::-1]
