"""The rows of a thyristor (symbols of IEC 60747-6), in the order in which they are printed."""

from __future__ import annotations

from engine.verdicts.average_current import HALF_SINE_FORM, average_by_loss
from engine.verdicts.case import Case
from engine.verdicts.common import (
    THERMAL,
    instantaneous,
    junction,
    largest,
    link_peak,
    steady_link,
    thermal,
    transient_peak,
)
from engine.verdicts.comparison import Comparison
from engine.verdicts.dead_interval import dead_interval
from engine.verdicts.gate_pulse import gate_pulse, holding, latching
from engine.verdicts.row import Row, waits_for


def _with_diodes(case: Case) -> str | None:
    return "a feedback diode leaves a volt or two of reverse voltage" if case.has_diodes else None


def reverse_peak(case: Case, row: Row) -> Comparison:
    """Reverse blocking voltage where no feedback diode takes it away."""
    table = case.solved.instantaneous
    return transient_peak(case, row, table, table.switch_reverse_V, "reverse")


_ON_STATE = ("V_T0_V", "r_T_ohm")
_A_SHOOT_THROUGH = waits_for("the calculation of a shoot-through")

ROWS: tuple[Row, ...] = (
    Row("switch.V_DRM", "V_DRM", "V", link_peak, keys=("V_DRM_V",)),
    Row("switch.V_RRM", "V_RRM", "V", reverse_peak, keys=("V_RRM_V",), applies=_with_diodes),
    Row(
        "switch.I_TAV",
        "I_T(AV)",
        "A",
        average_by_loss(HALF_SINE_FORM, "half-sine"),
        keys=("I_TAV_A", *_ON_STATE),
        conditions=("I_TAV_case_C",),
        heat=True,
    ),
    Row(
        "switch.I_TRMS",
        "I_T(RMS)",
        "A",
        largest("rms", thermal, lambda table: table.switch_rms_A),
        keys=("I_TRMS_A",),
    ),
    Row(
        "switch.I_TRM",
        "I_TRM",
        "A",
        largest("peak", instantaneous, lambda table: table.switch_peak_A),
        keys=("I_TRM_A",),
    ),
    Row("switch.I_TSM", "I_TSM", "A", _A_SHOOT_THROUGH),
    Row("switch.I2t", "I²t", "A2s", _A_SHOOT_THROUGH),
    Row("switch.didt", "(di/dt)cr", "A/s", waits_for("the di/dt reactor and the snubber")),
    Row("switch.dvdt", "(dv/dt)cr", "V/s", waits_for("the snubber")),
    Row(
        "switch.tq_dead",
        "t_q",
        "s",
        dead_interval,
        keys=("tq_s",),
        conditions=("tq_reverse_V",),
        refines=("tq_Tvj_C",),
    ),
    Row("switch.tq_commutation", "t_q", "s", waits_for("the commutation circuit")),
    Row("switch.I_L", "I_L", "A", latching, keys=("I_L_A",), refines=("V_T0_V",)),
    Row("switch.I_H", "I_H", "A", holding, keys=("I_H_A",), refines=("V_T0_V",)),
    Row("switch.gate_pulse", "gate pulse", "s", gate_pulse, keys=("I_L_A",), refines=("V_T0_V",)),
    Row("switch.V_steady", "V_DRM, steady", "V", steady_link, keys=("V_DRM_V",)),
    Row("switch.V_isol", "V_isol", "V", steady_link, keys=("V_isol_V",)),
    Row(
        "switch.Tvj",
        "T_vj",
        "C",
        junction,
        keys=("Tvj_max_C", *_ON_STATE),
        refines=THERMAL,
        heat=True,
    ),
)
