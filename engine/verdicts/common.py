"""Judges that more than one kind of device shares: voltages, currents, junction temperature."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import TypeVar

import numpy as np

from engine.junction_temperature import on_one_sink_with
from engine.losses import on_state_drop
from engine.ratings import condition
from engine.stress_table import Array, StressTable
from engine.verdicts.case import Case
from engine.verdicts.comparison import Comparison, Place
from engine.verdicts.row import Finding, Judge, Open, Row
from engine.verdicts.wording import celsius, named, number, quantity

Number = TypeVar("Number", float, Array)

HALF_SINE_FORM = np.pi / 2.0
"""Rms over average of a half-sine, for which I_T(AV) and I_F(AV) are stated."""
DIRECT_FORM = 1.0
"""The same of a direct current, for which I_C is stated."""


def without_diodes(case: Case) -> str | None:
    return None if case.has_diodes else "the bridge has no feedback diodes"


def limit(
    case: Case, row: Row, table: StressTable, applied: Array, words: Callable[[Place], str]
) -> Comparison:
    """A stress against the permitted fraction of its rating; `words` tell how it came about."""
    rating, fraction = row.compared(case), row.fraction(case)
    allowed = rating * fraction
    product = f"{quantity(rating, row.unit)} × {number(fraction)} = {quantity(allowed, row.unit)}"
    return Comparison(
        points=table.points,
        applied=applied,
        allowed=np.full((len(applied), 1), allowed),
        fraction=fraction,
        how=lambda place: f"{words(place)}; {product}",
        rating_for=lambda target, place: target / fraction,
    )


def link_peak(case: Case, row: Row) -> Finding:
    """Repetitive peak on a bridge without snubber: the link voltage times a transient factor."""
    table = case.solved.instantaneous
    link_V = table.points.voltage_V[:, None]
    return transient_peak(case, row, table, link_V, "link")


def transient_peak(
    case: Case, row: Row, table: StressTable, blocking_V: Array, what: str
) -> Comparison:
    """A blocking voltage times the rule set's transient factor."""
    factor = case.rules.factor("transient_overshoot")

    def words(place: Place) -> str:
        blocking = place.of(blocking_V)
        product = f"{quantity(blocking, 'V')} {what} × {number(factor)} transient factor"
        return f"{product} = {quantity(blocking * factor, 'V')}"

    return limit(case, row, table, blocking_V * factor, words)


def steady_link(case: Case, row: Row) -> Finding:
    """The link voltage, as a device stands it for hours, or its insulation does."""
    table = case.solved.instantaneous
    link_V = table.points.voltage_V[:, None]
    return limit(case, row, table, link_V, lambda place: f"{quantity(place.of(link_V), 'V')} link")


def largest(
    what: str, table_of: Callable[[Case], StressTable], column: Callable[[StressTable], Array]
) -> Judge:
    """Judge of a current of the solved bridge against the permitted fraction of its rating."""

    def judge(case: Case, row: Row) -> Finding:
        table = table_of(case)
        applied = column(table)

        def words(place: Place) -> str:
            return f"{what} {quantity(place.of(applied), row.unit)}"

        return limit(case, row, table, applied, words)

    return judge


def instantaneous(case: Case) -> StressTable:
    return case.solved.instantaneous


def thermal(case: Case) -> StressTable:
    return case.solved.thermal


# Average currents, by equal loss ----------------------------------------------------------


def equal_loss_average(
    threshold_V: float, slope_ohm: float, form: Number, loss_W: Number
) -> Number:
    """Average of a wave of some form factor that causes a loss: V_0·I + r·(form·I)² = loss."""
    square = 4.0 * slope_ohm * form**2 * loss_W
    return 2.0 * loss_W / (threshold_V + (threshold_V**2 + square) ** 0.5)


def cooling_share(case_C: Array, rated_case_C: float, Tvj_max_C: float) -> Array:
    """Share of the rated loss that a case hotter than the rating's still allows, at most 1."""
    return np.clip((Tvj_max_C - case_C) / (Tvj_max_C - rated_case_C), 0.0, 1.0)


def average_by_loss(rated_form: float, wave: str) -> Judge:
    """Judge of an average current against the one of its own wave that causes the rated loss.

    The row's first condition is the case temperature of the rating.
    """
    return partial(_average_by_loss, rated_form=rated_form, wave=wave)


