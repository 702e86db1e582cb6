"""Hand-made stresses, parts and duties with round numbers, for tests of what is made of them.

All parts are invented. Nothing here is computed by the program.
"""

from __future__ import annotations

from typing import Any

import msgspec
import numpy as np

from engine.bridge import POSITIONS
from engine.corners import SolvedDuty, instantaneous_points, thermal_points
from engine.duty import duty_of
from engine.ratings import Diode, Igbt, Thyristor
from engine.selection import FORMAT, Candidate, Cooling, Gating, Load, Selection, Supply
from engine.stress import (
    BridgeStress,
    DiodeStress,
    PositionStress,
    SwitchingEvent,
    SwitchStress,
)
from engine.stress_table import OperatingPoints, stacked

SWITCH = SwitchStress(
    current_avg_A=10.0,
    current_rms_A=20.0,
    current_peak_A=40.0,
    gate_off_current_A=30.0,
    forward_blocking_peak_V=500.0,
    reverse_blocking_peak_V=0.0,
)
DIODE = DiodeStress(
    current_avg_A=2.0, current_rms_A=6.0, current_peak_A=30.0, reverse_blocking_peak_V=500.0
)
POSITION = PositionStress(
    position="T1",
    switch=SWITCH,
    diode=DIODE,
    dead_interval_s=1e-3,
    freewheel_s=5e-4,
    overrun_s=0.0,
    turn_off="forced",
    forward_reapplied_s=0.0,
    reapplied_step_V=500.0,
    turn_on_delay_s=0.0,
)


def position(name: str = "T1", **changes: Any) -> PositionStress:
    """One position; keys of the switch or the diode go to them: `switch={...}`."""
    for part in ("switch", "diode"):
        if part in changes:
            changes[part] = msgspec.structs.replace(getattr(POSITION, part), **changes[part])
    return msgspec.structs.replace(POSITION, position=name, **changes)


def event(**changes: Any) -> SwitchingEvent:
    usual = {
        "angle_deg": 0.0,
        "time_s": 0.0,
        "position": "T1",
        "device": "switch",
        "kind": "off forced",
        "current_A": 30.0,
        "voltage_V": 500.0,
        "didt_A_per_s": None,
    }
    return SwitchingEvent(**{**usual, **changes})


def stress(
    positions: dict[str, dict[str, Any]] | None = None, events: tuple[SwitchingEvent, ...] = ()
) -> BridgeStress:
    """A bridge whose six positions are alike, but for the changes named by position."""
    changes = positions or {}
    three = (1.0, 1.0, 1.0)
    return BridgeStress(
        line_current_rms_A=three,
        line_current_peak_A=three,
        branch_current_rms_A=three,
        line_voltage_rms_V=three,
        line_voltage_fundamental_rms_V=three,
        line_voltage_thd=three,
        phase_voltage_rms_V=three,
        load_power_W=1.0,
        link_power_W=1.0,
        link_current_avg_A=1.0,
        link_current_rms_A=1.0,
        link_current_ripple_rms_A=1.0,
        positions=tuple(position(name, **changes.get(name, {})) for name in POSITIONS),
        events=events,
    )


THYRISTOR = Thyristor(
    V_DRM_V=1400.0,
    V_RRM_V=1400.0,
    I_TAV_A=40.0,
    I_TAV_case_C=85.0,
    I_TRMS_A=80.0,
    I_TRM_A=200.0,
    tq_s=150e-6,
    tq_reverse_V=50.0,
    I_L_A=0.4,
    I_H_A=0.2,
    V_T0_V=1.0,
    r_T_ohm=6e-3,
    Tvj_max_C=125.0,
    Rth_jc_K_per_W=0.4,
    Rth_ch_K_per_W=0.1,
    V_isol_V=2500.0,
)
IGBT = Igbt(
    V_isol_V=2500.0,
    V_CES_V=1200.0,
    I_C_A=75.0,
    I_C_case_C=80.0,
    I_CRM_A=150.0,
    V_CE0_V=0.9,
    r_CE_ohm=15e-3,
    Eon_J=8e-3,
    Eoff_J=7e-3,
    E_current_A=75.0,
    E_voltage_V=600.0,
    E_Tvj_C=125.0,
    tdon_min_s=1e-7,
    tdoff_max_s=5e-7,
    tr_s=5e-8,
    tf_s=1e-7,
    driver_skew_s=1e-7,
    Tvj_max_C=150.0,
    Rth_jc_K_per_W=0.35,
    Rth_ch_K_per_W=0.1,
)
FREEWHEEL = Diode(
    V_RRM_V=1400.0,
    I_FAV_A=30.0,
    I_FAV_case_C=85.0,
    I_FRMS_A=60.0,
    I_FRM_A=200.0,
    V_F0_V=0.9,
    r_F_ohm=8e-3,
    Err_J=2e-3,
    E_current_A=75.0,
    E_voltage_V=600.0,
    E_Tvj_C=125.0,
    Tvj_max_C=150.0,
    Rth_jc_K_per_W=0.6,
    Rth_ch_K_per_W=0.2,
)


def candidate(switch: Any = THYRISTOR, diode: Diode = FREEWHEEL, name: str = "one") -> Candidate:
    return Candidate(name=name, switch=switch, diode=diode)


def selection(*candidates: Candidate, **changes: Any) -> Selection:
    """A star of 9 Ω and 12 mH on 540 V (486–594 V), 120°, 50 Hz (5–90 Hz)."""
    usual: dict[str, Any] = {
        "supply": Supply(voltage_V=540.0, voltage_low_V=486.0, voltage_high_V=594.0),
        "gating": Gating(
            conduction_deg=120.0, frequency_Hz=50.0, frequency_low_Hz=5.0, frequency_high_Hz=90.0
        ),
        "load": Load(connection="star", resistance_ohm=9.0, inductance_H=0.012),
        "cooling": Cooling(
            ambient_C=40.0, ambient_low_C=-10.0, ambient_high_C=45.0, sink_K_per_W=0.08
        ),
    }
    return Selection(format=FORMAT, version=1, candidates=candidates, **{**usual, **changes})


def solved_by_hand(made: BridgeStress, document: Selection) -> SolvedDuty:
    """As if the bridge of a document had been solved to `made` at every frequency.

    Latching needs the solution itself, which is not there.
    """
    duty = duty_of(document)
    f = duty.frequency_Hz
    frequencies = tuple(dict.fromkeys((f.nominal, f.low, f.high)))
    count = len(frequencies)
    points = OperatingPoints(
        np.full(count, duty.voltage_V.nominal), np.array(frequencies), np.ones(count)
    )
    base = stacked(points, [made] * count)
    return SolvedDuty(
        duty=duty,
        states={},
        nominal=made,
        base=base,
        lightest=base.at(OperatingPoints(points.voltage_V, points.frequency_Hz, np.ones(count))),
        instantaneous=base.at(instantaneous_points(duty)),
        thermal=base.at(thermal_points(duty)),
    )
