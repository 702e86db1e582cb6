"""What the program remembers of its user, none of it part of a document."""

from __future__ import annotations

import tempfile
from pathlib import Path
from typing import cast

from PySide6.QtCore import QByteArray, QSettings, QStandardPaths

from app.theme import ThemeChoice

FOLDER = "switchwright"
RECENT = 10
WINDOW_LAYOUT = 1
"""Raised when the window's parts change so that an older stored state no longer fits."""


def data_folder() -> Path:
    """Where recovery files and the log stand; a temporary folder where the user has no other."""
    location = QStandardPaths.StandardLocation.GenericDataLocation
    folder = Path(QStandardPaths.writableLocation(location)) / FOLDER
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError:
        return Path(tempfile.mkdtemp(prefix=f"{FOLDER}-"))
    return folder


def settings_file() -> Path:
    location = QStandardPaths.StandardLocation.GenericConfigLocation
    return Path(QStandardPaths.writableLocation(location)) / FOLDER / "settings.ini"


class Settings:
    """Typed access to the settings file."""

    def __init__(self, file: Path | None = None) -> None:
        path = settings_file() if file is None else file
        self._store = QSettings(str(path), QSettings.Format.IniFormat)

    @property
    def recent_files(self) -> tuple[Path, ...]:
        """Newest first, at most ten, also those that are gone meanwhile."""
        return tuple(Path(text) for text in self._texts("recent_files"))

    def remember_file(self, path: Path) -> None:
        others = [str(file) for file in self.recent_files if file != path]
        self._store.setValue("recent_files", [str(path), *others][:RECENT])

    def clear_recent_files(self) -> None:
        self._store.remove("recent_files")

    @property
    def last_file(self) -> Path | None:
        """The file to open at the next start."""
        text = self._text("last_file")
        return Path(text) if text else None

    @last_file.setter
    def last_file(self, path: Path | None) -> None:
        self._store.setValue("last_file", "" if path is None else str(path))

    @property
    def theme(self) -> ThemeChoice:
        text = self._text("theme")
        return cast(ThemeChoice, text) if text in ("light", "dark") else "system"

    @theme.setter
    def theme(self, choice: ThemeChoice) -> None:
        self._store.setValue("theme", choice)

    @property
    def cautions_understood(self) -> str:
        """The program version whose cautions this user has read, '' if none."""
        return self._text("cautions_understood")

    @cautions_understood.setter
    def cautions_understood(self, version: str) -> None:
        self._store.setValue("cautions_understood", version)

    def window(self) -> tuple[QByteArray, QByteArray] | None:
        """Geometry and state as the window saved them, `None` if there are none that fit."""
        geometry = self._store.value(f"window_{WINDOW_LAYOUT}/geometry")
        state = self._store.value(f"window_{WINDOW_LAYOUT}/state")
        if isinstance(geometry, QByteArray) and isinstance(state, QByteArray):
            return geometry, state
        return None

    def remember_window(self, geometry: QByteArray, state: QByteArray) -> None:
        self._store.setValue(f"window_{WINDOW_LAYOUT}/geometry", geometry)
        self._store.setValue(f"window_{WINDOW_LAYOUT}/state", state)

    def write(self) -> None:
        """Put everything on disk now."""
        self._store.sync()

    def _text(self, key: str) -> str:
        value = self._store.value(key, "")
        return value if isinstance(value, str) else ""

    def _texts(self, key: str) -> list[str]:
        value = self._store.value(key, [])
        values = value if isinstance(value, list) else [value]
        return [text for text in values if isinstance(text, str) and text]
