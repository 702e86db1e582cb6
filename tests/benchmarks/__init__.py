"""Measured figures beside their references; `python3 -m tests.benchmarks` prints them.

A module of this package lists its measurements as `ROWS`: functions without arguments that
return a `Row`. What depends on the machine is given as a ratio of two timings of one run.
"""

from __future__ import annotations

import statistics
import time
from collections.abc import Callable
from dataclasses import dataclass


@dataclass(frozen=True)
class Row:
    """One line of the table, as text; `met` says whether the goal is reached, if there is one."""

    what: str
    measured: str
    reference: str
    ratio: str
    goal: str
    met: bool | None


def seconds(of: Callable[[], object], repeat: int = 30) -> float:
    """Median time of one call, after a call that is not counted."""
    of()
    times = []
    for _ in range(repeat):
        began = time.perf_counter()
        of()
        times.append(time.perf_counter() - began)
    return statistics.median(times)


def as_time(duration_s: float) -> str:
    """'52.3 µs', '1.24 ms', '2.5 s'."""
    for unit, factor in (("µs", 1e6), ("ms", 1e3)):
        if duration_s * factor < 1000.0:
            return f"{duration_s * factor:.3g} {unit}"
    return f"{duration_s:.3g} s"