def _average_by_loss(case: Case, row: Row, rated_form: float, wave: str) -> Finding:
    device, heat, table = row.device(case), case.heat, case.solved.thermal
    rated_case_C, Tvj_max_C = condition(device, row.conditions[0]), device.Tvj_max_C
    assert heat is not None
    assert Tvj_max_C is not None
    V0, r = on_state_drop(device)
    if rated_case_C >= Tvj_max_C:
        key = f"{row.part}.{row.conditions[0]}"
        return Open(f"needs {named(key)} below T_vj max, {celsius(Tvj_max_C)}", (key,))
    if V0 == r == 0.0:
        key = f"{row.part}.{row.keys[1]}"
        return Open(f"needs {named(key)} above 0, or a slope resistance", (key,))
    of_switch = row.part == "switch"
    average = table.switch_average_A if of_switch else table.diode_average_A
    rms = table.switch_rms_A if of_switch else table.diode_rms_A
    case_C = heat.switch_case_C if of_switch else heat.diode_case_C
    carries = average > 0.0
    form = np.where(carries, rms / np.where(carries, average, 1.0), 1.0)
    rated_A, fraction = row.compared(case), row.fraction(case)
    rated_W = V0 * rated_A + r * (rated_form * rated_A) ** 2
    share = cooling_share(case_C, rated_case_C, Tvj_max_C)
    equal_A = equal_loss_average(V0, r, form, share * rated_W)

    def rating_for(target: float, place: Place) -> float | None:
        if place.of(share) == 0.0:
            return None
        own_A = target / fraction
        loss_W = (V0 * own_A + r * (place.of(form) * own_A) ** 2) / place.of(share)
        return equal_loss_average(V0, r, rated_form, loss_W)

    def how(place: Place) -> str:
        rated = quantity(rated_A, "A")
        squared = f"({number(rated_form)} × {rated})²" if rated_form != 1.0 else f"({rated})²"
        loss = (
            f"{rated} {wave} at a case of {celsius(rated_case_C)}: {number(V0)} V × {rated} + "
            f"{quantity(r, 'Ω')} × {squared} = {quantity(rated_W, 'W')}"
        )
        if place.of(share) < 1.0:
            loss += (
                f"; case {celsius(place.of(case_C))}: × ({celsius(Tvj_max_C)} − case)/"
                f"({celsius(Tvj_max_C)} − {celsius(rated_case_C)}) = × {number(place.of(share))}"
            )
        equal = place.of(equal_A)
        return (
            f"average {quantity(place.of(average), 'A')}, form factor {number(place.of(form))}; "
            f"{loss}; with this form factor the same loss at {quantity(equal, 'A')}, "
            f"× {number(fraction)} = {quantity(equal * fraction, 'A')}"
        )

    return Comparison(
        points=table.points,
        applied=average,
        allowed=equal_A * fraction,
        fraction=fraction,
        how=how,
        rating_for=rating_for,
        ambient="high",
        nothing_allowed="the case is as hot as T_vj max",
    )


# Junction temperature ---------------------------------------------------------------------


def junction(case: Case, row: Row) -> Finding:
    """Mean junction temperature against T_vj max less the rule set's margin, by rise."""
    heat, Tvj_max_C = case.heat, row.device(case).Tvj_max_C
    assert heat is not None
    assert Tvj_max_C is not None
    junction_C = heat.switch_junction_C if row.part == "switch" else heat.diode_junction_C
    margin_K, limit_C = case.rules.factor("junction_margin_K"), case.rules.junction_limit_C

    def how(place: Place) -> str:
        return f"{_rise(case, row, place)}; {_ceiling(Tvj_max_C, margin_K, limit_C)}"

    return Comparison(
        points=case.solved.thermal.points,
        applied=junction_C,
        allowed=np.full((len(junction_C), 1), min(Tvj_max_C - margin_K, limit_C)),
        how=how,
        rating_for=lambda target, place: target + margin_K if target <= limit_C else None,
        zero=case.solved.duty.ambient_C.high,
        ambient="high",
        unlimited="runs away: losses grow faster with temperature than the cooling carries off",
        nothing_allowed="the ambient alone reaches the allowed temperature",
    )


def _ceiling(Tvj_max_C: float, margin_K: float, limit_C: float) -> str:
    own = f"T_vj max {celsius(Tvj_max_C)} − {number(margin_K)} K = {celsius(Tvj_max_C - margin_K)}"
    if limit_C < Tvj_max_C - margin_K:
        return f"{own}, limited by the rule set to {celsius(limit_C)}"
    return own


def _rise(case: Case, row: Row, place: Place) -> str:
    """The chain from the ambient to the junction, with its numbers."""
    heat, duty, device = case.heat, case.solved.duty, row.device(case)
    assert heat is not None
    found, column = heat.temperatures, place.position + (0 if row.part == "switch" else 6)
    if found.runaway[place.point]:
        return "no temperature at which losses and cooling agree"
    loss_W = found.loss_W[place.point]
    served_W = loss_W[on_one_sink_with(duty, column)].sum()
    shared = case.candidate.diode.co_packed
    case_W = loss_W[[place.position, place.position + 6]].sum() if shared else loss_W[column]
    Rth_ch = (case.candidate.switch if shared else device).Rth_ch_K_per_W or 0.0
    return (
        f"{celsius(duty.ambient_C.high)} ambient + "
        f"{quantity(served_W, 'W')} × {number(duty.sink_K_per_W or 0.0)} K/W heatsink + "
        f"{quantity(case_W, 'W')} × {number(Rth_ch)} K/W to the case + "
        f"{quantity(loss_W[column], 'W')} × {number(device.Rth_jc_K_per_W or 0.0)} K/W to the "
        f"junction = {celsius(found.junction_C[place.point, column])}, mean over the period, "
        "each load of the cycle taken as lasting"
    )
