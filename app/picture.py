"""Everything the pages show of one selection at one looked-at point, computed in one go."""

from __future__ import annotations

from dataclasses import dataclass

from app.looked_at import LookedAt, corner_of
from engine.assessment import assess
from engine.bridge import bridge_at
from engine.checks import Assessment, Corner
from engine.device_stress import stress_of
from engine.duty import Duty, duty_of
from engine.selection import Selection
from engine.steady_state import SteadyState, solve
from engine.stress import BridgeStress
from engine.waveforms import Waveforms, sampled


@dataclass(frozen=True, slots=True, eq=False)
class Picture:
    """A selection and all that was computed from it. Two pictures are equal if they are the same.

    `state`, `stress` and `waveforms` hold at `corner`; `assessment` holds over all corners.
    """

    selection: Selection
    duty: Duty
    looked_at: LookedAt
    corner: Corner
    state: SteadyState
    stress: BridgeStress
    waveforms: Waveforms
    assessment: Assessment


@dataclass(frozen=True, slots=True)
class Problem:
    """Why there is no new picture: the key of the entry to change, '' where none is to blame."""

    key: str
    text: str


def picture_of(selection: Selection, looked_at: LookedAt, last: Picture | None = None) -> Picture:
    """Solve, sample and assess. Pure; runs in the worker.

    The assessment does not depend on the looked-at point: where `last` shows the very same
    selection, its assessment is taken over.

    Raises
    ------
    InvalidSelection
        Naming every entry that is missing or cannot be used.
    NoSolution
        No unique periodic steady state.
    """
    duty = duty_of(selection)
    corner = corner_of(looked_at, duty)
    state = solve(bridge_at(duty, corner.voltage_V, corner.frequency_Hz, corner.load_factor))
    same = last is not None and last.selection is selection
    return Picture(
        selection=selection,
        duty=duty,
        looked_at=looked_at,
        corner=corner,
        state=state,
        stress=stress_of(state),
        waveforms=sampled(state),
        assessment=last.assessment if last is not None and same else assess(selection),
    )
