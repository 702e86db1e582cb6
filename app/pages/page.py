"""What the window asks of a page."""

from __future__ import annotations

from typing import Protocol

from PySide6.QtCore import Signal
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QWidget

from app.open_selection import OpenSelection
from app.picture import Picture, Problem


class PageType(Protocol):
    """What makes a page; the class of a page is one."""

    @property
    def title(self) -> str: ...

    def __call__(self, document: OpenSelection) -> Page: ...


class Page(QWidget):
    """One page of the window.

    The window calls `show_*` on the page in view only, and on another page when it comes
    into view. Actions added by `addAction` stand in the View menu while the page is in view.
    """

    title: str
    """As on the rail."""

    asked = Signal(str)
    """Key of an entry, here or on another page, that the user wants to go to."""
    report_asked = Signal(object)
    """The report is to be saved with these `ReportOptions`."""

    def __init__(self, document: OpenSelection) -> None:
        super().__init__()
        self.document = document

    def show_picture(self, picture: Picture) -> None:
        """A new result, or the last one that is valid again: repaint."""
        raise NotImplementedError

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        """The last picture stays in the stale colour, verdicts without colour and mark.

        No problems: a new result is on its way. There may have been no picture yet.
        """
        raise NotImplementedError

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        """No result yet: empty axes, and what is needed (keys of required entries)."""
        raise NotImplementedError

    def go_to(self, key: str) -> bool:
        """Put the focus into the field of this key, if it is here."""
        return False

    def panes(self) -> tuple[QWidget, ...]:
        """The parts that F6 visits in turn."""
        return (self,)

    def copy(self) -> None:
        """Put what is in focus on the clipboard; by itself, a picture of the page."""
        QGuiApplication.clipboard().setPixmap(self.grab())
