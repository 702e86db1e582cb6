"""What a candidate's rows come to, and laws that hold for every candidate."""

from __future__ import annotations

import msgspec
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from engine.checks import VERDICTS, Check
from engine.corners import solved
from engine.duty import duty_of
from engine.ratings import Igbt, Thyristor
from engine.rule_sets import COMMON_PRACTICE, rule_set_of
from engine.selection import Cooling, Gating, Load, RuleSetChange, with_entry
from engine.verdicts.candidate import (
    NEEDED_BY_EVERY_SELECTION,
    ROWS,
    candidate_result,
    verdict_of,
    weakest_basis,
)
from tests.engine.hand_made import (
    FREEWHEEL,
    IGBT,
    THYRISTOR,
    candidate,
    selection,
    solved_by_hand,
    stress,
)

CANDIDATES = {"thyristor": candidate(THYRISTOR), "igbt": candidate(IGBT)}
SOLVED = solved(duty_of(selection()))


def row(verdict="adequate", id="switch.I_TRM", needs=(), basis=None):
    return Check(
        id=id, rating=id.rpartition(".")[2], unit="A", verdict=verdict, needs=needs, basis=basis
    )


OPEN = {"verdict": "not assessed", "needs": ("switch.key",)}


@pytest.mark.parametrize(
    ("rows", "verdict"),
    [
        ([row(), row()], "adequate"),
        ([row(), row("tight")], "tight"),
        ([row("tight"), row("undersized")], "undersized"),
        ([row(**OPEN, id="switch.Tvj"), row("undersized")], "undersized"),
        ([row(**OPEN, id="switch.Tvj"), row("tight")], "tight"),
        ([row(**OPEN, id="switch.Tvj"), row()], "not assessed"),
        ([row(**OPEN, id="switch.V_isol"), row()], "adequate"),
        ([row("not assessed", id="switch.tq_dead"), row()], "adequate"),
    ],
)
def test_the_worst_row_decides_and_a_missing_rating_only_if_everyone_needs_it(rows, verdict):
    assert verdict_of(rows) == verdict


@pytest.mark.parametrize("id", sorted(NEEDED_BY_EVERY_SELECTION))
def test_each_rating_that_every_selection_needs_withholds_the_verdict(id):
    assert verdict_of([row(), row(**OPEN, id=id)]) == "not assessed"


def test_what_every_selection_needs_are_rows_that_exist():
    assert {one.id for rows in ROWS.values() for one in rows} >= NEEDED_BY_EVERY_SELECTION


@pytest.mark.parametrize(
    ("bases", "words"),
    [
        ([None, None], None),
        (["maximum", None], None),
        (["maximum", "typical"], "a typical b"),
        (["assumed", "typical"], "an assumed a"),
        (["read from curve", "maximum"], "a read from a curve"),
        (["read from curve", "typical"], "a typical b"),
    ],
)
def test_the_weakest_basis_is_said_with_its_rating(bases, words):
    rows = [row(id=f"switch.{name}", basis=basis) for name, basis in zip("ab", bases, strict=True)]
    assert weakest_basis(rows) == words


# The order and the ids are those of the results contract; V_isol concerns every kind of switch.
@pytest.mark.parametrize(
    ("kind", "stems"),
    [
        (
            Thyristor,
            "V_DRM V_RRM I_TAV I_TRMS I_TRM I_TSM I2t didt dvdt tq_dead tq_commutation I_L I_H "
            "gate_pulse V_steady V_isol Tvj",
        ),
        (Igbt, "V_CES V_steady I_C I_CRM turn_off_current blanking tsc V_isol Tvj"),
    ],
)
def test_rows_stand_in_their_fixed_order(kind, stems):
    of_diode = "V_RRM V_steady I_FAV I_FRMS I_FRM I_FSM I2t didt_recovery Tvj"
    expected = [f"switch.{stem}" for stem in stems.split()]
    expected += [f"diode.{stem}" for stem in of_diode.split()]
    assert [one.id for one in ROWS[kind]] == expected


def test_a_thyristor_with_forced_turn_off_says_that_its_circuit_is_not_there():
    result = candidate_result(CANDIDATES["thyristor"], SOLVED, COMMON_PRACTICE)
    assert result.verdict == "adequate"
    assert result.remark == "without its commutation circuit"


def test_an_igbt_needs_no_commutation_circuit():
    assert candidate_result(CANDIDATES["igbt"], SOLVED, COMMON_PRACTICE).remark == ""


def test_ratings_that_are_missing_are_counted_and_named_beside_the_verdict():
    switch = msgspec.structs.replace(THYRISTOR, I_TRM_A=None, V_isol_V=None)
    result = candidate_result(candidate(switch), SOLVED, COMMON_PRACTICE)
    assert result.verdict == "adequate"
    assert result.remark.endswith("; 2 not assessed: I_TRM, V_isol")


