"""What the Turn-off page shows of a picture: lanes, rows and sentences; no widgets.

Every figure comes from the solved bridge or from a verdict row; here they are only put side
by side.
"""

from __future__ import annotations

from collections.abc import Sequence

from app.pages.check_pages import chosen_result
from app.picture import Picture
from app.verdict_sentence import rounded
from app.widgets.time_bar import Interval, Lane
from app.widgets.turn_off_table import PositionRow
from engine.checks import CandidateResult, Check
from engine.latching import time_to_reach
from engine.ratings import Thyristor
from engine.selection import Candidate, Selection
from engine.stress import PositionStress

TIME_CHECKS = ("switch.tq_dead", "switch.blanking")
"""Rows that set a time which the bridge gives against one that the switch needs."""

WITHOUT_CIRCUIT = (
    "A forced turn-off needs a commutation circuit that holds the switch reversed for k·t_q: "
    "without it the verdict stands on the rows that exist."
)


def time_check(result: CandidateResult) -> Check | None:
    """The row that compares times, if this candidate's kind has one."""
    return next((check for check in result.checks if check.id in TIME_CHECKS), None)


def worst_position(picture: Picture) -> int:
    """The position that the chosen candidate's turn-off is worst at, else the shortest of time.

    An index into `POSITIONS`.
    """
    result = chosen_result(picture.assessment)
    check = time_check(result) if result is not None else None
    names = [each.position for each in picture.stress.positions]
    if check is not None and check.position in names:
        return names.index(check.position)
    return min(range(len(names)), key=lambda i: _time_there_is(picture.stress.positions[i]))


def _time_there_is(stress: PositionStress) -> float:
    """What a switch has to turn off in: a natural one until forward voltage returns."""
    if stress.turn_off == "natural" and stress.forward_reapplied_s is not None:
        return stress.forward_reapplied_s
    return stress.dead_interval_s


def lanes_of(picture: Picture, position: int) -> list[Lane]:
    """The intervals of one position, then what each candidate needs, the chosen one first."""
    stress = picture.stress.positions[position]
    dead_s = stress.dead_interval_s
    lanes = [Lane("dead interval", (Interval(0.0, dead_s, "dead"),))]
    lanes.append(Lane(_freewheel_name(stress), _freewheel(stress)))
    if stress.turn_off == "natural" and stress.forward_reapplied_s is not None:
        reversed_for = Interval(0.0, stress.forward_reapplied_s, "reversed")
        lanes.append(Lane("until forward voltage", (reversed_for,)))
    chosen = picture.assessment.chosen
    results = sorted(picture.assessment.candidates, key=lambda each: each.name != chosen)
    return lanes + [lane for each in results if (lane := _needed_lane(each)) is not None]


def _freewheel_name(stress: PositionStress) -> str:
    return "freewheel, overrun" if stress.overrun_s > 0.0 else "freewheel"


def _freewheel(stress: PositionStress) -> tuple[Interval, ...]:
    inside = Interval(0.0, stress.freewheel_s - stress.overrun_s, "freewheel")
    overrun = Interval(inside.end_s, stress.freewheel_s, "overrun")
    return (inside, overrun) if stress.overrun_s > 0.0 else (inside,)


def _needed_lane(result: CandidateResult) -> Lane | None:
    check = time_check(result)
    if check is None or check.applied is None:
        return None
    what = "k·t_q" if check.id == "switch.tq_dead" else "blanking"
    needed = Interval(0.0, check.applied, "needed")
    return Lane(f"{what} {result.name}", (needed,), check.verdict)


def position_rows(picture: Picture) -> list[PositionRow]:
    """All six positions at the looked-at point, with what the chosen candidate needs."""
    candidate = _chosen(picture.selection)
    result = chosen_result(picture.assessment)
    check = time_check(result) if result is not None else None
    needed_s = check.applied if check is not None else None
    return [
        PositionRow(
            stress=stress,
            pulse_needed_s=_pulse_needed_s(picture, position, candidate),
            margin_s=None if needed_s is None else _time_there_is(stress) - needed_s,
        )
        for position, stress in enumerate(picture.stress.positions)
    ]


def _pulse_needed_s(picture: Picture, position: int, candidate: Candidate | None) -> float | None:
    """From gate-on until the current has passed I_L for good, `None` where I_L is not known."""
    if candidate is None or not isinstance(candidate.switch, Thyristor):
        return None
    latching_A = candidate.switch.I_L_A
    return None if latching_A is None else time_to_reach(picture.state, position, latching_A)


def _chosen(selection: Selection) -> Candidate | None:
    found = (each for each in selection.candidates if each.name == selection.chosen)
    return next(found, None)


def sentences(picture: Picture, position: int) -> tuple[str, ...]:
    """How this position turns off, and what follows from it."""
    stress = picture.stress.positions[position]
    said = [_how_it_turns_off(stress)]
    if stress.overrun_s > 0.0:
        said.append(_overrun(stress, position))
    if stress.turn_off == "forced" and _any_thyristor(picture.selection.candidates):
        said.append(WITHOUT_CIRCUIT)
    return tuple(said)


def _how_it_turns_off(stress: PositionStress) -> str:
    name = stress.position
    if stress.turn_off == "idle":
        return f"{name} carries no current in this period."
    if stress.turn_off == "natural":
        after_s = stress.forward_reapplied_s
        until = f"{rounded(after_s, 's')} later" if after_s is not None else "never"
        return (
            f"{name} turns off naturally: its current has ended before gate-off, and forward "
            f"voltage stands on it {until}."
        )
    current = rounded(stress.switch.gate_off_current_A, "A")
    at_once = rounded(stress.reapplied_step_V or 0.0, "V")
    return f"{name} has a forced turn-off, at {current}; {at_once} stand on it at once."


def _overrun(stress: PositionStress, position: int) -> str:
    incoming = f"T{(position + 3) % 6 + 1}"
    return (
        f"Its freewheel overruns the dead interval by {rounded(stress.overrun_s, 's')}: until then "
        f"{incoming} cannot take the current, and its gate pulse must outlast that."
    )


def _any_thyristor(candidates: Sequence[Candidate]) -> bool:
    return any(isinstance(candidate.switch, Thyristor) for candidate in candidates)
