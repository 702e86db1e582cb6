"""What stands in the rows and cells of the rating sheets."""

from __future__ import annotations

import pytest

from app.widgets.sheet_rows import SheetRow, cell_of, most_wanted, sheet_rows, symbol_of
from engine.ratings import Diode, Igbt, Thyristor
from engine.selection import Candidate
from tests.app.assessments import check, result

THYRISTOR = Candidate(
    name="second",
    switch=Thyristor(V_DRM_V=1200.0, r_T_ohm=0.0065, basis={"r_T_ohm": "typical"}),
    diode=Diode(V_RRM_V=1200.0),
)
IGBT = Candidate(name="other", switch=Igbt(V_CES_V=1200.0))


def row(rows: list[SheetRow], section: str, key: str) -> SheetRow:
    return next(each for each in rows if (each.section, each.key) == (section, key))


def keys(rows: list[SheetRow], section: str) -> list[str]:
    return [each.key for each in rows if each.section == section and each.form == "rating"]


def test_rows_that_a_verdict_needs_come_first_and_the_rest_is_folded() -> None:
    folded = keys(sheet_rows([THYRISTOR], frozenset()), "switch")
    unfolded = keys(sheet_rows([THYRISTOR], frozenset({"switch"})), "switch")
    assert folded[:3] == ["V_DRM_V", "V_RRM_V", "I_TAV_A"]
    assert "I_GT_A" not in folded
    assert unfolded[: len(folded)] == folded
    assert len(unfolded) == 38


def test_sheets_of_two_kinds_share_rows_where_they_can() -> None:
    rows = keys(sheet_rows([THYRISTOR, IGBT], frozenset({"switch"})), "switch")
    assert len(rows) == len(set(rows))
    assert rows.index("V_CES_V") < rows.index("I_TAV_A")
    assert rows.count("Tvj_max_C") == 1


def test_a_kind_without_that_rating_has_no_cell_there() -> None:
    rows = sheet_rows([THYRISTOR, IGBT], frozenset())
    assert cell_of(IGBT, row(rows, "switch", "V_DRM_V"), None).rating is None


def test_a_usual_test_condition_stands_there_as_assumed() -> None:
    cell = cell_of(
        THYRISTOR, row(sheet_rows([THYRISTOR], frozenset()), "switch", "tq_reverse_V"), None
    )
    assert cell.assumed
    assert cell.value is not None
    assert not cell.missing


def test_a_needed_rating_that_was_not_entered_is_missing() -> None:
    rows = sheet_rows([THYRISTOR], frozenset({"switch"}))
    assert cell_of(THYRISTOR, row(rows, "switch", "tq_s"), None).missing
    assert not cell_of(THYRISTOR, row(rows, "switch", "V_DRM_V"), None).missing
    assert not cell_of(THYRISTOR, row(rows, "switch", "I_GT_A"), None).missing


def test_the_basis_of_a_rating_is_told() -> None:
    rows = sheet_rows([THYRISTOR], frozenset())
    assert cell_of(THYRISTOR, row(rows, "switch", "r_T_ohm"), None).basis == "typical"


def test_a_cell_shows_the_worst_of_the_rows_that_compare_its_rating() -> None:
    rows = sheet_rows([THYRISTOR], frozenset())
    peak = check("switch.V_DRM", "V_DRM", "adequate", headroom_pct=20.0)
    steady = check("switch.V_steady", "V_DRM", "tight", headroom_pct=3.0)
    diode = check("diode.V_RRM", "V_RRM", "undersized", headroom_pct=-3.0)
    found = cell_of(THYRISTOR, row(rows, "switch", "V_DRM_V"), result("tight", peak, steady, diode))
    assert found.checks == (steady, peak)


def test_a_row_that_waits_for_its_circuit_does_not_hide_the_others() -> None:
    rows = sheet_rows([THYRISTOR], frozenset())
    dead = check("switch.tq_dead", "t_q", "adequate", headroom_pct=95.0)
    circuit = check("switch.tq_commutation", "t_q", "not assessed")
    found = cell_of(THYRISTOR, row(rows, "switch", "tq_s"), result("adequate", circuit, dead))
    assert found.checks == (dead, circuit)


def test_only_what_a_row_waits_for_is_missing_once_there_are_results() -> None:
    rows = sheet_rows([THYRISTOR], frozenset())
    waiting = result(
        "adequate", check("switch.tq_dead", "t_q", "not assessed", needs=("switch.tq_s",))
    )
    assert cell_of(THYRISTOR, row(rows, "switch", "tq_s"), waiting).missing
    assert not cell_of(THYRISTOR, row(rows, "switch", "V_RRM_V"), waiting).missing


def test_the_figure_that_settles_most_rows_is_named_first() -> None:
    waiting = result(
        "not assessed",
        check("switch.tq_dead", "t_q", "not assessed", needs=("switch.tq_s",)),
        check("switch.Tvj", "T_vj", "not assessed", needs=("switch.Rth_jc_K_per_W",)),
        check("switch.I_TAV", "I_T(AV)", "not assessed", needs=("switch.Rth_jc_K_per_W",)),
        check("switch.V_DRM", "V_DRM", "adequate", needs=("switch.V_DRM_V",)),
    )
    assert most_wanted(waiting) == [("switch.Rth_jc_K_per_W", 2), ("switch.tq_s", 1)]


@pytest.mark.parametrize(
    ("key", "symbol"),
    [("switch.tq_s", "t_q"), ("diode.Rth_jc_K_per_W", "R_th(j-c) of the diode")],
)
def test_a_rating_is_called_by_its_symbol(key: str, symbol: str) -> None:
    assert symbol_of(THYRISTOR, key) == symbol
