"""The exact periodic steady state of the bridge.

Plus and minus change places every half period, so the state is the fixed point of
x ← −x(T/2); when load and gating are balanced one sixth of a period is enough, as then
i_A(t + T/6) = −i_B(t), and cyclically. The fixed point is found by Newton's method with the
sensitivity of the event times. The diodes are a monotone law, so the map never expands in the
norm √(xᵀLx); that norm of the residual is the merit by which a Newton step is shortened, or
replaced by plain iteration.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import sqrt
from typing import NamedTuple

from engine.bridge import Bridge
from engine.duty import Triple
from engine.errors import NoSolution
from engine.gating import gate_steps, gate_window_s
from engine.leg_states import current_scale_A, impedances_ohm
from engine.period_map import Matrix, Walk
from engine.pieces import Piece

_MOST_STEPS = 400  # of Newton's method
_CLOSED = 1e-13  # residual of the period map, of the current scale
_STALLED = 1e-9  # residual that is accepted when a step no longer halves it


@dataclass(frozen=True, slots=True, eq=False)
class SteadyState:
    """One period of the bridge as its pieces, in order of time, first at T1's nominal gate-on."""

    bridge: Bridge
    half: tuple[Piece, ...]
    """The pieces of the first half period."""

    @property
    def pieces(self) -> tuple[Piece, ...]:
        """The pieces of the whole period: the second half is the first with + and − changed."""
        return self.half + tuple(piece.mirrored() for piece in self.half)


def solve(bridge: Bridge) -> SteadyState:
    """The periodic steady state of a bridge.

    Raises
    ------
    NoSolution
        The load has no unique steady state, or is not one that this solver treats.
    """
    _refuse(bridge)
    start = _periodic_start(bridge)
    walk = Walk(bridge, gate_steps(bridge, 0.5 * bridge.period_s), start)
    return SteadyState(bridge, tuple(walk.pieces))


def _refuse(bridge: Bridge) -> None:
    R, L = bridge.resistance_ohm, bridge.inductance_H
    if any(bridge.emf_peak_V):
        raise NoSolution(
            "load.emf_peak_V", "must be 0: this version does not solve loads with an EMF yet"
        )
    if any(r == 0.0 and l == 0.0 for r, l in zip(R, L, strict=True)):
        raise NoSolution("load.resistance_ohm", "R and L of a branch must not both be 0")
    if R.count(0.0) > (1 if bridge.connection == "star" else 0):
        raise NoSolution(
            "load.resistance_ohm",
            "no unique periodic steady state: a star may have one branch without resistance, "
            "a delta none",
        )
    if not bridge.feedback_diodes and any(L):
        raise NoSolution(
            "feedback_diodes", "must be true with an inductive load: its current needs a path"
        )
    if gate_window_s(bridge) <= 0.0:
        raise NoSolution("gating.blanking_s", "must be shorter than the gate window")


class _Image(NamedTuple):
    """Where the map takes x, with the sensitivity ∂image/∂x and the residual's norm √(rᵀLr)."""

    x: Triple
    image: Triple
    sensitivity: Matrix
    merit: float

    @property
    def residual(self) -> Triple:
        (a, b, c), (p, q, r) = self.x, self.image
        return p - a, q - b, r - c


_Map = Callable[[Triple], _Image]


def _periodic_start(bridge: Bridge) -> Triple:
    """Branch currents at T1's nominal gate-on."""
    if not any(bridge.inductance_H):
        return 0.0, 0.0, 0.0
    a, b, c = bridge.inductance_H
    steps = gate_steps(bridge, bridge.period_s / (6.0 if bridge.is_balanced else 2.0))

    def mapped(x: Triple) -> _Image:
        walk = Walk(bridge, steps, x)
        p, q, r = walk.currents
        rows = walk.sensitivity
        if bridge.is_balanced:
            p, q, r = r, p, q
            rows = rows[2], rows[0], rows[1]
        image = (-p, -q, -r)
        merit = sqrt(a * (x[0] + p) ** 2 + b * (x[1] + q) ** 2 + c * (x[2] + r) ** 2)
        return _Image(x, image, (_negative(rows[0]), _negative(rows[1]), _negative(rows[2])), merit)

    return _fixed_point(mapped, _usual_norm(bridge))


def _usual_norm(bridge: Bridge) -> float:
    """√(xᵀLx) of currents of the order of those that flow."""
    most_A = current_scale_A(bridge)
    currents = (min(most_A, bridge.voltage_V / Z) for Z in impedances_ohm(bridge))
    return sqrt(sum(L * i * i for L, i in zip(bridge.inductance_H, currents, strict=True)))


def _negative(row: Triple) -> Triple:
    return -row[0], -row[1], -row[2]


def _fixed_point(mapped: _Map, scale: float) -> Triple:
    """x with mapped(x) = x, from rest; `scale` is a merit of the order of the solution's norm."""
    here = mapped((0.0, 0.0, 0.0))
    for _ in range(_MOST_STEPS):
        if here.merit <= _CLOSED * scale:
            return here.image
        better = _newton(mapped, here)
        if here.merit <= _STALLED * scale and (better is None or better.merit > 0.5 * here.merit):
            return here.image
        here = better or mapped(here.image)
    raise NoSolution("load", "the periodic steady state was not reached")


def _newton(mapped: _Map, here: _Image) -> _Image | None:
    """The longest Newton step of 1, 1/2 … 1/64 that lowers the merit, `None` when none does."""
    step = _newton_step(here)
    part = 1.0
    while step is not None and part >= 1.0 / 64.0:
        x = here.x
        there = mapped((x[0] + part * step[0], x[1] + part * step[1], x[2] + part * step[2]))
        if there.merit < here.merit:
            return there
        part *= 0.5
    return None


def _newton_step(here: _Image) -> Triple | None:
    """Solution of (I − M) step = residual by Cramer's rule, `None` when singular."""
    m = here.sensitivity
    columns = [
        (1.0 - m[0][0], -m[1][0], -m[2][0]),
        (-m[0][1], 1.0 - m[1][1], -m[2][1]),
        (-m[0][2], -m[1][2], 1.0 - m[2][2]),
    ]
    determinant = _determinant(columns)
    if determinant == 0.0:
        return None
    a, b, c = columns
    r = here.residual
    return (
        _determinant([r, b, c]) / determinant,
        _determinant([a, r, c]) / determinant,
        _determinant([a, b, r]) / determinant,
    )


def _determinant(columns: list[Triple]) -> float:
    a, b, c = columns
    return (
        a[0] * (b[1] * c[2] - b[2] * c[1])
        - b[0] * (a[1] * c[2] - a[2] * c[1])
        + c[0] * (a[1] * b[2] - a[2] * b[1])
    )
