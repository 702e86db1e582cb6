"""Results of one operating point: what every position and the bridge as a whole must stand.

Field names are those of the results contract. `None` means not computed or not applicable,
never zero.
"""

from __future__ import annotations

from typing import Literal

import msgspec

Kind = Literal["on at zero", "on at current", "off forced", "off natural", "off recovery"]
TurnOff = Literal["forced", "natural", "idle"]


class Result(msgspec.Struct, frozen=True, kw_only=True):
    """One block of the results."""


class SwitchStress(Result, frozen=True, kw_only=True):
    """Currents and blocking voltages of one switch, without its diode."""

    current_avg_A: float
    current_rms_A: float
    current_peak_A: float
    gate_off_current_A: float
    forward_blocking_peak_V: float
    reverse_blocking_peak_V: float


class DiodeStress(Result, frozen=True, kw_only=True):
    """Currents and blocking voltage of the feedback diode across one switch."""

    current_avg_A: float
    current_rms_A: float
    current_peak_A: float
    reverse_blocking_peak_V: float


class SwitchingEvent(Result, frozen=True, kw_only=True):
    """One change of state of one device.

    Turn-on: current just after, voltage just before. Turn-off: current just before, voltage
    just after. Recovery: the diode's current before and the voltage it then blocks.
    `didt_A_per_s` is what the load and the link impose, `None` where a jump of current makes
    it a matter of the loop inductance.
    """

    angle_deg: float
    time_s: float
    position: str
    device: Literal["switch", "diode"]
    kind: Kind
    current_A: float
    voltage_V: float
    didt_A_per_s: float | None


class PositionStress(Result, frozen=True, kw_only=True):
    """One of the six positions over one period."""

    position: str
    switch: SwitchStress
    diode: DiodeStress
    dead_interval_s: float
    freewheel_s: float
    overrun_s: float
    turn_off: TurnOff
    forward_reapplied_s: float | None
    reapplied_step_V: float | None
    """Forward voltage that stands on the switch at once after a forced turn-off."""
    turn_on_delay_s: float | None
    """From gate-on to the last rise of the switch's current from zero within the window."""


class BridgeStress(Result, frozen=True, kw_only=True):
    """The whole bridge over one period."""

    line_current_rms_A: tuple[float, float, float]
    line_current_peak_A: tuple[float, float, float]
    branch_current_rms_A: tuple[float, float, float]
    line_voltage_rms_V: tuple[float, float, float]
    line_voltage_fundamental_rms_V: tuple[float, float, float]
    line_voltage_thd: tuple[float, float, float]
    phase_voltage_rms_V: tuple[float, float, float] | None
    load_power_W: float
    link_power_W: float
    link_current_avg_A: float
    link_current_rms_A: float
    link_current_ripple_rms_A: float
    positions: tuple[PositionStress, ...]
    events: tuple[SwitchingEvent, ...]
