"""Judges that more than one kind of device shares: voltages, largest currents, temperature."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from engine.junction_temperature import on_one_sink_with
from engine.stress_table import Array, StressTable
from engine.verdicts.case import Case
from engine.verdicts.comparison import Comparison, Place
from engine.verdicts.row import Finding, Judge, Row
from engine.verdicts.wording import celsius, number, quantity

THERMAL = ("Rth_jc_K_per_W", "Rth_ch_K_per_W", "leakage_A")
"""Ratings that a junction temperature rests on beside the device's losses."""


def energy_conditions(*stems: str) -> tuple[str, ...]:
    """What the scaling of some switching energies rests on."""
    keys = ("current_exponent", "voltage_exponent", "per_K")
    return ("E_Tvj_C", *(f"{stem}_{key}" for stem in stems for key in keys))


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
