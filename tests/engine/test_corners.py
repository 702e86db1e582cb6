"""Corners of a duty: which there are, and that scaling gives what solving gives."""

from __future__ import annotations

from dataclasses import fields

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from engine.bridge import bridge_at
from engine.corners import instantaneous_points, solution, solved, thermal_points
from engine.device_stress import stress_of
from engine.duty import duty_of
from engine.selection import CycleSegment, Gating, Load, Supply
from engine.steady_state import solve
from engine.stress_table import Events, OperatingPoints, StressTable, stacked
from tests.engine.hand_made import event, selection, stress


def points(*rows):
    grid = np.array(rows, dtype=float)
    return OperatingPoints(grid[:, 0], grid[:, 1], grid[:, 2])


def assert_same(found: StressTable, expected: StressTable):
    """Equal to 1e-9 of each column's largest value."""
    for field in fields(StressTable):
        a, b = getattr(found, field.name), getattr(expected, field.name)
        if isinstance(a, Events):
            for part in ("current_A", "voltage_V", "didt_A_per_s"):
                assert_close(getattr(a, part), getattr(b, part))
        elif isinstance(a, np.ndarray):
            assert_close(a, b)


def assert_close(a, b):
    assert a.shape == b.shape
    scale = np.nanmax(np.abs(b), initial=0.0, where=np.isfinite(b))
    np.testing.assert_allclose(a, b, rtol=1e-9, atol=1e-9 * scale)


def test_every_extreme_meets_every_other_and_the_nominal_point_comes_first():
    found = instantaneous_points(duty_of(selection()))
    rows = list(zip(found.voltage_V, found.frequency_Hz, found.load_factor, strict=True))
    assert rows[0] == (540.0, 50.0, 1.0)
    assert len(rows) == len(set(rows)) == 27
    assert (486.0, 5.0, 0.2) in rows
    assert (594.0, 90.0, 1.5) in rows


def test_an_extreme_that_equals_the_nominal_makes_no_corner_of_its_own():
    duty = duty_of(
        selection(
            supply=Supply(voltage_V=540.0), gating=Gating(conduction_deg=120.0, frequency_Hz=50.0)
        )
    )
    assert len(instantaneous_points(duty).voltage_V) == 3
    assert len(thermal_points(duty).voltage_V) == 1


def test_thermal_corners_run_over_the_overload_cycle_and_not_over_the_overload_corner():
    cycle = tuple(
        CycleSegment(duration_s=1.0, load_factor=factor) for factor in (1.0, 1.8, 1.0, 0.0)
    )
    found = thermal_points(duty_of(selection(overload_cycle=cycle)))
    assert set(found.load_factor) == {1.0, 1.8, 0.0}
    assert len(found.load_factor) == 27


@settings(max_examples=15, deadline=None)
@given(
    st.sampled_from([120.0, 137.0, 150.0, 180.0]),
    st.sampled_from([0.0, 1e-4]),
    st.sampled_from(["star", "delta"]),
    st.tuples(*[st.sampled_from([3.0, 9.0, 20.0])] * 3),
    st.tuples(*[st.sampled_from([0.0, 0.012, 0.1])] * 3),
    st.floats(100.0, 900.0),
    st.floats(0.1, 3.0),
)
def test_scaling_to_another_voltage_and_load_gives_what_solving_there_gives(
    conduction_deg, blanking_s, connection, resistance_ohm, inductance_H, voltage_V, factor
):
    duty = duty_of(
        selection(
            gating=Gating(conduction_deg=conduction_deg, frequency_Hz=50.0, blanking_s=blanking_s),
            load=Load(
                connection=connection, resistance_ohm=resistance_ohm, inductance_H=inductance_H
            ),
        )
    )
    base = stacked(
        points((540.0, 50.0, 1.0)), [stress_of(solve(bridge_at(duty, 540.0, 50.0, 1.0)))]
    )
    there = points((voltage_V, 50.0, factor))
    direct = stacked(there, [stress_of(solve(bridge_at(duty, voltage_V, 50.0, factor)))])
    assert_same(base.at(there), direct)


def test_each_frequency_is_scaled_from_its_own_solution():
    duty = duty_of(selection())
    bridge = solved(duty)
    row = np.flatnonzero(
        (bridge.instantaneous.points.frequency_Hz == 90.0)
        & (bridge.instantaneous.points.voltage_V == 594.0)
        & (bridge.instantaneous.points.load_factor == 1.5)
    )[0]
    direct = stress_of(solve(bridge_at(duty, 594.0, 90.0, 1.5)))
    peaks = [one.switch.current_peak_A for one in direct.positions]
    assert bridge.instantaneous.switch_peak_A[row] == pytest.approx(peaks, rel=1e-9)


def test_the_lightest_point_is_lowest_voltage_and_light_load_at_every_frequency():
    bridge = solved(duty_of(selection()))
    found = bridge.lightest.points
    assert set(found.voltage_V) == {486.0}
    assert set(found.load_factor) == {0.2}
    assert found.frequency_Hz.tolist() == list(bridge.states) == [50.0, 5.0, 90.0]


def test_the_nominal_stress_is_the_solution_at_nominal_voltage_frequency_and_load():
    duty = duty_of(selection())
    assert solved(duty).nominal == stress_of(solve(bridge_at(duty, 540.0, 50.0, 1.0)))


def test_a_bridge_that_has_been_solved_is_found_again():
    bridge = bridge_at(duty_of(selection()), 540.0, 50.0, 1.0)
    assert solution(bridge) is solution(bridge)


def test_events_of_one_kind_are_laid_out_by_position_and_padded_without_current():
    made = stress(
        events=(
            event(position="T2", current_A=7.0, voltage_V=100.0, didt_A_per_s=3.0),
            event(position="T2", current_A=8.0),
            event(position="T3", kind="on at current", current_A=9.0),
            event(position="T2", device="diode", kind="off recovery", current_A=4.0),
        )
    )
    table = stacked(points((540.0, 50.0, 1.0)), [made])
    assert table.turn_off.current_A[0, 1].tolist() == [7.0, 8.0]
    assert table.turn_off.didt_A_per_s[0, 1, 0] == 3.0
    assert np.isnan(table.turn_off.didt_A_per_s[0, 1, 1])
    assert table.turn_off.current_A[0, 0].tolist() == [0.0, 0.0]
    assert table.turn_on.current_A[0, 2].tolist() == [9.0]
    assert table.recovery.current_A[0, 1].tolist() == [4.0]


def test_time_to_turn_off_is_the_dead_interval_or_the_diodes_or_none():
    made = stress(
        {
            "T2": {"turn_off": "natural", "forward_reapplied_s": 2e-4},
            "T3": {"turn_off": "idle", "forward_reapplied_s": None},
        }
    )
    times = stacked(points((540.0, 50.0, 1.0)), [made]).turn_off_time_s[0]
    assert times[:2].tolist() == [1e-3, 2e-4]
    assert np.isnan(times[2])
