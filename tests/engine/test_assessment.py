"""The assessment of a whole selection."""

from __future__ import annotations

import tomllib
from pathlib import Path

import msgspec
import pytest

from engine.assessment import assess
from engine.checks import VERDICTS
from engine.errors import InvalidSelection
from engine.fingerprint import fingerprint
from engine.selection import GatePulse, Gating, Load, RuleSetChange, Supply, new_selection
from engine.version import VERSION
from tests.engine.hand_made import IGBT, THYRISTOR, candidate, selection

BOTH = (candidate(name="first"), candidate(IGBT, name="second"))


def warned(document):
    return {(one.id, one.key) for one in assess(document).warnings}


def test_the_version_is_that_of_the_project():
    project = tomllib.loads((Path(__file__).parents[2] / "pyproject.toml").read_text())
    assert project["project"]["version"] == VERSION


def test_an_assessment_carries_what_it_was_made_from():
    document = selection(*BOTH, chosen="second", rule_set="MIL-STD-975M")
    found = assess(document)
    assert (found.program, found.version) == ("switchwright", VERSION)
    assert (found.rule_set, found.chosen) == ("MIL-STD-975M", "second")
    assert found.fingerprint == fingerprint(document)


def test_candidates_are_judged_in_the_order_of_the_document():
    assert [one.name for one in assess(selection(*BOTH)).candidates] == ["first", "second"]


def test_names_restrict_the_candidates():
    assert [one.name for one in assess(selection(*BOTH), ["second"]).candidates] == ["second"]


def test_a_name_that_no_candidate_has_is_refused():
    with pytest.raises(InvalidSelection, match="candidates: none is named 'third'"):
        assess(selection(*BOTH), ["third"])


def test_without_candidates_stresses_and_wanted_ratings_are_given():
    found = assess(selection())
    assert found.candidates == ()
    assert len(found.nominal.positions) == 6
    assert found.wanted[0].rating == "V_DRM"


def test_wanted_ratings_follow_the_kinds_of_the_candidates():
    ids = {one.id for one in assess(selection(candidate(IGBT))).wanted}
    assert "switch.V_CES" in ids
    assert "switch.V_DRM" not in ids


def test_an_incomplete_document_names_every_entry_it_needs():
    with pytest.raises(InvalidSelection) as refused:
        assess(new_selection())
    assert {fault.key for fault in refused.value.faults} >= {"supply.voltage_V"}


def test_two_candidates_of_one_name_are_refused():
    with pytest.raises(InvalidSelection, match=r"candidates\.1\.name"):
        assess(selection(candidate(), candidate()))


def test_an_unknown_rule_set_is_refused_by_its_key():
    with pytest.raises(InvalidSelection, match="rule_set: must be one of common practice"):
        assess(selection(rule_set="none"))


def test_a_change_of_the_rule_set_reaches_the_rows():
    change = RuleSetChange(based_on="common practice", tight_band_pct=0.0, factors={"tq": 2.0})
    found = assess(selection(BOTH[0], rule_set=change))
    check = next(one for one in found.candidates[0].checks if one.id == "switch.tq_dead")
    assert check.applied == pytest.approx(150e-6 * 2.0 * 1.5)


def test_results_are_written_as_json_without_numbers_that_json_lacks():
    runaway = candidate(msgspec.structs.replace(THYRISTOR, leakage_A=20.0, Rth_ch_K_per_W=2.0))
    never = candidate(msgspec.structs.replace(THYRISTOR, I_L_A=1e5), name="never latches")
    found = assess(selection(runaway, never))
    plain = msgspec.json.decode(msgspec.json.encode(found))
    assert len(plain["candidates"][0]["checks"]) == 26
    latching = next(c for c in plain["candidates"][1]["checks"] if c["id"] == "switch.gate_pulse")
    assert (latching["applied"], latching["headroom_pct"]) == (None, None)
    for one in found.candidates:
        for check in one.checks:
            figures = (check.applied, check.allowed, check.headroom_pct, check.would_do)
            assert all(value is None or abs(value) < float("inf") for value in figures)


def test_entries_that_do_not_act_yet_are_warned_of():
    supply = Supply(voltage_V=540.0, follows_frequency=True)
    keys = {key for _, key in warned(selection(supply=supply, on_state_drops=True))}
    assert {"supply.follows_frequency", "on_state_drops", "gating.soft_start"} <= keys


def test_a_soft_start_needs_no_warning_of_the_currents_of_switching_on():
    gating = Gating(conduction_deg=120.0, frequency_Hz=50.0, soft_start=True)
    keys = {key for _, key in warned(selection(gating=gating))}
    assert "gating.soft_start" not in keys


def test_a_thermal_resistance_that_holds_ripple_already_is_warned_of():
    part = candidate(msgspec.structs.replace(THYRISTOR, Rth_wave="sine180"))
    assert ("thermal_resistance_wave", "candidates.0.switch.Rth_wave") in warned(selection(part))
    assert not [key for _, key in warned(selection(candidate())) if "Rth_wave" in key]


def test_assumed_entries_are_counted():
    assert "assumed" in {id for id, _ in warned(selection())}


@pytest.mark.parametrize("conduction_deg", [120.0, 150.0, 180.0])
@pytest.mark.parametrize("connection", ["star", "delta"])
@pytest.mark.parametrize("inductance_H", [0.0, 0.012, (0.0, 0.012, 0.5)])
@pytest.mark.parametrize("pulse", [GatePulse(), GatePulse(form="single", width_s=1e-4)])
def test_every_kind_of_duty_gives_a_verdict_for_every_candidate(
    conduction_deg, connection, inductance_H, pulse
):
    document = selection(
        *BOTH,
        load=Load(connection=connection, resistance_ohm=9.0, inductance_H=inductance_H),
        gating=Gating(conduction_deg=conduction_deg, frequency_Hz=50.0, pulse=pulse),
    )
    found = assess(document)
    assert all(one.verdict in VERDICTS for one in found.candidates)
    expected = "undersized" if conduction_deg == 180.0 else None
    for check in found.candidates[1].checks:
        if check.id == "switch.blanking" and expected:
            assert check.verdict == expected
