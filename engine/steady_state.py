"""The exact periodic steady state of the bridge.

Each gate step is walked piece by piece: the consistent leg state, its closed form, and the
first diode current or open-leg voltage that ends it. The period map x(T) = f(x(0)) of the
branch currents is solved by Newton's method with the sensitivity of the event times. The
diodes are a monotone law, so the map never expands in the norm √(xᵀLx); that norm of the
residual is the merit by which a Newton step is shortened, or replaced by plain iteration.
When load and gating are balanced one sixth of a period is enough: then
i_A(t + T/6) = −i_B(t), and cyclically.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from math import exp, sqrt

from engine.bridge import Bridge
from engine.duty import Triple
from engine.errors import NoSolution
from engine.gating import gate_steps, gate_window_s
from engine.leg_states import consistent_piece, current_scale_A
from engine.pieces import Legs, Piece, line_weights, terminal_voltages
from engine.roots import Coefficients, first_fall

Matrix = tuple[Triple, Triple, Triple]

_MOST_PIECES = 64  # in one gate step
_MOST_STEPS = 400  # of Newton's method
_CLOSED = 1e-13  # residual of the period map, of the current scale
_ZERO_CURRENT = 1e-12  # of the current scale
_ZERO_VOLTAGE = 1e-11  # of the link voltage
_UNIT: Matrix = ((1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0))


@dataclass(frozen=True, eq=False)
class SteadyState:
    """One period of the bridge as its pieces, in order of time, first at T1's nominal gate-on.

    Compared by identity, so that what is derived from it can be kept beside it.
    """

    bridge: Bridge
    pieces: tuple[Piece, ...]


def solve(bridge: Bridge) -> SteadyState:
    """The periodic steady state of a bridge.

    Raises
    ------
    NoSolution
        The load has no unique steady state, or is not one that this solver treats.
    """
    _refuse(bridge)
    steps = gate_steps(bridge)
    currents = _periodic_start(bridge, steps)
    pieces, _, _ = _walk(bridge, steps, currents, sensitive=False)
    return SteadyState(bridge, tuple(pieces))


def _refuse(bridge: Bridge) -> None:
    R, L = bridge.resistance_ohm, bridge.inductance_H
    if any(bridge.emf_peak_V):
        raise NoSolution("load.emf_peak_V", "must be 0: loads with an EMF are not solved yet")
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


def _periodic_start(bridge: Bridge, steps: tuple) -> Triple:
    """Branch currents at T1's nominal gate-on."""
    if not any(bridge.inductance_H):
        return 0.0, 0.0, 0.0
    balanced = len(set(bridge.resistance_ohm)) == 1 and len(set(bridge.inductance_H)) == 1
    sixth = _first_sixth(bridge, steps) if balanced else None

    def period_map(x: Triple) -> tuple[Triple, Matrix]:
        _, end, sensitivity = _walk(bridge, sixth or steps, x, sensitive=True)
        return (_turned(end), _turned_rows(sensitivity)) if sixth else (end, sensitivity)

    return _fixed_point(bridge, period_map)


def _first_sixth(bridge: Bridge, steps: tuple) -> tuple:
    end_s = bridge.period_s / 6.0
    return tuple(
        (start, min(stop, end_s), gates)
        for start, stop, gates in steps
        if start < end_s * (1.0 - 1e-12)
    )


def _turned(x: Triple) -> Triple:
    """The state one sixth of a period earlier that a balanced bridge mirrors into x."""
    return -x[2], -x[0], -x[1]


def _turned_rows(m: Matrix) -> Matrix:
    def negative(row: Triple) -> Triple:
        return -row[0], -row[1], -row[2]

    return negative(m[2]), negative(m[0]), negative(m[1])


