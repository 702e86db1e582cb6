"""Dialogs that answer by themselves and note what they were asked."""

from __future__ import annotations

from pathlib import Path

from app.dialogs import SELECTIONS, Dialogs, Restore, Unsaved


class Answers(Dialogs):
    """Set the answers beforehand; read `said` afterwards."""

    def __init__(self) -> None:
        super().__init__()
        self.open_file: Path | None = None
        self.save_file: Path | None = None
        self.folder: Path | None = None
        self.unsaved: Unsaved = "cancel"
        self.restore: Restore = "later"
        self.said: list[str] = []

    def file_to_open(self) -> Path | None:
        return self.open_file

    def file_to_save(self, suggested: Path, kinds: str = SELECTIONS) -> Path | None:
        self.said.append(f"save {suggested.name}")
        return self.save_file

    def folder_for_tables(self) -> Path | None:
        return self.folder

    def ask_unsaved(self, name: str) -> Unsaved:
        self.said.append(f"unsaved {name}")
        return self.unsaved

    def offer_recovery(self, headline: str, what_differs: str) -> Restore:
        self.said.append(f"{headline}\n{what_differs}")
        return self.restore

    def tell(self, headline: str, text: str = "") -> None:
        self.said.append(f"{headline}\n{text}")

    def show_text(self, headline: str, text: str) -> None:
        self.said.append(f"{headline}\n{text}")
