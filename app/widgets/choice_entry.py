"""A field that holds one of a few words."""

from __future__ import annotations

from collections.abc import Mapping

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QKeyEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QButtonGroup, QHBoxLayout, QPushButton, QSizePolicy, QWidget

from app.widgets.number_entry import HOW_TO_CONFIRM, underline_assumed
from app.widgets.restyle import restyle

YES_NO: Mapping[object, str] = {True: "yes", False: "no"}


class ChoiceEntry(QWidget):
    """Words side by side, one of them chosen; the arrow keys go through them.

    `choices` maps each value of the document to its word. Ctrl+Enter, or a click on the word
    that is chosen already, confirms an assumed choice.
    """

    entered = Signal(object)

    def __init__(
        self, key: str, name: str, choices: Mapping[object, str], parent: QWidget | None = None
    ) -> None:
        super().__init__(parent)
        self.key = key
        self.fault = ""
        self._value: object = None
        self._assumed = False
        self.setAccessibleName(name)
        self.setFixedHeight(24)
        self._group = QButtonGroup(self)
        layout = QHBoxLayout(self)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.setSpacing(0)
        self._words = {value: ChoiceWord(name, word) for value, word in choices.items()}
        for value, word in self._words.items():
            self._group.addButton(word)
            layout.addWidget(word)
            word.clicked.connect(lambda _=False, value=value: self._enter(value))
        self._let_focus_in()

    @property
    def value(self) -> object:
        return self._value

    @property
    def assumed(self) -> bool:
        return self._assumed

    def set_value(self, value: object, assumed: bool = False) -> None:
        """Show a value of the document, or none; does not emit."""
        self._value, self._assumed = value, assumed
        self._group.setExclusive(False)
        for each, word in self._words.items():
            word.setChecked(value is not None and each == value)
            word.set_assumed(assumed and each == value)
        self._group.setExclusive(True)
        self._let_focus_in()

    def set_fault(self, text: str | None) -> None:
        self.fault = text or ""
        for word in self._words.values():
            word.setToolTip(self.fault)
            restyle(word, "fault", bool(text))

    def confirm(self) -> None:
        """Make the assumed choice an entry."""
        if self._assumed:
            self._enter(self._value)

    def _enter(self, value: object) -> None:
        if value != self._value or self._assumed:
            self.set_value(value)
            self.entered.emit(value)

    def _let_focus_in(self) -> None:
        """Tab stops once: at the chosen word, else at the first."""
        chosen = self._group.checkedButton() or next(iter(self._words.values()))
        for word in self._words.values():
            stops = word is chosen
            word.setFocusPolicy(Qt.FocusPolicy.StrongFocus if stops else Qt.FocusPolicy.ClickFocus)
        self.setFocusProxy(chosen)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        keys = {Qt.Key.Key_Left: -1, Qt.Key.Key_Up: -1, Qt.Key.Key_Right: 1, Qt.Key.Key_Down: 1}
        step = keys.get(Qt.Key(event.key()))
        if step is not None:
            self._move(step)
        elif event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            if event.modifiers() & Qt.KeyboardModifier.ControlModifier:
                self.confirm()
            else:
                self.focusNextChild()
        else:
            super().keyPressEvent(event)

    def _move(self, step: int) -> None:
        values = list(self._words)
        here = values.index(self._value) if self._value in values else -step
        there = min(max(here + step, 0), len(values) - 1)
        self._words[values[there]].setFocus(Qt.FocusReason.TabFocusReason)
        self._enter(values[there])


class ChoiceWord(QPushButton):
    """One of the words; the keys that change the choice are its parent's."""

    def __init__(self, name: str, word: str) -> None:
        super().__init__(word)
        self._assumed = False
        self.setCheckable(True)
        self.setProperty("choice", True)
        self.setAccessibleName(f"{name}: {word}")
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setMinimumWidth(self.fontMetrics().horizontalAdvance(word) + 8)

    def set_assumed(self, assumed: bool) -> None:
        self._assumed = assumed
        restyle(self, "assumed", assumed)
        self.setToolTip(HOW_TO_CONFIRM if assumed else "")
        self.update()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() == Qt.Key.Key_Space:
            super().keyPressEvent(event)
        else:
            event.ignore()

    def paintEvent(self, event: QPaintEvent) -> None:
        super().paintEvent(event)
        if self._assumed:
            half = self.fontMetrics().horizontalAdvance(self.text()) // 2
            middle = self.width() // 2
            painter = QPainter(self)
            underline_assumed(painter, middle - half, middle + half, self.height() // 2 + 8)
