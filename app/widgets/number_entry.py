"""A field for one number with its unit, understood while it is typed."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import astuple
from decimal import Decimal

from PySide6.QtCore import QLineF, QSize, Qt, Signal
from PySide6.QtGui import QFocusEvent, QKeyEvent, QPainter, QPaintEvent, QResizeEvent, QWheelEvent
from PySide6.QtWidgets import QLineEdit, QWidget

from app.entry_limits import Limits, field_limits, number_fault, value_fault
from app.theme import line_pen, theme
from app.widgets.restyle import restyle
from engine.quantities import QuantityFault, parse, shown

DIGITS = 6
"""Significant figures shown; the document keeps all that were typed."""
ROOM_AROUND = 10
"""Of a field's width, in px, what text cannot take."""

HOW_TO_CONFIRM = "Assumed. Type a value, or press Ctrl+Enter to confirm it."

_LEADING_NUMBER = re.compile(r"\s*([+\-−]?(?:\d+[.,]?\d*|[.,]\d+))")


class NumberEntry(QLineEdit):
    """Holds one quantity in SI; text may carry a prefix and the unit: '35u', '1,5 kV'.

    By itself it shows the unit in the text (`12 mH`), and a bare number is in `unit`. Given
    `shown_in` (`mH`, of `scale` SI units each) it shows the number alone, for a unit that
    stands beside the field, and a bare number is in that unit.

    What cannot be used is refused with a sentence; the last good value then still holds.
    """

    entered = Signal(object)
    """The new value in SI, or `None` when emptied; while typing."""
    refused = Signal(str)
    """Why the text cannot be used; '' when it can be used again."""
    fault_shown = Signal(str)
    """The sentence to show at the field, of whichever origin; '' for none."""

    def __init__(
        self,
        key: str,
        name: str,
        unit: str,
        parent: QWidget | None = None,
        *,
        shown_in: str | None = None,
        scale: float = 1.0,
        fault_of: Callable[[float], str | None] | None = None,
    ) -> None:
        super().__init__(parent)
        self.key = key
        self.moves_on = True
        """Whether Enter goes to the next field."""
        self._unit, self._shown_in, self._scale = unit, shown_in, scale
        self._fault_of = fault_of or self._limit_fault
        self._value: float | None = None
        self._assumed = False
        self._typed = False
        self._emitting = False
        self._refusal = ""
        self._fault = ""
        self.setAccessibleName(f"{name}, {shown_in or unit}" if shown_in or unit else name)
        self.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        self.setMinimumWidth(40)
        self.setAcceptDrops(False)  # a file dropped here is for the window
        self.textEdited.connect(self._on_text)
        self.returnPressed.connect(self._on_return)

    @property
    def value(self) -> float | None:
        """The last good value."""
        return self._value

    @property
    def fault(self) -> str:
        """The sentence shown at the field, '' for none."""
        return self._refusal or self._fault

    @property
    def assumed(self) -> bool:
        return self._assumed

    def set_value(self, value: float | None, assumed: bool = False) -> None:
        """Show a value of the document. Emits no `entered`; leaves alone what is being typed."""
        same = value == self._value
        if same and assumed == self._assumed and not (self._typed or self._refusal):
            return
        self._value = value
        self._set_assumed(assumed)
        if not self._emitting and not (self._typed and same):
            self.discard_typing()

    def discard_typing(self) -> None:
        """Show the last good value instead of what was typed."""
        self._typed = False
        self._show_value()
        self._set_refusal("")

    def set_fault(self, text: str | None) -> None:
        """A fault of the document at this entry; a refused text shows its own reason first."""
        self._fault = text or ""
        self._show_fault()

    def confirm(self) -> None:
        """Make the assumed value an entry."""
        if self._assumed and self._value is not None and not self._refusal:
            self._enter(self._value)

    # Understanding ----------------------------------------------------------------------

    def _on_text(self, text: str) -> None:
        self._typed = True
        if not text.strip():
            self._accept(None)
            return
        try:
            value = parse(text, self._unit, self._scale)
        except QuantityFault as fault:
            self._set_refusal(str(fault))
            return
        fault_text = self._fault_of(value)
        if fault_text:
            self._set_refusal(fault_text)
        else:
            self._accept(value)

    def _limit_fault(self, value: float) -> str | None:
        """What a file would be told of this value, in the unit that the field shows."""
        if value_fault(self.key, value) is None:
            return None
        bounds = astuple(field_limits(self.key))
        shown_bounds = (None if bound is None else bound / self._scale for bound in bounds)
        return number_fault(value / self._scale, Limits(*shown_bounds))

    def _accept(self, value: float | None) -> None:
        self._set_refusal("")
        if value != self._value or (self._assumed and value is not None):
            self._enter(value)

    def _enter(self, value: float | None) -> None:
        self._value = value
        self._set_assumed(False)
        # What the document makes of it (an emptied field may become 'assumed') is shown later:
        # the text under the cursor stays.
        self._emitting = True
        self.entered.emit(value)
        self._emitting = False

    def _text_of(self, value: float | None) -> str:
        if value is None:
            return ""
        if self._shown_in is None:
            return shown(value, self._unit)
        return self._fitting(value / self._scale)

    def _fitting(self, number: float) -> str:
        """As many figures as the field has room for; all of them while it is in focus."""
        room = self.width() - ROOM_AROUND
        if self.hasFocus():
            return plain_number(number)
        metrics = self.fontMetrics()
        texts = (plain_number(number, figures) for figures in range(DIGITS, 1, -1))
        fits = (text for text in texts if metrics.horizontalAdvance(text) <= room)
        return next(fits, None) or plain_number(number, 2)

    def resizeEvent(self, event: QResizeEvent) -> None:
        super().resizeEvent(event)
        self._show_value()

    def _show_value(self) -> None:
        if not self._typed:
            self.setText(self._text_of(self._value))
            self._describe()

    # Keys -------------------------------------------------------------------------------

    def keyPressEvent(self, event: QKeyEvent) -> None:
        step = {Qt.Key.Key_Up: 1, Qt.Key.Key_Down: -1}.get(Qt.Key(event.key()))
        enter = event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter)
        if step is not None:
            tenfold = event.modifiers() & Qt.KeyboardModifier.ShiftModifier
            self._step(step * (10 if tenfold else 1))
        elif enter and event.modifiers() & Qt.KeyboardModifier.ControlModifier:
            self.confirm()
        elif event.key() == Qt.Key.Key_Escape and self._refusal:
            self.discard_typing()
        else:
            super().keyPressEvent(event)

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Steps only in the field in focus; elsewhere the page scrolls."""
        if self.hasFocus() and event.angleDelta().y():
            self._step(1 if event.angleDelta().y() > 0 else -1)
            event.accept()
        else:
            event.ignore()

    def focusInEvent(self, event: QFocusEvent) -> None:
        self._show_value()
        super().focusInEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        super().focusOutEvent(event)
        if not self._refusal:
            self.discard_typing()

    def _on_return(self) -> None:
        if self._refusal:
            return
        self.discard_typing()
        if self.moves_on:
            self.focusNextChild()

    def _step(self, steps: int) -> None:
        """Change the last digit; a step out of range is not taken."""
        found = _LEADING_NUMBER.match(self.text())
        if found is None or self.isReadOnly() or self._refusal:
            return
        number = Decimal(found[1].replace(",", ".").replace("−", "-"))
        exponent = min(int(number.as_tuple().exponent), 0)
        stepped = number + steps * Decimal(1).scaleb(exponent)
        text = f"{stepped:f}{self.text()[found.end() :]}"
        if not self._fault_of(parse(text, self._unit, self._scale)):
            self.setText(text)
            self._on_text(text)

    # Look -------------------------------------------------------------------------------

    def _set_assumed(self, assumed: bool) -> None:
        if assumed != self._assumed:
            self._assumed = assumed
            restyle(self, "assumed", assumed)
            self._describe()

    def _set_refusal(self, text: str) -> None:
        if text != self._refusal:
            self._refusal = text
            self.refused.emit(text)
            self._show_fault()

    def _show_fault(self) -> None:
        restyle(self, "fault", bool(self.fault))
        self._describe()
        self.fault_shown.emit(self.fault)

    def _describe(self) -> None:
        text = self.fault or (HOW_TO_CONFIRM if self._assumed else "")
        self.setAccessibleDescription(text)
        self.setToolTip(text or self._left_out())

    def _left_out(self) -> str:
        """The whole number where the field has no room for it."""
        if self._value is None or self._shown_in is None:
            return ""
        whole = plain_number(self._value / self._scale)
        return "" if self._typed or self.text() == whole else f"{whole} {self._shown_in}".strip()

    def paintEvent(self, event: QPaintEvent) -> None:
        super().paintEvent(event)
        if self._assumed and not self.fault:
            width = self.fontMetrics().horizontalAdvance(self.text())
            right = self.width() - 6
            underline_assumed(QPainter(self), right - width, right, self.height() // 2 + 8)

    def sizeHint(self) -> QSize:
        return QSize(64, 24)


def underline_assumed(painter: QPainter, left: int, right: int, y: int) -> None:
    """The dotted line below a value that nobody has confirmed."""
    painter.setPen(line_pen(theme().second_ink, 1.0, (1.0, 2.0)))
    painter.drawLine(QLineF(left, y, right, y))


def plain_number(value: float, figures: int = DIGITS) -> str:
    """The number in some significant figures, without an exponent where it is readable.

    Figures before the decimal point are never rounded away.
    """
    whole = len(f"{abs(value):.0f}")
    text = f"{value:.{max(figures, min(whole, 12))}g}"
    if "e" in text and 1e-9 <= abs(value) < 1e12:
        text = f"{Decimal(text):f}"
    return text
