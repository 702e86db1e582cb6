"""The rows of a feedback diode (symbols of IEC 60747-2), in the order in which they are printed."""

from __future__ import annotations

from functools import partial

from engine.verdicts.average_current import HALF_SINE_FORM, average_by_loss
from engine.verdicts.common import (
    THERMAL,
    energy_conditions,
    instantaneous,
    junction,
    largest,
    link_peak,
    steady_link,
    thermal,
    without_diodes,
)
from engine.verdicts.row import Row, waits_for

_row = partial(Row, applies=without_diodes)
_ON_STATE = ("V_F0_V", "r_F_ohm")
_A_SHOOT_THROUGH = waits_for("the calculation of a shoot-through")

ROWS: tuple[Row, ...] = (
    _row("diode.V_RRM", "V_RRM", "V", link_peak, keys=("V_RRM_V",)),
    _row("diode.V_steady", "V_RRM, steady", "V", steady_link, keys=("V_RRM_V",)),
    _row(
        "diode.I_FAV",
        "I_F(AV)",
        "A",
        average_by_loss(HALF_SINE_FORM, "half-sine"),
        keys=("I_FAV_A", *_ON_STATE),
        conditions=("I_FAV_case_C",),
        heat=True,
    ),
    _row(
        "diode.I_FRMS",
        "I_F(RMS)",
        "A",
        largest("rms", thermal, lambda table: table.diode_rms_A),
        keys=("I_FRMS_A",),
    ),
    _row(
        "diode.I_FRM",
        "I_FRM",
        "A",
        largest("peak", instantaneous, lambda table: table.diode_peak_A),
        keys=("I_FRM_A",),
    ),
    _row("diode.I_FSM", "I_FSM", "A", _A_SHOOT_THROUGH),
    _row("diode.I2t", "I²t", "A2s", _A_SHOOT_THROUGH),
    _row("diode.didt_recovery", "−di/dt", "A/s", waits_for("the di/dt reactor and the snubber")),
    _row(
        "diode.Tvj",
        "T_vj",
        "C",
        junction,
        keys=("Tvj_max_C", *_ON_STATE),
        refines=(*THERMAL, "Err_J", "Qrr_As"),
        conditions=energy_conditions("Err"),
        heat=True,
    ),
)
