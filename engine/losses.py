"""Losses of switches and diodes from their currents and switching events.

Every cause but leakage is a straight line over the junction temperature, so that a device's
loss is `W + W_per_K · T_vj` plus a leakage that doubles every 10 K: losses and temperatures are
then brought to agreement with an exact derivative (`engine.junction_temperature`).

On-state loss V_0·I_avg + r·I_rms²: IEC 60747-6 and the worked examples of B. R. Gupta,
V. Singhal, Power Electronics (Example 2.16). Scaling of switching energies, of the recovered
charge, and the doubling of leakage: common practice, no source.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from engine.ratings import Diode, Igbt, Switch, Thyristor, condition, entered
from engine.stress_table import Array, Events, StressTable

ON_STATE_KEYS: dict[type, tuple[str, str, str, str]] = {
    Thyristor: ("V_T0_V", "r_T_ohm", "V_T0_25C_V", "r_T_25C_ohm"),
    Igbt: ("V_CE0_V", "r_CE_ohm", "V_CE0_25C_V", "r_CE_25C_ohm"),
    Diode: ("V_F0_V", "r_F_ohm", "V_F0_25C_V", "r_F_25C_ohm"),
}
"""Threshold voltage and slope resistance: hot (at T_vj max), and at 25 °C."""

REVERSE_VOLTAGE_WITH_DIODE_V = 2.0
"""What a conducting feedback diode leaves across the switch (common practice: one or two)."""

LEAKAGE_DOUBLES_EVERY_K = 10.0
_MOST_DOUBLINGS = 60.0  # keeps a diverging temperature from overflowing


@dataclass(frozen=True, slots=True, eq=False)
class Loss:
    """Loss of one cause, W + W_per_K · T_vj with T_vj in °C; each `(n_points, 6)`."""

    W: Array
    W_per_K: Array

    def at(self, Tvj_C: Array) -> Array:
        return self.W + self.W_per_K * Tvj_C

    def __add__(self, other: Loss) -> Loss:
        return Loss(self.W + other.W, self.W_per_K + other.W_per_K)


@dataclass(frozen=True, slots=True, eq=False)
class DeviceLoss:
    """Loss of the switches, or of the diodes, of all six positions at all points."""

    on_state: Loss
    switching: Loss
    recovery: Loss
    leakage_W: Array
    """At `Tvj_max_C`, `(n_points, 6)`."""
    Tvj_max_C: float

    def at(self, Tvj_C: Array) -> Array:
        """Total loss in W at junction temperatures `(n_points, 6)` in °C."""
        straight = self.on_state + self.switching + self.recovery
        return straight.at(Tvj_C) + self.leakage_at(Tvj_C)

    def slope_at(self, Tvj_C: Array) -> Array:
        """Derivative of `at` over the temperature, in W/K."""
        straight = self.on_state + self.switching + self.recovery
        growth = np.log(2.0) / LEAKAGE_DOUBLES_EVERY_K
        return straight.W_per_K + growth * self.leakage_at(Tvj_C)

    def leakage_at(self, Tvj_C: Array) -> Array:
        doublings = (Tvj_C - self.Tvj_max_C) / LEAKAGE_DOUBLES_EVERY_K
        return self.leakage_W * np.exp2(np.minimum(doublings, _MOST_DOUBLINGS))


def switch_loss(switch: Switch, table: StressTable, diodes: bool) -> DeviceLoss:
    """Loss of the switches; `diodes`: whether feedback diodes lie across them.

    All ratings of `missing_for_switch_loss` must be there.
    """
    on_state = on_state_loss(switch, table.switch_average_A, table.switch_rms_A)
    if isinstance(switch, Igbt):
        switching, recovery = _igbt_switching(switch, table), _nothing(table)
    else:
        switching = _thyristor_turn_on(switch, table)
        recovery = _thyristor_recovery(switch, table, diodes)
    return _device_loss(switch, table, on_state, switching, recovery)


def diode_loss(
    diode: Diode, switch: Switch, table: StressTable, loop_inductance_H: float
) -> DeviceLoss:
    """Loss of the feedback diodes; the switch that takes the current over sets their di/dt.

    All ratings of `missing_for_diode_loss` must be there.
    """
    on_state = on_state_loss(diode, table.diode_average_A, table.diode_rms_A)
    didt = commutation_didt(table.recovery, loop_inductance_H, switch)
    recovery = _diode_recovery(diode, table, didt)
    return _device_loss(diode, table, on_state, _nothing(table), recovery)


def no_loss(table: StressTable) -> DeviceLoss:
    """Loss of devices that are not there."""
    nothing = _nothing(table)
    return DeviceLoss(nothing, nothing, nothing, nothing.W, 0.0)


def missing_for_switch_loss(switch: Switch, table: StressTable) -> Iterator[str]:
    """Ratings without which the switches' loss at these points cannot be computed."""
    yield from _missing(switch, *ON_STATE_KEYS[type(switch)][:2])
    if isinstance(switch, Igbt):
        charged = {"Eon_J": table.turn_on, "Eoff_J": table.turn_off}
        needed = [key for key, events in charged.items() if np.any(events.current_A)]
        conditions = ("E_current_A", "E_voltage_V") if needed else ()
        yield from _missing(switch, *needed, *conditions)


