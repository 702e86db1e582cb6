"""The left column of the Duty page: every entry of the duty, and nothing but entries."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QFrame, QLineEdit, QScrollArea, QVBoxLayout, QWidget

from app.open_selection import OpenSelection
from app.pages.cycle_section import CycleSection
from app.pages.duty_fields import AMBIENT, LOOP, SERVES, SINK, VOLTAGE
from app.pages.entry_section import EntrySection
from app.pages.gating_section import GatingSection
from app.pages.load_section import LoadSection
from app.pages.rule_section import RuleSection
from app.picture import Problem
from app.widgets.entry_row import NARROW, WIDE
from app.widgets.window_width import WindowWidth

SECTIONS: tuple[Callable[[OpenSelection], EntrySection], ...]


class DutyEntries(QScrollArea):
    """Writes every entry to the document while it is made, and follows the document."""

    def __init__(self, document: OpenSelection) -> None:
        super().__init__()
        self.setAccessibleName("Entries of the duty")
        self.setFrameShape(QFrame.Shape.NoFrame)
        self.setWidgetResizable(True)
        self.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.sections = tuple(make(document) for make in SECTIONS)
        self.setWidget(self._column())
        WindowWidth(self, self._fit)
        document.opened.connect(self._forget)
        document.changed.connect(self.refresh)
        self.refresh()
        self._fit(narrow=False)

    def refresh(self) -> None:
        """Show the document as it is now."""
        for section in self.sections:
            section.refresh()

    def show_problems(self, problems: tuple[Problem, ...]) -> None:
        """Mark the entries that are to blame; none: every mark goes."""
        faults = {problem.key: problem.text for problem in problems if problem.key}
        for section in self.sections:
            section.show_faults(faults)

    def go_to(self, key: str) -> bool:
        """Put the focus into the field of this key, if it is here."""
        fields = (section.field_of(key) for section in self.sections)
        field = next((field for field in fields if field is not None), None)
        if field is None:
            return False
        self.ensureWidgetVisible(field, 0, 48)
        field.setFocus(Qt.FocusReason.OtherFocusReason)
        if isinstance(field, QLineEdit):
            field.selectAll()
        return True

    def _column(self) -> QWidget:
        column = QWidget()
        layout = QVBoxLayout(column)
        layout.setContentsMargins(0, 8, 0, 8)
        layout.setSpacing(0)
        for section in self.sections:
            layout.addWidget(section)
        layout.addStretch(1)
        return column

    def _forget(self) -> None:
        for section in self.sections:
            section.discard_typing()

    def _fit(self, narrow: bool) -> None:
        widths = NARROW if narrow else WIDE
        self.setFixedWidth(widths.column)
        for section in self.sections:
            section.fit(widths)


def _supply(document: OpenSelection) -> EntrySection:
    section = EntrySection(document, "Supply")
    section.add_number(VOLTAGE)
    section.add_number(LOOP)
    return section


def _cooling(document: OpenSelection) -> EntrySection:
    section = EntrySection(document, "Cooling")
    section.add_number(AMBIENT)
    section.add_number(SINK)
    section.add_choice(SERVES)
    return section


SECTIONS = (_supply, GatingSection, LoadSection, _cooling, CycleSection, RuleSection)