def test_losses_and_peak_are_those_of_the_hottest_junction():
    result = candidate_result(CANDIDATES["thyristor"], SOLVED, COMMON_PRACTICE)
    hottest = next(one for one in result.checks if one.id == "switch.Tvj")
    assert result.junction_peak_C == pytest.approx(hottest.applied)
    assert result.switch_losses.on_state_W == pytest.approx(result.switch_loss_W)
    assert result.diode_losses.on_state_W == pytest.approx(result.diode_loss_W)
    assert result.diode_loss_W < result.switch_loss_W


# In a hand-made bridge at 540 V, T2's switch carries twice the current of the others and D3 four
# times: 22·1 + 44²·6e-3 = 33.6 W at 594 V, and 8.8·0.9 + 26.4²·8e-3 = 13.5 W.
def test_losses_are_those_of_the_worst_switch_and_the_worst_diode():
    made = stress(
        {
            "T2": {"switch": {"current_avg_A": 20.0, "current_rms_A": 40.0}},
            "T3": {"diode": {"current_avg_A": 8.0, "current_rms_A": 24.0}},
        }
    )
    bridge = solved_by_hand(made, selection())
    switch = msgspec.structs.replace(THYRISTOR, I_L_A=None)
    result = candidate_result(candidate(switch), bridge, COMMON_PRACTICE)
    assert result.switch_loss_W == pytest.approx(22.0 + 6e-3 * 44.0**2)
    assert result.diode_loss_W == pytest.approx(8.8 * 0.9 + 8e-3 * 26.4**2)
    assert result.switch_losses.on_state_W == pytest.approx(result.switch_loss_W)
    assert result.diode_losses.on_state_W == pytest.approx(result.diode_loss_W)


def test_the_first_diode_is_not_taken_for_a_switch_however_much_it_loses():
    made = stress({"T1": {"diode": {"current_avg_A": 40.0, "current_rms_A": 80.0}}})
    switch = msgspec.structs.replace(THYRISTOR, I_L_A=None)
    result = candidate_result(candidate(switch), solved_by_hand(made, selection()), COMMON_PRACTICE)
    assert result.switch_loss_W == pytest.approx(11.0 + 6e-3 * 22.0**2)
    assert result.diode_loss_W == pytest.approx(44.0 * 0.9 + 8e-3 * 88.0**2)
    assert result.switch_losses.on_state_W == pytest.approx(result.switch_loss_W)
    assert result.diode_losses.on_state_W == pytest.approx(result.diode_loss_W)


def test_where_the_diode_is_the_hotter_one_its_temperature_is_the_peak():
    diode = msgspec.structs.replace(FREEWHEEL, Rth_jc_K_per_W=30.0)
    result = candidate_result(candidate(diode=diode), SOLVED, COMMON_PRACTICE)
    hottest = next(one for one in result.checks if one.id == "diode.Tvj")
    assert result.junction_peak_C == pytest.approx(hottest.applied)


def test_the_causes_of_a_loss_add_up_to_it():
    switch = msgspec.structs.replace(IGBT, leakage_A=5e-3)
    duty = duty_of(selection(gating=Gating(conduction_deg=180.0, frequency_Hz=400.0)))
    result = candidate_result(candidate(switch), solved(duty), COMMON_PRACTICE)
    parts = result.switch_losses
    assert min(parts.on_state_W, parts.switching_W, parts.leakage_W) > 0.0
    total = parts.on_state_W + parts.switching_W + parts.recovery_W + parts.leakage_W
    assert total == pytest.approx(result.switch_loss_W)


def test_without_temperatures_there_are_no_losses():
    duty = duty_of(selection(cooling=Cooling(ambient_C=40.0)))
    result = candidate_result(CANDIDATES["thyristor"], solved(duty), COMMON_PRACTICE)
    assert (result.switch_loss_W, result.diode_loss_W, result.junction_peak_C) == (None,) * 3
    assert result.verdict == "not assessed"


def test_a_runaway_is_a_row_of_the_table_and_no_error():
    switch = msgspec.structs.replace(THYRISTOR, leakage_A=20.0, Rth_ch_K_per_W=2.0)
    result = candidate_result(candidate(switch), SOLVED, COMMON_PRACTICE)
    assert (result.verdict, result.junction_peak_C) == ("undersized", None)


def test_without_feedback_diodes_there_is_no_diode_loss():
    load = Load(connection="star", resistance_ohm=9.0, inductance_H=0.0)
    duty = duty_of(selection(feedback_diodes=False, load=load))
    result = candidate_result(CANDIDATES["thyristor"], solved(duty), COMMON_PRACTICE)
    assert (result.diode_loss_W, result.diode_losses) == (None, None)
    assert result.switch_loss_W > 0.0


