"""Latching, holding and the gate pulse, at lowest link voltage, light load and low ambient.

The bridge is solved as if the gate stood for the whole window; the pulse enters only here. On-state
drops, which the solved bridge leaves out, are taken off the link voltage: two devices conduct.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import lru_cache

import numpy as np

from engine.bridge import POSITIONS
from engine.corners import SolvedDuty
from engine.latching import least_current_after, time_to_reach
from engine.ratings import Thyristor
from engine.selection import GatePulse
from engine.steady_state import SteadyState
from engine.stress_table import Array
from engine.verdicts.case import Case
from engine.verdicts.comparison import Comparison, Place
from engine.verdicts.row import Finding, Row, does_not_apply
from engine.verdicts.wording import quantity

DROP_UNLESS_STATED_V = 2.0
"""Drop of one conducting device where V_T0 is not entered (common practice, no source)."""


def _thyristor(case: Case) -> Thyristor:
    switch = case.candidate.switch
    assert isinstance(switch, Thyristor)
    return switch


def _conducting_share(case: Case) -> float:
    """Share of the lowest link voltage that two conducting devices leave to the load."""
    drop_V = 2.0 * _drop(case)
    low_V = case.solved.duty.voltage_V.low
    return max(low_V - drop_V, 0.0) / low_V


def _drop(case: Case) -> float:
    V_T0 = _thyristor(case).V_T0_V
    return DROP_UNLESS_STATED_V if V_T0 is None else V_T0


def _drops_in_words(case: Case) -> str:
    low_V = case.solved.duty.voltage_V.low
    return f"(at {quantity(low_V, 'V')} less 2 × {quantity(_drop(case), 'V')} of two devices)"


def _current_share(case: Case) -> float:
    """Current at light load and lowest voltage, drops taken off, over that of `states`."""
    duty = case.solved.duty
    by_voltage = duty.voltage_V.low / duty.voltage_V.nominal
    return by_voltage * duty.light_factor * _conducting_share(case)


def latching(case: Case, row: Row) -> Finding:
    """I_L against the largest current of the window; the gate pulse's row tests the time."""
    table = case.solved.lightest
    there_A = table.switch_peak_A * _conducting_share(case)
    there_A[~(table.forced | table.natural)] = np.nan

    def how(place: Place) -> str:
        return (
            f"I_L {quantity(row.compared(case), 'A')} needed; the switch reaches "
            f"{quantity(place.of(there_A), 'A')} {_drops_in_words(case)}"
        )

    return Comparison(
        points=table.points,
        applied=np.full((len(there_A), 1), row.compared(case)),
        allowed=there_A,
        how=how,
        rating_for=lambda target, place: target,
        at_least=True,
        ambient="low",
    )


def holding(case: Case, row: Row) -> Finding:
    """I_H against the smallest current from the end of the gate pulse to a forced turn-off."""
    table = case.solved.lightest
    there_A = _least_after_pulse(case.solved) * _current_share(case)
    there_A[~table.forced] = np.nan
    if np.isnan(there_A).all():
        return does_not_apply("no position turns off forced")

    def how(place: Place) -> str:
        return (
            f"I_H {quantity(row.compared(case), 'A')} needed; from the end of the gate pulse to "
            f"gate-off at least {quantity(place.of(there_A), 'A')} {_drops_in_words(case)}"
        )

    return Comparison(
        points=table.points,
        applied=np.full((len(there_A), 1), row.compared(case)),
        allowed=there_A,
        how=how,
        rating_for=lambda target, place: target,
        at_least=True,
        ambient="low",
        nothing_allowed="the current falls to zero after the gate pulse",
    )


@lru_cache(maxsize=8)
def _least_after_pulse(solved: SolvedDuty) -> Array:
    """Smallest current from the pulse's end to gate-off at the points of `states`, in A."""
    pulse, table = solved.duty.pulse, solved.base
    width_s = _pulse_width(pulse)
    if np.isinf(width_s):
        return table.gate_off_A
    # Of a train, the pulse counts that meets the current's rise.
    begins_s = table.turn_on_delay_s if pulse.form == "train" else 0.0 * table.dead_interval_s
    ends_s = begins_s + width_s
    least = _for_each(
        solved,
        lambda state, point, position: least_current_after(
            state, position, ends_s[point, position]
        ),
    )
    return np.minimum(least, table.gate_off_A)


def _pulse_width(pulse: GatePulse) -> float:
    """Width of one pulse in s, ∞ for a block, which lasts as long as the window."""
    return np.inf if pulse.form == "block" or pulse.width_s is None else pulse.width_s


def gate_pulse(case: Case, row: Row) -> Finding:
    """From gate-on until the switch has latched, against the gate pulse."""
    duty = case.solved.duty
    table = case.solved.lightest
    points = table.points
    needed_s = _time_to_latch(case, row.compared(case))
    is_train = duty.pulse.form == "train"
    if is_train:
        needed_s = needed_s - table.turn_on_delay_s
    needed_s[np.isnan(table.turn_on_delay_s)] = np.nan
    window_s = duty.conduction_deg / 360.0 / points.frequency_Hz[:, None] - duty.blanking_s
    there_s = np.minimum(window_s, _pulse_width(duty.pulse))

    def how(place: Place) -> str:
        delay_s, latched_s = place.of(table.turn_on_delay_s), place.of(needed_s)
        start = "after that" if is_train else "after gate-on"
        after = "never" if np.isinf(latched_s) else f"{quantity(latched_s, 's')} {start}"
        return (
            f"the current rises from zero {quantity(delay_s, 's')} after gate-on and reaches I_L "
            f"{quantity(row.compared(case), 'A')} {after} {_drops_in_words(case)}; "
            f"the pulse lasts {quantity(place.of(there_s), 's')}"
        )

    return Comparison(
        points=points,
        applied=needed_s,
        allowed=there_s,
        how=how,
        rating_for=lambda target, place: place.of(needed_s) / case.rules.adequate_share,
        at_least=True,
        ambient="low",
        unlimited="the latching current is never reached",
    )


def _time_to_latch(case: Case, latching_A: float) -> Array:
    """From gate-on to I_L, ∞ where it is never reached, `(n_frequencies, 6)` in s."""
    share = _current_share(case)
    if share == 0.0:
        return np.full((len(case.solved.states), 6), np.inf)
    return _for_each(
        case.solved,
        lambda state, _, position: time_to_reach(state, position, latching_A / share),
    )


def _for_each(solved: SolvedDuty, of: Callable[[SteadyState, int, int], float | None]) -> Array:
    """A figure of every state and position, ∞ where there is none.

    Positions that are alike are asked once: all six of a balanced bridge, else opposite ones.
    """
    found = []
    for point, state in enumerate(solved.states.values()):
        apart = 1 if state.bridge.is_balanced else 3
        row = [of(state, point, position) for position in range(apart)]
        found.append([np.inf if one is None else one for one in row] * (len(POSITIONS) // apart))
    return np.array(found)
