"""Junction temperatures: a worked example, chains by hand, agreement, runaway."""

from __future__ import annotations

from dataclasses import replace

import msgspec
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from engine.duty import duty_of
from engine.junction_temperature import (
    ThermalChain,
    missing_for_chain,
    on_one_sink_with,
    temperatures,
    thermal_chain,
)
from engine.losses import DeviceLoss, Loss
from tests.engine.hand_made import FREEWHEEL, THYRISTOR, candidate, selection

DUTY = duty_of(selection())


def device(W, W_per_K=0.0, leakage_W=0.0, Tvj_max_C=125.0, points=1):
    """Six alike devices with a straight loss over temperature and a leakage."""
    shape = (points, 6)
    nothing = Loss(np.zeros(shape), np.zeros(shape))
    straight = Loss(np.full(shape, W), np.full(shape, W_per_K))
    return DeviceLoss(straight, nothing, nothing, np.full(shape, leakage_W), Tvj_max_C)


def alone(K_per_W):
    """Each device on a chain of its own."""
    return ThermalChain(K_per_W * np.eye(12), 0.0 * np.eye(12))


# P. S. Bimbhra, Power Electronics, Example 4.20 (printed 229.17 W, and 8.71 % more current at a
# cooler sink); the answers read in a transcription, the inputs from memory and confirmed by
# both answers: 0.16 and 0.08 K/W, T_vj 125 °C, sink at 70 °C, then 60 °C.
def test_a_worked_example_of_the_static_chain_reaches_its_junction_temperature():
    one = candidate(msgspec.structs.replace(THYRISTOR, Rth_jc_K_per_W=0.16, Rth_ch_K_per_W=0.08))
    chain = thermal_chain(one, replace(DUTY, sink_K_per_W=0.0))
    printed_W = 229.17
    found = temperatures(chain, 70.0, device(printed_W), device(0.0))
    assert found.junction_C[0, :6] == pytest.approx([125.0] * 6, abs=5e-3)
    cooler_W = printed_W * 1.0871**2
    found = temperatures(chain, 60.0, device(cooler_W), device(0.0))
    assert found.junction_C[0, :6] == pytest.approx([125.0] * 6, abs=5e-3)


@pytest.mark.parametrize(("serves", "on_one_sink"), [("all", 6), ("leg", 2), ("position", 1)])
def test_a_sink_is_heated_by_all_that_it_serves(serves, on_one_sink):
    duty = replace(DUTY, sink_K_per_W=0.1, sink_serves=serves)
    found = temperatures(thermal_chain(candidate(), duty), 45.0, device(30.0), device(10.0))
    sink_C = 45.0 + 0.1 * on_one_sink * (30.0 + 10.0)
    assert found.case_C[0, :6] == pytest.approx([sink_C + 0.1 * 30.0] * 6)
    assert found.case_C[0, 6:] == pytest.approx([sink_C + 0.2 * 10.0] * 6)
    assert found.junction_C[0, :6] == pytest.approx([sink_C + (0.1 + 0.4) * 30.0] * 6)
    assert found.junction_C[0, 6:] == pytest.approx([sink_C + (0.2 + 0.6) * 10.0] * 6)


def test_a_leg_is_upper_and_lower_position_of_one_terminal():
    duty = replace(DUTY, sink_serves="leg")
    served = on_one_sink_with(duty, 6 + 1)
    assert np.flatnonzero(served).tolist() == [1, 4, 7, 10]


def test_a_co_packed_diode_shares_the_case():
    diode = msgspec.structs.replace(FREEWHEEL, co_packed=True, Rth_ch_K_per_W=None)
    one = candidate(diode=diode)
    duty = replace(DUTY, sink_K_per_W=0.0)
    assert list(missing_for_chain(one, duty)) == []
    found = temperatures(thermal_chain(one, duty), 45.0, device(30.0), device(10.0))
    assert found.case_C[0] == pytest.approx([45.0 + 0.1 * 40.0] * 12)
    assert found.junction_C[0, 6] == pytest.approx(49.0 + 0.6 * 10.0)


