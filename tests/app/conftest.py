"""Tests of the window touch neither the user's settings nor a screen."""

from __future__ import annotations

import gc
import os
from collections.abc import Iterator
from pathlib import Path

os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")

import pytest
import shiboken6
from PySide6.QtCore import QCoreApplication, QEvent
from PySide6.QtWidgets import QApplication


@pytest.fixture(autouse=True)
def home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A home of its own for settings, recovery files and the log."""
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "home" / "config"))
    monkeypatch.setenv("XDG_DATA_HOME", str(tmp_path / "home" / "data"))
    return tmp_path / "home"


@pytest.fixture(autouse=True)
def _no_widget_is_left() -> Iterator[None]:
    yield
    widgets = QApplication.topLevelWidgets() if QApplication.instance() else []
    for window in [widget for widget in widgets if widget.parent() is None]:
        if shiboken6.isValid(window):
            window.close()
            shiboken6.delete(window)
    QCoreApplication.sendPostedEvents(None, QEvent.Type.DeferredDelete)
    gc.collect()
