"""Starts the window, and ends it cleanly."""

from __future__ import annotations

import signal
import socket
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from importlib import import_module
from pathlib import Path

from PySide6.QtCore import QSocketNotifier, QTimer
from PySide6.QtWidgets import QApplication

from app.crash_log import CrashLog
from app.display import display_problem
from app.main_window import MainWindow
from app.open_selection import OpenSelection
from app.pages.page import Page
from app.recovery import LeftBehind, Recovery, differing_keys, left_behind
from app.selection_file import demo_selection, read_selection
from app.settings import Settings, data_folder
from app.theme import apply_theme
from engine.errors import InvalidSelection
from engine.selection import Selection, new_selection

NO_DISPLAY = 3
SIGNALLED = 128
"""Added to a signal's number it makes the exit status: 130 after Ctrl+C."""


def run_window(path: Path | None = None) -> int:
    """Open a selection, else the last one, else the demo; returns the exit status."""
    problem = display_problem()
    if problem is not None:
        print(problem, file=sys.stderr)
        return NO_DISPLAY
    application = QApplication.instance() or QApplication(["switchwright"])
    assert isinstance(application, QApplication)
    settings = Settings()
    apply_theme(application, settings.theme)
    data = data_folder()
    crash_log = CrashLog(data / "log")
    crash_log.install()
    window, recovery = make_window(settings, crash_log, data / "recovery")
    open_first(window, path)
    window.show()
    QTimer.singleShot(0, window, lambda: offer_left_behind(window, recovery))
    with signals(lambda number: _end_on_signal(application, window, recovery, number)):
        status = application.exec()
    crash_log.uninstall()
    return status


@dataclass(frozen=True)
class LaterPage:
    """A page whose code is loaded when it is first made, so that the window opens sooner."""

    title: str
    module: str
    name: str

    def __call__(self, document: OpenSelection) -> Page:
        made = getattr(import_module(self.module), self.name)(document)
        assert isinstance(made, Page)
        return made


PAGES = (
    LaterPage("Duty", "app.pages.duty", "DutyPage"),
    LaterPage("Candidates", "app.pages.candidates", "Candidates"),
    LaterPage("Turn-off", "app.pages.turn_off", "TurnOff"),
    LaterPage("Report", "app.pages.report", "ReportPage"),
)
"""The pages, in the order of the rail."""


def make_window(
    settings: Settings, crash_log: CrashLog, recovery_folder: Path
) -> tuple[MainWindow, Recovery]:
    """The window with everything that guards its work."""
    window = MainWindow(PAGES, settings, log_text=crash_log.text)
    recovery = Recovery(window.document, recovery_folder, window)
    recovery.failed.connect(window.dialogs.tell)
    window.closing.connect(recovery.close)
    crash_log.caught.connect(window.show_mistake)
    window.restore_layout()
    return window, recovery


def open_first(window: MainWindow, path: Path | None) -> None:
    """The file asked for, else the one that was open last, else the demo."""
    last = window.settings.last_file
    wanted = path or (last if last is not None and last.exists() else None)
    if wanted is None or not window.files.open(wanted):
        window.document.open(demo_selection(), None)


def offer_left_behind(window: MainWindow, recovery: Recovery) -> None:
    """Ask about the work of windows that crashed, newest first, until one is restored."""
    for found in left_behind(recovery.file.parent):
        answer = window.dialogs.offer_recovery(_headline(found), _what_differs(found))
        if answer == "restore":
            recovery.adopt(found)
            window.document.open(found.selection, found.path, unsaved=True)
            return
        if answer == "discard":
            found.discard()
        else:
            found.lock.unlock()


def _headline(found: LeftBehind) -> str:
    name = found.path.name if found.path else found.selection.title or "an untitled document"
    return f"Unsaved work on {name} from {found.edited:%d %B %Y, %H:%M:%S} was left behind."


def _what_differs(found: LeftBehind, most: int = 8) -> str:
    before, since = _last_saved(found)
    keys = differing_keys(before, found.selection)
    more = f"\n… and {len(keys) - most} more" if len(keys) > most else ""
    return f"{since}\n" + "\n".join(keys[:most]) + more


def _last_saved(found: LeftBehind) -> tuple[Selection, str]:
    if found.path is None:
        return new_selection(), "It was never saved. Entries:"
    try:
        return read_selection(found.path).selection, "It differs from the saved file in:"
    except InvalidSelection:
        return new_selection(), "Its file cannot be read any more. Entries:"


def _end_on_signal(
    application: QApplication, window: MainWindow, recovery: Recovery, number: int
) -> None:
    recovery.write()
    window.leave()
    application.exit(SIGNALLED + number)


@contextmanager
def signals(then: Callable[[int], None]) -> Iterator[None]:
    """Call `then` in the window's thread on SIGINT and SIGTERM, also while Qt waits for events."""
    ours, pythons = socket.socketpair()
    pythons.setblocking(False)
    notifier = QSocketNotifier(ours.fileno(), QSocketNotifier.Type.Read)
    notifier.activated.connect(lambda: then(ours.recv(1)[0]))
    numbers = (signal.SIGINT, signal.SIGTERM)
    before = [signal.signal(number, lambda *_: None) for number in numbers]
    wakeup = signal.set_wakeup_fd(pythons.fileno())
    try:
        yield
    finally:
        signal.set_wakeup_fd(wakeup)
        for number, handler in zip(numbers, before, strict=True):
            signal.signal(number, handler)
        notifier.setEnabled(False)
        ours.close()
        pythons.close()