def test_positions_with_different_losses_keep_their_own_temperatures():
    duty = replace(DUTY, sink_K_per_W=0.1, sink_serves="position")
    switches = device(0.0)
    switches.on_state.W[0] = [10.0, 20.0, 30.0, 40.0, 50.0, 60.0]
    found = temperatures(thermal_chain(candidate(), duty), 45.0, switches, device(0.0))
    assert found.junction_C[0, :6] == pytest.approx(45.0 + 0.6 * switches.on_state.W[0])


# T = 45 + 1·(20 + 0.5·T) has the one solution T = 130 °C.
def test_loss_and_temperature_agree():
    found = temperatures(alone(1.0), 45.0, device(20.0, 0.5), device(0.0))
    assert found.junction_C[0, 0] == pytest.approx(130.0, abs=1e-6)
    assert found.loss_W[0, 0] == pytest.approx(85.0, abs=1e-6)


# T = 45 + 1·(20 + T) has none: every watt heats by more than it takes to cause it.
@pytest.mark.parametrize("W_per_K", [1.0, 1.5])
def test_a_loss_that_outgrows_its_cooling_runs_away(W_per_K):
    found = temperatures(alone(1.0), 45.0, device(20.0, W_per_K), device(0.0))
    assert found.runaway.tolist() == [True]
    assert np.isinf(found.junction_C).all()


def test_a_point_that_runs_away_leaves_the_others_alone():
    switches = device(20.0, 0.5, points=2)
    switches.on_state.W_per_K[1] = 2.0
    found = temperatures(alone(1.0), 45.0, switches, device(0.0, points=2))
    assert found.runaway.tolist() == [False, True]
    assert found.junction_C[0, 0] == pytest.approx(130.0, abs=1e-6)


# Leakage W·2^((T−125)/10) against (T − 45)/K touches at e·ln2/10·W·2^((45−125)/10)·K = 1.
@pytest.mark.parametrize(("share_of_limit", "runs_away"), [(0.99, False), (1.01, True)])
def test_leakage_runs_away_just_where_its_tangent_misses_the_cooling_line(
    share_of_limit, runs_away
):
    limit_W = 1.0 / (np.e * np.log(2.0) / 10.0 * 2.0 ** ((45.0 - 125.0) / 10.0))
    leaking = device(0.0, leakage_W=share_of_limit * limit_W)
    found = temperatures(alone(1.0), 45.0, leaking, device(0.0))
    assert bool(found.runaway[0]) is runs_away


@given(
    st.floats(0.0, 500.0),
    st.floats(0.0, 3.0),
    st.floats(0.0, 50.0),
    st.floats(0.01, 1.5),
    st.floats(-40.0, 60.0),
)
def test_a_temperature_that_is_given_is_the_lowest_at_which_losses_and_cooling_agree(
    W, W_per_K, leakage_W, K, ambient_C
):
    switches = device(W + 40.0 * W_per_K, W_per_K, leakage_W)
    found = temperatures(alone(K), ambient_C, switches, device(0.0))

    def excess(T):
        return ambient_C + K * switches.at(np.full((1, 6), T))[0, 0] - T

    if found.runaway[0]:
        assert all(excess(T) > -0.01 for T in np.linspace(ambient_C, ambient_C + 400.0, 400))
    else:
        T = found.junction_C[0, 0]
        assert abs(excess(T)) < 0.01
        assert all(excess(t) > -0.01 for t in np.linspace(ambient_C, T, 50))


def test_every_entry_of_the_chain_that_is_missing_is_named():
    bare = candidate(type(THYRISTOR)(), type(FREEWHEEL)())
    assert list(missing_for_chain(bare, replace(DUTY, sink_K_per_W=None))) == [
        "switch.Tvj_max_C",
        "switch.Rth_jc_K_per_W",
        "switch.Rth_ch_K_per_W",
        "diode.Tvj_max_C",
        "diode.Rth_jc_K_per_W",
        "diode.Rth_ch_K_per_W",
        "cooling.sink_K_per_W",
    ]


def test_without_feedback_diodes_their_chain_is_not_needed():
    bare = candidate(THYRISTOR, type(FREEWHEEL)())
    assert list(missing_for_chain(bare, replace(DUTY, feedback_diodes=False))) == []
