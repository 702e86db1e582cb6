"""Every row of the verdict table with numbers by hand.

The hand-made bridge stands at 540 V (486–594 V) with 10 A average, 20 A rms, 40 A peak and 30 A
at gate-off in every switch, 2, 6 and 30 A in every diode, and 1 ms of dead interval.
"""

from __future__ import annotations

from dataclasses import replace
from math import pi, sqrt

import msgspec
import pytest

from engine.ratings import Diode, Igbt, Thyristor
from engine.rule_sets import COMMON_PRACTICE, MIL_STD_975M
from engine.selection import Cooling
from engine.verdicts.candidate import ROWS
from engine.verdicts.case import case_of
from engine.verdicts.row import check_of
from tests.engine.hand_made import (
    FREEWHEEL,
    IGBT,
    THYRISTOR,
    candidate,
    event,
    selection,
    solved_by_hand,
    stress,
)

LARGEST = 594.0 / 540.0
"""Currents of the hand-made bridge grow with the link voltage."""

BY_HAND = {row.id for kind in ROWS for row in ROWS[kind]} - {
    "switch.I_L",
    "switch.I_H",
    "switch.gate_pulse",
}


def judged(switch=THYRISTOR, diode=FREEWHEEL, made=None, rules=COMMON_PRACTICE, **changes):
    """The checks of a candidate in the hand-made bridge, by id."""
    document = selection(candidate(switch, diode), **changes)
    bridge = solved_by_hand(made or stress(), document)
    case = case_of(document.candidates[0], bridge, rules)
    rows = [row for row in ROWS[type(switch)] if row.id in BY_HAND]
    return {row.id: check_of(row, case) for row in rows}


def changed(device, **ratings):
    return msgspec.structs.replace(device, **ratings)


# Voltages ---------------------------------------------------------------------------------


def test_repetitive_peak_is_the_highest_link_voltage_times_the_transient_factor():
    check = judged(changed(THYRISTOR, V_DRM_V=1200.0))["switch.V_DRM"]
    assert (check.applied, check.allowed) == pytest.approx((891.0, 960.0))
    assert check.headroom_pct == pytest.approx(7.1875)
    assert (check.verdict, check.position, check.fraction) == ("tight", None, 0.8)
    assert check.would_do == pytest.approx(891.0 / (0.8 * 0.9))
    assert check.corner.voltage_V == 594.0
    assert check.how == (
        "594 V link × 1.5 transient factor = 891 V; 1200 V × 0.8 = 960 V; headroom 7.2 %"
    )


def test_a_corner_that_matters_not_is_named_at_its_nominal_value():
    corner = judged()["switch.V_DRM"].corner
    assert (corner.frequency_Hz, corner.load_factor, corner.ambient_C) == (50.0, 1.0, 40.0)


@pytest.mark.parametrize(
    ("check_id", "switch", "allowed"),
    [
        ("switch.V_steady", THYRISTOR, 1400.0 * 0.6),
        ("switch.V_steady", IGBT, 1200.0 * 2 / 3),
        ("diode.V_steady", THYRISTOR, 1400.0 * 0.6),
        ("switch.V_isol", THYRISTOR, 2500.0 * 0.5),
    ],
)
def test_the_link_stands_for_hours_against_a_smaller_fraction(check_id, switch, allowed):
    check = judged(switch)[check_id]
    assert (check.applied, check.allowed) == pytest.approx((594.0, allowed))


def test_the_derating_table_judges_the_same_voltage_more_strictly():
    check = judged(changed(THYRISTOR, V_DRM_V=1200.0), rules=MIL_STD_975M)["switch.V_DRM"]
    assert check.allowed == pytest.approx(840.0)
    assert check.verdict == "undersized"


def test_reverse_voltage_does_not_matter_to_a_thyristor_with_a_feedback_diode():
    check = judged(changed(THYRISTOR, V_RRM_V=None))["switch.V_RRM"]
    assert (check.verdict, check.applied, check.needs) == ("not assessed", None, ())
    assert check.reason.startswith("does not apply")