def missing_for_diode_loss(diode: Diode, table: StressTable) -> Iterator[str]:
    """Ratings without which the diodes' loss at these points cannot be computed."""
    yield from _missing(diode, *ON_STATE_KEYS[Diode][:2])
    charged = np.any(table.recovery.current_A)
    if charged and (diode.Err_J is not None or diode.Qrr_As is None):
        yield from _missing(diode, "Err_J", "E_current_A", "E_voltage_V")


def _missing(device: Switch | Diode, *keys: str) -> Iterator[str]:
    return (key for key in keys if getattr(device, key) is None)


def on_state_drop(device: Switch | Diode) -> tuple[float, float]:
    """Threshold voltage in V and slope resistance in ohms, hot."""
    threshold, slope, _, _ = ON_STATE_KEYS[type(device)]
    return entered(device, threshold), entered(device, slope)


def on_state_loss(device: Switch | Diode, average_A: Array, rms_A: Array) -> Loss:
    """V_0(T)·I_avg + r(T)·I_rms², straight between 25 °C and T_vj max where both are known."""
    hot = on_state_drop(device)
    _, _, cold_threshold, cold_slope = ON_STATE_KEYS[type(device)]
    threshold = _line(getattr(device, cold_threshold), hot[0], device.Tvj_max_C)
    slope = _line(getattr(device, cold_slope), hot[1], device.Tvj_max_C)
    return Loss(
        threshold[0] * average_A + slope[0] * rms_A**2,
        threshold[1] * average_A + slope[1] * rms_A**2,
    )


def _line(cold: float | None, hot: float, Tvj_max_C: float | None) -> tuple[float, float]:
    """Value at 0 °C and change per kelvin of a line through 25 °C and T_vj max."""
    if cold is None or Tvj_max_C is None or Tvj_max_C <= 25.0:
        return hot, 0.0
    per_K = (hot - cold) / (Tvj_max_C - 25.0)
    return cold - 25.0 * per_K, per_K


def commutation_didt(events: Events, loop_inductance_H: float, switch: Switch) -> Array:
    """di/dt at which one device takes the current over from another, in A/s.

    What the load imposes; at a jump the step of voltage over the loop inductance, an IGBT's no
    faster than i/t_r. Infinite where neither limits it.
    """
    with np.errstate(divide="ignore", invalid="ignore"):
        hard = events.voltage_V / np.float64(loop_inductance_H)
    if isinstance(switch, Igbt) and switch.tr_s is not None:
        hard = np.fmin(hard, events.current_A / switch.tr_s)
    return np.where(np.isnan(events.didt_A_per_s), hard, np.abs(events.didt_A_per_s))


