"""Keeps the results abreast of the document, and says how far they can be trusted."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Protocol

from PySide6.QtCore import QObject, QTimer, Signal

from app.assessment_runner import AssessmentRunner
from app.looked_at import LookedAt
from app.open_selection import OpenSelection
from app.picture import Picture, Problem
from engine.duty import missing_keys
from engine.selection import Selection

STALE_AFTER_MS = 150
PROGRESS_AFTER_MS = 300

CANCELLED = Problem("", "Cancelled: the results are older than the entries. F5 computes anew.")


class ShowsResults(Protocol):
    """What a page, the rail and the verdict line have in common."""

    def show_picture(self, picture: Picture) -> None: ...
    def show_stale(self, problems: tuple[Problem, ...]) -> None: ...
    def show_incomplete(self, missing: tuple[str, ...]) -> None: ...


@dataclass(frozen=True, slots=True)
class Standing:
    """What there is to show: the last good picture of this document, and whether it holds."""

    picture: Picture | None = None
    stale: bool = False
    problems: tuple[Problem, ...] = ()
    missing: tuple[str, ...] = ()

    def show_on(self, view: ShowsResults, before: Standing | None) -> None:
        """Bring a view up to date that shows `before`."""
        if self == before:
            return
        if self.picture is None:
            if self.missing or self.stale:
                view.show_incomplete(self.missing)
        elif before is None or before.picture is not self.picture or not self.stale:
            view.show_picture(self.picture)
        if self.stale:
            view.show_stale(self.problems)


class LiveResults(QObject):
    """Asks for a new picture at every change and publishes a `Standing`.

    A document that lacks required entries is not computed. While one computes, the last
    picture stands, after 150 ms as stale; after 300 ms `slow` asks for a progress display.
    """

    changed = Signal(object)
    """The new `Standing`."""
    slow = Signal(bool)

    def __init__(
        self,
        document: OpenSelection,
        runner: AssessmentRunner,
        parent: QObject | None = None,
    ) -> None:
        super().__init__(parent)
        self._document = document
        self._runner = runner
        self._standing = Standing()
        self._picture: Picture | None = None
        self._problems: tuple[Problem, ...] = ()
        self._late = False
        self._asked: tuple[Selection, LookedAt] | None = None
        self._late_timer = self._timer(STALE_AFTER_MS, self._on_late)
        self._slow_timer = self._timer(PROGRESS_AFTER_MS, lambda: self.slow.emit(True))
        self._connect()

    @property
    def standing(self) -> Standing:
        return self._standing

    def refresh(self) -> None:
        """Compute what the document holds now, unless just that is known or under way."""
        if missing_keys(self._document.selection):
            self._runner.cancel()
            self._asked = None
            self._end_wait()
            self._restate()
            return
        asked = (self._document.selection, self._document.looked_at)
        if not self._is_asked(asked):
            self._asked = asked
            self._runner.request(*asked)

    def compute_anew(self) -> None:
        """Compute even if nothing has changed."""
        self._asked = None
        self.refresh()

    def cancel(self) -> None:
        """Leave the running computation; the last picture stays, marked stale."""
        if self._runner.is_busy:
            self._runner.cancel()
            self._end_wait()
            self._on_failed((CANCELLED,))

    def _connect(self) -> None:
        self._document.opened.connect(self._forget)
        self._document.changed.connect(self.refresh)
        self._document.looked_at_changed.connect(self.refresh)
        self._document.refusals_changed.connect(self._restate)
        self._runner.finished.connect(self._on_finished)
        self._runner.failed.connect(self._on_failed)
        self._runner.busy.connect(self._on_busy)

    def _timer(self, milliseconds: int, then: Callable[[], None]) -> QTimer:
        timer = QTimer(self, singleShot=True, interval=milliseconds)
        timer.timeout.connect(then)
        return timer

    def _is_asked(self, asked: tuple[Selection, LookedAt]) -> bool:
        last = self._asked
        return last is not None and last[0] is asked[0] and last[1] == asked[1]

    def _forget(self) -> None:
        self._runner.cancel()
        self._picture, self._problems, self._asked = None, (), None

    def _on_busy(self, busy: bool) -> None:
        self._end_wait()
        if busy:
            self._late_timer.start()
            self._slow_timer.start()

    def _end_wait(self) -> None:
        self._late = False
        self._late_timer.stop()
        self._slow_timer.stop()
        self.slow.emit(False)

    def _on_late(self) -> None:
        self._late = True
        self._restate()

    def _on_finished(self, picture: Picture) -> None:
        self._picture, self._problems, self._late = picture, (), False
        self._restate()

    def _on_failed(self, problems: tuple[Problem, ...]) -> None:
        self._problems = problems
        self._restate()

    def _restate(self) -> None:
        missing = missing_keys(self._document.selection)
        problems = (
            *(Problem(key, text) for key, text in self._document.refusals.items()),
            *(Problem(key, "needed, not given") for key in missing if self._picture is not None),
            *(self._problems if not missing else ()),
        )
        self._standing = Standing(
            picture=self._picture,
            stale=bool(problems) or self._late,
            problems=problems,
            missing=missing,
        )
        self.changed.emit(self._standing)
