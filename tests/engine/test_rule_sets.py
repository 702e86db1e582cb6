"""Rule sets: figures with a source each, and their replacement for one selection."""

from __future__ import annotations

import pytest

from engine.errors import InvalidSelection
from engine.rule_sets import BUILT_IN, COMMON_PRACTICE, MIL_STD_975M, rule_set_of
from engine.selection import RuleSetChange
from tests.engine.hand_made import selection


def changed(**change):
    return rule_set_of(selection(rule_set=RuleSetChange(**change)))


@pytest.mark.parametrize("rules", BUILT_IN.values(), ids=lambda rules: rules.name)
def test_every_figure_of_a_built_in_rule_set_says_where_it_comes_from(rules):
    assert all(figure.source for figure in (*rules.fractions.values(), *rules.factors.values()))


def test_a_selection_without_a_rule_set_is_judged_by_common_practice():
    assert rule_set_of(selection()) is COMMON_PRACTICE


def test_a_selection_names_its_rule_set():
    assert rule_set_of(selection(rule_set="MIL-STD-975M")) is MIL_STD_975M


# MIL-STD-975M (5 August 1994, cancelled 5 May 1998), Appendix A, 3.4 (diodes, thyristors) and
# 3.15 (transistors), read in a transcription.
@pytest.mark.parametrize(
    ("check_id", "printed"),
    [
        ("switch.V_DRM", 0.70),
        ("switch.V_RRM", 0.70),
        ("diode.V_RRM", 0.70),
        ("switch.I_TSM", 0.50),
        ("diode.I_FSM", 0.50),
        ("switch.I_TAV", 0.50),
        ("diode.I_FAV", 0.50),
        ("switch.V_CES", 0.75),
        ("switch.I_C", 0.75),
    ],
)
def test_the_derating_table_gives_the_printed_fraction(check_id, printed):
    assert MIL_STD_975M.fraction(check_id) == printed


# The same: junction temperature at most 125 °C.
def test_the_derating_table_limits_the_junction_itself():
    assert MIL_STD_975M.junction_limit_C == 125.0


def test_common_practice_limits_the_junction_only_by_its_margin():
    assert COMMON_PRACTICE.junction_limit_C == float("inf")


def test_a_rating_that_the_derating_table_does_not_state_falls_back_and_says_so():
    figure = MIL_STD_975M.fractions["switch.I_TRM"]
    assert figure.value == COMMON_PRACTICE.fraction("switch.I_TRM")
    assert figure.source.startswith("not stated in MIL-STD-975M; common practice")


def test_an_igbt_may_use_two_thirds_and_a_thyristor_six_tenths_of_its_voltage_for_hours():
    assert COMMON_PRACTICE.fraction("switch.V_steady", "igbt") == pytest.approx(2 / 3)
    assert COMMON_PRACTICE.fraction("switch.V_steady", "thyristor") == 0.6


def test_a_changed_figure_replaces_its_own_and_no_other():
    rules = changed(based_on="common practice", fractions={"switch.V_DRM": 0.7})
    assert rules.fraction("switch.V_DRM") == 0.7
    assert rules.fraction("switch.V_RRM") == COMMON_PRACTICE.fraction("switch.V_RRM")
    assert rules.fractions["switch.V_DRM"].source == "set in this selection"
    assert rules.name == "common practice, changed"


def test_a_changed_steady_fraction_holds_for_igbts_too():
    rules = changed(based_on="common practice", fractions={"switch.V_steady": 0.5})
    assert rules.fraction("switch.V_steady", "igbt") == 0.5


def test_a_changed_factor_and_band_replace_the_built_in_ones():
    rules = changed(based_on="common practice", tight_band_pct=5.0, factors={"tq": 2.0}, note="us")
    assert rules.factor("tq") == 2.0
    assert rules.factors["tq"].source == "set in this selection: us"
    assert rules.tight_band_pct == 5.0
    assert rules.adequate_share == pytest.approx(0.95)


def test_a_band_that_is_not_changed_stays():
    assert changed(based_on="common practice").tight_band_pct == 10.0
    assert changed(based_on="common practice", tight_band_pct=0.0).tight_band_pct == 0.0


@pytest.mark.parametrize(
    ("rule_set", "key"),
    [
        ("no such rules", "rule_set"),
        (RuleSetChange(based_on="none"), "rule_set.based_on"),
        (
            RuleSetChange(based_on="common practice", fractions={"switch.V_XYZ": 0.5}),
            "rule_set.fractions.switch.V_XYZ",
        ),
        (
            RuleSetChange(based_on="common practice", factors={"tw": 2.0}),
            "rule_set.factors.tw",
        ),
    ],
)
def test_a_name_that_does_not_exist_is_refused_with_its_key_path(rule_set, key):
    with pytest.raises(InvalidSelection) as refused:
        rule_set_of(selection(rule_set=rule_set))
    (fault,) = refused.value.faults
    assert fault.key == key
    assert "common practice" in fault.text or "known are" in fault.text


def test_every_unknown_figure_is_named_at_once():
    change = RuleSetChange(
        based_on="common practice", fractions={"a.b": 0.5}, factors={"c": 1.0, "d": 1.0}
    )
    with pytest.raises(InvalidSelection) as refused:
        rule_set_of(selection(rule_set=change))
    assert len(refused.value.faults) == 3
