"""What the 'how' lines and reasons print."""

from __future__ import annotations

import pytest

from engine.corners import solved
from engine.duty import duty_of
from engine.rule_sets import COMMON_PRACTICE
from engine.selection import Gating, Load
from engine.verdicts.candidate import candidate_result
from engine.verdicts.wording import celsius, named, number, percent, quantity
from tests.engine.hand_made import IGBT, THYRISTOR, candidate, event, selection, stress
from tests.engine.verdicts.test_rows import changed, judged


@pytest.mark.parametrize(
    ("key", "words"),
    [
        ("switch.V_DRM_V", "V_DRM of the switch"),
        ("switch.tq_s", "t_q of the switch"),
        ("diode.Rth_jc_K_per_W", "R_th(j-c) of the diode"),
        ("diode.r_F_ohm", "r_F of the diode"),
        ("switch.I_C_case_C", "T_c of I_C of the switch"),
        ("cooling.sink_K_per_W", "the heatsink's thermal resistance"),
    ],
)
def test_an_entry_is_named_by_its_symbol(key, words):
    assert named(key) == words


def test_figures_carry_four_digits_and_a_true_minus_sign():
    assert quantity(1.85185e-3, "s") == "1.852 ms"
    assert number(2 / 3) == "0.6667"
    assert number(-2.0) == "−2"
    assert percent(-7.25) == "−7.2 %"
    assert celsius(-10.0) == "−10.0 °C"


@pytest.mark.parametrize(
    ("check_id", "switch", "how"),
    [
        (
            "switch.I_TAV",
            THYRISTOR,
            "average 11 A, form factor 2; 40 A half-sine at a case of 85.0 °C: 1 V × 40 A + "
            "6 mΩ × (1.571 × 40 A)² = 63.69 W; with this form factor the same loss at 34.73 A, "
            "× 0.8 = 27.79 A; headroom 60.4 %",
        ),
        (
            "switch.Tvj",
            THYRISTOR,
            "45.0 °C ambient + 97.39 W × 0.08 K/W heatsink + 13.9 W × 0.1 K/W to the case + "
            "13.9 W × 0.4 K/W to the junction = 59.7 °C, mean over the period, each load of the "
            "cycle taken as lasting; T_vj max 125.0 °C − 20 K = 105.0 °C; headroom 75.4 %",
        ),
        (
            "switch.V_CES",
            IGBT,
            "594 V link + 84.48 V overshoot (200 nH of loop and package × 0.8 × 52.8 A/100 ns) = "
            "678.5 V; 1200 V × 0.8 = 960 V; headroom 29.3 %",
        ),
        (
            "switch.blanking",
            IGBT,
            "1.2 × (500 ns + 100 ns − 100 ns + 100 ns driver skew) = 720 ns needed; dead interval "
            "1 ms; headroom 99.9 %",
        ),
        (
            "switch.turn_off_current",
            IGBT,
            "turned off 52.8 A at a peak of 678.5 V, V_CES 1200 V; 150 A × 0.8 = 120 A; "
            "headroom 56.0 %",
        ),
    ],
)
def test_a_how_line_puts_the_numbers_into_the_law(check_id, switch, how):
    off = () if switch is THYRISTOR else (event(current_A=32.0),)
    assert judged(switch, made=stress(events=off))[check_id].how == how


def test_the_how_line_of_a_direct_current_has_no_form_factor_in_its_rated_loss():
    flat = {f"T{n}": {"switch": {"current_peak_A": 12.0}} for n in range(1, 7)}
    check = judged(changed(IGBT, I_C_A=37.5), made=stress(flat))["switch.I_C"]
    assert check.how == (
        "average 11 A, form factor 2; 37.5 A direct at a case of 80.0 °C: 0.9 V × 37.5 A + "
        "15 mΩ × (37.5 A)² = 54.84 W; with this form factor the same loss at 23.65 A, "
        "× 0.8 = 18.92 A; headroom 41.9 %"
    )


def test_a_how_line_names_the_temperature_that_lengthens_the_turn_off_time():
    how = judged(changed(THYRISTOR, tq_Tvj_C=40.0))["switch.tq_dead"].how
    assert "(junction 19.74 K above the one t_q is stated for)" in how


def test_the_how_line_of_a_dead_interval_shows_its_law_and_how_far_it_holds():
    result = candidate_result(candidate(), solved(duty_of(selection())), COMMON_PRACTICE)
    check = next(one for one in result.checks if one.id == "switch.tq_dead")
    assert check.how == (
        "150 µs × 1.5 × 1.5 (stated at 50 V; a feedback diode leaves one or two) = 337.5 µs "
        "needed, commutation counted as 0 until a circuit is designed; "
        "(180° − 120°)/(360° × 90 Hz) = 1.852 ms, enough up to 493.8 Hz; headroom 81.8 %"
    )


@pytest.mark.parametrize(
    ("conduction_deg", "blanking_s", "part"),
    [
        (180.0, 1e-3, "(180° − 180°)/(360° × 50 Hz) + 1 ms blanking = 1 ms; headroom"),
        (180.0, 3e-4, "(180° − 180°)/(360° × 50 Hz) + 300 µs blanking = 300 µs; headroom"),
        (150.0, 1e-3, "(180° − 150°)/(360° × 50 Hz) + 1 ms blanking = 2.667 ms; headroom"),
        (150.0, 150e-6 * 1.5 * 1.5, "+ 337.5 µs blanking = 2.004 ms; headroom"),
        # 30°/360° in 337.5 − 37.5 = 300 µs: 277.8 Hz.
        (150.0, 37.5e-6, "+ 37.5 µs blanking = 1.704 ms, enough up to 277.8 Hz; headroom"),
    ],
)
def test_the_how_line_of_a_dead_interval_adds_the_blanking(conduction_deg, blanking_s, part):
    gating = Gating(conduction_deg=conduction_deg, frequency_Hz=50.0, blanking_s=blanking_s)
    load = Load(connection="star", resistance_ohm=9.0, inductance_H=0.0012)
    document = selection(gating=gating, load=load)
    result = candidate_result(candidate(), solved(duty_of(document)), COMMON_PRACTICE)
    check = next(one for one in result.checks if one.id == "switch.tq_dead")
    assert part in check.how
