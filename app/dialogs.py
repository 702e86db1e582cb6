"""Every question and message that stops the user, in one place so that tests can answer."""

from __future__ import annotations

from pathlib import Path
from typing import Literal

from PySide6.QtGui import QFontDatabase, QGuiApplication
from PySide6.QtWidgets import (
    QDialog,
    QDialogButtonBox,
    QFileDialog,
    QLabel,
    QMessageBox,
    QPlainTextEdit,
    QVBoxLayout,
    QWidget,
)

PROGRAM = "Switchwright"
SELECTIONS = "Switchwright files (*.json)"
REPORTS = "Reports that carry one (*.pdf)"

Unsaved = Literal["save", "discard", "cancel"]
Restore = Literal["restore", "discard", "later"]


class Dialogs:
    """Modal dialogs over one window."""

    def __init__(self, parent: QWidget | None = None) -> None:
        self._parent = parent

    def file_to_open(self) -> Path | None:
        kinds = f"{SELECTIONS};;{REPORTS};;All (*)"
        name, _ = QFileDialog.getOpenFileName(self._parent, "Open", "", kinds)
        return Path(name) if name else None

    def file_to_save(self, suggested: Path, kinds: str = SELECTIONS) -> Path | None:
        """The dialog itself asks before a file is replaced."""
        name, _ = QFileDialog.getSaveFileName(self._parent, "Save As", str(suggested), kinds)
        return Path(name) if name else None

    def folder_for_tables(self) -> Path | None:
        name = QFileDialog.getExistingDirectory(self._parent, "Folder for the tables")
        return Path(name) if name else None

    def ask_unsaved(self, name: str) -> Unsaved:
        box = self._box(QMessageBox.Icon.Question, f"Save the changes to {name}?")
        box.setInformativeText("They are lost if you go on without saving.")
        save = box.addButton("&Save", QMessageBox.ButtonRole.AcceptRole)
        discard = box.addButton("Go on &without saving", QMessageBox.ButtonRole.DestructiveRole)
        box.addButton("Cancel", QMessageBox.ButtonRole.RejectRole)
        box.setDefaultButton(save)
        box.exec()
        if box.clickedButton() is save:
            return "save"
        return "discard" if box.clickedButton() is discard else "cancel"

    def offer_recovery(self, headline: str, what_differs: str) -> Restore:
        box = self._box(QMessageBox.Icon.Question, headline)
        box.setInformativeText(what_differs)
        restore = box.addButton("&Restore", QMessageBox.ButtonRole.AcceptRole)
        discard = box.addButton("&Throw away", QMessageBox.ButtonRole.DestructiveRole)
        box.addButton("Ask &later", QMessageBox.ButtonRole.RejectRole)
        box.setDefaultButton(restore)
        box.exec()
        if box.clickedButton() is restore:
            return "restore"
        return "discard" if box.clickedButton() is discard else "later"

    def tell(self, headline: str, text: str = "") -> None:
        box = self._box(QMessageBox.Icon.Warning, headline)
        box.setInformativeText(text)
        box.exec()

    def show_text(self, headline: str, text: str) -> None:
        """A longer text that can be selected and copied."""
        text_dialog(self._parent, headline, text).exec()

    def _box(self, icon: QMessageBox.Icon, headline: str) -> QMessageBox:
        box = QMessageBox(self._parent)
        box.setWindowTitle(PROGRAM)
        box.setIcon(icon)
        box.setText(headline)
        return box


def text_dialog(parent: QWidget | None, headline: str, text: str) -> QDialog:
    """A headline over a read-only text, with a button that copies the text."""
    dialog = QDialog(parent)
    dialog.setWindowTitle(PROGRAM)
    dialog.resize(720, 420)
    body = QPlainTextEdit(text, readOnly=True)
    body.setAccessibleName(headline)
    body.setFont(QFontDatabase.systemFont(QFontDatabase.SystemFont.FixedFont))
    buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Close)
    copy = buttons.addButton("&Copy", QDialogButtonBox.ButtonRole.ActionRole)
    copy.clicked.connect(lambda: QGuiApplication.clipboard().setText(text))
    buttons.rejected.connect(dialog.reject)
    layout = QVBoxLayout(dialog)
    layout.addWidget(QLabel(headline, wordWrap=True))
    layout.addWidget(body)
    layout.addWidget(buttons)
    return dialog
