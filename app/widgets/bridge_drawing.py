"""The bridge: link, legs with their positions, load; the current's path at the cursor by weight.

A click on a position, or its digit, looks at it.
"""

from __future__ import annotations

from PySide6.QtCore import QEvent, QPointF, QRectF, QSize, Qt, Signal
from PySide6.QtGui import (
    QAccessible,
    QColor,
    QFocusEvent,
    QHelpEvent,
    QKeyEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
)
from PySide6.QtWidgets import QSizePolicy, QToolTip, QWidget

from app.picture import Picture
from app.position_verdicts import NONE, PositionVerdicts, position_verdicts
from app.theme import AXIS, TABLE, font, line_pen, theme, theme_signals
from app.verdict_sentence import rounded
from app.widgets.bridge_plan import NO_CURRENTS, REACH, BridgePlan, Currents, currents_at
from app.widgets.cursor import AngleCursor
from app.widgets.device_symbols import (
    HALF,
    SwitchKind,
    draw_arrow,
    draw_branch,
    draw_diode,
    draw_lines,
    draw_switch,
)
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from engine.bridge import LEG_OF_POSITION, LOWER_OF_LEG, PHASES, POSITIONS, UPPER, UPPER_OF_LEG
from engine.ratings import Igbt

IDLE, LIGHTEST, HEAVIEST = 1.0, 2.0, 4.0
"""Weight of a line without current, with the least, and with the highest of the period, in px."""
TALLEST = 340
TO_LEG = {Qt.Key.Key_Left: -1, Qt.Key.Key_Right: 1}
MIDDLE = Qt.AlignmentFlag.AlignCenter


