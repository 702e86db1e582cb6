"""The document: one bridge, its duty, its candidates, and what was chosen.

A `Selection` holds what was entered and nothing else. An optional entry that nobody made
is `None`; `engine.duty.duty_of` puts the usual value in its place and says that it is
assumed. Every record is frozen, so a selection is its own undo snapshot.
Field names are the keys of the selection file.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from typing import Annotated, Any, Literal

import msgspec
from msgspec import Meta

from engine.errors import Fault
from engine.ratings import Diode, Switch

FORMAT: Literal["switchwright selection"] = "switchwright selection"
VERSION = 1

Voltage = Annotated[float, Meta(gt=0.0, le=1e5)]
Frequency = Annotated[float, Meta(gt=0.0, le=1e5)]

# One value for all three branches, or three. The limits stand in `extra` because msgspec
# 0.23 crashes on a union of a bounded number and a tuple; the reader enforces them.
PerBranch = float | tuple[float, float, float]
Resistances = Annotated[PerBranch, Meta(extra={"ge": 0.0, "le": 1e6})]
Inductances = Annotated[PerBranch, Meta(extra={"ge": 0.0, "le": 1e3})]
EmfPeaks = Annotated[PerBranch, Meta(extra={"ge": 0.0, "le": 1e5})]

Temperature = Annotated[float, Meta(ge=-100.0, le=200.0)]
LoadFactor = Annotated[float, Meta(gt=0.0, le=100.0)]
Title = Annotated[str, Meta(max_length=400)]
Name = Annotated[str, Meta(max_length=200)]
Text = Annotated[str, Meta(max_length=20_000)]


class Record(
    msgspec.Struct, frozen=True, forbid_unknown_fields=True, omit_defaults=True, kw_only=True
):
    """One block of the selection file."""


class Supply(Record, frozen=True, kw_only=True):
    voltage_V: Voltage | None = None
    voltage_low_V: Voltage | None = None
    voltage_high_V: Voltage | None = None
    loop_inductance_H: Annotated[float, Meta(ge=0.0, le=1.0)] | None = None
    link_capacitance_F: Annotated[float, Meta(gt=0.0, le=1e3)] | None = None
    takes_power_back: bool | None = None
    follows_frequency: bool | None = None


class GatePulse(Record, frozen=True, kw_only=True):
    form: Literal["block", "single", "train"] = "block"
    width_s: Annotated[float, Meta(gt=0.0, le=10.0)] | None = None
    interval_s: Annotated[float, Meta(gt=0.0, le=10.0)] | None = None


class Gating(Record, frozen=True, kw_only=True):
    conduction_deg: Annotated[float, Meta(ge=120.0, le=180.0)] | None = None
    frequency_Hz: Frequency | None = None
    frequency_low_Hz: Frequency | None = None
    frequency_high_Hz: Frequency | None = None
    blanking_s: Annotated[float, Meta(ge=0.0, le=10.0)] | None = None
    pulse: GatePulse | None = None
    soft_start: bool | None = None


class Load(Record, frozen=True, kw_only=True):
    """Branch values take one number, or three: A, B, C of a star; AB, BC, CA of a delta."""

    connection: Literal["star", "delta"] | None = None
    resistance_ohm: Resistances | None = None
    inductance_H: Inductances | None = None
    emf_peak_V: EmfPeaks | None = None
    emf_lag_deg: Annotated[float, Meta(ge=-360.0, le=360.0)] | None = None
    emf_shape: Literal["sine", "trapezoid"] | None = None
    emf_follows_frequency: bool | None = None
    emf_follows_supply: bool | None = None
    scaling: Literal["machine", "impedance"] | None = None
    light_factor: LoadFactor | None = None
    overload_factor: LoadFactor | None = None


class Cooling(Record, frozen=True, kw_only=True):
    ambient_C: Temperature | None = None
    ambient_low_C: Temperature | None = None
    ambient_high_C: Temperature | None = None
    sink_K_per_W: Annotated[float, Meta(ge=0.0, le=1e4)] | None = None
    sink_serves: Literal["all", "leg", "position"] | None = None


class CycleSegment(Record, frozen=True, kw_only=True):
    duration_s: Annotated[float, Meta(gt=0.0, le=1e8)]
    load_factor: Annotated[float, Meta(ge=0.0, le=100.0)]


class RuleSetChange(Record, frozen=True, kw_only=True):
    """A built-in rule set with some of its figures replaced for this selection."""

    based_on: Name
    tight_band_pct: Annotated[float, Meta(ge=0.0, lt=100.0)] | None = None
    fractions: dict[str, Annotated[float, Meta(gt=0.0, le=10.0)]] = {}
    factors: dict[str, Annotated[float, Meta(gt=0.0, le=100.0)]] = {}
    note: Text = ""


class Candidate(Record, frozen=True, kw_only=True):
    """One switch with its feedback diode, offered for all six positions."""

    name: Name
    note: Text = ""
    switch: Switch
    diode: Diode = Diode()


class Selection(Record, frozen=True, kw_only=True):
    """The whole document, as entered."""

    format: Literal["switchwright selection"]
    version: Annotated[int, Meta(ge=1)]
    title: Title = ""
    engineer: Title = ""
    reference: Title = ""
    notes: Text = ""
    supply: Supply = Supply()
    gating: Gating = Gating()
    load: Load = Load()
    feedback_diodes: bool | None = None
    on_state_drops: bool | None = None
    cooling: Cooling = Cooling()
    overload_cycle: tuple[CycleSegment, ...] | None = None
    rule_set: Name | RuleSetChange | None = None
    candidates: tuple[Candidate, ...] = ()
    chosen: Name = ""


def new_selection() -> Selection:
    """An empty document: every entry still to be made."""
    return Selection(format=FORMAT, version=VERSION)


def entry(record: Any, key: str) -> Any:
    """What a record holds at a dotted key path such as `candidates.0.switch.tq_s`."""
    for name in key.split("."):
        record = record[int(name)] if isinstance(record, tuple) else getattr(record, name)
    return record


def with_entry(record: Any, key: str, value: Any) -> Any:
    """A copy of the record with one entry replaced; everything else is shared."""
    name, _, rest = key.partition(".")
    if isinstance(record, tuple):
        index = int(name)
        inner = with_entry(record[index], rest, value) if rest else value
        return (*record[:index], inner, *record[index + 1 :])
    inner = with_entry(getattr(record, name), rest, value) if rest else value
    return msgspec.structs.replace(record, **{name: inner})


def document_faults(selection: Selection) -> Iterator[Fault]:
    """Faults that make a document ambiguous: candidates without a name or of one name."""
    if selection.version > VERSION:
        yield Fault("version", f"at most {VERSION}: this file was written by a later version")
    names = Counter(candidate.name for candidate in selection.candidates)
    for index, candidate in enumerate(selection.candidates):
        key = f"candidates.{index}.name"
        if not candidate.name.strip():
            yield Fault(key, "needed, not given")
        elif names[candidate.name] > 1:
            yield Fault(key, f"must differ from the others; '{candidate.name}' stands twice")
    if selection.chosen and selection.chosen not in names:
        yield Fault("chosen", f"must name one of the candidates; got '{selection.chosen}'")
