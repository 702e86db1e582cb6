"""Junction and case temperatures of all positions, in agreement with the losses they cause.

A chain of thermal resistances: junction – case – heatsink – ambient. The heatsink serves all
six positions, a leg, or one position; a co-packed diode shares the switch's case. All rises
are linear in the losses, so that the chain is a matrix over the twelve devices, switches first:
T = T_ambient + K·P(T). Means over the period; no ripple, no thermal capacity.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from engine.bridge import LEG_OF_POSITION
from engine.duty import Duty
from engine.losses import DeviceLoss
from engine.selection import Candidate
from engine.stress_table import Array

AGREEMENT_K = 1e-3
"""Largest last step of a temperature that is taken as found."""
_MOST_STEPS = 60
_SEARCHED_C = (-1e3, 1e4)


@dataclass(frozen=True, slots=True, eq=False)
class ThermalChain:
    """Rise of each device's junction and case per watt of each device, `(12, 12)` in K/W."""

    junction_K_per_W: Array
    case_K_per_W: Array


@dataclass(frozen=True, slots=True, eq=False)
class Temperatures:
    """Junction and case temperatures in °C, `(n_points, 12)`, switches first, then diodes.

    `runaway` `(n_points,)`: there the losses grow faster with temperature than the cooling
    carries away, and the temperatures are infinite.
    """

    junction_C: Array
    case_C: Array
    loss_W: Array
    runaway: NDArray[np.bool_]


def missing_for_chain(candidate: Candidate, duty: Duty) -> Iterator[str]:
    """Entries without which the chain is not closed, as keys below candidate or document."""
    own = ["switch.Tvj_max_C", "switch.Rth_jc_K_per_W", "switch.Rth_ch_K_per_W"]
    if duty.feedback_diodes:
        own += ["diode.Tvj_max_C", "diode.Rth_jc_K_per_W"]
        own += [] if candidate.diode.co_packed else ["diode.Rth_ch_K_per_W"]
    for key in own:
        part, _, rating = key.partition(".")
        if getattr(getattr(candidate, part), rating) is None:
            yield key
    if duty.sink_K_per_W is None:
        yield "cooling.sink_K_per_W"


def thermal_chain(candidate: Candidate, duty: Duty) -> ThermalChain:
    """The chain of a candidate. Nothing of `missing_for_chain` may be missing."""
    switch, diode = candidate.switch, candidate.diode
    assert duty.sink_K_per_W is not None
    case = duty.sink_K_per_W * np.tile(_on_one_sink(duty), (2, 2))
    if diode.co_packed:
        case += (switch.Rth_ch_K_per_W or 0.0) * np.tile(np.eye(6), (2, 2))
    else:
        case += _of_devices(switch.Rth_ch_K_per_W, diode.Rth_ch_K_per_W)
    return ThermalChain(case + _of_devices(switch.Rth_jc_K_per_W, diode.Rth_jc_K_per_W), case)


def _of_devices(switch_K_per_W: float | None, diode_K_per_W: float | None) -> Array:
    return np.diag(np.array([switch_K_per_W or 0.0] * 6 + [diode_K_per_W or 0.0] * 6))


def _on_one_sink(duty: Duty) -> Array:
    """Which positions heat each other's sink, `(6, 6)` of 0 and 1."""
    if duty.sink_serves == "all":
        return np.ones((6, 6))
    if duty.sink_serves == "leg":
        leg = np.array(LEG_OF_POSITION)
        return (leg[:, None] == leg[None, :]).astype(np.float64)
    return np.eye(6)


def on_one_sink_with(duty: Duty, device: int) -> NDArray[np.bool_]:
    """Which of the twelve devices heat the sink of one of them, `(12,)`."""
    return np.tile(_on_one_sink(duty)[device % 6] > 0.0, 2)


def temperatures(
    chain: ThermalChain, ambient_C: float, switches: DeviceLoss, diodes: DeviceLoss
) -> Temperatures:
    """Solve T = T_ambient + K·P(T) for all points at once, to better than 0.01 K.

    Newton's method from the ambient. As P grows with T and is convex, the steps rise towards
    the lowest solution, the stable one, and never pass it; where there is none they find no
    rest, which is reported as runaway.
    """
    K = chain.junction_K_per_W
    T = np.full((len(switches.leakage_W), 12), float(ambient_C))
    at_rest = np.zeros(len(T), dtype=np.bool_)
    for _ in range(_MOST_STEPS):
        excess = ambient_C + _loss(switches, diodes, T) @ K.T - T
        step = _solve(_newton_matrix(K, _slope(switches, diodes, T)), excess)
        T = np.clip(T + step, *_SEARCHED_C)
        at_rest = np.abs(step).max(axis=1) < AGREEMENT_K
        if at_rest.all():
            break
    stable = at_rest & _is_stable(K, _slope(switches, diodes, T))
    power = _loss(switches, diodes, T)
    case = ambient_C + power @ chain.case_K_per_W.T
    found = stable[:, None]
    return Temperatures(
        junction_C=np.where(found, T, np.inf),
        case_C=np.where(found, case, np.inf),
        loss_W=np.where(found, power, np.inf),
        runaway=~stable,
    )


def _loss(switches: DeviceLoss, diodes: DeviceLoss, T: Array) -> Array:
    return np.concatenate((switches.at(T[:, :6]), diodes.at(T[:, 6:])), axis=1)


def _slope(switches: DeviceLoss, diodes: DeviceLoss, T: Array) -> Array:
    return np.concatenate((switches.slope_at(T[:, :6]), diodes.slope_at(T[:, 6:])), axis=1)


def _newton_matrix(K: Array, slope_W_per_K: Array) -> Array:
    """I − K·diag(P'), `(n_points, 12, 12)`; the nudge keeps round figures from a zero pivot."""
    return np.eye(12) * (1.0 + 1e-12) - K * slope_W_per_K[:, None, :]


def _solve(matrix: Array, right: Array) -> Array:
    return np.asarray(np.linalg.solve(matrix, right[:, :, None])[:, :, 0], dtype=np.float64)


def _is_stable(K: Array, slope_W_per_K: Array) -> NDArray[np.bool_]:
    """Whether a small rise of temperature dies out: the spectral radius of K·diag(P') is below 1.

    For a matrix of this kind (no positive element off the diagonal) that holds just if
    I − K·diag(P') turns some positive vector, hence the one with all-ones image, positive
    (A. Berman, R. J. Plemmons, Nonnegative Matrices in the Mathematical Sciences, ch. 6;
    from memory).
    """
    growing = _newton_matrix(K, np.maximum(slope_W_per_K, 0.0))
    return np.all(_solve(growing, np.ones(slope_W_per_K.shape)) > 0.0, axis=1)
