"""The time a thyristor gets to turn off against the time it needs.

Forced: the dead interval. Natural, where the current ends before gate-off: the time for which
the feedback diode then holds the switch reversed.
"""

from __future__ import annotations

import numpy as np

from engine.ratings import Thyristor, condition
from engine.verdicts.case import Case
from engine.verdicts.comparison import Comparison, Place
from engine.verdicts.row import Finding, Row
from engine.verdicts.wording import number, quantity

LOW_REVERSE_VOLTAGE_V = 5.0
"""A t_q stated at no more than this needs no correction for the diode's low voltage."""


def _thyristor(case: Case) -> Thyristor:
    switch = case.candidate.switch
    assert isinstance(switch, Thyristor)
    return switch


def dead_interval(case: Case, row: Row) -> Finding:
    """k·t_q against the dead interval, or against the diode's conduction at a natural turn-off."""
    table, duty = case.solved.instantaneous, case.solved.duty
    needed_s, needed_in_words = _needed_tq(case)
    there_s = table.turn_off_time_s
    multiple = needed_s / row.compared(case)
    without = bool((table.forced & (table.dead_interval_s <= 0.0)).any())

    def how(place: Place) -> str:
        if table.natural[place.point, place.position]:
            there = (
                "the current ends before gate-off, and forward voltage returns after "
                f"{quantity(place.of(there_s), 's')}"
            )
            return f"{needed_in_words}; {there}"
        frequency = quantity(place.of(table.points.frequency_Hz[:, None]), "Hz")
        dead = f"(180° − {number(duty.conduction_deg)}°)/(360° × {frequency})"
        blanking = f" + {quantity(duty.blanking_s, 's')} blanking" if duty.blanking_s else ""
        return (
            f"{needed_in_words}, commutation counted as 0 until a circuit is designed; "
            f"{dead}{blanking} = {quantity(place.of(there_s), 's')}{_holds_to(case, needed_s)}"
        )

    return Comparison(
        points=table.points,
        applied=np.where(np.isnan(there_s), np.nan, needed_s),
        allowed=there_s,
        how=how,
        rating_for=lambda target, place: target / multiple,
        at_least=True,
        ambient="high",
        nothing_allowed="the dead interval is zero"
        if without
        else "forward voltage returns at once",
    )


def _needed_tq(case: Case) -> tuple[float, str]:
    """k·t_q with its corrections, in s and in words."""
    switch, factor = _thyristor(case), case.rules.factor
    assert switch.tq_s is not None
    steps = [(factor("tq"), "")]
    reverse_V = condition(switch, "tq_reverse_V")
    if case.has_diodes and reverse_V > LOW_REVERSE_VOLTAGE_V:
        why = f" (stated at {quantity(reverse_V, 'V')}; a feedback diode leaves one or two)"
        steps.append((factor("tq_low_reverse_voltage"), why))
    hotter_K = _hotter_than_stated(case)
    if hotter_K > 0.0:
        why = f" (junction {number(hotter_K)} K above the one t_q is stated for)"
        steps.append((1.0 + factor("tq_per_K") * hotter_K, why))
    needed_s = switch.tq_s
    words = quantity(switch.tq_s, "s")
    for by, why in steps:
        needed_s *= by
        words += f" × {number(by)}{why}"
    return needed_s, f"{words} = {quantity(needed_s, 's')} needed"


def _hotter_than_stated(case: Case) -> float:
    stated_C = _thyristor(case).tq_Tvj_C
    if stated_C is None or case.heat is None:
        return 0.0
    hottest_C = case.heat.switch_junction_C.max()
    return float(hottest_C - stated_C) if np.isfinite(hottest_C) else 0.0


def _holds_to(case: Case, needed_s: float) -> str:
    """The highest frequency at which the dead interval is still k·t_q."""
    duty = case.solved.duty
    from_gating_s = needed_s - duty.blanking_s
    if from_gating_s <= 0.0 or duty.conduction_deg >= 180.0:
        return ""
    highest_Hz = (180.0 - duty.conduction_deg) / 360.0 / from_gating_s
    return f", enough up to {quantity(highest_Hz, 'Hz')}"
