"""At the verdict line's right end: that something computes, and how to leave it."""

from __future__ import annotations

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QKeySequence, QShortcut
from PySide6.QtWidgets import QHBoxLayout, QProgressBar, QPushButton, QSizePolicy, QWidget


class ProgressEnd(QWidget):
    """Hidden while nothing computes; Esc cancels while it is in view."""

    cancelled = Signal()

    def __init__(self) -> None:
        super().__init__()
        bar = QProgressBar(minimum=0, maximum=0, textVisible=False)
        bar.setFixedSize(96, 8)
        bar.setAccessibleName("Computing")
        button = QPushButton("Cancel (Esc)", flat=True)
        button.clicked.connect(self.cancelled)
        layout = QHBoxLayout(self)
        layout.setContentsMargins(8, 0, 8, 0)
        layout.setSpacing(8)
        layout.addWidget(bar)
        layout.addWidget(button)
        self._escape = QShortcut(QKeySequence(Qt.Key.Key_Escape), self)
        self._escape.activated.connect(self.cancelled)
        self.setSizePolicy(QSizePolicy.Policy.Fixed, QSizePolicy.Policy.Fixed)
        self.show_progress(False)

    def show_progress(self, computing: bool) -> None:
        self.setVisible(computing)
        self._escape.setEnabled(computing)
