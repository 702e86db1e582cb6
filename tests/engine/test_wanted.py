"""Wanted ratings: hand-made numbers, and that a part bought by them is adequate."""

from __future__ import annotations

import msgspec
import pytest

from engine.corners import solved
from engine.duty import duty_of
from engine.ratings import Thyristor
from engine.rule_sets import COMMON_PRACTICE, MIL_STD_975M
from engine.selection import Load
from engine.verdicts.candidate import ROWS, candidate_result
from engine.wanted import wanted_of
from tests.engine.hand_made import (
    FREEWHEEL,
    THYRISTOR,
    candidate,
    selection,
    solved_by_hand,
    stress,
)

LARGEST = 594.0 / 540.0


def wanted(made=None, kinds=("thyristor",), rules=COMMON_PRACTICE, **changes):
    bridge = solved_by_hand(made or stress(), selection(**changes))
    return {one.id: one for one in wanted_of(bridge, rules, kinds)}


# The hand-made bridge: 594 V at most, 10 A average, 20 A rms, 40 A peak at 540 V; band 10 %.
@pytest.mark.parametrize(
    ("id", "value"),
    [
        ("switch.V_DRM", 594 * 1.5 / 0.72),
        ("switch.V_steady", 594 / 0.54),
        ("switch.V_isol", 594 / 0.45),
        ("switch.I_TAV", 10 * LARGEST / 0.72),
        ("switch.I_TRMS", 20 * LARGEST / 0.72),
        ("switch.I_TRM", 40 * LARGEST * 1.5 / 0.72),
        ("switch.tq_dead", 1e-3 * 0.9 / 2.25),
        ("diode.V_RRM", 594 * 1.5 / 0.72),
        ("diode.I_FAV", 2 * LARGEST / 0.72),
        ("diode.I_FRM", 30 * LARGEST * 1.5 / 0.72),
    ],
)
def test_what_is_wanted_is_the_stress_over_fraction_and_band(id, value):
    assert wanted()[id].value == pytest.approx(value)


def test_a_wanted_figure_says_how_it_came_about():
    found = wanted()
    assert found["switch.V_DRM"].how == (
        "link voltage × transient factor 891 V/(0.8 × 0.9) = 1237 V"
    )
    assert "form factor and the case temperature left out" in found["switch.I_TAV"].how
    assert found["switch.tq_dead"].how == "1 ms × 0.9/(1.5 × 1.5) = 400 µs"


def test_the_next_class_above_is_named_where_the_trade_has_classes():
    found = wanted(kinds=("thyristor", "igbt"))
    assert found["switch.V_DRM"].next_class == 1400.0
    assert found["switch.V_CES"].next_class == 1200.0
    assert found["switch.I_TAV"].next_class is None


def test_a_value_that_is_a_class_is_its_own_next_class():
    supply = type(selection().supply)(voltage_V=1200 * 0.72 / 1.5)
    assert wanted(supply=supply)["switch.V_DRM"].next_class == 1200.0


def test_above_the_highest_class_there_is_none():
    supply = type(selection().supply)(voltage_V=9000.0)
    assert wanted(supply=supply)["switch.V_DRM"].next_class is None


def test_turn_off_time_is_wanted_at_most_and_by_the_worst_position():
    positions = {"T4": {"turn_off": "natural", "forward_reapplied_s": 2e-4}}
    found = wanted(stress(positions))["switch.tq_dead"]
    assert found.at_most
    assert found.position == "T4"
    assert found.value == pytest.approx(2e-4 * 0.9 / 2.25)
    assert found.corner.ambient_C == 45.0


def test_no_turn_off_time_is_wanted_where_no_current_flows():
    idle = {f"T{n}": {"turn_off": "idle", "forward_reapplied_s": None} for n in range(1, 7)}
    assert "switch.tq_dead" not in wanted(stress(idle))


def test_without_feedback_diodes_none_are_wanted():
    load = Load(connection="star", resistance_ohm=9.0, inductance_H=0.0)
    found = wanted(feedback_diodes=False, load=load)
    assert not [id for id in found if id.startswith("diode.")]
    assert found["switch.tq_dead"].value == pytest.approx(1e-3 * 0.9 / 1.5)


def test_the_first_three_are_those_that_the_choice_begins_with():
    assert list(wanted())[:3] == ["switch.V_DRM", "switch.I_TAV", "switch.tq_dead"]


def test_the_rule_set_decides_how_much_is_wanted():
    assert wanted(rules=MIL_STD_975M)["switch.I_TAV"].value == pytest.approx(10 * LARGEST / 0.45)


def test_a_part_with_just_the_wanted_ratings_is_adequate_but_for_its_average_current():
    document = selection()
    bridge = solved(duty_of(document))
    ratings: dict[str, dict[str, float]] = {"switch": {}, "diode": {}}
    rows = {row.id: row for row in ROWS[Thyristor]}
    for one in wanted_of(bridge, COMMON_PRACTICE, ["thyristor"]):
        row = rows[one.id]
        values = ratings[row.part]
        values[row.keys[0]] = max(values.get(row.keys[0], 0.0), one.value)
    part = candidate(
        msgspec.structs.replace(THYRISTOR, **ratings["switch"]),
        msgspec.structs.replace(FREEWHEEL, **ratings["diode"]),
    )
    checks = candidate_result(part, bridge, COMMON_PRACTICE).checks
    short = {check.id for check in checks if check.verdict in ("tight", "undersized")}
    assert short <= {"switch.I_TAV", "diode.I_FAV"}
