"""The whole program killed at random moments: work is offered again, all but the last second."""

from __future__ import annotations

import os
import random
import signal
import subprocess
import sys
import threading
import time
from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from app.recovery import left_behind
from app.settings import data_folder

ROOT = Path(__file__).parents[2]

EDITING_WINDOW = """
import sys, time
from PySide6.QtCore import QTimer
from app import start
from app.pages.page import Page

class Plain(Page):
    title = "Plain"
    def show_picture(self, picture): pass
    def show_stale(self, problems): pass
    def show_incomplete(self, missing): pass

def edit():
    document = window.document
    value = (document.selection.supply.voltage_V or 540.0) + 0.001
    document.set_entry("supply.voltage_V", value, "Edit link voltage")
    print(time.time(), value, flush=True)

make_window = start.make_window
def made(*words):
    global window, timer
    window, recovery = make_window(*words)
    timer = QTimer(window, interval=20)
    timer.timeout.connect(edit)
    timer.start()
    return window, recovery

start.make_window = made
start.PAGES = (Plain,)
sys.exit(start.run_window())
"""


def killed_after(seconds: float) -> tuple[float, list[tuple[float, float]]]:
    """Run the window under edits and kill it; when, and each edit's time and value."""
    environment = {**os.environ, "QT_QPA_PLATFORM": "offscreen"}
    process = subprocess.Popen(
        [sys.executable, "-c", EDITING_WINDOW],
        cwd=ROOT,
        env=environment,
        stdout=subprocess.PIPE,
        text=True,
    )
    assert process.stdout is not None
    too_late = threading.Timer(60.0, process.kill)
    too_late.start()
    first = process.stdout.readline()
    time.sleep(seconds)
    process.send_signal(signal.SIGKILL)
    at = time.time()
    too_late.cancel()
    rest, _ = process.communicate(timeout=60)
    lines = [line.split() for line in (first + rest).splitlines()]
    return at, [(float(words[0]), float(words[1])) for words in lines if len(words) == 2]


def check_one_kill(seconds: float) -> None:
    at, edits = killed_after(seconds)
    (found,) = list(left_behind(data_folder() / "recovery"))
    value = found.selection.supply.voltage_V
    owed = [typed for when, typed in edits if when < at - 1.0]
    assert value is not None
    assert value >= max(owed)
    found.discard()


def test_a_killed_window_loses_at_most_the_last_second(qtbot: QtBot) -> None:
    for seconds in (1.1, 1.9):
        check_one_kill(seconds)


@pytest.mark.long
def test_two_hundred_killed_windows_lose_at_most_the_last_second(qtbot: QtBot) -> None:
    chance = random.Random(1)
    for _ in range(200):
        check_one_kill(chance.uniform(1.05, 2.5))