class BridgeDrawing(QWidget):
    """Shows a picture's bridge at the cursor."""

    position_asked = Signal(int)
    """Index into `POSITIONS`."""

    def __init__(self, angle_cursor: AngleCursor) -> None:
        super().__init__()
        self._angle_cursor = angle_cursor
        self._picture: Picture | None = None
        self._verdicts: PositionVerdicts = NONE
        self._stale = False
        self._currents = NO_CURRENTS
        self.setAccessibleName("Bridge")
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setMinimumSize(200, 190)
        angle_cursor.moved.connect(self._on_cursor)
        theme_signals.changed.connect(self.update)

    # What is shown ----------------------------------------------------------------------

    @property
    def position(self) -> int:
        """The position looked at."""
        return self._picture.looked_at.position if self._picture else 0

    @property
    def currents(self) -> Currents:
        return self._currents

    def show_picture(self, picture: Picture) -> None:
        self._picture, self._stale = picture, False
        self._verdicts = position_verdicts(picture)
        self._on_cursor()

    def show_stale(self) -> None:
        """The drawing stays, in the stale colour and without marks."""
        self._stale, self._verdicts = True, NONE
        self.update()

    def show_incomplete(self) -> None:
        self._picture, self._verdicts, self._stale = None, NONE, False
        self._on_cursor()

    def _on_cursor(self) -> None:
        self._currents = (
            currents_at(self._picture.waveforms, self._angle_cursor.angle_deg)
            if self._picture
            else NO_CURRENTS
        )
        if QAccessible.isActive():
            self.setAccessibleDescription(self.in_words())
        self.update()

    def in_words(self) -> str:
        """What conducts at the cursor, then each position with its verdict."""
        if self._picture is None:
            return ""
        flowing = [
            f"{name} {rounded(current, 'A')}"
            for name, current in zip(
                _DEVICES, (*self._currents.switch, *self._currents.diode), strict=True
            )
            if self._currents.part(current)
        ]
        verdicts = [
            f"{name} {verdict}"
            for name, verdict in zip(POSITIONS, self._verdicts, strict=True)
            if verdict
        ]
        looked_at = f"{POSITIONS[self.position]} looked at"
        stale = ["stale"] if self._stale else []
        return "\n".join([*stale, looked_at, ", ".join(flowing) or "no current", *verdicts])

    def sizeHint(self) -> QSize:
        return QSize(296, 300)

    @property
    def plan(self) -> BridgePlan:
        return BridgePlan(float(self.width()), float(min(self.height(), TALLEST)))

    @property
    def _offset(self) -> int:
        """From the top of the widget to the drawing."""
        return max(0, self.height() - TALLEST) // 2

    # Painting ---------------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        plan = self.plan
        painter.translate(0, self._offset)
        self._paint_rails(painter, plan)
        for leg in range(3):
            self._paint_leg(painter, plan, leg)
        self._paint_load(painter, plan)
        for position in range(6):
            self._paint_label(painter, plan, position)

    def _pen(self, painter: QPainter, current_A: float = 0.0) -> None:
        """The weight of a line that carries this current."""
        part = self._currents.part(current_A)
        look = theme()
        colour = look.stale if self._stale else look.ink if part else look.field_edge
        weight = LIGHTEST + part * (HEAVIEST - LIGHTEST) if part else IDLE
        pen = line_pen(colour, weight)
        pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
        pen.setCapStyle(Qt.PenCapStyle.RoundCap if part else Qt.PenCapStyle.FlatCap)
        painter.setPen(pen)

    def _words(self, painter: QPainter, room: QRectF, text: str, colour: QColor) -> None:
        painter.setPen(theme().stale if self._stale else colour)
        painter.drawText(room, MIDDLE, text)

    def _paint_rails(self, painter: QPainter, plan: BridgePlan) -> None:
        xs = (plan.link_x, plan.leg_x(0), plan.leg_x(1), plan.leg_x(2))
        for leg in range(3):
            for y, current in (
                (plan.top, self._currents.upper_rail(leg)),
                (plan.bottom, self._currents.lower_rail(leg)),
            ):
                self._pen(painter, current)
                draw_lines(painter, (xs[leg], y), (xs[leg + 1], y))
        self._paint_link(painter, plan)

    def _paint_link(self, painter: QPainter, plan: BridgePlan) -> None:
        """Terminals of the link with its voltage between them."""
        look = theme()
        painter.setFont(font(AXIS))
        for y, sign, beside in ((plan.top, "+", 12.0), (plan.bottom, "−", -12.0)):
            self._pen(painter)
            painter.setBrush(look.ground)
            painter.drawEllipse(QPointF(plan.link_x, y), 3.0, 3.0)
            painter.setBrush(Qt.BrushStyle.NoBrush)
            room = QRectF(plan.link_x - 8.0, y + beside - 8.0, 16.0, 16.0)
            self._words(painter, room, sign, look.second_ink)
        if self._picture is not None:
            painter.save()
            painter.translate(plan.link_x, plan.middle)
            painter.rotate(-90.0)
            text = rounded(self._picture.corner.voltage_V, "V")
            self._words(painter, QRectF(-60.0, -8.0, 120.0, 16.0), text, look.ink)
            painter.restore()

    def _paint_leg(self, painter: QPainter, plan: BridgePlan, leg: int) -> None:
        upper, lower = UPPER_OF_LEG[leg], LOWER_OF_LEG[leg]
        self._paint_position(painter, plan, upper, plan.top, plan.phase_y(leg))
        self._paint_position(painter, plan, lower, plan.phase_y(leg), plan.bottom)
        x, y = plan.leg_x(leg), plan.phase_y(leg)
        self._pen(painter, self._currents.line[leg])
        bend = plan.load_x - 1.5
        draw_lines(
            painter,
            (x, y),
            (bend, y),
            (bend, plan.terminal_y(leg)),
            (plan.load_x + 4.0, plan.terminal_y(leg)),
        )
        self._paint_dot(painter, x, y)

    def _paint_dot(self, painter: QPainter, x: float, y: float) -> None:
        """A junction; lines that only cross have none."""
        look = theme()
        painter.setBrush(look.stale if self._stale else look.ink)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.drawEllipse(QPointF(x, y), 2.5, 2.5)
        painter.setBrush(Qt.BrushStyle.NoBrush)

    def _paint_position(
        self, painter: QPainter, plan: BridgePlan, position: int, top: float, bottom: float
    ) -> None:
        """From rail to phase or from phase to rail: switch and diode beside each other."""
        centre = plan.centre(position)
        x, y, diode_x = centre.x(), centre.y(), plan.diode_x(LEG_OF_POSITION[position])
        self._pen(painter, self._currents.through(position))
        draw_lines(painter, (x, top), (x, y - REACH))
        draw_lines(painter, (x, y + REACH), (x, bottom))
        self._pen(painter, self._currents.switch[position])
        draw_lines(painter, (x, y - REACH), (x, y - HALF))
        draw_lines(painter, (x, y + HALF), (x, y + REACH))
        draw_switch(painter, self._switch_kind(), x, y)
        if self._picture is None or self._picture.duty.feedback_diodes:
            self._pen(painter, self._currents.diode[position])
            draw_lines(painter, (x, y - REACH), (diode_x, y - REACH), (diode_x, y - HALF))
            draw_lines(painter, (x, y + REACH), (diode_x, y + REACH), (diode_x, y + HALF))
            draw_diode(painter, diode_x, y)

    def _switch_kind(self) -> SwitchKind:
        if self._picture is None:
            return "contact"
        selection = self._picture.selection
        chosen = next((c for c in selection.candidates if c.name == selection.chosen), None)
        if chosen is None:
            return "contact"
        return "igbt" if isinstance(chosen.switch, Igbt) else "thyristor"

    def _paint_label(self, painter: QPainter, plan: BridgePlan, position: int) -> None:
        """Name and verdict mark at the left of a switch; the one looked at is underlined."""
        look, room = theme(), plan.room(position)
        at, centre = position == self.position, plan.centre(position)
        painter.setFont(font(AXIS if plan.is_narrow else TABLE, bold=at))
        name = QRectF(room.left(), room.top() + 2.0, 16.0 if plan.is_narrow else 22.0, 16.0)
        self._words(painter, name, POSITIONS[position], look.ink if at else look.second_ink)
        if at:
            painter.setPen(line_pen(look.accent, 2.0 if self.hasFocus() else 1.0))
            draw_lines(painter, (name.left() + 2, name.bottom()), (name.right() - 2, name.bottom()))
        indent = 0.0 if plan.is_narrow else 3.0
        mark = QRectF(room.left() + indent, room.top() + 20.0, SIZE, SIZE)
        draw_verdict_mark(painter, mark, self._verdicts[position])
        painter.setFont(font(AXIS))
        above = QRectF(
            plan.diode_x(LEG_OF_POSITION[position]) - 9.0, centre.y() - REACH - 13.0, 18.0, 12.0
        )
        self._words(painter, above, f"D{position + 1}", look.second_ink)

    def _paint_load(self, painter: QPainter, plan: BridgePlan) -> None:
        for leg in range(3):
            self._paint_terminal(painter, plan, leg)
        if self._picture is not None and self._picture.duty.connection == "delta":
            self._paint_delta(painter, plan)
        else:
            self._paint_star(painter, plan)

    def _paint_terminal(self, painter: QPainter, plan: BridgePlan, leg: int) -> None:
        """The phase's letter, and an arrow where its current goes."""
        y, current = plan.terminal_y(leg), self._currents.line[leg]
        painter.setFont(font(TABLE, bold=True))
        letter = QRectF(plan.load_x, y - 19.0, 14.0, 16.0)
        self._words(painter, letter, PHASES[leg], theme().phase[leg])
        if self._currents.part(current):
            painter.setPen(line_pen(theme().stale if self._stale else theme().ink, 1.5))
            tip = plan.load_x + (10.0 if current > 0.0 else 4.0)
            draw_arrow(painter, QPointF(tip, y + 8.0), current > 0.0)

    def _branch(self, painter: QPainter, branch: int, start: QPointF, end: QPointF) -> None:
        duty = self._picture.duty if self._picture else None
        self._pen(painter, self._currents.branch[branch])
        draw_branch(
            painter,
            start,
            end,
            resistor=duty is None or duty.resistance_ohm[branch] > 0.0,
            coil=duty is None or duty.inductance_H[branch] > 0.0,
        )

    def _paint_star(self, painter: QPainter, plan: BridgePlan) -> None:
        end = plan.width - 10.5
        for leg in range(3):
            y = plan.terminal_y(leg)
            self._branch(painter, leg, QPointF(plan.load_x + 4.0, y), QPointF(end, y))
        for leg, other in ((0, 1), (2, 1)):
            self._pen(painter, self._currents.line[leg])
            draw_lines(painter, (end, plan.terminal_y(leg)), (end, plan.terminal_y(other)))
        self._paint_dot(painter, end, plan.terminal_y(1))

    def _paint_delta(self, painter: QPainter, plan: BridgePlan) -> None:
        near, far = plan.load_x + (18.5 if plan.is_narrow else 30.5), plan.width - 12.5
        ys = [plan.terminal_y(leg) for leg in range(3)]
        for leg in range(3):
            self._pen(painter, self._currents.line[leg])
            draw_lines(painter, (plan.load_x + 4.0, ys[leg]), (near, ys[leg]))
        self._branch(painter, 0, QPointF(near, ys[0]), QPointF(near, ys[1]))
        self._branch(painter, 1, QPointF(near, ys[1]), QPointF(near, ys[2]))
        self._branch(painter, 2, QPointF(far, ys[0]), QPointF(far, ys[2]))
        self._pen(painter, self._currents.branch[2])
        for y in (ys[0], ys[2]):
            draw_lines(painter, (near, y), (far, y))
        for y in ys:
            self._paint_dot(painter, near, y)

    # Keys and mouse ---------------------------------------------------------------------

    def keyPressEvent(self, event: QKeyEvent) -> None:
        key = Qt.Key(event.key())
        if Qt.Key.Key_1 <= key <= Qt.Key.Key_6:
            self.position_asked.emit(key - Qt.Key.Key_1)
        elif key in TO_LEG:
            leg = (LEG_OF_POSITION[self.position] + TO_LEG[key]) % 3
            self.position_asked.emit(_position_of(leg, UPPER[self.position]))
        elif key in (Qt.Key.Key_Up, Qt.Key.Key_Down):
            leg = LEG_OF_POSITION[self.position]
            self.position_asked.emit(_position_of(leg, key == Qt.Key.Key_Up))
        else:
            super().keyPressEvent(event)

    def _position_at(self, point: QPointF) -> int | None:
        return self.plan.position_at(point - QPointF(0.0, self._offset))

    def mousePressEvent(self, event: QMouseEvent) -> None:
        position = self._position_at(event.position())
        if position is not None and event.button() == Qt.MouseButton.LeftButton:
            self.position_asked.emit(position)

    def event(self, event: QEvent) -> bool:
        if event.type() == QEvent.Type.ToolTip and isinstance(event, QHelpEvent):
            position = self._position_at(QPointF(event.pos()))
            QToolTip.showText(event.globalPos(), self._tip(position), self)
            return True
        return super().event(event)

    def _tip(self, position: int | None) -> str:
        if position is None:
            return ""
        verdict = self._verdicts[position]
        name = POSITIONS[position]
        return f"{name}: {verdict}" if verdict else f"Look at {name}"

    def focusInEvent(self, event: QFocusEvent) -> None:
        self.update()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        self.update()


_DEVICES = (*POSITIONS, *(f"D{number}" for number in range(1, 7)))


def _position_of(leg: int, upper: bool) -> int:
    return UPPER_OF_LEG[leg] if upper else LOWER_OF_LEG[leg]
