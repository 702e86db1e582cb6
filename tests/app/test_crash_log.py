"""Mistakes in the program reach the log and the user, and end nothing."""

from __future__ import annotations

import logging
import sys
import threading
from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import qWarning
from pytestqt.qtbot import QtBot

from app.crash_log import SIZE, CrashLog


@pytest.fixture
def crash_log(tmp_path: Path, qtbot: QtBot) -> Iterator[CrashLog]:
    level, hook = logging.getLogger().level, sys.excepthook
    crash_log = CrashLog(tmp_path / "log")
    crash_log.install()
    yield crash_log
    crash_log.uninstall()
    sys.excepthook = hook
    logging.getLogger().setLevel(level)


def test_an_exception_is_logged_and_reported(crash_log: CrashLog, qtbot: QtBot) -> None:
    with qtbot.waitSignal(crash_log.caught) as caught:
        try:
            raise ZeroDivisionError("a clear text")
        except ZeroDivisionError as error:
            sys.excepthook(type(error), error, error.__traceback__)
    assert "ZeroDivisionError: a clear text" in caught.args[0]
    assert "ZeroDivisionError: a clear text" in crash_log.text()


def test_an_exception_in_a_thread_is_reported_too(crash_log: CrashLog, qtbot: QtBot) -> None:
    with qtbot.waitSignal(crash_log.caught) as caught:
        threading.Thread(target=lambda: [][1]).start()
    assert "IndexError" in caught.args[0]


def test_messages_of_qt_are_logged(crash_log: CrashLog) -> None:
    qWarning("something about a widget")
    assert "WARNING qt: something about a widget" in crash_log.text()


def test_the_log_is_kept_small(crash_log: CrashLog) -> None:
    for _ in range(8):
        logging.getLogger("much").error("x" * (SIZE // 2))
    sizes = [file.stat().st_size for file in crash_log.file.parent.glob("switchwright.log*")]
    assert len(sizes) == 4
    assert max(sizes) <= SIZE


def test_uninstalling_puts_everything_back(tmp_path: Path, qtbot: QtBot) -> None:
    crash_log = CrashLog(tmp_path / "log")
    crash_log.install()
    crash_log.uninstall()
    assert sys.excepthook is sys.__excepthook__
    assert threading.excepthook is threading.__excepthook__
    assert crash_log.text() == ""
