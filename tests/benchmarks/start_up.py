"""From import to the first painted window, against a bare window with one pyqtgraph plot."""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import tempfile

from tests.benchmarks import Row, as_time

REPEAT = 7
GOAL = 1.5

_UNTIL_PAINTED = """
from PySide6.QtCore import QEvent, QObject

class Painted(QObject):
    def eventFilter(self, watched, event):
        if event.type() == QEvent.Type.Paint:
            print(time.perf_counter() - began, flush=True)
            os._exit(0)
        return False
"""

_OURS = (
    """
import os, time
began = time.perf_counter()
from pathlib import Path
from PySide6.QtWidgets import QApplication
from app.crash_log import CrashLog
from app.settings import Settings, data_folder
from app.start import make_window, open_first
from app.theme import apply_theme
"""
    + _UNTIL_PAINTED
    + """
class Filled(Painted):
    def eventFilter(self, watched, event):
        return super().eventFilter(watched, event) if watched.picture else False

application = QApplication([])
settings = Settings()
apply_theme(application, settings.theme)
data = data_folder()
crash_log = CrashLog(data / "log")
crash_log.install()
window, recovery = make_window(settings, crash_log, data / "recovery")
open_first(window, None)
painted = PAINTED()
WATCHED.installEventFilter(painted)
window.show()
application.exec()
"""
)

_BARE = (
    """
import os, time
began = time.perf_counter()
import numpy
import pyqtgraph
from PySide6.QtWidgets import QApplication, QMainWindow
"""
    + _UNTIL_PAINTED
    + """
application = QApplication([])
window = QMainWindow()
plot = pyqtgraph.PlotWidget()
plot.plot(numpy.arange(100.0))
window.setCentralWidget(plot)
painted = Painted()
plot.viewport().installEventFilter(painted)
window.show()
application.exec()
"""
)


def first_paint() -> Row:
    ours_s = _median_s(_ours("window.current_page", "Painted"))
    bare_s = _median_s(_BARE)
    return Row(
        what="import to first painted window",
        measured=as_time(ours_s),
        reference=f"bare {as_time(bare_s)}",
        ratio=f"{ours_s / bare_s:.2f}",
        goal=f"≤ {GOAL}",
        met=ours_s <= GOAL * bare_s,
    )


def first_curves() -> Row:
    duration_s = _median_s(_ours("window.current_page.strips", "Filled"))
    return Row("import to the first window with curves", as_time(duration_s), "", "", "", None)


def _ours(watched: str, painted: str) -> str:
    return _OURS.replace("WATCHED", watched).replace("PAINTED", painted)


def _median_s(script: str) -> float:
    """Median over fresh processes; the first, which warms the caches of the disk, is left out."""
    return statistics.median([_run_s(script) for _ in range(REPEAT + 1)][1:])


def _run_s(script: str) -> float:
    with tempfile.TemporaryDirectory() as home:
        environment = {**os.environ, "XDG_CONFIG_HOME": home, "XDG_DATA_HOME": home}
        # Compiled modules are kept, as on a user's machine: the first run of each is cold.
        environment.pop("PYTHONDONTWRITEBYTECODE", None)
        done = subprocess.run(
            [sys.executable, "-c", script],
            env=environment,
            capture_output=True,
            text=True,
            check=True,
        )
    return float(done.stdout.split()[-1])


ROWS = (first_paint, first_curves)