def _fixed_point(bridge: Bridge, period_map: Callable[[Triple], tuple[Triple, Matrix]]) -> Triple:
    scale_A = current_scale_A(bridge)
    inductance = bridge.inductance_H

    def merit_of(x: Triple, image: Triple) -> float:
        return sqrt(sum(L * (b - a) ** 2 for L, a, b in zip(inductance, x, image, strict=True)))

    enough = _CLOSED * scale_A * sqrt(sum(inductance))
    x: Triple = (0.0, 0.0, 0.0)
    image, sensitivity = period_map(x)
    merit = merit_of(x, image)
    for _ in range(_MOST_STEPS):
        if merit <= enough:
            return image
        step = _newton_step(x, image, sensitivity)
        trial = _shortened(x, image, step, merit, period_map, merit_of)
        if trial is None:
            if merit <= 100.0 * enough:
                return image
            trial_image, sensitivity = period_map(image)
            x, image = image, trial_image
        else:
            x, image, sensitivity = trial
        merit = merit_of(x, image)
    raise NoSolution("load", "the periodic steady state was not reached")


def _shortened(
    x: Triple,
    image: Triple,
    step: Triple | None,
    merit: float,
    period_map: Callable,
    merit_of: Callable,
) -> tuple[Triple, Triple, Matrix] | None:
    """The longest of the step's halves that lowers the merit, `None` when none does."""
    part = 1.0
    while step is not None and part >= 1.0 / 64.0:
        trial = (x[0] + part * step[0], x[1] + part * step[1], x[2] + part * step[2])
        trial_image, sensitivity = period_map(trial)
        if merit_of(trial, trial_image) < merit:
            return trial, trial_image, sensitivity
        part *= 0.5
    return None


def _newton_step(x: Triple, image: Triple, m: Matrix) -> Triple | None:
    """Solution of (I − M) step = image − x by Cramer's rule, `None` when singular."""
    a = tuple(
        tuple((1.0 if row == column else 0.0) - m[row][column] for column in range(3))
        for row in range(3)
    )
    r = (image[0] - x[0], image[1] - x[1], image[2] - x[2])
    det = _determinant(a)
    if abs(det) < 1e-300:
        return None
    parts = []
    for column in range(3):
        swapped = tuple(
            tuple(r[row] if k == column else a[row][k] for k in range(3)) for row in range(3)
        )
        parts.append(_determinant(swapped) / det)
    return parts[0], parts[1], parts[2]


def _determinant(a: tuple) -> float:
    return (
        a[0][0] * (a[1][1] * a[2][2] - a[1][2] * a[2][1])
        - a[0][1] * (a[1][0] * a[2][2] - a[1][2] * a[2][0])
        + a[0][2] * (a[1][0] * a[2][1] - a[1][1] * a[2][0])
    )


@dataclass(frozen=True, slots=True)
class _Event:
    """The end of a piece at a zero of g = constant + Σ weightᵢ yᵢ."""

    s: float
    weights: tuple[float, ...]


def _walk(
    bridge: Bridge, steps: tuple, currents: Triple, sensitive: bool
) -> tuple[list[Piece], Triple, Matrix]:
    """Pieces from these currents on, the currents at the end, and their sensitivity to x(0)."""
    pieces: list[Piece] = []
    matrix = _UNIT
    last: Legs | None = None
    kink: tuple[Triple, Triple] | None = None
    for start_s, end_s, gates in steps:
        now_s, event = start_s, None
        for _ in range(_MOST_PIECES):
            piece = consistent_piece(bridge, now_s, gates, currents, last, event is not None)
            if kink is not None:
                matrix = _bent(matrix, kink, piece)
            event = _first_event(piece, end_s - now_s)
            piece = piece.until(end_s - now_s if event is None else event.s)
            pieces.append(piece)
            if sensitive:
                matrix, kink = _carried(piece, matrix, event)
            currents = piece.currents_at(piece.duration_s)
            last = piece.legs
            now_s += piece.duration_s
            if event is None:
                break
        else:
            raise NoSolution("load", "the diodes change state without end within one gate step")
    return pieces, currents, matrix


