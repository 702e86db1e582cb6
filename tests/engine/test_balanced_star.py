"""The closed form of the balanced star against the general solver, figure by figure."""

from __future__ import annotations

from dataclasses import replace
from random import Random
from typing import Any

import msgspec
import pytest

from engine.balanced_star import closed_form_stress, has_closed_form
from engine.bridge import Bridge
from engine.device_stress import stress_at, stress_from_pieces, stress_of
from engine.steady_state import solve
from engine.stress import BridgeStress

STAR = Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3)


def random_star(seed: int) -> Bridge:
    """L/R from a thousandth to ten thousand periods, with and without blanking."""
    random = Random(seed)
    frequency_Hz = 10.0 ** random.uniform(0.0, 3.0)
    conduction_deg = random.choice([120.0, 150.0, 180.0, random.uniform(120.0, 180.0)])
    R = 10.0 ** random.uniform(-2.0, 3.0)
    L = R * 10.0 ** random.uniform(-3.0, random.choice([1.0, 4.0])) / frequency_Hz
    blanking_deg = random.choice([0.0, random.uniform(0.0, conduction_deg - 120.0)])
    return Bridge(
        voltage_V=10.0 ** random.uniform(0.0, 4.0),
        frequency_Hz=frequency_Hz,
        conduction_deg=conduction_deg,
        connection="star",
        resistance_ohm=(R,) * 3,
        inductance_H=(L,) * 3,
        blanking_s=blanking_deg / 360.0 / frequency_Hz,
    )


def leaves(value: Any, name: str = "") -> list[tuple[str, Any]]:
    """Every figure of a result with its path, events in the order of angle, position, kind."""
    if isinstance(value, dict):
        return [leaf for key, part in value.items() for leaf in leaves(part, f"{name}.{key}")]
    if isinstance(value, list | tuple):
        parts = sorted(value, key=event_order) if name == ".events" else value
        return [leaf for k, part in enumerate(parts) for leaf in leaves(part, f"{name}[{k}]")]
    return [(name, value)]


def event_order(event: dict[str, Any]) -> tuple[float, str, str, str]:
    angle = round(event["angle_deg"], 6) % 360.0
    return angle, event["position"], event["device"], event["kind"]


def scale_of(name: str, bridge: Bridge, stress: BridgeStress) -> float:
    """What a difference is measured against, by the unit at the end of a field's name."""
    units = {
        "A_per_s": bridge.voltage_V / bridge.inductance_H[0],
        "_A": stress.line_current_peak_A[0],
        "_V": bridge.voltage_V,
        # Powers of a load of nearly no resistance are small beside what flows to and fro.
        "_W": bridge.voltage_V * stress.link_current_rms_A,
        "_s": bridge.period_s,
        "_deg": 360.0,
        "_thd": 1.0,
    }
    stem = name.split("[")[0] if name.endswith("]") else name
    return next(scale for unit, scale in units.items() if stem.endswith(unit))


@pytest.mark.parametrize("seed", range(120))
def test_both_paths_agree_to_1e_12(seed: int) -> None:
    """All currents, voltages, times and events of both paths are the same."""
    bridge = random_star(seed)
    assert has_closed_form(bridge)
    general = stress_from_pieces(solve(bridge))
    closed = leaves(msgspec.to_builtins(closed_form_stress(bridge)))
    pieces = leaves(msgspec.to_builtins(general))
    assert [name for name, _ in closed] == [name for name, _ in pieces]
    for (name, got), (_, expected) in zip(closed, pieces, strict=True):
        if not isinstance(expected, float):
            assert got == expected, name
            continue
        difference = abs(got - expected) / scale_of(name, bridge, general)
        if name.endswith(("angle_deg", "time_s")):
            difference = min(difference, abs(1.0 - difference))  # 0° and 360° are one
        assert difference <= 1e-12, name


@pytest.mark.parametrize(
    "bridge",
    [
        replace(STAR, connection="delta"),
        replace(STAR, resistance_ohm=(9.0, 9.0, 9.1)),
        replace(STAR, inductance_H=(0.012, 0.012, 0.013)),
        replace(STAR, inductance_H=(0.0,) * 3),
        replace(STAR, blanking_s=1e-4),
        replace(STAR, emf_peak_V=(1.0,) * 3),
    ],
)
def test_other_bridges_have_no_closed_form(bridge: Bridge) -> None:
    """A delta, unequal branches, no inductance, an EMF, or a window below 120° is left out."""
    assert not has_closed_form(bridge)


def test_stresses_come_by_the_closed_form_where_there_is_one() -> None:
    """`stress_at` and `stress_of` take it for a balanced star, the pieces for any other load."""
    assert stress_at(STAR) == stress_of(solve(STAR)) == closed_form_stress(STAR)
    delta = replace(STAR, connection="delta")
    assert stress_at(delta) == stress_of(solve(delta)) == stress_from_pieces(solve(delta))
