"""The table of ratings: complete, and exact between sheet units and SI."""

from __future__ import annotations

from collections import Counter

import pytest
from hypothesis import given
from hypothesis import strategies as st

from engine.quantities import QuantityFault
from engine.ratings import USUAL_CONDITIONS, Diode, Igbt, Ratings, Switch, Thyristor
from engine.verdicts.candidate import ROWS
from parts_library.rating_sheet import (
    GROUPS,
    SHEETS,
    Kind,
    rating_of,
    sheet_figure,
    sheet_number,
    si_value,
)

RECORDS: dict[Kind, type[Ratings]] = {"thyristor": Thyristor, "igbt": Igbt, "diode": Diode}
UNIT_IN_KEY = {
    "V": "V",
    "A": "A",
    "s": "s",
    "A2s": "A2s",
    "A_per_s": "A/s",
    "V_per_s": "V/s",
    "ohm": "ohm",
    "As": "As",
    "J": "J",
    "H": "H",
    "C": "C",
    "K_per_W": "K/W",
}
"""The last part of a field's name, and the SI unit that it says."""


@pytest.mark.parametrize("kind", SHEETS)
def test_a_sheet_holds_every_field_of_its_record_once(kind: Kind) -> None:
    fields = [name for name in RECORDS[kind].__struct_fields__ if name != "basis"]
    assert Counter(rating.key for rating in SHEETS[kind]) == Counter(fields)


@pytest.mark.parametrize("kind", SHEETS)
def test_the_unit_of_a_rating_is_the_one_its_key_says(kind: Kind) -> None:
    for rating in SHEETS[kind]:
        if rating.unit:
            ends = [end for end in UNIT_IN_KEY if rating.key.endswith(f"_{end}")]
            assert rating.unit == UNIT_IN_KEY[max(ends, key=len)], rating.key


@pytest.mark.parametrize("kind", SHEETS)
def test_conditions_stand_right_below_their_rating_and_fold_with_it(kind: Kind) -> None:
    last = None
    for rating in SHEETS[kind]:
        if rating.condition_of:
            assert last is not None
            assert rating.condition_of == last.key
            assert rating.needed == last.needed
        else:
            last = rating


@pytest.mark.parametrize("switch", [Thyristor(), Igbt()])
def test_every_rating_that_a_verdict_waits_for_is_marked_as_needed(switch: Switch) -> None:
    needed = {
        f"{part}.{rating.key}"
        for part, kind in (("switch", type(switch).__name__.lower()), ("diode", "diode"))
        for rating in SHEETS[kind]  # type: ignore[index]
        if rating.needed
    }
    checks = ROWS[type(switch)]
    waited_for = {f"{row.part}.{key}" for row in checks for key in row.keys}
    assert waited_for <= needed


@pytest.mark.parametrize("switch", [Thyristor(), Igbt()])
def test_every_row_of_the_verdict_stands_beside_a_rating(switch: Switch) -> None:
    shown = {
        f"{part}.{check}"
        for part, kind in (("switch", type(switch).__name__.lower()), ("diode", "diode"))
        for rating in SHEETS[kind]  # type: ignore[index]
        for check in rating.checks
    }
    assert {row.id for row in ROWS[type(switch)]} <= shown


@pytest.mark.parametrize("kind", SHEETS)
def test_the_blocks_of_a_sheet_come_in_one_order(kind: Kind) -> None:
    places = [GROUPS.index(rating.group) for rating in SHEETS[kind] if rating.group != "part"]
    assert places == sorted(places)


def test_only_conditions_and_the_scaling_of_energies_have_usual_figures() -> None:
    conditions = {r.key for sheet in SHEETS.values() for r in sheet if r.condition_of}
    scaling = {
        f"{energy}_{law}"
        for energy in ("Eon", "Eoff", "Err")
        for law in ("current_exponent", "voltage_exponent", "per_K")
    }
    assert set(USUAL_CONDITIONS) <= conditions | scaling


@pytest.mark.parametrize(
    ("kind", "key", "text", "value"),
    [
        ("thyristor", "tq_s", "150", 150e-6),
        ("thyristor", "tq_s", "150 µs", 150e-6),
        ("thyristor", "tq_s", "150us", 150e-6),
        ("thyristor", "tq_s", "0,15 ms", 150e-6),
        ("thyristor", "r_T_ohm", "6,5", 6.5e-3),
        ("thyristor", "didt_A_per_s", "200", 200e6),
        ("thyristor", "didt_A_per_s", "200 A/µs", 200e6),
        ("thyristor", "dvdt_V_per_s", "1000 V/us", 1e9),
        ("thyristor", "I2t_A2s", "4050", 4050.0),
        ("thyristor", "I2t_A2s", "4050 A²s", 4050.0),
        ("thyristor", "V_DRM_V", "1,2 kV", 1200.0),
        ("thyristor", "I_L_A", "300", 0.3),
        ("thyristor", "I_L_A", "0.3 A", 0.3),
        ("thyristor", "Tvj_max_C", "125", 125.0),
        ("thyristor", "Rth_jc_K_per_W", "0.55", 0.55),
        ("igbt", "Eon_J", "1.5e1", 15e-3),
        ("diode", "Qrr_As", "40", 40e-6),
    ],
)
def test_a_bare_number_counts_in_the_sheets_unit_and_a_unit_is_obeyed(
    kind: Kind, key: str, text: str, value: float
) -> None:
    assert si_value(rating_of(kind, key), text) == value


@pytest.mark.parametrize("text", ["", "abc", "1 2", "150 V", "1.2.3", "µs", "2 x"])
def test_what_is_no_quantity_of_the_rating_is_refused(text: str) -> None:
    with pytest.raises(QuantityFault):
        si_value(rating_of("thyristor", "tq_s"), text)


def test_a_rating_without_unit_takes_bare_numbers_only() -> None:
    rating = rating_of("igbt", "Eon_current_exponent")
    assert si_value(rating, "1,3") == 1.3
    with pytest.raises(QuantityFault):
        si_value(rating, "1.3 V")


@given(st.floats(min_value=1e-9, max_value=1e9).map(lambda value: float(f"{value:.15g}")))
def test_a_value_of_fifteen_digits_written_in_the_sheets_unit_reads_back_as_the_same_value(
    value: float,
) -> None:
    for kind, key in (("thyristor", "tq_s"), ("thyristor", "didt_A_per_s"), ("diode", "I2t_A2s")):
        rating = rating_of(kind, key)
        assert si_value(rating, sheet_number(rating, value)) == value


def test_figures_for_reading_are_rounded_in_the_sheets_unit() -> None:
    assert sheet_figure(rating_of("thyristor", "tq_s"), 84.4321e-6) == 84.43


def test_an_unknown_rating_is_named() -> None:
    with pytest.raises(KeyError, match="a diode has no rating 'tq_s'"):
        rating_of("diode", "tq_s")