def _carried(
    piece: Piece, matrix: Matrix, event: _Event | None
) -> tuple[Matrix, tuple[Triple, Triple] | None]:
    """Sensitivity at the end of a piece; with an event also what its moving adds (f⁻, δt)."""
    s = piece.duration_s
    rows = [_row_times(mode.take, matrix) for mode in piece.pattern.modes]
    decay = [exp(rate * s) for rate in piece.rates]
    rows = [(r[0] * d, r[1] * d, r[2] * d) for r, d in zip(rows, decay, strict=True)]
    shapes = [mode.shape for mode in piece.pattern.modes]
    carried = _outer_sum(shapes, rows)
    if event is None:
        return carried, None
    speed = sum(w * g * d for w, g, d in zip(event.weights, piece.slopes, decay, strict=True))
    if speed == 0.0:
        return carried, None
    shift = [
        -sum(w * row[k] for w, row in zip(event.weights, rows, strict=True)) / speed
        for k in range(3)
    ]
    return carried, (piece.slopes_at(s), (shift[0], shift[1], shift[2]))


def _bent(matrix: Matrix, kink: tuple[Triple, Triple], after: Piece) -> Matrix:
    """M + (f⁻ − f⁺) ⊗ δt, where the vector field changes at an event."""
    before, shift = kink
    slope = after.slopes_at(0.0)
    change = (before[0] - slope[0], before[1] - slope[1], before[2] - slope[2])
    return _outer_sum([change, *_UNIT], [shift, *matrix])


def _row_times(row: Triple, m: Matrix) -> Triple:
    return (
        row[0] * m[0][0] + row[1] * m[1][0] + row[2] * m[2][0],
        row[0] * m[0][1] + row[1] * m[1][1] + row[2] * m[2][1],
        row[0] * m[0][2] + row[1] * m[1][2] + row[2] * m[2][2],
    )


def _outer_sum(columns: list[Triple], rows: list[Triple]) -> Matrix:
    def entry(i: int, k: int) -> float:
        return sum(c[i] * r[k] for c, r in zip(columns, rows, strict=True))

    a, b, c = ((entry(i, 0), entry(i, 1), entry(i, 2)) for i in range(3))
    return a, b, c


def _first_event(piece: Piece, length_s: float) -> _Event | None:
    """The first diode current that ends, or open leg whose voltage leaves the rails."""
    first: _Event | None = None
    for f, weights, slack in _guards(piece):
        s = first_fall(f, piece.rates, length_s if first is None else first.s, slack)
        if s is not None:
            first = _Event(s, weights)
    return first


def _guards(
    piece: Piece,
) -> Iterator[tuple[Coefficients, tuple[float, ...], float]]:
    """Functions that must stay positive for the leg state to hold: coefficients, weights, slack."""
    if not piece.bridge.feedback_diodes or all(piece.gates):
        return
    link_V = piece.bridge.voltage_V
    current_slack = _ZERO_CURRENT * current_scale_A(piece.bridge)
    voltages = terminal_voltages(piece) if 0 in piece.legs else None
    for leg, (gate, state) in enumerate(zip(piece.gates, piece.legs, strict=True)):
        if gate:
            continue
        if state:
            weights = tuple(-state * w for w in line_weights(piece.pattern, leg))
            yield piece.combined(weights), weights, current_slack
        elif voltages is not None:
            f = voltages[leg]
            below = (link_V - f[0], *(-c for c in f[1:]))
            yield f, _as_weights(f, piece), _ZERO_VOLTAGE * link_V
            yield below, _as_weights(below, piece), _ZERO_VOLTAGE * link_V


def _as_weights(f: Coefficients, piece: Piece) -> tuple[float, ...]:
    """The form in the modes behind coefficients: f's ψ coefficient is weight times slope."""
    return tuple(c / g if g else 0.0 for c, g in zip(f[1:], piece.slopes, strict=True))
