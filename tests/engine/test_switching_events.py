"""The event list of one period."""

from __future__ import annotations

from dataclasses import replace
from random import Random

import pytest

from engine.bridge import POSITIONS, Bridge
from engine.device_stress import stress_from_pieces
from engine.steady_state import solve
from engine.stress import SwitchingEvent
from tests.engine.random_bridges import random_bridge

STAR = Bridge(540.0, 50.0, 120.0, "star", (9.0,) * 3, (0.012,) * 3)


def events(bridge: Bridge) -> tuple[SwitchingEvent, ...]:
    return stress_from_pieces(solve(bridge)).events


def of(found: tuple[SwitchingEvent, ...], position: str, device: str) -> list[SwitchingEvent]:
    return [event for event in found if event.position == position and event.device == device]


def test_one_period_of_a_thyristor_and_its_diode() -> None:
    """T1 turns on at zero and is cut at its peak; D4 takes over and ends by itself."""
    found = events(STAR)
    on, off = of(found, "T1", "switch")
    assert (on.kind, on.current_A, on.angle_deg) == ("on at zero", 0.0, 0.0)
    assert on.voltage_V == pytest.approx(270.0)
    assert on.didt_A_per_s == pytest.approx(2.0 / 3.0 * 540.0 / 0.012)
    assert (off.kind, off.didt_A_per_s) == ("off forced", None)
    assert off.angle_deg == pytest.approx(120.0)
    assert off.voltage_V == pytest.approx(540.0)
    taken, ended = of(found, "T4", "diode")
    assert taken.kind == "on at current"
    assert taken.current_A == pytest.approx(off.current_A)
    assert taken.time_s == pytest.approx(off.time_s)
    assert (ended.kind, ended.current_A) == ("off natural", 0.0)
    assert ended.didt_A_per_s == pytest.approx(540.0 / 3.0 / 0.012)
    assert ended.voltage_V == pytest.approx(270.0)


def test_every_device_turns_off_as_often_as_on() -> None:
    """Ons and offs of one device alternate over the period, for bridges of every kind."""
    for seed in range(60):
        found = events(random_bridge(Random(seed)))
        for position in POSITIONS:
            for device in ("switch", "diode"):
                turns = [event.kind.split()[0] for event in of(found, position, device)]
                pairs = len(turns) // 2
                assert turns in (["on", "off"] * pairs, ["off", "on"] * pairs)


def test_events_rise_in_time_and_mirror_after_half_a_period() -> None:
    """Opposite positions do the same half a period apart."""
    for seed in range(30):
        bridge = random_bridge(Random(seed))
        found = events(bridge)
        times = [event.time_s for event in found]
        assert times == sorted(times)
        assert all(0.0 <= event.angle_deg < 360.0 for event in found)
        half = len(found) // 2
        for one, two in zip(found[:half], found[half:], strict=True):
            assert POSITIONS.index(two.position) == (POSITIONS.index(one.position) + 3) % 6
            assert two.angle_deg == pytest.approx(one.angle_deg + 180.0)
            assert (two.kind, two.current_A) == (one.kind, one.current_A)


def test_conducting_diode_is_recovered_by_the_opposite_switch() -> None:
    """A diode that conducts when the opposite switch is gated recovers from its full current.

    Wherever the opposite switch takes the current over, both see the same voltage.
    """
    bridge = Bridge(540.0, 50.0, 180.0, "star", (9.0, 9.0, 0.3), (0.0, 0.0, 0.05))
    checked = 0
    for found in (events(bridge), *(events(random_bridge(Random(seed))) for seed in range(80))):
        for event in found:
            if event.kind != "off recovery":
                continue
            assert event.device == "diode"
            assert event.current_A > 0.0
            opposite = POSITIONS[(POSITIONS.index(event.position) + 3) % 6]
            for taking in of(found, opposite, "switch"):
                if taking.kind == "on at current" and taking.time_s == event.time_s:
                    assert event.voltage_V == pytest.approx(taking.voltage_V)
                    checked += 1
    assert checked > 0


def test_load_inductance_limits_the_rise_at_zero_current() -> None:
    """Half the inductance doubles the di/dt of a turn-on at zero."""
    slow, fast = (of(events(bridge), "T1", "switch")[0] for bridge in (STAR, _half(STAR)))
    assert slow.didt_A_per_s is not None
    assert fast.didt_A_per_s == pytest.approx(2.0 * slow.didt_A_per_s)


def _half(bridge: Bridge) -> Bridge:
    return replace(bridge, inductance_H=(0.006,) * 3)
