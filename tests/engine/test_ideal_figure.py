"""Textbook figures of the load's voltages."""

from __future__ import annotations

from dataclasses import replace
from math import sqrt

import pytest

from engine.bridge import Bridge
from engine.device_stress import stress_of
from engine.ideal_figure import ideal_line_rms, ideal_phase_rms
from engine.steady_state import solve

RESISTIVE = Bridge(
    voltage_V=614.60,
    frequency_Hz=50.0,
    conduction_deg=120.0,
    connection="star",
    resistance_ohm=(9.0,) * 3,
    inductance_H=(0.0,) * 3,
)


# M. D. Singh, K. B. Khanchandani, Power Electronics, 2nd ed., example 9.17 (read as a
# transcription): 614.60 V link, 120°, line rms 434.59 V, phase rms 250.91 V.
def test_120_degrees_give_the_printed_rms_values() -> None:
    assert 614.60 * ideal_phase_rms(RESISTIVE) == pytest.approx(250.91, abs=0.005)
    assert 614.60 * ideal_line_rms(RESISTIVE) == pytest.approx(434.59, abs=0.005)


# The same book, example 9.12: 500 V link, 180°, phase 235.70 V, line 408.25 V.
def test_180_degrees_give_the_printed_rms_values() -> None:
    bridge = replace(RESISTIVE, conduction_deg=180.0)
    assert 500.0 * ideal_phase_rms(bridge) == pytest.approx(235.70, abs=0.005)
    assert 500.0 * ideal_line_rms(bridge) == pytest.approx(408.25, abs=0.005)


@pytest.mark.parametrize("conduction_deg", [120.0, 135.0, 150.0, 167.5, 180.0])
@pytest.mark.parametrize("blanking_s", [0.0, 2e-4])
def test_the_solved_resistive_bridge_agrees(conduction_deg: float, blanking_s: float) -> None:
    bridge = replace(RESISTIVE, conduction_deg=conduction_deg, blanking_s=blanking_s)
    phase_rms_V = stress_of(solve(bridge)).phase_voltage_rms_V
    assert phase_rms_V is not None
    assert phase_rms_V == pytest.approx([bridge.voltage_V * ideal_phase_rms(bridge)] * 3, rel=1e-9)


def test_phase_and_line_stand_in_the_ratio_of_a_balanced_star() -> None:
    assert ideal_line_rms(RESISTIVE) / ideal_phase_rms(RESISTIVE) == pytest.approx(sqrt(3.0))
