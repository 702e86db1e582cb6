"""Recomputes in the background: one worker, finish what runs, then only the newest request."""

from __future__ import annotations

import logging
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass

from PySide6.QtCore import QObject, Qt, Signal

from app.looked_at import LookedAt
from app.picture import Picture, Problem, picture_of
from engine.errors import InvalidSelection, NoSolution, SwitchwrightError
from engine.selection import Selection

Compute = Callable[[Selection, LookedAt, Picture | None], Picture]

UNEXPECTED = (
    "The computation stopped at a mistake in this program ({name}). "
    "Help → Log holds the details; undo the last edit to go on."
)


@dataclass(frozen=True, slots=True)
class _Request:
    generation: int
    selection: Selection
    looked_at: LookedAt


@dataclass(frozen=True, slots=True)
class _Answer:
    request: _Request
    result: Picture | tuple[Problem, ...]


class AssessmentRunner(QObject):
    """Answers requests in the order of their generation and never goes back to an older one.

    A request made while another runs waits; a still newer one takes its place. So results
    keep coming while somebody types, and the last edit is always answered.
    """

    finished = Signal(object)
    """A `Picture`."""
    failed = Signal(object)
    """A tuple of `Problem`, at least one."""
    busy = Signal(bool)
    """True each time a computation starts, False when none follows."""
    _arrived = Signal(object)

    def __init__(self, compute: Compute = picture_of, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._compute = compute
        self._executor = ThreadPoolExecutor(1, thread_name_prefix="assessment")
        self._generation = 0
        self._oldest_wanted = 0
        self._running = False
        self._waiting: _Request | None = None
        self._last: Picture | None = None
        self._arrived.connect(self._take, Qt.ConnectionType.QueuedConnection)

    @property
    def is_busy(self) -> bool:
        return self._running

    def request(self, selection: Selection, looked_at: LookedAt) -> None:
        """Compute this next; whatever waits already is dropped."""
        self._generation += 1
        request = _Request(self._generation, selection, looked_at)
        if self._running:
            self._waiting = request
        else:
            self._start(request)

    def cancel(self) -> None:
        """Drop what waits, and the answer of what runs."""
        self._waiting = None
        self._oldest_wanted = self._generation + 1

    def shut_down(self) -> None:
        """Wait for the worker to end; no signal follows."""
        self.cancel()
        self._arrived.disconnect(self._take)
        self._executor.shutdown(wait=True, cancel_futures=True)

    def _start(self, request: _Request) -> None:
        self._running = True
        self.busy.emit(True)
        self._executor.submit(self._work, request, self._last)

    def _work(self, request: _Request, last: Picture | None) -> None:
        self._arrived.emit(_Answer(request, _result_of(self._compute, request, last)))

    def _take(self, answer: _Answer) -> None:
        self._publish(answer)
        waiting, self._waiting = self._waiting, None
        if waiting is not None:
            self._start(waiting)
        else:
            self._running = False
            self.busy.emit(False)

    def _publish(self, answer: _Answer) -> None:
        if answer.request.generation < self._oldest_wanted:
            return
        if isinstance(answer.result, Picture):
            self._last = answer.result
            self.finished.emit(answer.result)
        elif self._waiting is None:
            self.failed.emit(answer.result)


def _result_of(
    compute: Compute, request: _Request, last: Picture | None
) -> Picture | tuple[Problem, ...]:
    try:
        return compute(request.selection, request.looked_at, last)
    except InvalidSelection as error:
        return tuple(Problem(fault.key, fault.text) for fault in error.faults)
    except NoSolution as error:
        return (Problem(error.key, error.reason),)
    except SwitchwrightError as error:
        return (Problem("", str(error)),)
    except Exception as error:
        logging.getLogger(__name__).exception("assessment failed")
        return (Problem("", UNEXPECTED.format(name=type(error).__name__)),)
