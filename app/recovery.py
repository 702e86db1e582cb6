"""Keeps unsaved work on disk, so that a crash costs at most the last second of edits.

Each window has one recovery file and holds a lock (with its process id) beside it. A file
whose lock is free was left behind by a window that crashed. It is kept until its document
is saved, or thrown away on purpose; restoring alone never removes it.
"""

from __future__ import annotations

import logging
import os
import time
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path
from typing import Any

import msgspec
from PySide6.QtCore import QLockFile, QObject, QTimer, Signal

from app.open_selection import OpenSelection
from app.safe_write import write_atomically
from app.selection_file import selection_bytes, selection_from_bytes
from engine.errors import InvalidSelection
from engine.selection import Selection

WRITE_AFTER_MS = 500
SUFFIX = ".recovery"


@dataclass(frozen=True, slots=True)
class LeftBehind:
    """Unsaved work of a window that is gone. `path` is the document's file, if it had one."""

    file: Path
    edited: datetime
    path: Path | None
    selection: Selection
    lock: QLockFile

    def discard(self) -> None:
        self.file.unlink(missing_ok=True)
        self.lock.unlock()


class _Head(msgspec.Struct, frozen=True):
    """First line of a recovery file; the selection follows as in a selection file."""

    path: str | None
    edited: datetime


class Recovery(QObject):
    """Writes the document's recovery file within a second of an edit, removes it on saving."""

    failed = Signal(str)

    def __init__(
        self, document: OpenSelection, folder: Path, parent: QObject | None = None
    ) -> None:
        super().__init__(parent)
        self._document = document
        folder.mkdir(parents=True, exist_ok=True)
        self._file = folder / f"{os.getpid()}-{time.time_ns()}{SUFFIX}"
        self._lock = _lock_of(self._file)
        self._lock.tryLock(0)
        self._timer = QTimer(self, singleShot=True, interval=WRITE_AFTER_MS)
        self._timer.timeout.connect(self.write)
        document.changed.connect(self._on_changed)
        document.saved.connect(self.write)

    @property
    def file(self) -> Path:
        return self._file

    def adopt(self, left_behind: LeftBehind) -> None:
        """Go on with the file of a crashed window, whose work is now in the document."""
        self._remove()
        self._lock.unlock()
        self._file, self._lock = left_behind.file, left_behind.lock

    def write(self) -> None:
        """Make the recovery file agree with the document now."""
        self._timer.stop()
        try:
            if self._document.undo_stack.isClean():
                self._remove()
            else:
                write_atomically(self._file, _recovery_bytes(self._document))
        except OSError as error:
            logging.getLogger(__name__).warning("recovery file not written: %s", error)
            self.failed.emit(f"Unsaved work is not protected against a crash: {error}")

    def close(self) -> None:
        """A clean end: the work is saved or given up on purpose."""
        self._timer.stop()
        self._document.changed.disconnect(self._on_changed)
        self._document.saved.disconnect(self.write)
        self._remove()
        self._lock.unlock()

    def _on_changed(self) -> None:
        # Not restarted by further edits: steady typing must not put the writing off.
        if not self._timer.isActive():
            self._timer.start()

    def _remove(self) -> None:
        self._file.unlink(missing_ok=True)


def left_behind(folder: Path) -> Iterator[LeftBehind]:
    """Recovery files of windows that no longer run, newest first.

    Each is locked when it is handed out: unlock it to leave it for the next start.
    """
    files = [(file.stat().st_mtime, file) for file in folder.glob(f"*{SUFFIX}")]
    for _, file in sorted(files, reverse=True):
        lock = _lock_of(file)
        if not lock.tryLock(0):
            continue
        try:
            yield _read(file, lock)
        except (OSError, msgspec.MsgspecError, InvalidSelection) as error:
            logging.getLogger(__name__).warning("%s cannot be read: %s", file, error)
            lock.unlock()


def differing_keys(before: Selection, after: Selection) -> tuple[str, ...]:
    """Dotted keys of the entries in which two selections differ."""
    return tuple(_differences(msgspec.to_builtins(before), msgspec.to_builtins(after), ""))


def _differences(before: Any, after: Any, key: str) -> Iterator[str]:
    one, other = ({} if value is None else value for value in (before, after))
    if isinstance(one, dict) and isinstance(other, dict):
        for name in {**one, **other}:
            yield from _differences(one.get(name), other.get(name), f"{key}.{name}".strip("."))
    elif one != other:
        yield key


def _lock_of(file: Path) -> QLockFile:
    lock = QLockFile(str(file.with_suffix(".lock")))
    lock.setStaleLockTime(0)  # only a process that is gone makes a lock stale, never its age
    return lock


def _recovery_bytes(document: OpenSelection) -> bytes:
    path = None if document.path is None else str(document.path)
    head = msgspec.json.encode(_Head(path, datetime.now().astimezone()))
    return head + b"\n" + selection_bytes(document.selection)


def _read(file: Path, lock: QLockFile) -> LeftBehind:
    first, _, rest = file.read_bytes().partition(b"\n")
    head = msgspec.json.decode(first, type=_Head)
    return LeftBehind(
        file=file,
        edited=head.edited,
        path=None if head.path is None else Path(head.path),
        selection=selection_from_bytes(rest),
        lock=lock,
    )
