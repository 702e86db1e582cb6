"""One operating point of the bridge: all that the solver needs to know, and nothing more."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from engine.duty import Duty, Triple

POSITIONS = ("T1", "T2", "T3", "T4", "T5", "T6")
PHASES = ("A", "B", "C")
LEG_OF_POSITION = (0, 2, 1, 0, 2, 1)
"""Leg (0 = A, 1 = B, 2 = C) of T1..T6."""
UPPER = (True, False, True, False, True, False)
"""Whether T1..T6 stand on the positive rail."""
UPPER_OF_LEG = (0, 2, 4)
LOWER_OF_LEG = (3, 5, 1)
"""Index into `POSITIONS` of the upper and lower position of legs A, B, C."""


@dataclass(frozen=True, slots=True)
class Bridge:
    """A bridge at one link voltage, frequency and load (SI units, angle in electrical degrees).

    `resistance_ohm`, `inductance_H` and `emf_peak_V` hold branches A, B, C of a star or
    AB, BC, CA of a delta.
    """

    voltage_V: float
    frequency_Hz: float
    conduction_deg: float
    connection: Literal["star", "delta"]
    resistance_ohm: Triple
    inductance_H: Triple
    emf_peak_V: Triple = (0.0, 0.0, 0.0)
    blanking_s: float = 0.0
    feedback_diodes: bool = True

    @property
    def period_s(self) -> float:
        return 1.0 / self.frequency_Hz

    @property
    def is_balanced(self) -> bool:
        """Whether the three branches are alike: each sixth of a period then mirrors the last."""
        return all(
            len(set(branches)) == 1
            for branches in (self.resistance_ohm, self.inductance_H, self.emf_peak_V)
        )

    @property
    def dead_interval_s(self) -> float:
        """From one switch's gate-off to the gate-on of the other switch of its leg."""
        return (180.0 - self.conduction_deg) / 360.0 / self.frequency_Hz + self.blanking_s


def bridge_at(duty: Duty, voltage_V: float, frequency_Hz: float, load_factor: float) -> Bridge:
    """The bridge of a duty at one voltage, frequency and load factor.

    A load factor m divides every R and L by m, so that all currents scale by m exactly.
    """
    return Bridge(
        voltage_V=voltage_V,
        frequency_Hz=frequency_Hz,
        conduction_deg=duty.conduction_deg,
        connection=duty.connection,
        resistance_ohm=_scaled(duty.resistance_ohm, 1.0 / load_factor),
        inductance_H=_scaled(duty.inductance_H, 1.0 / load_factor),
        emf_peak_V=duty.emf_peak_V,
        blanking_s=duty.blanking_s,
        feedback_diodes=duty.feedback_diodes,
    )


def nominal_bridge(duty: Duty) -> Bridge:
    """The bridge of a duty at nominal voltage, frequency and load."""
    return bridge_at(duty, duty.voltage_V.nominal, duty.frequency_Hz.nominal, 1.0)


def _scaled(values: Triple, by: float) -> Triple:
    a, b, c = values
    return a * by, b * by, c * by
