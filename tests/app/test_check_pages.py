"""Each check stands on the page it belongs to, and leads to the entry it is about."""

from __future__ import annotations

import pytest

from app.pages.check_pages import (
    deciding_check,
    key_of_check,
    missing_count,
    page_of,
    shown_on,
    worst_by_page,
)
from engine.ratings import Diode, Igbt, Thyristor
from engine.selection import Candidate, with_entry
from tests.app.assessments import (
    BLOCKING,
    DEAD_INTERVAL,
    JUNCTION,
    MISSING,
    SELECTION,
    WAITING,
    check,
    result,
)

PAGES = ("Duty", "Candidates", "Turn-off", "Report")


@pytest.mark.parametrize(
    ("check_id", "page"),
    [
        ("switch.V_DRM", "Candidates"),
        ("switch.V_steady", "Candidates"),
        ("diode.I_FRM", "Candidates"),
        ("switch.turn_off_current", "Candidates"),
        ("switch.dvdt", "Snubber"),
        ("switch.didt", "Snubber"),
        ("diode.didt_recovery", "Snubber"),
        ("snubber.resistor_power", "Snubber"),
        ("switch.tq_dead", "Turn-off"),
        ("switch.I_L", "Turn-off"),
        ("switch.I_H", "Turn-off"),
        ("switch.gate_pulse", "Turn-off"),
        ("switch.blanking", "Turn-off"),
        ("commutation.reverse_time", "Turn-off"),
        ("switch.I_TSM", "Link"),
        ("diode.I_FSM", "Link"),
        ("diode.I2t", "Link"),
        ("switch.tsc", "Link"),
        ("fuse.I2t", "Link"),
        ("link_capacitor.ripple", "Link"),
        ("switch.Tvj", "Heat"),
        ("life.cycles", "Heat"),
    ],
)
def test_every_check_has_its_page(check_id: str, page: str) -> None:
    assert page_of(check_id) == page


def test_check_of_a_page_that_is_not_there_stands_on_candidates() -> None:
    assert shown_on(JUNCTION, PAGES) == "Candidates"
    assert shown_on(JUNCTION, (*PAGES, "Heat")) == "Heat"


def test_check_that_no_entry_would_help_stands_on_report_alone() -> None:
    assert shown_on(WAITING, PAGES) == "Report"
    assert worst_by_page(result("adequate", BLOCKING, WAITING), PAGES) == {"Candidates": "adequate"}


def test_a_page_shows_the_worst_of_its_checks() -> None:
    found = worst_by_page(result("undersized", BLOCKING, MISSING, DEAD_INTERVAL, JUNCTION), PAGES)
    assert found == {"Candidates": "undersized", "Turn-off": "tight"}
    found = worst_by_page(result("not assessed", BLOCKING, MISSING), PAGES)
    assert found == {"Candidates": "not assessed"}


def test_each_missing_entry_is_counted_once() -> None:
    assert missing_count(result("adequate", BLOCKING, MISSING, MISSING, WAITING)) == 1
    assert missing_count(None) == 0


def test_the_deciding_check_has_the_verdict_and_the_least_headroom() -> None:
    worse = check("switch.I_TAV", "I_T(AV)", "tight", "A", headroom_pct=2.0)
    assert deciding_check(result("tight", BLOCKING, DEAD_INTERVAL, worse, WAITING)) is worse
    hopeless = check("switch.Tvj", "T_vj", "undersized", "C", reason="nothing is allowed")
    assert deciding_check(result("undersized", JUNCTION, hopeless)) is hopeless


def test_of_what_is_not_assessed_the_one_decides_that_an_entry_would_help() -> None:
    assert deciding_check(result("not assessed", BLOCKING, WAITING, MISSING)) is MISSING


@pytest.mark.parametrize(
    ("check_id", "key"),
    [
        ("switch.V_DRM", "candidates.1.switch.V_DRM_V"),
        ("switch.I_TAV", "candidates.1.switch.I_TAV_A"),
        ("switch.I2t", "candidates.1.switch.I2t_A2s"),
        ("switch.tq_dead", "candidates.1.switch.tq_s"),
        ("switch.Tvj", "candidates.1.switch.Tvj_max_C"),
        ("switch.V_steady", "candidates.1.switch.V_DRM_V"),
        ("switch.didt", "candidates.1.switch.didt_A_per_s"),
        ("diode.V_steady", "candidates.1.diode.V_RRM_V"),
        ("diode.I_FAV", "candidates.1.diode.I_FAV_A"),
        ("diode.didt_recovery", "candidates.1.diode.Qrr_As"),
        ("switch.gate_pulse", "gating.pulse.form"),
        ("switch.blanking", "gating.blanking_s"),
    ],
)
def test_a_check_leads_to_its_entry(check_id: str, key: str) -> None:
    found = key_of_check(check(check_id, "", "adequate"), SELECTION, "second")
    assert found == key


THYRISTOR = [
    "V_DRM",
    "V_RRM",
    "I_TAV",
    "I_TRMS",
    "I_TRM",
    "I_TSM",
    "I2t",
    "didt",
    "dvdt",
    "tq_dead",
    "tq_commutation",
    "I_L",
    "I_H",
    "gate_pulse",
    "V_steady",
    "V_isol",
    "Tvj",
]
IGBT = ["V_CES", "V_steady", "I_C", "I_CRM", "turn_off_current", "blanking", "tsc", "Tvj"]
DIODE = ["V_RRM", "V_steady", "I_FAV", "I_FRMS", "I_FRM", "I_FSM", "I2t", "didt_recovery", "Tvj"]


@pytest.mark.parametrize(
    ("switch", "ids"),
    [
        (Thyristor(), [f"switch.{stem}" for stem in THYRISTOR]),
        (Igbt(), [f"switch.{stem}" for stem in IGBT]),
        (Thyristor(), [f"diode.{stem}" for stem in DIODE]),
    ],
    ids=["thyristor", "igbt", "diode"],
)
def test_every_check_leads_to_an_entry_that_exists(
    switch: Thyristor | Igbt, ids: list[str]
) -> None:
    candidate = Candidate(name="second", switch=switch, diode=Diode())
    selection = with_entry(SELECTION, "candidates.1", candidate)
    for check_id in ids:
        key = key_of_check(check(check_id, "", "adequate"), selection, "second")
        if key.startswith("candidates.1."):
            _, _, part, field = key.split(".")
            assert field in getattr(candidate, part).__struct_fields__
        else:
            assert key.startswith("gating.")


def test_a_check_leads_first_to_what_it_needs() -> None:
    assert key_of_check(MISSING, SELECTION, "second") == "candidates.1.switch.Rth_jc_K_per_W"
    sink = check("switch.Tvj", "T_vj", "not assessed", "C", needs=("cooling.sink_K_per_W",))
    assert key_of_check(sink, SELECTION, "second") == "cooling.sink_K_per_W"


def test_a_candidate_that_is_gone_leads_nowhere() -> None:
    assert key_of_check(BLOCKING, SELECTION, "third") == ""
