"""Starting and ending the whole program."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from app.crash_log import CrashLog
from app.main_window import MainWindow
from app.recovery import Recovery
from app.selection_file import demo_selection, selection_bytes
from app.settings import Settings, data_folder
from app.start import NO_DISPLAY, make_window, offer_left_behind, open_first
from engine.selection import with_entry
from tests.app.answers import Answers

ROOT = Path(__file__).parents[2]

WINDOW = """
import sys
from PySide6.QtCore import QTimer
from app import main_window, start
{setup}
sys.exit(start.run_window())
"""

READY_AND_EDITED = """
show = main_window.MainWindow.showEvent
def shown(window, event):
    show(window, event)
    window.document.set_entry("supply.voltage_V", 538.0, "Edit link voltage")
    QTimer.singleShot(900, lambda: print("ready", flush=True))
main_window.MainWindow.showEvent = shown
"""


def process(setup: str = "", **environment: str) -> subprocess.Popen[str]:
    return subprocess.Popen(
        [sys.executable, "-c", WINDOW.format(setup=setup)],
        cwd=ROOT,
        env={**os.environ, "QT_QPA_PLATFORM": "offscreen", **environment},
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
    )


def make(tmp_path: Path) -> tuple[MainWindow, Recovery, Answers]:
    window, recovery = make_window(
        Settings(), CrashLog(tmp_path / "log"), data_folder() / "recovery"
    )
    answers = Answers()
    window.dialogs = window.files._dialogs = answers
    return window, recovery, answers


def saved(path: Path, voltage_V: float = 555.0) -> Path:
    path.write_bytes(selection_bytes(with_entry(demo_selection(), "supply.voltage_V", voltage_V)))
    return path


def test_the_first_start_opens_the_demo(qtbot: QtBot, tmp_path: Path) -> None:
    window, _, _ = make(tmp_path)
    open_first(window, None)
    assert window.document.selection == demo_selection()
    assert not window.isWindowModified()


def test_the_next_start_opens_the_last_file(qtbot: QtBot, tmp_path: Path) -> None:
    window, _, _ = make(tmp_path)
    window.files.open(saved(tmp_path / "winch.json"))
    window.close()
    window, _, _ = make(tmp_path)
    open_first(window, None)
    assert window.document.path == tmp_path / "winch.json"


def test_a_last_file_that_is_gone_gives_the_demo(qtbot: QtBot, tmp_path: Path) -> None:
    window, _, _ = make(tmp_path)
    window.settings.last_file = tmp_path / "gone.json"
    open_first(window, None)
    assert window.document.path is None


def test_a_bad_file_asked_for_is_explained_over_the_demo(qtbot: QtBot, tmp_path: Path) -> None:
    window, _, answers = make(tmp_path)
    (tmp_path / "bad.json").write_text("no")
    open_first(window, tmp_path / "bad.json")
    assert "bad.json cannot be opened." in answers.said[0]
    assert window.document.selection == demo_selection()


def test_a_killed_window_costs_nothing(qtbot: QtBot, tmp_path: Path) -> None:
    killed = process(READY_AND_EDITED)
    assert killed.stdout is not None
    assert killed.stdout.readline() == "ready\n"
    killed.send_signal(signal.SIGKILL)
    killed.communicate(timeout=60)
    window, recovery, answers = make(tmp_path)
    open_first(window, None)
    answers.restore = "restore"
    offer_left_behind(window, recovery)
    assert "was left behind" in answers.said[0]
    assert "supply.voltage_V" in answers.said[0]
    assert window.document.selection.supply.voltage_V == 538.0
    assert window.isWindowModified()


@pytest.mark.parametrize("number", [signal.SIGINT, signal.SIGTERM])
def test_a_signal_ends_the_window_quietly_and_keeps_the_work(
    number: signal.Signals, home: Path
) -> None:
    running = process(READY_AND_EDITED)
    assert running.stdout is not None
    assert running.stdout.readline() == "ready\n"
    running.send_signal(number)
    _, errors = running.communicate(timeout=60)
    assert running.returncode == 128 + number
    assert "Traceback" not in errors
    assert len(list((home / "data").rglob("*.recovery"))) == 1


def test_closing_the_window_ends_the_program_with_0() -> None:
    closing = """
show = main_window.MainWindow.showEvent
def shown(window, event):
    show(window, event)
    QTimer.singleShot(500, window.close)
main_window.MainWindow.showEvent = shown
"""
    running = process(closing)
    _, errors = running.communicate(timeout=60)
    assert running.returncode == 0, errors


def test_without_a_display_it_says_so_and_does_not_abort() -> None:
    environment = {"QT_QPA_PLATFORM": "xcb", "DISPLAY": "", "WAYLAND_DISPLAY": ""}
    running = process(**environment)
    _, errors = running.communicate(timeout=60)
    assert running.returncode == NO_DISPLAY
    assert "no display" in errors
    assert "Traceback" not in errors


def test_discarded_work_is_gone_and_later_work_stays(qtbot: QtBot, tmp_path: Path) -> None:
    window, recovery, answers = make(tmp_path)
    window.document.set_entry("supply.voltage_V", 538.0, "Edit link voltage")
    recovery.write()
    recovery._lock.unlock()
    second, guard, answers = make(tmp_path)
    offer_left_behind(second, guard)
    answers.restore = "discard"
    offer_left_behind(second, guard)
    offer_left_behind(second, guard)
    assert len(answers.said) == 2
    assert second.document.selection.supply.voltage_V is None


def test_starting_takes_no_time_for_what_the_window_does_not_need() -> None:
    heavy = subprocess.run(
        [
            sys.executable,
            "-c",
            "import sys, importlib, app.start;"
            "[importlib.import_module(page.module) for page in app.start.PAGES];"
            "print(*sorted({'scipy', 'pandas'} & set(sys.modules)))",
        ],
        cwd=ROOT,
        env={**os.environ, "QT_QPA_PLATFORM": "offscreen"},
        capture_output=True,
        text=True,
        check=True,
        timeout=60,
    )
    assert heavy.stdout.split() == []
