"""Fixtures of the tests of the left column of the Duty page."""

from __future__ import annotations

import pytest
from PySide6.QtWidgets import QApplication

from app.open_selection import OpenSelection
from app.pages.duty_entries import DutyEntries
from app.theme import apply_theme
from tests.app.assessments import SELECTION


@pytest.fixture
def document(qapp: QApplication) -> OpenSelection:
    apply_theme(qapp, "light")
    return OpenSelection(SELECTION)


@pytest.fixture
def entries(document: OpenSelection, qtbot) -> DutyEntries:
    entries = DutyEntries(document)
    qtbot.addWidget(entries)
    entries.resize(304, 736)
    entries.show()
    entries.activateWindow()
    qtbot.waitActive(entries)
    return entries
