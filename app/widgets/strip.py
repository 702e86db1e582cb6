"""What the strips show of one period: lanes of curves with names and units; no painting."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from app.widgets.strip_scale import in_figures
from engine.bridge import PHASES, POSITIONS
from engine.stress import BridgeStress
from engine.waveforms import Waveforms

Array = NDArray[np.float64]
Line = Literal["A", "B", "C", "position", "diode", "other"]
"""How a curve is drawn: as a phase, as the position looked at, its diode, or another one."""
Connection = Literal["star", "delta"]

GATES = "gates"
PHASE_VOLTAGES = "phase voltages"
LINE_VOLTAGES = "line voltages"
LINE_CURRENTS = "line currents"
POSITION = "position"
LINK_CURRENT = "link current"
STRIPS = (GATES, PHASE_VOLTAGES, LINE_VOLTAGES, LINE_CURRENTS, POSITION, LINK_CURRENT)
"""Top to bottom. In a delta the second strip holds the branch currents."""

LINES = ("AB", "BC", "CA")


@dataclass(frozen=True, slots=True, eq=False)
class Curve:
    """One quantity over the period, `values` of shape (n,) in SI."""

    name: str
    column: str
    """In a table of values, without the unit."""
    values: Array
    line: Line


@dataclass(frozen=True, slots=True, eq=False)
class Lane:
    """Curves over one zero line."""

    unit: str
    curves: tuple[Curve, ...]


@dataclass(frozen=True, slots=True, eq=False)
class Strip:
    """Lanes under one heading. Lanes of one unit share their scale."""

    key: str
    title: str
    lanes: tuple[Lane, ...]
    figures: str = ""
    """rms and peak over the period, in words."""

    def curves(self) -> Iterator[tuple[Lane, Curve]]:
        for lane in self.lanes:
            for curve in lane.curves:
                yield lane, curve

    def values_in_words(self, angle_deg: Array, cursor_deg: float) -> str:
        """'AB 540 V  BC −540 V  CA 0 V' at the cursor."""
        return "  ".join(
            f"{curve.name} {in_figures(value_at(angle_deg, curve.values, cursor_deg), lane.unit)}"
            for lane, curve in self.curves()
        )


EMPTY = tuple(Strip(key, key.capitalize(), ()) for key in STRIPS)
"""What stands there before anything is solved."""


def value_at(angle_deg: Array, values: Array, at_deg: float) -> float:
    """A curve between its samples; at a jump, the value just after it."""
    right = int(np.searchsorted(angle_deg, at_deg, side="right"))
    if right == len(angle_deg):
        return float(values[-1])
    left = max(right - 1, 0)
    width = float(angle_deg[right] - angle_deg[left])
    part = (at_deg - float(angle_deg[left])) / width if width else 0.0
    return float(values[left] + part * (values[right] - values[left]))


def strips_of(
    waveforms: Waveforms,
    connection: Connection,
    position: int,
    stress: BridgeStress | None = None,
) -> tuple[Strip, ...]:
    """All strips, in the order of `STRIPS`; rms and peak are named where `stress` is given."""
    return (
        _gates(waveforms, position),
        _branch_currents(waveforms, stress)
        if connection == "delta"
        else _phase_voltages(waveforms, stress),
        _line_voltages(waveforms, stress),
        _line_currents(waveforms, stress),
        _position(waveforms, position, stress),
        _link_current(waveforms, stress),
    )


def _gates(w: Waveforms, position: int) -> Strip:
    curves = (
        Curve(
            name, f"{name}_gate", w.gate[n].astype(float), "position" if n == position else "other"
        )
        for n, name in enumerate(POSITIONS)
    )
    return Strip(GATES, "Gates", tuple(Lane("", (curve,)) for curve in curves))


def _three(names: Sequence[str], column: str, values: Array) -> tuple[Curve, ...]:
    lines: tuple[Line, ...] = ("A", "B", "C")
    return tuple(
        Curve(name, f"{column}_{name}", row, line)
        for name, row, line in zip(names, values, lines, strict=True)
    )


def _stepped(key: str, title: str, curves: tuple[Curve, ...], rms: Sequence[float] | None) -> Strip:
    """Stepped voltages lie on each other when overlaid: a lane each."""
    lanes = tuple(Lane("V", (curve,)) for curve in curves)
    return Strip(key, title, lanes, _figures(rms, _peaks(curves), "V"))


def _phase_voltages(w: Waveforms, stress: BridgeStress | None) -> Strip:
    curves = _three(PHASES, "phase_voltage", w.phase_voltage_V)
    rms = stress.phase_voltage_rms_V if stress else None
    return _stepped(PHASE_VOLTAGES, "Phase voltages", curves, rms)


def _line_voltages(w: Waveforms, stress: BridgeStress | None) -> Strip:
    curves = _three(LINES, "line_voltage", w.line_voltage_V)
    rms = stress.line_voltage_rms_V if stress else None
    return _stepped(LINE_VOLTAGES, "Line voltages", curves, rms)


def _branch_currents(w: Waveforms, stress: BridgeStress | None) -> Strip:
    curves = _three(LINES, "branch_current", w.branch_current_A)
    rms = stress.branch_current_rms_A if stress else None
    figures = _figures(rms, _peaks(curves), "A")
    return Strip(PHASE_VOLTAGES, "Branch currents", (Lane("A", curves),), figures)


def _line_currents(w: Waveforms, stress: BridgeStress | None) -> Strip:
    curves = _three(PHASES, "line_current", w.line_current_A)
    rms = stress.line_current_rms_A if stress else None
    peaks = stress.line_current_peak_A if stress else ()
    return Strip(LINE_CURRENTS, "Line currents", (Lane("A", curves),), _figures(rms, peaks, "A"))


def _position(w: Waveforms, position: int, stress: BridgeStress | None) -> Strip:
    """The switch's current upwards, its diode's downwards; below them the voltage."""
    switch, diode = POSITIONS[position], f"D{position + 1}"
    currents = (
        Curve(switch, f"{switch}_current", w.switch_current_A[position], "position"),
        Curve(diode, f"{diode}_current", -w.diode_current_A[position], "diode"),
    )
    voltage = Curve(switch, f"{switch}_voltage", w.position_voltage_V[position], "position")
    lanes = (Lane("A", currents), Lane("V", (voltage,)))
    return Strip(POSITION, f"Position {switch}", lanes, _position_figures(position, stress))


def _position_figures(position: int, stress: BridgeStress | None) -> str:
    if stress is None:
        return ""
    switch = stress.positions[position].switch
    blocks = in_figures(max(switch.forward_blocking_peak_V, switch.reverse_blocking_peak_V), "V")
    return f"{_figures([switch.current_rms_A], [switch.current_peak_A], 'A')}   blocks {blocks}"


def _link_current(w: Waveforms, stress: BridgeStress | None) -> Strip:
    curves = (Curve("link", "link_current", w.link_current_A, "position"),)
    rms = [stress.link_current_rms_A] if stress else None
    figures = _figures(rms, _peaks(curves), "A")
    return Strip(LINK_CURRENT, "Link current", (Lane("A", curves),), figures)


def _peaks(curves: Sequence[Curve]) -> list[float]:
    return [float(np.abs(curve.values).max()) for curve in curves]


def _figures(rms: Sequence[float] | None, peaks: Sequence[float], unit: str) -> str:
    if rms is None:
        return ""
    return f"rms {_together(rms, unit)}   peak {_together(peaks, unit)}"


def _together(values: Sequence[float], unit: str) -> str:
    """One figure where all print alike, else all of them."""
    texts = [in_figures(value, unit) for value in values]
    return texts[0] if len(set(texts)) == 1 else " / ".join(texts)
