"""A mistake in the program goes to a log and to the user, and never ends the program."""

from __future__ import annotations

import faulthandler
import logging
import sys
import threading
import traceback
from logging.handlers import RotatingFileHandler
from pathlib import Path
from types import TracebackType

from PySide6.QtCore import QMessageLogContext, QObject, QtMsgType, Signal, qInstallMessageHandler

LOG_NAME = "switchwright.log"
FAULTS_NAME = "faults.log"
SIZE, KEPT = 500_000, 3

_LEVELS = {
    QtMsgType.QtDebugMsg: logging.DEBUG,
    QtMsgType.QtInfoMsg: logging.INFO,
    QtMsgType.QtWarningMsg: logging.WARNING,
    QtMsgType.QtCriticalMsg: logging.ERROR,
    QtMsgType.QtFatalMsg: logging.CRITICAL,
}


class CrashLog(QObject):
    """Catches what nobody caught: in the window's thread, in others, in Qt and below Python."""

    caught = Signal(str)
    """The traceback of an exception, in the thread of the window."""

    def __init__(self, folder: Path, parent: QObject | None = None) -> None:
        super().__init__(parent)
        folder.mkdir(parents=True, exist_ok=True)
        self.file = folder / LOG_NAME
        self._handler = RotatingFileHandler(
            self.file, maxBytes=SIZE, backupCount=KEPT, encoding="utf-8", delay=True
        )
        self._handler.setFormatter(
            logging.Formatter("%(asctime)s %(levelname)s %(name)s: %(message)s")
        )
        self._faults = (folder / FAULTS_NAME).open("a", encoding="utf-8")

    def install(self) -> None:
        root = logging.getLogger()
        root.addHandler(self._handler)
        root.setLevel(logging.INFO)
        sys.excepthook = self.take
        threading.excepthook = self._take_from_thread
        qInstallMessageHandler(_log_qt_message)
        faulthandler.enable(self._faults)

    def uninstall(self) -> None:
        faulthandler.disable()
        qInstallMessageHandler(None)
        threading.excepthook = threading.__excepthook__
        sys.excepthook = sys.__excepthook__
        logging.getLogger().removeHandler(self._handler)
        self._handler.close()
        self._faults.close()

    def take(
        self,
        kind: type[BaseException],
        error: BaseException,
        trace: TracebackType | None,
    ) -> None:
        """Log an exception and report it."""
        text = "".join(traceback.format_exception(kind, error, trace))
        logging.getLogger("uncaught").error("%s", text)
        self.caught.emit(text)

    def text(self) -> str:
        """The current log file."""
        self._handler.flush()
        return self.file.read_text(encoding="utf-8") if self.file.exists() else ""

    def _take_from_thread(self, args: threading.ExceptHookArgs) -> None:
        if args.exc_value is not None:
            self.take(args.exc_type, args.exc_value, args.exc_traceback)


def _log_qt_message(kind: QtMsgType, context: QMessageLogContext, message: str) -> None:
    logging.getLogger("qt").log(_LEVELS.get(kind, logging.WARNING), "%s", message)
