"""All checks of four candidates over all corners of one duty."""

from __future__ import annotations

from engine.assessment import assess
from engine.corners import solution, solved
from tests.benchmarks import Row, as_time, seconds
from tests.engine.hand_made import IGBT, THYRISTOR, candidate, selection

FOUR = selection(
    candidate(THYRISTOR, name="first"),
    candidate(THYRISTOR, name="second"),
    candidate(IGBT, name="third"),
    candidate(IGBT, name="fourth"),
)
GOAL_S = 0.05


def after_an_edit_of_the_duty() -> Row:
    def anew() -> None:
        solved.cache_clear()
        solution.cache_clear()
        assess(FOUR)

    return _row("4 candidates over all corners, the bridge solved anew", seconds(anew))


def after_an_edit_of_a_rating() -> Row:
    return _row("the same with the bridge known", seconds(lambda: assess(FOUR)))


def _row(what: str, duration_s: float) -> Row:
    return Row(
        what=what,
        measured=as_time(duration_s),
        reference="",
        ratio="",
        goal=f"≤ {as_time(GOAL_S)}",
        met=duration_s <= GOAL_S,
    )


ROWS = (after_an_edit_of_the_duty, after_an_edit_of_a_rating)
