"""The report and the tables as files, written in the background."""

from __future__ import annotations

import logging
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

from PySide6.QtCore import QObject, Qt, Signal

from app.dialogs import Dialogs
from app.picture import Picture
from app.report.options import ReportOptions
from app.safe_write import write_atomically

PDF = "PDF (*.pdf)"
MISTAKE = "This is a mistake in the program; Help → Log holds the details."


class Exports(QObject):
    """Asks where to, writes, and says what came of it."""

    busy = Signal(bool)
    written = Signal(object)
    """The path of the file or folder."""
    _ended = Signal(object, str)

    def __init__(self, dialogs: Dialogs, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._dialogs = dialogs
        self._executor = ThreadPoolExecutor(1, thread_name_prefix="export")
        self._ended.connect(self._on_ended, Qt.ConnectionType.QueuedConnection)

    def report(self, picture: Picture, name: str, options: ReportOptions) -> None:
        path = self._dialogs.file_to_save(Path(f"{name}.pdf"), PDF)
        if path is not None:
            path = path if path.suffix else path.with_suffix(".pdf")
            self._start(path, lambda: _write_report(picture, path, options))

    def tables(self, picture: Picture) -> None:
        folder = self._dialogs.folder_for_tables()
        if folder is not None:
            self._start(folder, lambda: _write_tables(picture, folder))

    def shut_down(self) -> None:
        """Wait until everything is written."""
        self._executor.shutdown(wait=True)

    def _start(self, path: Path, write: Callable[[], None]) -> None:
        self.busy.emit(True)
        self._executor.submit(self._work, path, write)

    def _work(self, path: Path, write: Callable[[], None]) -> None:
        try:
            write()
        except OSError as error:
            self._ended.emit(path, error.strerror or str(error))
        except Exception:
            logging.getLogger(__name__).exception("export failed")
            self._ended.emit(path, MISTAKE)
        else:
            self._ended.emit(path, "")

    def _on_ended(self, path: Path, fault: str) -> None:
        self.busy.emit(False)
        if fault:
            self._dialogs.tell(f"{path.name} cannot be written.", fault)
        else:
            self.written.emit(path)


def _write_report(picture: Picture, path: Path, options: ReportOptions) -> None:
    from app.report.pdf import report_pdf

    write_atomically(path, report_pdf(picture.selection, picture.assessment, options))


def _write_tables(picture: Picture, folder: Path) -> None:
    from app.export import write_tables

    write_tables(picture.selection, picture.assessment, folder)