# Laws -------------------------------------------------------------------------------------

NOT_A_RATING = ("switch.gate_pulse",)
"""Rows whose 'would do' is an entry of the duty."""


@pytest.mark.parametrize("kind", CANDIDATES)
@pytest.mark.parametrize("conduction_deg", [120.0, 150.0])
@pytest.mark.parametrize("rule_set", ["common practice", "MIL-STD-975M"])
def test_a_rating_that_would_do_is_just_adequate_when_put_in(kind, conduction_deg, rule_set):
    document = selection(
        CANDIDATES[kind],
        gating=Gating(conduction_deg=conduction_deg, frequency_Hz=50.0, frequency_high_Hz=90.0),
        rule_set=rule_set,
        cooling=Cooling(ambient_C=45.0, sink_K_per_W=0.6),
    )
    bridge, rules = solved(duty_of(document)), rule_set_of(document)
    rows = ROWS[type(CANDIDATES[kind].switch)]
    checks = candidate_result(CANDIDATES[kind], bridge, rules).checks
    tested = 0
    for one, check in zip(rows, checks, strict=True):
        if check.would_do is None or check.id in NOT_A_RATING:
            continue
        key = f"{one.part}.{one.keys[0]}"
        better = with_entry(CANDIDATES[kind], key, check.would_do)
        found = candidate_result(better, bridge, rules).checks
        again = next(one for one in found if one.id == check.id)
        assert (again.verdict, again.headroom_pct) == ("adequate", pytest.approx(10.0, abs=1e-6))
        tested += 1
    assert tested >= 12


# Key, and whether more of it is better.
DIRECTIONS = {
    "switch.V_DRM_V": True,
    "switch.I_TAV_A": True,
    "switch.I_TAV_case_C": True,
    "switch.I_TRMS_A": True,
    "switch.I_TRM_A": True,
    "switch.V_isol_V": True,
    "switch.Tvj_max_C": True,
    "switch.tq_s": False,
    "switch.I_L_A": False,
    "switch.I_H_A": False,
    "switch.Rth_jc_K_per_W": False,
    "switch.Rth_ch_K_per_W": False,
    "diode.V_RRM_V": True,
    "diode.I_FAV_A": True,
    "diode.I_FRMS_A": True,
    "diode.I_FRM_A": True,
    "diode.Rth_jc_K_per_W": False,
}


@settings(max_examples=60, deadline=None)
@given(
    st.sampled_from(sorted(DIRECTIONS)),
    st.floats(0.05, 3.0),
    st.floats(1.0, 3.0),
    st.floats(0.0, 1.0),
)
def test_a_better_rating_never_gives_a_worse_verdict(key, share, better_by, sink_K_per_W):
    part, _, name = key.partition(".")
    usual = getattr({"switch": THYRISTOR, "diode": FREEWHEEL}[part], name)
    poor, good = usual * share, usual * share * better_by
    if not DIRECTIONS[key]:
        poor, good = good, poor
    duty = duty_of(selection(cooling=Cooling(ambient_C=45.0, sink_K_per_W=sink_K_per_W)))
    bridge = solved(duty)
    before, after = (
        candidate_result(with_entry(CANDIDATES["thyristor"], key, value), bridge, COMMON_PRACTICE)
        for value in (poor, good)
    )
    for worse, better in zip(before.checks, after.checks, strict=True):
        if "not assessed" not in (worse.verdict, better.verdict):
            assert VERDICTS.index(better.verdict) >= VERDICTS.index(worse.verdict), better.id


def test_a_smaller_permitted_fraction_never_gives_more_headroom():
    def headrooms(fraction):
        fractions = dict.fromkeys(COMMON_PRACTICE.fractions, fraction)
        change = RuleSetChange(based_on="common practice", fractions=fractions)
        rules = rule_set_of(selection(rule_set=change))
        result = candidate_result(CANDIDATES["thyristor"], SOLVED, rules)
        return [one.headroom_pct for one in result.checks if one.fraction is not None]

    strict, lax = headrooms(0.3), headrooms(0.9)
    assert len(strict) == 11
    assert all(a < b for a, b in zip(strict, lax, strict=True))


@pytest.mark.parametrize("kind", CANDIDATES)
def test_every_assessed_row_says_how_it_was_computed(kind):
    result = candidate_result(CANDIDATES[kind], SOLVED, COMMON_PRACTICE)
    for check in result.checks:
        assert check.how
        if check.headroom_pct is not None:
            assert check.how.endswith(f"headroom {check.headroom_pct:.1f} %")
