"""The rows of an IGBT (symbols of IEC 60747-9), in the order in which they are printed."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from engine.ratings import Igbt, entered
from engine.stress_table import Array, StressTable
from engine.verdicts.average_current import DIRECT_FORM, average_by_loss
from engine.verdicts.case import Case
from engine.verdicts.common import (
    THERMAL,
    energy_conditions,
    instantaneous,
    junction,
    largest,
    limit,
    steady_link,
)
from engine.verdicts.comparison import Comparison, Place
from engine.verdicts.row import Finding, Row, waits_for
from engine.verdicts.wording import number, quantity

FALL_SHARE = 0.8
"""Share of the turned-off current that falls in t_f (90 % to 10 %)."""


def _igbt(case: Case) -> Igbt:
    switch = case.candidate.switch
    assert isinstance(switch, Igbt)
    return switch


def turned_off_A(table: StressTable) -> Array:
    """Largest current that each switch turns off, `(n_points, 6)`."""
    return table.turn_off.current_A.max(axis=2, initial=0.0)


def _loop_H(case: Case) -> float:
    return case.solved.duty.loop_inductance_H + (_igbt(case).package_inductance_H or 0.0)


def overshoot_V(case: Case) -> Array:
    """(L_loop + L_package)·0.8·I_off/t_f at the instantaneous corners, `(n_points, 6)`."""
    off_A = turned_off_A(case.solved.instantaneous)
    return _loop_H(case) * FALL_SHARE * off_A / entered(_igbt(case), "tf_s")


def turn_off_peak(case: Case, row: Row) -> Finding:
    """Link voltage and turn-off overshoot."""
    table = case.solved.instantaneous
    link_V, over_V = table.points.voltage_V[:, None], overshoot_V(case)
    off_A, t_f = turned_off_A(table), entered(_igbt(case), "tf_s")

    def words(place: Place) -> str:
        link, over = place.of(link_V), place.of(over_V)
        didt = f"{FALL_SHARE} × {quantity(place.of(off_A), 'A')}/{quantity(t_f, 's')}"
        return (
            f"{quantity(link, 'V')} link + {quantity(over, 'V')} overshoot "
            f"({quantity(_loop_H(case), 'H')} of loop and package × {didt}) = "
            f"{quantity(link + over, 'V')}"
        )

    return limit(case, row, table, link_V + over_V, words)


def collector_current(case: Case, row: Row) -> Finding:
    """Equal loss with a direct current at the rated case, and the peak at nominal load."""
    by_loss = average_by_loss(DIRECT_FORM, "direct")(case, row)
    return (by_loss, _nominal_peak(case, row)) if isinstance(by_loss, Comparison) else by_loss


def _nominal_peak(case: Case, row: Row) -> Comparison:
    table = case.solved.instantaneous
    nominal = table.points.load_factor[:, None] == 1.0
    peak_A = np.where(nominal, table.switch_peak_A, np.nan)

    def words(place: Place) -> str:
        return f"peak at nominal load {quantity(place.of(peak_A), 'A')}"

    return limit(case, row, table, peak_A, words)


def turn_off_current(case: Case, row: Row) -> Finding:
    """Turn-off current against I_CRM, which holds up to V_CES."""
    table, V_CES = case.solved.instantaneous, entered(_igbt(case), "V_CES_V")
    off_A = turned_off_A(table)
    peak_V = table.points.voltage_V[:, None] + overshoot_V(case)

    def words(place: Place) -> str:
        peak = f"at a peak of {quantity(place.of(peak_V), 'V')}, V_CES {quantity(V_CES, 'V')}"
        return f"turned off {quantity(place.of(off_A), 'A')} {peak}"

    found = limit(case, row, table, off_A, words)
    return replace(
        found,
        allowed=np.where(peak_V <= V_CES, found.allowed, 0.0),
        rating_for=lambda target, place: (
            found.rating_for(target, place) if place.of(peak_V) <= V_CES else None
        ),
        nothing_allowed="the peak voltage at turn-off is above V_CES",
    )


def blanking(case: Case, row: Row) -> Finding:
    """k·(t_d(off) + t_f − t_d(on) + driver skew) against the dead interval."""
    switch, table = _igbt(case), case.solved.instantaneous
    k = case.rules.factor("blanking")
    t_off, t_f, t_on = (entered(switch, key) for key in ("tdoff_max_s", "tf_s", "tdon_min_s"))
    skew = switch.driver_skew_s or 0.0
    needed_s = max(k * (t_off + t_f - t_on + skew), 0.0)
    there_s = table.dead_interval_s[:, :1]

    def how(place: Place) -> str:
        delays = f"{quantity(t_off, 's')} + {quantity(t_f, 's')} − {quantity(t_on, 's')}"
        needed = f"{delays} + {quantity(skew, 's')} driver skew) = {quantity(needed_s, 's')}"
        there = quantity(place.of(there_s), "s")
        return f"{number(k)} × ({needed} needed; dead interval {there}"

    def rating_for(target: float, place: Place) -> float | None:
        delay_s = target / k - t_f + t_on - skew
        return delay_s if delay_s > 0.0 else None

    return Comparison(
        points=table.points,
        applied=np.full_like(there_s, needed_s),
        allowed=there_s,
        how=how,
        rating_for=rating_for,
        at_least=True,
        nothing_allowed="the dead interval is zero",
    )


_ON_STATE = ("V_CE0_V", "r_CE_ohm")

ROWS: tuple[Row, ...] = (
    Row(
        "switch.V_CES",
        "V_CES",
        "V",
        turn_off_peak,
        keys=("V_CES_V", "tf_s"),
        refines=("package_inductance_H",),
    ),
    Row("switch.V_steady", "V_CES, steady", "V", steady_link, keys=("V_CES_V",)),
    Row(
        "switch.I_C",
        "I_C",
        "A",
        collector_current,
        keys=("I_C_A", *_ON_STATE),
        conditions=("I_C_case_C",),
        heat=True,
    ),
    Row(
        "switch.I_CRM",
        "I_CRM",
        "A",
        largest("peak", instantaneous, lambda table: table.switch_peak_A),
        keys=("I_CRM_A",),
    ),
    Row(
        "switch.turn_off_current",
        "I_CRM",
        "A",
        turn_off_current,
        keys=("I_CRM_A", "V_CES_V", "tf_s"),
        refines=("package_inductance_H",),
    ),
    Row(
        "switch.blanking",
        "t_d(off)",
        "s",
        blanking,
        keys=("tdoff_max_s", "tf_s", "tdon_min_s"),
        refines=("driver_skew_s",),
    ),
    Row("switch.tsc", "t_psc", "s", waits_for("the calculation of a shoot-through")),
    Row("switch.V_isol", "V_isol", "V", steady_link, keys=("V_isol_V",)),
    Row(
        "switch.Tvj",
        "T_vj",
        "C",
        junction,
        keys=("Tvj_max_C", *_ON_STATE),
        refines=(*THERMAL, "Eon_J", "Eoff_J"),
        conditions=energy_conditions("Eon", "Eoff"),
        heat=True,
    ),
)
