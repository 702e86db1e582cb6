"""The cautions across the head of the pages, until the user has understood them."""

from __future__ import annotations

from PySide6.QtCore import Signal
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QPushButton

from app.cautions import cautions_in_short

HEIGHT = 64


class CautionsBand(QFrame):
    """One short paragraph and one button."""

    understood = Signal()

    def __init__(self) -> None:
        super().__init__()
        self.setObjectName("band")
        self.setFixedHeight(HEIGHT)
        self.setAccessibleName("Cautions")
        text = QLabel(cautions_in_short(), wordWrap=True)
        self.button = QPushButton("&Understood")
        self.button.clicked.connect(self.understood)
        layout = QHBoxLayout(self)
        layout.setContentsMargins(12, 4, 12, 4)
        layout.setSpacing(24)
        layout.addWidget(text, 1)
        layout.addWidget(self.button)