def test_without_feedback_diodes_the_reverse_peak_is_compared_and_diodes_are_not():
    made = stress({"T4": {"switch": {"reverse_blocking_peak_V": 270.0}}})
    load = {"connection": "star", "resistance_ohm": 9.0, "inductance_H": 0.0}
    checks = judged(
        diode=Diode(), made=made, feedback_diodes=False, load=type(selection().load)(**load)
    )
    check = checks["switch.V_RRM"]
    assert check.applied == pytest.approx(270.0 * LARGEST * 1.5)
    assert check.position == "T4"
    of_diode = [one for one in checks.values() if one.id.startswith("diode.")]
    assert {one.reason for one in of_diode} == {"does not apply: the bridge has no feedback diodes"}
    assert checks["switch.Tvj"].verdict == "adequate"


# IGBT: V_CES = 594 + (200 + 20) nH · 0.8 · 49.5 A / 100 ns = 594 + 87.12 V at overload.
def test_turn_off_overshoot_stands_on_the_link_voltage():
    made = stress(events=(event(position="T2", current_A=30.0),))
    check = judged(changed(IGBT, package_inductance_H=20e-9), made=made)["switch.V_CES"]
    assert check.applied == pytest.approx(594.0 + 220e-9 * 0.8 * 30.0 * LARGEST * 1.5 / 100e-9)
    assert check.applied == pytest.approx(681.12)
    assert (check.position, check.corner.load_factor) == ("T2", 1.5)
    assert check.allowed == pytest.approx(960.0)


# Currents ---------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("check_id", "switch", "applied", "rating"),
    [
        ("switch.I_TRMS", THYRISTOR, 20.0, 80.0),
        ("switch.I_TRM", THYRISTOR, 40.0 * 1.5, 200.0),
        ("switch.I_CRM", IGBT, 40.0 * 1.5, 150.0),
        ("diode.I_FRMS", THYRISTOR, 6.0, 60.0),
        ("diode.I_FRM", THYRISTOR, 30.0 * 1.5, 200.0),
    ],
)
def test_rms_runs_over_the_cycle_and_peaks_over_the_overload(check_id, switch, applied, rating):
    check = judged(switch)[check_id]
    assert check.applied == pytest.approx(applied * LARGEST)
    assert check.allowed == pytest.approx(0.8 * rating)
    assert check.would_do == pytest.approx(applied * LARGEST / (0.8 * 0.9))


def test_the_worst_position_is_named():
    check = judged(made=stress({"T5": {"switch": {"current_peak_A": 60.0}}}))["switch.I_TRM"]
    assert check.position == "T5"


# Rated: 40 A half-sine, 1 V, 6 mΩ: 40 + 6e-3·(40·π/2)² = 63.69 W. The wave's form factor is 2:
# I + 6e-3·4·I² = 63.69 W at I = (−1 + √(1 + 4·0.024·63.69))/0.048.
def test_average_current_is_allowed_up_to_the_loss_of_the_rated_half_sine():
    check = judged()["switch.I_TAV"]
    rated_W = 40.0 + 6e-3 * (40.0 * pi / 2) ** 2
    equal_A = (-1.0 + sqrt(1.0 + 4 * 0.024 * rated_W)) / 0.048
    assert check.applied == pytest.approx(10.0 * LARGEST)
    assert check.allowed == pytest.approx(0.8 * equal_A)
    assert check.corner.ambient_C == 45.0
    assert "form factor 2;" in check.how


def test_without_slope_resistance_averages_are_compared_directly():
    check = judged(changed(THYRISTOR, r_T_ohm=0.0))["switch.I_TAV"]
    assert check.allowed == pytest.approx(0.8 * 40.0)


def test_without_threshold_voltage_rms_values_are_compared():
    check = judged(changed(THYRISTOR, V_T0_V=0.0))["switch.I_TAV"]
    assert check.allowed == pytest.approx(0.8 * 40.0 * (pi / 2) / 2.0)


# Loss of one switch 11 + 6e-3·22² = 13.904 W. A case-to-sink resistance of 4 K/W alone makes the
# case 45 + 4·13.904 = 100.6 °C, so that (125 − 100.6)/(125 − 85) of the rated loss is allowed.
def test_a_case_hotter_than_the_ratings_allows_less_loss():
    hot = changed(THYRISTOR, Rth_ch_K_per_W=4.0)
    check = judged(hot, cooling=Cooling(ambient_C=45.0, sink_K_per_W=0.0))["switch.I_TAV"]
    share = (125.0 - (45.0 + 4.0 * 13.904)) / (125.0 - 85.0)
    loss_W = share * (40.0 + 6e-3 * (40.0 * pi / 2) ** 2)
    assert check.allowed == pytest.approx(0.8 * (-1.0 + sqrt(1.0 + 4 * 0.024 * loss_W)) / 0.048)
    assert ", × (125.0 °C − 100.6 °C case)/(125.0 °C − 85.0 °C) = × 0.6096" in check.how


