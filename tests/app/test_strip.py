"""What the strips hold of a solved bridge, their scales, and where they stand."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest

from app.widgets.strip import (
    GATES,
    LINE_CURRENTS,
    PHASE_VOLTAGES,
    POSITION,
    STRIPS,
    Strip,
    strips_of,
    value_at,
)
from app.widgets.strip_layout import COMFORTABLE, FOLDED, LEAST, AngleAxis, lay_out, strip_heights
from app.widgets.strip_painting import intervals_on, thinned, within_period
from app.widgets.strip_scale import Scale, figures_for, in_figures, roundest, scale_for, ticks
from app.widgets.strip_sheet import conduction_parts, intervals_of, scales_of
from tests.app.solved import solved, with_load


def strip(key: str, strips: tuple[Strip, ...]) -> Strip:
    return next(each for each in strips if each.key == key)


def all_strips(position: int = 0, **load: object) -> tuple[Strip, ...]:
    picture = solved(with_load(**load)) if load else solved()
    return strips_of(picture.waveforms, picture.duty.connection, position, picture.stress)


# Curves ---------------------------------------------------------------------------------


def test_stepped_voltages_have_a_lane_each_and_currents_share_one() -> None:
    strips = all_strips()
    assert [each.key for each in strips] == list(STRIPS)
    assert len(strip(PHASE_VOLTAGES, strips).lanes) == 3
    assert [curve.name for _, curve in strip(LINE_CURRENTS, strips).curves()] == ["A", "B", "C"]
    assert len(strip(LINE_CURRENTS, strips).lanes) == 1


def test_a_delta_shows_branch_currents_in_place_of_phase_voltages() -> None:
    strips = all_strips(connection="delta", resistance_ohm=9.0, inductance_H=0.012)
    branches = strip(PHASE_VOLTAGES, strips)
    assert branches.title == "Branch currents"
    assert [curve.name for _, curve in branches.curves()] == ["AB", "BC", "CA"]


def test_the_position_strip_follows_the_position_looked_at() -> None:
    shown = strip(POSITION, all_strips(position=4))
    assert shown.title == "Position T5"
    assert [curve.name for _, curve in shown.curves()] == ["T5", "D5", "T5"]


def test_a_diode_is_drawn_downwards_below_its_switch() -> None:
    (_, switch), (_, diode), _ = strip(POSITION, all_strips()).curves()
    assert switch.values.min() >= 0.0
    assert diode.values.max() <= 0.0
    assert diode.values.min() < 0.0


def test_headings_name_the_engines_rms_and_peak() -> None:
    stress = solved().stress
    figures = strip(LINE_CURRENTS, all_strips()).figures
    assert in_figures(stress.line_current_rms_A[0], "A") in figures
    assert in_figures(stress.line_current_peak_A[0], "A") in figures


def test_unlike_phases_are_all_named_in_the_heading() -> None:
    strips = all_strips(resistance_ohm=(9.0, 12.0, 5.0), inductance_H=0.012)
    assert strip(LINE_CURRENTS, strips).figures.count(" / ") == 4


def test_a_value_is_read_between_samples_and_just_after_a_jump() -> None:
    angle, values = np.array([0.0, 10.0, 10.0, 20.0]), np.array([0.0, 1.0, 5.0, 7.0])
    assert value_at(angle, values, 5.0) == pytest.approx(0.5)
    assert value_at(angle, values, 10.0) == 5.0
    assert value_at(angle, values, 15.0) == pytest.approx(6.0)
    assert value_at(angle, values, 20.0) == 7.0


def test_the_head_names_what_conducts_over_the_whole_period() -> None:
    parts = conduction_parts(solved().waveforms)
    assert parts[0][2] == "T1 T6 D2"
    assert parts[0][0] == 0.0
    assert parts[-1][1] == pytest.approx(360.0)
    assert all(a[1] == pytest.approx(b[0]) for a, b in pairwise(parts))


# Intervals ------------------------------------------------------------------------------


def test_dead_interval_and_freewheel_begin_at_gate_off() -> None:
    picture = solved()
    dead, freewheel, overrun = intervals_of(picture.waveforms, 0)
    assert (dead.start_deg, dead.end_deg) == pytest.approx((120.0, 180.0))
    freewheel_s = picture.stress.positions[0].freewheel_s
    assert freewheel.end_deg - 120.0 == pytest.approx(freewheel_s * 50.0 * 360.0)
    assert overrun.end_deg == pytest.approx(overrun.start_deg)


def test_overrun_is_the_part_of_the_freewheel_beyond_the_dead_interval() -> None:
    picture = solved(with_load(resistance_ohm=0.9, inductance_H=0.012))
    dead, freewheel, overrun = intervals_of(picture.waveforms, 0)
    assert freewheel.end_deg == pytest.approx(dead.end_deg)
    assert overrun.end_deg > dead.end_deg + 1.0


def test_an_interval_past_360_degrees_goes_on_at_0() -> None:
    assert within_period(300.0, 420.0) == [(300.0, 360.0), (0.0, 60.0)]
    assert within_period(480.0, 500.0) == [(120.0, 140.0)]
    assert within_period(120.0, 120.0) == []


def test_a_gate_that_is_on_across_360_degrees_is_two_bars() -> None:
    waveforms = solved().waveforms
    bars = intervals_on(waveforms.angle_deg, waveforms.gate[5].astype(float))
    assert bars == [pytest.approx((0.0, 60.0)), pytest.approx((300.0, 360.0))]


# Drawing points -------------------------------------------------------------------------


def test_thinning_moves_no_curve_by_more_than_a_quarter_of_a_pixel() -> None:
    waveforms = solved().waveforms
    x = waveforms.angle_deg * (580.0 / 360.0)
    for values in (waveforms.line_current_A[0], waveforms.link_current_A):
        y = values * 1.5
        kept_x, kept_y = thinned(x, y)
        assert len(kept_x) < len(x) / 4
        # A jump stands twice at one angle; interpolation there may take either side.
        once = np.diff(x, prepend=-1.0) > 0.0
        once &= np.diff(x, append=1e9) > 0.0
        assert np.abs(np.interp(x[once], kept_x, kept_y) - y[once]).max() < 0.25


def test_thinning_keeps_every_corner_of_a_step() -> None:
    x = np.array([0.0, 1.0, 2.0, 3.0, 3.0, 4.0, 5.0, 6.0])
    y = np.array([1.0, 1.0, 1.0, 1.0, 9.0, 9.0, 9.0, 9.0])
    kept = list(zip(*(each.tolist() for each in thinned(x, y)), strict=True))
    assert {(0.0, 1.0), (3.0, 1.0), (3.0, 9.0), (6.0, 9.0)} <= set(kept)


# Scales ---------------------------------------------------------------------------------


def test_a_scale_stays_while_the_curves_fill_most_of_it() -> None:
    scale = scale_for(-100.0, 100.0)
    assert scale_for(-80.0, 80.0, scale) is scale
    assert scale_for(-60.0, 60.0, scale) is not scale
    assert scale_for(-120.0, 120.0, scale) is not scale


def test_zero_is_on_every_scale_and_nothing_at_all_has_one() -> None:
    assert scale_for(5.0, 9.0).low < 0.0 < scale_for(5.0, 9.0).high
    assert scale_for(0.0, 0.0) == Scale(-1.0, 1.0)


def test_lanes_of_one_unit_share_their_scale() -> None:
    scales = scales_of(all_strips())
    assert len(set(scales[PHASE_VOLTAGES])) == 1
    assert len(set(scales[POSITION])) == 2


def test_ticks_are_round_and_far_enough_apart() -> None:
    assert ticks(Scale(-31.0, 31.0), 80.0, 20.0) == [-20.0, 0.0, 20.0]
    assert roundest(scale_for(-540.0, 540.0)) == 500.0


def test_figures_of_a_lane_have_one_unit_and_a_true_minus() -> None:
    figures = figures_for(Scale(-0.0311, 0.0311), "A")
    assert (figures.of(-0.0123), figures.unit) == ("−12.3", "mA")
    assert figures.of(1e-12) == "0"
    assert in_figures(21.0, "A") == "21.0 A"
    assert in_figures(-1188.0, "V") == "−1188 V"


# Layout ---------------------------------------------------------------------------------


def test_the_large_window_has_every_strip_open_at_the_planned_height() -> None:
    heights = strip_heights(STRIPS, 672.0, {})
    assert heights[GATES] == 66
    assert all(heights[key] >= 107 for key in STRIPS if key != GATES)


def test_in_the_small_window_phase_voltages_fold_first() -> None:
    heights = strip_heights(STRIPS, 486.0, {})
    assert heights[PHASE_VOLTAGES] == FOLDED
    assert heights[GATES] == 62
    others = [heights[key] for key in STRIPS if key not in (GATES, PHASE_VOLTAGES)]
    assert min(others) >= COMFORTABLE


@pytest.mark.parametrize("available", range(240, 800, 7))
def test_open_strips_are_never_too_low_and_all_fit(available: int) -> None:
    heights = strip_heights(STRIPS, float(available), {})
    assert all(h == FOLDED or h >= (62 if k == GATES else LEAST) for k, h in heights.items())
    assert sum(heights.values()) <= available


def test_what_the_user_opens_stays_open_before_the_others() -> None:
    heights = strip_heights(STRIPS, 420.0, {PHASE_VOLTAGES: False})
    assert heights[PHASE_VOLTAGES] >= LEAST
    assert heights[GATES] == FOLDED


def test_a_step_of_the_large_window_is_97_px_wide() -> None:
    layout = lay_out(STRIPS, 704.0, 712.0, {})
    assert layout.axis.x(60.0) - layout.axis.x(0.0) == pytest.approx(97.0, abs=0.5)
    assert lay_out(STRIPS, 512.0, 526.0, {}).axis.x(360.0) - 42.0 == pytest.approx(410.0)


def test_the_axis_reads_back_the_angle_it_shows() -> None:
    axis = AngleAxis(56.0, 636.0)
    assert axis.angle_deg(axis.x(137.0)) == pytest.approx(137.0)
    assert axis.angle_deg(0.0) == 0.0
    assert axis.angle_deg(9999.0) == 360.0
