"""Results for other programs: JSON, and tables as CSV with the unit in each column's name."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import Any

import msgspec

from app.safe_write import write_atomically
from engine.bridge import PHASES, POSITIONS, nominal_bridge
from engine.checks import Assessment
from engine.duty import Duty, duty_of
from engine.selection import Selection
from engine.steady_state import solve
from engine.waveforms import Waveforms, sampled

Row = Sequence[object]


def results_json(assessment: Assessment) -> bytes:
    """The results as JSON, indented; what is not computed is null."""
    return msgspec.json.format(msgspec.json.encode(assessment), indent=2) + b"\n"


def write_tables(selection: Selection, assessment: Assessment, folder: Path) -> None:
    """Write duty, positions, events, waveforms, checks and corners into a folder, made if needed.

    Raises
    ------
    OSError
        The folder cannot be made or written.
    """
    duty = duty_of(selection)
    folder.mkdir(parents=True, exist_ok=True)
    tables = {
        "duty": _duty_rows(duty),
        "positions": _position_rows(assessment),
        "events": _event_rows(assessment),
        "waveforms": _waveform_rows(sampled(solve(nominal_bridge(duty)))),
        "checks": _check_rows(assessment),
        "corners": _corner_rows(assessment),
    }
    for name, rows in tables.items():
        write_atomically(folder / f"{name}.csv", table_bytes(rows))


def table_bytes(rows: Iterable[Row]) -> bytes:
    """Rows as CSV: comma between fields, point for decimals, nothing for what is null."""
    text = io.StringIO()
    csv.writer(text, lineterminator="\n").writerows(
        ["" if cell is None else cell for cell in row] for row in rows
    )
    return text.getvalue().encode()


def _duty_rows(duty: Duty) -> Iterable[Row]:
    yield "entry", "value", "assumed"
    for name, value in msgspec.to_builtins(duty).items():
        if name == "assumed":
            continue
        for key, leaf in _leaves(name, value):
            yield key, leaf, "yes" if any(k.endswith(name) for k in duty.assumed) else ""


def _leaves(name: str, value: Any) -> Iterable[tuple[str, object]]:
    """A value's parts under dotted names."""
    if isinstance(value, dict):
        pairs: Iterable[tuple[object, Any]] = value.items()
    elif isinstance(value, list | tuple):
        pairs = enumerate(value)
    else:
        yield name, value
        return
    for part, inner in pairs:
        yield from _leaves(f"{name}.{part}", inner)


def _position_rows(assessment: Assessment) -> Iterable[Row]:
    positions = assessment.nominal.positions if assessment.nominal else ()
    flat = [dict(_leaves_of(position)) for position in positions]
    if flat:
        yield tuple(flat[0])
        yield from (tuple(row.values()) for row in flat)


def _leaves_of(result: msgspec.Struct) -> Iterable[tuple[str, object]]:
    for name, value in msgspec.to_builtins(result).items():
        yield from _leaves(name, value)


def _event_rows(assessment: Assessment) -> Iterable[Row]:
    names = ("angle_deg", "time_s", "position", "device", "kind", "current_A", "voltage_V")
    yield *names, "didt_A_per_s"
    for event in assessment.nominal.events if assessment.nominal else ():
        yield tuple(msgspec.structs.astuple(event))


def _waveform_rows(w: Waveforms) -> Iterable[Row]:
    lines = ("AB", "BC", "CA")
    yield (
        "angle_deg",
        *(f"phase_voltage_{phase}_V" for phase in PHASES),
        *(f"line_voltage_{line}_V" for line in lines),
        *(f"line_current_{phase}_A" for phase in PHASES),
        "link_current_A",
        *(f"{position}_current_A" for position in POSITIONS),
        *(f"D{position[1]}_current_A" for position in POSITIONS),
        *(f"{position}_voltage_V" for position in POSITIONS),
    )
    columns = (
        w.angle_deg,
        *w.phase_voltage_V,
        *w.line_voltage_V,
        *w.line_current_A,
        w.link_current_A,
        *w.switch_current_A,
        *w.diode_current_A,
        *w.position_voltage_V,
    )
    yield from zip(*(column.tolist() for column in columns), strict=True)


_CORNER = ("voltage_V", "frequency_Hz", "load_factor", "ambient_C")
_CHECK = (
    "id",
    "rating",
    "unit",
    "verdict",
    "applied",
    "allowed",
    "fraction",
    "headroom_pct",
    "position",
    "would_do",
    "reason",
    "how",
)


def _check_rows(assessment: Assessment) -> Iterable[Row]:
    yield "candidate", *_CHECK, *_CORNER
    for result in assessment.candidates:
        for check in result.checks:
            corner = [getattr(check.corner, name, None) for name in _CORNER]
            yield result.name, *(getattr(check, name) for name in _CHECK), *corner


def _corner_rows(assessment: Assessment) -> Iterable[Row]:
    """The corners at which rows are at their worst, and which rows those are."""
    yield *_CORNER, "candidate", "worst_of"
    for result in assessment.candidates:
        rows: dict[tuple[object, ...], list[str]] = {}
        for check in result.checks:
            if check.corner is not None:
                key = tuple(getattr(check.corner, name) for name in _CORNER)
                rows.setdefault(key, []).append(check.id)
        for place, ids in rows.items():
            yield *place, result.name, " ".join(ids)