def test_a_cooler_case_allows_no_more_than_the_rating():
    warm = judged(cooling=Cooling(ambient_C=40.0, sink_K_per_W=0.1))["switch.I_TAV"]
    cool = judged(cooling=Cooling(ambient_C=-20.0, sink_K_per_W=0.0))["switch.I_TAV"]
    assert cool.allowed == pytest.approx(warm.allowed)


def test_a_case_as_hot_as_the_junction_may_be_allows_nothing():
    hot = changed(THYRISTOR, Rth_ch_K_per_W=8.0)
    check = judged(hot)["switch.I_TAV"]
    assert (check.verdict, check.headroom_pct, check.would_do) == ("undersized", None, None)
    assert check.reason == "the case is as hot as T_vj max"


def test_a_hot_case_allows_nothing_to_a_device_without_threshold_either():
    hot = changed(THYRISTOR, V_T0_V=0.0, Rth_ch_K_per_W=40.0)
    assert judged(hot)["switch.I_TAV"].reason == "the case is as hot as T_vj max"


def test_a_rated_case_above_the_highest_junction_temperature_is_no_rating():
    check = judged(changed(THYRISTOR, I_TAV_case_C=125.0))["switch.I_TAV"]
    assert check.verdict == "not assessed"
    assert check.needs == ("switch.I_TAV_case_C",)


def test_a_device_without_any_drop_has_no_rated_loss():
    check = judged(changed(THYRISTOR, V_T0_V=0.0, r_T_ohm=0.0))["switch.I_TAV"]
    assert check.verdict == "not assessed"
    assert check.needs == ("switch.V_T0_V",)


def test_an_idle_diode_leaves_its_whole_average_free():
    still = {"current_avg_A": 0.0, "current_rms_A": 0.0, "current_peak_A": 0.0}
    positions = {f"T{n}": {"diode": still} for n in range(1, 7)}
    check = judged(made=stress(positions))["diode.I_FAV"]
    assert (check.applied, check.headroom_pct) == (0.0, 100.0)


# I_C is a direct current: 75 A · 0.9 V + 15 mΩ · (75 A)² = 151.9 W. The wave's form factor is 2.
def test_collector_current_is_compared_by_loss_with_a_direct_current():
    switch = changed(IGBT, I_C_A=300.0 / 8.0)
    flat = {f"T{n}": {"switch": {"current_peak_A": 12.0}} for n in range(1, 7)}
    check = judged(switch, made=stress(flat))["switch.I_C"]
    rated_W = 0.9 * 37.5 + 15e-3 * 37.5**2
    equal_A = (-0.9 + sqrt(0.81 + 4 * 0.06 * rated_W)) / 0.12
    assert check.applied == pytest.approx(10.0 * LARGEST)
    assert check.allowed == pytest.approx(0.8 * equal_A)


def test_collector_current_is_also_compared_with_the_peak_at_nominal_load():
    check = judged(changed(IGBT, I_C_A=60.0))["switch.I_C"]
    assert check.applied == pytest.approx(40.0 * LARGEST)
    assert check.corner.load_factor == 1.0
    assert check.would_do == pytest.approx(40.0 * LARGEST / 0.72)


def test_turn_off_current_is_compared_up_to_the_collector_voltage():
    made = stress(events=(event(current_A=30.0),))
    check = judged(IGBT, made=made)["switch.turn_off_current"]
    assert (check.applied, check.allowed) == pytest.approx((30.0 * LARGEST * 1.5, 120.0))


def test_no_turn_off_current_is_allowed_above_the_collector_voltage():
    made = stress(events=(event(current_A=30.0),))
    check = judged(changed(IGBT, V_CES_V=600.0), made=made)["switch.turn_off_current"]
    assert (check.verdict, check.headroom_pct, check.would_do) == ("undersized", None, None)
    assert check.reason == "the peak voltage at turn-off is above V_CES"


# Turn-off ---------------------------------------------------------------------------------


