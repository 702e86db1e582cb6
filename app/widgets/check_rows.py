"""Verdict rows of the candidates, each with its law and the numbers put in."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QFontMetrics, QFontMetricsF, QPainter, QPaintEvent, QResizeEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.theme import AXIS, BODY, TABLE, font, theme
from app.verdict_sentence import corner_in_words, told_apart
from app.widgets.sheet_delegate import headroom_text
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from engine.checks import CandidateResult, Check

HEAD, LINE, GAP = 28, 18, 12
LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
WRAPPED = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignTop | Qt.TextFlag.TextWordWrap

NAMES = {
    "tq_dead": "dead interval against t_q",
    "tq_commutation": "commutation circuit against t_q",
    "I_L": "latching current",
    "I_H": "holding current",
    "gate_pulse": "gate pulse",
    "blanking": "dead interval against blanking",
}
"""Rows of a turn-off, in the order shown."""

COLUMNS = ((124, 330, LEFT), (330, 450, RIGHT), (450, 570, RIGHT), (570, 650, RIGHT))
"""Left edge, right edge and side of name, needed, there and headroom."""


@dataclass(frozen=True, slots=True)
class CandidateRows:
    """One candidate's rows; `note` stands beside its name."""

    name: str
    note: str
    checks: tuple[Check, ...]


def turn_off_rows(results: Sequence[CandidateResult], chosen: str) -> list[CandidateRows]:
    """The rows of turn-off of every candidate, the chosen one first."""
    ordered = sorted(results, key=lambda result: result.name != chosen)
    return [
        CandidateRows(result.name, "chosen" if result.name == chosen else "", _rows_of(result))
        for result in ordered
    ]


def _rows_of(result: CandidateResult) -> tuple[Check, ...]:
    by_stem = {check.id.removeprefix("switch."): check for check in result.checks}
    return tuple(by_stem[stem] for stem in NAMES if stem in by_stem)


class CheckRows(QWidget):
    """Two lines a row: the figures with the verdict, and below them how they come about."""

    def __init__(self) -> None:
        super().__init__()
        self._blocks: tuple[CandidateRows, ...] = ()
        self._stale = False
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.setAccessibleName("Verdict rows of turn-off")

    def show_rows(self, blocks: Sequence[CandidateRows]) -> None:
        self._blocks, self._stale = tuple(blocks), False
        self._fit()
        self.setAccessibleDescription(self.as_text())
        self.update()

    def resizeEvent(self, event: QResizeEvent) -> None:
        super().resizeEvent(event)
        self._fit()

    def _fit(self) -> None:
        rows = sum(self._row_height(check) for block in self._blocks for check in block.checks)
        self.setFixedHeight(int(rows + len(self._blocks) * (HEAD + GAP)) or 1)

    def _row_height(self, check: Check) -> float:
        return LINE + self._law_room(0.0, check).height() + 6.0

    def _law_room(self, top: float, check: Check) -> QRectF:
        """The room of the law, wrapped to the width there is."""
        left = COLUMNS[0][0]
        width = max(self.width() - left - 8, 200)
        wrapped = QFontMetricsF(font(AXIS)).boundingRect(
            QRectF(0, 0, width, 1000), WRAPPED, law_of(check)
        )
        return QRectF(left, top, width, wrapped.height())

    def show_stale(self) -> None:
        self._stale = True
        self.update()

    def as_text(self) -> str:
        """Tabbed, for a spreadsheet."""
        lines = []
        for block in self._blocks:
            lines.append(block.name)
            lines += [
                "\t".join((check.verdict, *figures_of(check), law_of(check)))
                for check in block.checks
            ]
        return "\n".join(lines)

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        top = 0.0
        for block in self._blocks:
            self._head(painter, top, block)
            top += HEAD
            for check in block.checks:
                self._row(painter, top, check)
                top += self._row_height(check)
            top += GAP

    def _head(self, painter: QPainter, top: float, block: CandidateRows) -> None:
        look = theme()
        painter.fillRect(QRectF(0, top, self.width(), HEAD - 2), look.band)
        painter.setFont(font(BODY, bold=True))
        painter.setPen(look.ink)
        painter.drawText(QRectF(8, top, 400, HEAD - 2), LEFT, block.name)
        left = 16 + QFontMetrics(painter.font()).horizontalAdvance(block.name)
        painter.setFont(font(AXIS))
        painter.setPen(look.accent)
        painter.drawText(QRectF(left, top, 100, HEAD - 2), LEFT, block.note)

    def _row(self, painter: QPainter, top: float, check: Check) -> None:
        look = theme()
        painter.setFont(font(TABLE))
        painter.setPen(look.stale if self._stale else look.ink)
        for (left, right, side), text in zip(COLUMNS, figures_of(check), strict=True):
            painter.drawText(QRectF(left, top + 2, right - left, LINE), side, text)
        if not self._stale:
            draw_verdict_mark(painter, QRectF(8, top + 4, SIZE, SIZE), check.verdict)
            painter.setPen(look.verdict[check.verdict])
            painter.drawText(QRectF(28, top + 2, 92, LINE), LEFT, check.verdict)
        self._law(painter, top + LINE + 1, check)

    def _law(self, painter: QPainter, top: float, check: Check) -> None:
        painter.setPen(theme().stale if self._stale else theme().second_ink)
        painter.setFont(font(AXIS))
        painter.drawText(self._law_room(top, check), WRAPPED, law_of(check))


def law_of(check: Check) -> str:
    """Where the row is at its worst, and how its figures come about."""
    corner = corner_in_words(check.corner) if check.corner is not None else ""
    place = ", ".join(part for part in (check.position, corner) if part)
    return ": ".join(part for part in (place, check.how or check.reason) if part)


def figures_of(check: Check) -> tuple[str, str, str, str]:
    """Name, needed or applied, there or allowed, headroom."""
    name = NAMES.get(check.id.removeprefix("switch."), check.rating)
    if check.applied is None or check.allowed is None:
        return name, "", "", ""
    applied, allowed = told_apart(check.applied, check.allowed, check.unit)
    words = ("needed", "there") if check.at_least else ("applied", "allowed")
    headroom = f"{headroom_text(check.headroom_pct)} %" if check.headroom_pct is not None else ""
    return name, f"{applied} {words[0]}", f"{allowed} {words[1]}", headroom