def recovered_charge(
    device: Thyristor | Diode, current_A: Array, didt_A_per_s: Array | None
) -> Array:
    """Q_rr in As, in proportion to current·√(di/dt) from where the sheet states it.

    A reference that the sheet leaves out, or a di/dt that is not known, scales nothing.
    """
    if device.Qrr_As is None:
        return np.zeros_like(current_A)
    reference_A = device.Qrr_current_A
    share = current_A / reference_A if reference_A else np.sign(current_A)
    if didt_A_per_s is None or device.Qrr_didt_A_per_s is None:
        return device.Qrr_As * share
    return device.Qrr_As * share * np.sqrt(didt_A_per_s / device.Qrr_didt_A_per_s)


def switching_energy(device: Igbt | Diode, name: str, events: Events) -> Loss:
    """Energy in J of all events of one period, `name` being Eon, Eoff or Err.

    E_ref·(i/I_ref)^k_i·(v/V_ref)^k_v·(1 + α(T_vj − T_ref)).
    """
    by_current, by_voltage, per_K = (
        condition(device, f"{name}_{key}")
        for key in ("current_exponent", "voltage_exponent", "per_K")
    )
    reference_C = condition(device, "E_Tvj_C")
    shares = (events.current_A / entered(device, "E_current_A")) ** by_current
    # 0⁰ is 1, and no current must cost no energy whatever the exponent.
    shares *= (events.voltage_V / entered(device, "E_voltage_V")) ** by_voltage * (
        events.current_A > 0.0
    )
    energy = entered(device, f"{name}_J") * shares.sum(axis=2)
    return Loss(energy * (1.0 - per_K * reference_C), energy * per_K)


def _igbt_switching(switch: Igbt, table: StressTable) -> Loss:
    charged = {"Eon": table.turn_on, "Eoff": table.turn_off}
    total = _nothing(table)
    for name, events in charged.items():
        if np.any(events.current_A):
            total += switching_energy(switch, name, events)
    return _per_second(total, table)


def _thyristor_turn_on(switch: Thyristor, table: StressTable) -> Loss:
    # The entered energy at its reference di/dt, for every turn-on at current.
    count = np.count_nonzero(table.turn_on.current_A, axis=2)
    return _per_second(_lasting((switch.Eon_J or 0.0) * count), table)


def _thyristor_recovery(switch: Thyristor, table: StressTable, diodes: bool) -> Loss:
    charge = recovered_charge(switch, table.turn_off.current_A, None).sum(axis=2)
    reverse_V = REVERSE_VOLTAGE_WITH_DIODE_V if diodes else table.switch_reverse_V
    return _per_second(_lasting(charge * reverse_V / 2.0), table)


def _diode_recovery(diode: Diode, table: StressTable, didt_A_per_s: Array) -> Loss:
    if diode.Err_J is not None and np.any(table.recovery.current_A):
        return _per_second(switching_energy(diode, "Err", table.recovery), table)
    charge = recovered_charge(diode, table.recovery.current_A, didt_A_per_s)
    return _per_second(_lasting((charge * table.recovery.voltage_V).sum(axis=2) / 2.0), table)


def _device_loss(
    device: Switch | Diode, table: StressTable, on_state: Loss, switching: Loss, recovery: Loss
) -> DeviceLoss:
    # As if the device blocked the whole link voltage all the time.
    leakage = (device.leakage_A or 0.0) * table.points.voltage_V[:, None]
    Tvj_max = device.Tvj_max_C
    return DeviceLoss(
        on_state,
        switching,
        recovery,
        np.broadcast_to(leakage, on_state.W.shape),
        0.0 if Tvj_max is None else Tvj_max,
    )


def _nothing(table: StressTable) -> Loss:
    return _lasting(np.zeros_like(table.switch_average_A))


def _lasting(value: Array) -> Loss:
    """The same at every temperature."""
    return Loss(value, np.zeros_like(value))


def _per_second(energy: Loss, table: StressTable) -> Loss:
    frequency = table.points.frequency_Hz[:, None]
    return Loss(energy.W * frequency, energy.W_per_K * frequency)
