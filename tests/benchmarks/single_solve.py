"""One bridge solved to its exact periodic steady state, against marching there with `solve_ivp`."""

from __future__ import annotations

from dataclasses import replace

from engine.bridge import Bridge
from engine.device_stress import stress_at, stress_from_pieces
from engine.steady_state import solve
from engine.waveforms import sampled
from tests.benchmarks import Row, as_time, seconds
from tests.references.marched import marched_start

BALANCED = Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3)
UNBALANCED = replace(BALANCED, resistance_ohm=(9.0, 7.0, 5.0), inductance_H=(0.012, 0.01, 0.02))


def balanced_with_stresses() -> Row:
    solved = seconds(lambda: stress_at(BALANCED), 400)
    marched = seconds(lambda: marched_start(BALANCED, rtol=1e-8), 7)
    return _against_march(
        "balanced R-L star, steady state and all stresses", solved, marched, 300.0
    )


def balanced_by_the_general_solver() -> Row:
    solved = seconds(lambda: stress_from_pieces(solve(BALANCED)), 60)
    marched = seconds(lambda: marched_start(BALANCED, rtol=1e-8), 7)
    return _against_march("the same by the general solver", solved, marched, None)


def unbalanced_with_stresses() -> Row:
    solved = seconds(lambda: stress_at(UNBALANCED), 40)
    marched = seconds(lambda: marched_start(UNBALANCED, rtol=1e-8), 7)
    return _against_march("three different branches, all stresses", solved, marched, None)


def _against_march(what: str, solved: float, marched: float, goal: float | None) -> Row:
    ratio = marched / solved
    return Row(
        what=what,
        measured=as_time(solved),
        reference=f"march {as_time(marched)}",
        ratio=f"{ratio:.0f}×",
        goal=f"≥ {goal:.0f}×" if goal else "",
        met=ratio >= goal if goal else None,
    )


def long_time_constant() -> Row:
    return _long_against_short("L/R of 100 periods against a tenth, closed form", stress_at)


def long_time_constant_in_general() -> Row:
    return _long_against_short(
        "L/R of 100 periods against a tenth, general solver",
        lambda bridge: stress_from_pieces(solve(bridge)),
    )


def _long_against_short(what: str, of) -> Row:  # type: ignore[no-untyped-def]
    short, long = (
        replace(BALANCED, inductance_H=(9.0 * periods * 0.02,) * 3) for periods in (0.1, 100.0)
    )
    short_s, long_s = seconds(lambda: of(short), 100), seconds(lambda: of(long), 100)
    ratio = long_s / short_s
    return Row(what, as_time(long_s), as_time(short_s), f"{ratio:.2f}×", "≤ 2×", ratio <= 2.0)


def waveforms_to_draw() -> Row:
    state = solve(UNBALANCED)
    sampled_s = seconds(lambda: sampled(state), 60)
    return Row(
        "721 samples of all waveforms of a solved bridge",
        as_time(sampled_s),
        "",
        "",
        "≤ 2 ms",
        sampled_s <= 2e-3,
    )


ROWS = (
    balanced_with_stresses,
    balanced_by_the_general_solver,
    unbalanced_with_stresses,
    long_time_constant,
    long_time_constant_in_general,
    waveforms_to_draw,
)