def test_forced_turn_off_needs_the_dead_interval_to_outlast_the_corrected_time():
    check = judged()["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 1.5 * 1.5)
    assert check.allowed == pytest.approx(1e-3)
    assert check.would_do == pytest.approx(1e-3 * 0.9 / 2.25)
    assert check.at_least
    assert check.corner.ambient_C == 45.0
    assert "until a circuit is designed" in check.how


def test_a_time_stated_just_above_a_low_reverse_voltage_is_corrected():
    check = judged(changed(THYRISTOR, tq_reverse_V=5.5))["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 2.25)


def test_a_time_stated_at_a_low_reverse_voltage_is_not_corrected_for_it():
    check = judged(changed(THYRISTOR, tq_reverse_V=5.0))["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 1.5)


def test_without_feedback_diodes_the_time_is_not_corrected_for_their_voltage():
    load = type(selection().load)(connection="star", resistance_ohm=9.0, inductance_H=0.0)
    check = judged(diode=Diode(), feedback_diodes=False, load=load)["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 1.5)


# Junction of the hand-made bridge: 45 + 0.5·13.904 + 0.08·6·(13.904 + P_diode), P_diode of
# 2.2 A and 6.6 A: 1.98 + 0.348 = 2.328 W.
JUNCTION_C = 45.0 + 0.5 * 13.904 + 0.08 * 6 * (13.904 + 2.32848)


def test_a_junction_hotter_than_the_times_own_condition_lengthens_it():
    stated_C = JUNCTION_C - 10.0
    check = judged(changed(THYRISTOR, tq_Tvj_C=stated_C))["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 2.25 * 1.1)


def test_half_a_kelvin_above_the_times_own_condition_already_lengthens_it():
    check = judged(changed(THYRISTOR, tq_Tvj_C=JUNCTION_C - 0.5))["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 2.25 * 1.005)


def test_a_junction_that_runs_away_leaves_the_time_to_its_own_row():
    switch = changed(THYRISTOR, leakage_A=5.0, Rth_ch_K_per_W=2.0, tq_Tvj_C=115.0)
    checks = judged(switch)
    assert checks["switch.Tvj"].verdict == "undersized"
    assert checks["switch.tq_dead"].applied == pytest.approx(150e-6 * 2.25)


def test_a_junction_cooler_than_the_times_own_condition_does_not_shorten_it():
    check = judged(changed(THYRISTOR, tq_Tvj_C=125.0))["switch.tq_dead"]
    assert check.applied == pytest.approx(150e-6 * 2.25)


def test_natural_turn_off_is_tested_against_the_time_the_diode_holds():
    positions = {
        f"T{n}": {"turn_off": "natural", "forward_reapplied_s": 4e-4, "dead_interval_s": 0.0}
        for n in range(1, 7)
    }
    check = judged(made=stress(positions))["switch.tq_dead"]
    assert check.allowed == pytest.approx(4e-4)
    assert check.verdict == "adequate"
    assert "the current ends before gate-off" in check.how


def test_without_a_dead_interval_nothing_turns_off():
    check = judged(made=stress({"T3": {"dead_interval_s": 0.0}}))["switch.tq_dead"]
    assert (check.verdict, check.headroom_pct, check.position) == ("undersized", None, "T3")
    assert check.reason == "the dead interval is zero"


def test_a_diode_that_does_not_hold_leaves_no_time_either():
    natural = {"turn_off": "natural", "forward_reapplied_s": 0.0, "dead_interval_s": 0.0}
    check = judged(made=stress({"T3": natural}))["switch.tq_dead"]
    assert (check.verdict, check.position) == ("undersized", "T3")
    assert check.reason == "forward voltage returns at once"


def test_an_idle_bridge_has_nothing_to_turn_off():
    idle = {f"T{n}": {"turn_off": "idle", "forward_reapplied_s": None} for n in range(1, 7)}
    check = judged(made=stress(idle))["switch.tq_dead"]
    assert (check.verdict, check.needs) == ("not assessed", ())
    assert check.reason.startswith("does not apply")


# 1.2 · (500 + 100 − 100 + 100) ns = 720 ns.
def test_blanking_must_outlast_the_spread_of_delays():
    check = judged(IGBT)["switch.blanking"]
    assert check.applied == pytest.approx(720e-9)
    assert check.allowed == pytest.approx(1e-3)
    assert check.would_do == pytest.approx(1e-3 * 0.9 / 1.2 - 100e-9)


def test_a_driver_skew_and_a_package_inductance_that_are_not_entered_count_as_none():
    made = stress(events=(event(current_A=30.0),))
    checks = judged(changed(IGBT, driver_skew_s=None), made=made)
    assert checks["switch.blanking"].applied == pytest.approx(1.2 * 500e-9)
    assert checks["switch.V_CES"].applied == pytest.approx(594.0 + 79.2)


def test_a_switch_that_turns_nothing_off_has_no_overshoot_up_to_the_voltage_itself():
    checks = judged(changed(IGBT, V_CES_V=594.0))
    assert checks["switch.V_CES"].applied == 594.0
    assert checks["switch.turn_off_current"].applied == 0.0
    assert checks["switch.turn_off_current"].verdict == "adequate"
    assert checks["switch.turn_off_current"].would_do is None


def test_blanking_is_a_matter_of_the_gating_and_of_no_position():
    check = judged(IGBT)["switch.blanking"]
    assert (check.position, check.at_least) == (None, True)


@pytest.mark.parametrize("check_id", ["switch.I_C", "switch.Tvj", "diode.I_FAV", "diode.Tvj"])
def test_what_rests_on_temperatures_needs_a_heatsink(check_id):
    check = judged(IGBT, cooling=Cooling(ambient_C=40.0))[check_id]
    assert check.needs == ("cooling.sink_K_per_W",)


def test_without_a_dead_interval_no_delay_would_do():
    none = {f"T{n}": {"dead_interval_s": 0.0} for n in range(1, 7)}
    check = judged(IGBT, made=stress(none))["switch.blanking"]
    assert (check.verdict, check.would_do) == ("undersized", None)
    assert check.reason == "the dead interval is zero"


# Temperature ------------------------------------------------------------------------------


def test_junction_temperature_is_compared_by_rise_against_the_margin_below_the_maximum():
    check = judged()["switch.Tvj"]
    assert check.applied == pytest.approx(JUNCTION_C, abs=1e-3)
    assert check.allowed == 105.0
    assert check.headroom_pct == pytest.approx(100 * (1 - (JUNCTION_C - 45) / 60), abs=0.01)
    assert check.would_do == pytest.approx(45 + (JUNCTION_C - 45) / 0.9 + 20, abs=0.01)
    assert (check.unit, check.corner.ambient_C) == ("C", 45.0)


def test_a_rule_sets_own_limit_caps_the_junction():
    cool = changed(IGBT, Tvj_max_C=175.0)
    check = judged(cool, rules=MIL_STD_975M)["switch.Tvj"]
    assert check.allowed == 125.0
    assert "limited by the rule set to 125.0 °C" in check.how


def test_no_maximum_would_do_where_the_rule_sets_limit_is_passed():
    hot = changed(IGBT, Tvj_max_C=400.0, Rth_jc_K_per_W=8.0)
    check = judged(hot, rules=MIL_STD_975M)["switch.Tvj"]
    assert (check.verdict, check.would_do) == ("undersized", None)


def test_a_candidate_that_runs_away_is_undersized_and_says_so():
    check = judged(changed(THYRISTOR, leakage_A=5.0, Rth_ch_K_per_W=2.0))["switch.Tvj"]
    assert (check.verdict, check.applied, check.headroom_pct) == ("undersized", None, None)
    assert check.reason.startswith("runs away")


def test_an_ambient_above_the_allowed_temperature_allows_nothing():
    check = judged(changed(THYRISTOR, Tvj_max_C=65.0, I_TAV_case_C=40.0))["switch.Tvj"]
    assert check.reason == "the ambient alone reaches the allowed temperature"


# What is missing --------------------------------------------------------------------------


@pytest.mark.parametrize("kind", [Thyristor, Igbt])
def test_a_candidate_without_ratings_passes_no_row(kind):
    document = selection(candidate(kind(), Diode()))
    bridge = solved_by_hand(stress(events=(event(),)), document)
    case = case_of(document.candidates[0], bridge, COMMON_PRACTICE)
    checks = [check_of(row, case) for row in ROWS[kind]]
    assert {check.verdict for check in checks} == {"not assessed"}
    assert all(check.reason for check in checks)


@pytest.mark.parametrize(
    "row", [row for kind in ROWS for row in ROWS[kind] if row.keys], ids=lambda row: row.id
)
def test_each_missing_rating_leaves_its_row_not_assessed_and_is_named(row):
    switch, diode = (
        (IGBT if row in ROWS[Igbt] and row not in ROWS[Thyristor] else THYRISTOR),
        FREEWHEEL,
    )
    for key in row.keys:
        part = {"switch": switch, "diode": diode}
        part[row.part] = changed(part[row.part], **{key: None})
        document = selection(candidate(part["switch"], part["diode"]))
        case = case_of(document.candidates[0], solved_by_hand(stress(), document), COMMON_PRACTICE)
        check = check_of(replace(row, applies=lambda case: None), case)
        assert check.verdict == "not assessed"
        assert f"{row.part}.{key}" in check.needs


def test_temperatures_name_what_they_need_of_switch_diode_and_heatsink():
    bare = changed(FREEWHEEL, V_F0_V=None, Rth_jc_K_per_W=None)
    check = judged(diode=bare, cooling=Cooling(ambient_C=40.0))["switch.Tvj"]
    assert check.needs == ("diode.Rth_jc_K_per_W", "cooling.sink_K_per_W", "diode.V_F0_V")
    assert check.reason == (
        "needs R_th(j-c) of the diode, the heatsink's thermal resistance, V_F0 of the diode"
    )


def test_a_recovered_charge_over_no_loop_inductance_needs_one():
    diode = changed(FREEWHEEL, Err_J=None, Qrr_As=1e-4, Qrr_current_A=50.0, Qrr_didt_A_per_s=1e8)
    recovery = event(device="diode", kind="off recovery")
    supply = msgspec.structs.replace(selection().supply, loop_inductance_H=0.0)
    check = judged(diode=diode, made=stress(events=(recovery,)), supply=supply)["diode.Tvj"]
    assert check.needs == ("supply.loop_inductance_H",)


@pytest.mark.parametrize(
    ("check_id", "awaited"),
    [
        ("switch.I_TSM", "shoot-through"),
        ("switch.I2t", "shoot-through"),
        ("switch.didt", "reactor"),
        ("switch.dvdt", "snubber"),
        ("switch.tq_commutation", "commutation circuit"),
        ("diode.I_FSM", "shoot-through"),
        ("diode.I2t", "shoot-through"),
        ("diode.didt_recovery", "snubber"),
    ],
)
def test_a_row_that_cannot_be_computed_yet_says_what_it_waits_for(check_id, awaited):
    check = judged()[check_id]
    assert (check.verdict, check.applied, check.needs) == ("not assessed", None, ())
    assert check.reason.startswith("waits for")
    assert awaited in check.reason


# Basis ------------------------------------------------------------------------------------


def test_a_row_carries_the_weakest_basis_of_its_ratings():
    switch = changed(
        THYRISTOR, basis={"I_TAV_A": "maximum", "V_T0_V": "typical", "r_T_ohm": "read from curve"}
    )
    assert judged(switch)["switch.I_TAV"].basis == "typical"


def test_a_test_condition_that_was_not_entered_is_assumed():
    assert judged(changed(THYRISTOR, I_TAV_case_C=None))["switch.I_TAV"].basis == "assumed"
    assert judged()["switch.I_TAV"].basis is None


def test_the_usual_test_condition_is_taken_where_none_was_entered():
    hot = changed(THYRISTOR, Rth_ch_K_per_W=4.0)
    entered = judged(hot)["switch.I_TAV"]
    assumed = judged(changed(hot, I_TAV_case_C=None))["switch.I_TAV"]
    assert assumed.allowed == pytest.approx(entered.allowed)


def test_energies_that_are_scaled_by_usual_exponents_leave_the_temperature_assumed():
    assert judged(IGBT)["switch.Tvj"].basis == "assumed"
    exponents = {
        f"{stem}_{key}": 1.0
        for stem in ("Eon", "Eoff")
        for key in ("current_exponent", "voltage_exponent")
    }
    own = changed(IGBT, **exponents, Eon_per_K=0.003, Eoff_per_K=0.003)
    assert judged(own)["switch.Tvj"].basis is None
    assert judged(changed(own, E_Tvj_C=None))["switch.Tvj"].basis == "assumed"


def test_exponents_of_an_energy_that_is_not_entered_are_not_assumed():
    diode = changed(FREEWHEEL, Err_J=None, E_Tvj_C=None, Qrr_As=1e-4)
    assert judged(diode=diode)["diode.Tvj"].basis is None
