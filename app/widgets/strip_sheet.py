"""From solved waveforms to what the strips have in common: scales, intervals, conduction."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from app.widgets.strip import Strip
from app.widgets.strip_painting import Interval
from app.widgets.strip_scale import Scale, scale_for
from engine.waveforms import Waveforms

Scales = Mapping[str, tuple[Scale, ...]]

_NEARLY_WHOLE_DEG = 1e-6


def scales_of(strips: Sequence[Strip], last: Scales | None = None) -> Scales:
    """A scale for each lane. Lanes of one unit in a strip share one; the last stays if it can."""
    return {strip.key: _lane_scales(strip, (last or {}).get(strip.key, ())) for strip in strips}


def _lane_scales(strip: Strip, last: Sequence[Scale]) -> tuple[Scale, ...]:
    scales: dict[str, Scale] = {}
    for number, lane in enumerate(strip.lanes):
        if lane.unit in scales:
            continue
        values = [c.values for each in strip.lanes if each.unit == lane.unit for c in each.curves]
        low, high = min(v.min() for v in values), max(v.max() for v in values)
        before = last[number] if number < len(last) else None
        scales[lane.unit] = scale_for(float(low), float(high), before)
    return tuple(scales[lane.unit] for lane in strip.lanes)


def intervals_of(waveforms: Waveforms, position: int) -> tuple[Interval, ...]:
    """Dead interval, freewheel and overrun after the gate-off of one position."""
    off_deg = waveforms.gate_off_deg[position]
    dead_deg = _length_deg(off_deg, waveforms.gate_on_deg[(position + 3) % 6])
    end_deg = off_deg + waveforms.freewheel_deg[position]
    overrun_deg = end_deg - waveforms.overrun_deg[position]
    return (
        Interval("dead", off_deg, off_deg + dead_deg),
        Interval("freewheel", off_deg, overrun_deg),
        Interval("overrun", overrun_deg, end_deg),
    )


def _length_deg(start_deg: float, end_deg: float) -> float:
    """From one angle on to another; no length where rounding alone has parted them."""
    length = (end_deg - start_deg) % 360.0
    return 0.0 if length > 360.0 - _NEARLY_WHOLE_DEG else length


def conduction_parts(waveforms: Waveforms) -> list[tuple[float, float, str]]:
    """Start, end and names of each part of the period; '–' where nothing conducts."""
    return [
        (part.start_deg, part.end_deg, " ".join(part.devices) or "–")
        for part in waveforms.conduction
    ]
