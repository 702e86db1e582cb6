"""Pictures of really solved bridges, with made-up verdict rows."""

from __future__ import annotations

from typing import Any

import msgspec

from app.looked_at import LookedAt, corner_of
from app.picture import Picture
from engine.bridge import bridge_at
from engine.checks import Check
from engine.device_stress import stress_of
from engine.duty import duty_of
from engine.selection import Load, Selection
from engine.steady_state import solve
from engine.waveforms import sampled
from tests.app.assessments import SELECTION, picture, result


def solved(
    selection: Selection = SELECTION, *checks: Check, looked_at: LookedAt | None = None
) -> Picture:
    """The bridge of a selection at a looked-at point; the checks are those of 'second'."""
    looked_at = looked_at or LookedAt()
    duty = duty_of(selection)
    corner = corner_of(looked_at, duty)
    state = solve(bridge_at(duty, corner.voltage_V, corner.frequency_Hz, corner.load_factor))
    results = (result("tight", *checks),) if checks else ()
    return Picture(
        selection=selection,
        duty=duty,
        looked_at=looked_at,
        corner=corner,
        state=state,
        stress=stress_of(state),
        waveforms=sampled(state),
        assessment=picture(*results, selection=selection).assessment,
    )


def with_load(connection: Any = "star", **load: Any) -> Selection:
    """The usual selection with another load."""
    return msgspec.structs.replace(SELECTION, load=Load(connection=connection, **load))
