"""Headroom, verdict, the worst place and the rating that would do, with numbers by hand."""

from __future__ import annotations

import numpy as np
import pytest

from engine.stress_table import OperatingPoints
from engine.verdicts.comparison import (
    ROUNDING_PCT,
    Comparison,
    Place,
    verdict_of_headroom,
    worst_of,
)


def comparison(applied, allowed, **kwargs):
    applied, allowed = np.atleast_2d(applied), np.atleast_2d(allowed)
    count = np.arange(float(len(applied)))
    usual = {
        "how": lambda place: "",
        "rating_for": lambda target, place: target,
    }
    points = OperatingPoints(count, count, count)
    return Comparison(points, applied.astype(float), allowed.astype(float), **{**usual, **kwargs})


@pytest.mark.parametrize(
    ("headroom_pct", "verdict"),
    [
        (None, "undersized"),
        (-0.001, "undersized"),
        (-2.0 * ROUNDING_PCT, "undersized"),
        (-ROUNDING_PCT, "tight"),
        (0.0, "tight"),
        (9.999, "tight"),
        (10.0 - 2.0 * ROUNDING_PCT, "tight"),
        (10.0 - ROUNDING_PCT, "adequate"),
        (10.0, "adequate"),
        (100.0, "adequate"),
    ],
)
def test_the_verdict_turns_exactly_at_zero_and_at_the_band(headroom_pct, verdict):
    assert verdict_of_headroom(headroom_pct, 10.0) == verdict


def test_without_a_band_nothing_is_tight():
    assert verdict_of_headroom(0.0, 0.0) == "adequate"


def test_headroom_is_what_is_left_of_the_allowed_value():
    worst = worst_of(comparison([[891.0]], [[960.0]]), 0.9)
    assert worst.headroom_pct == pytest.approx(7.1875)
    assert (worst.applied, worst.allowed, worst.reason) == (891.0, 960.0, None)


def test_the_worst_place_is_the_one_of_least_headroom_not_of_most_stress():
    worst = worst_of(comparison([[50.0, 90.0], [10.0, 20.0]], [[100.0, 200.0], [11.0, 100.0]]), 0.9)
    assert worst.place == Place(1, 0)


def test_of_equal_places_the_first_is_named_whatever_the_rounding():
    worst = worst_of(comparison([[50.0, 50.0 * (1 + 1e-14)]], [[100.0]]), 0.9)
    assert worst.place == Place(0, 0)


def test_places_that_are_left_out_do_not_count():
    worst = worst_of(comparison([[np.nan, 50.0]], [[10.0, 100.0]]), 0.9)
    assert worst.place == Place(0, 1)
    assert worst_of(comparison([[np.nan]], [[10.0]]), 0.9) is None
    assert worst_of(comparison([[1.0]], [[np.nan]]), 0.9) is None


@pytest.mark.parametrize("allowed", [0.0, -1.0])
def test_where_nothing_is_allowed_headroom_is_null_and_the_reason_given(allowed):
    worst = worst_of(comparison([[5.0]], [[allowed]], nothing_allowed="no room"), 0.9)
    assert worst.headroom_pct is None
    assert worst.reason == "no room"
    assert verdict_of_headroom(worst.headroom_pct, 10.0) == "undersized"


def test_where_nothing_is_allowed_is_worse_than_any_overload():
    worst = worst_of(comparison([[900.0, 0.0]], [[100.0, 0.0]]), 0.9)
    assert worst.place == Place(0, 1)


def test_a_stress_without_limit_has_no_applied_value_and_says_why():
    worst = worst_of(comparison([[np.inf]], [[100.0]], unlimited="runs away"), 0.9)
    assert (worst.applied, worst.headroom_pct, worst.reason) == (None, None, "runs away")
    assert worst.would_do is None


def test_a_temperature_is_compared_by_its_rise_over_the_ambient():
    worst = worst_of(comparison([[85.0]], [[105.0]], zero=45.0), 0.9)
    assert worst.headroom_pct == pytest.approx(100 * (1 - 40 / 60))


def test_a_ceiling_at_the_ambient_allows_nothing():
    worst = worst_of(comparison([[45.0]], [[45.0]], zero=45.0, nothing_allowed="too hot"), 0.9)
    assert (worst.headroom_pct, worst.reason) == (None, "too hot")


def test_what_would_do_leaves_just_the_band():
    assert worst_of(comparison([[90.0]], [[50.0]]), 0.9).would_do == pytest.approx(100.0)


def test_what_would_do_of_a_temperature_counts_from_the_ambient():
    worst = worst_of(comparison([[90.0]], [[50.0]], zero=45.0), 0.9)
    assert worst.would_do == pytest.approx(95.0)


def test_what_would_do_of_an_at_least_rating_is_just_less_than_there_is():
    worst = worst_of(comparison([[90.0]], [[50.0]], at_least=True), 0.9)
    assert worst.would_do == pytest.approx(45.0)
    assert worst.headroom_pct == pytest.approx(-80.0)


def test_where_there_is_nothing_no_rating_would_do():
    assert worst_of(comparison([[90.0]], [[0.0]], at_least=True), 0.9).would_do is None
