"""The duty with every figure in place: what was entered, and the usual value where nothing was.

`duty_of` is the only way from a document to the numbers that are computed with. It refuses
entries that contradict each other, and names the keys whose value is only assumed.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any, Literal

from engine.errors import Fault, InvalidSelection
from engine.selection import CycleSegment, GatePulse, Selection, entry

Triple = tuple[float, float, float]

REQUIRED = (
    "supply.voltage_V",
    "gating.conduction_deg",
    "gating.frequency_Hz",
    "load.connection",
    "load.resistance_ohm",
    "load.inductance_H",
)

USUAL: dict[str, Any] = {
    "supply.loop_inductance_H": 2e-7,
    "supply.takes_power_back": True,
    "supply.follows_frequency": False,
    "gating.blanking_s": 0.0,
    "gating.pulse": GatePulse(),
    "gating.soft_start": False,
    "load.emf_peak_V": 0.0,
    "load.emf_lag_deg": 0.0,
    "load.emf_shape": "sine",
    "load.emf_follows_frequency": True,
    "load.emf_follows_supply": False,
    "load.scaling": "machine",
    "load.light_factor": 0.2,
    "load.overload_factor": 1.5,
    "feedback_diodes": True,
    "on_state_drops": False,
    "cooling.ambient_C": 40.0,
    "cooling.sink_serves": "all",
    "overload_cycle": (CycleSegment(duration_s=60.0, load_factor=1.0),),
    "rule_set": "common practice",
}
"""Values taken for entries that nobody made; shown as assumed wherever they are used."""

_ONLY_WITH_EMF = (
    "supply.takes_power_back",
    "load.emf_peak_V",
    "load.emf_lag_deg",
    "load.emf_shape",
    "load.emf_follows_frequency",
    "load.emf_follows_supply",
    "load.scaling",
)

SAME_AS = {
    "supply.voltage_low_V": "supply.voltage_V",
    "supply.voltage_high_V": "supply.voltage_V",
    "gating.frequency_low_Hz": "gating.frequency_Hz",
    "gating.frequency_high_Hz": "gating.frequency_Hz",
    "cooling.ambient_low_C": "cooling.ambient_C",
    "cooling.ambient_high_C": "cooling.ambient_C",
}
"""Extremes that fall back to the nominal entry beside them."""


@dataclass(frozen=True, slots=True)
class Extremes:
    """Lowest, nominal and highest value of one quantity."""

    low: float
    nominal: float
    high: float

    def distinct(self) -> tuple[float, ...]:
        """The values in rising order, each once."""
        return tuple(sorted({self.low, self.nominal, self.high}))


@dataclass(frozen=True, slots=True)
class Duty:
    """Supply, gating, load, cooling and overload cycle, complete and free of contradiction (SI)."""

    voltage_V: Extremes
    frequency_Hz: Extremes
    ambient_C: Extremes
    loop_inductance_H: float
    link_capacitance_F: float | None
    takes_power_back: bool
    conduction_deg: float
    blanking_s: float
    pulse: GatePulse
    connection: Literal["star", "delta"]
    resistance_ohm: Triple
    inductance_H: Triple
    emf_peak_V: Triple
    light_factor: float
    overload_factor: float
    feedback_diodes: bool
    on_state_drops: bool
    sink_K_per_W: float | None
    sink_serves: Literal["all", "leg", "position"]
    cycle: tuple[CycleSegment, ...]
    assumed: tuple[str, ...]


def value_of(selection: Selection, key: str) -> Any:
    """The entry, else the usual value, else the entry it falls back to, else `None`."""
    entered = entry(selection, key)
    if entered is not None:
        return entered
    if key in SAME_AS:
        return value_of(selection, SAME_AS[key])
    return USUAL.get(key)


def assumed_keys(selection: Selection) -> tuple[str, ...]:
    """Keys of the duty that matter to it and whose value nobody entered or confirmed."""
    no_emf = not any(as_triple(value_of(selection, "load.emf_peak_V")))
    passed_over = _ONLY_WITH_EMF if no_emf else ()
    return tuple(
        key
        for key in (*USUAL, *SAME_AS)
        if key not in passed_over and entry(selection, key) is None
    )


def missing_keys(selection: Selection) -> tuple[str, ...]:
    """Required keys that are still empty, in the order of the file."""
    return tuple(key for key in REQUIRED if entry(selection, key) is None)


def duty_of(selection: Selection) -> Duty:
    """Complete the entries of a selection.

    Raises
    ------
    InvalidSelection
        Naming every required entry that is missing, or every contradiction between entries.
    """
    missing = missing_keys(selection)
    if missing:
        raise InvalidSelection([Fault(key, "needed, not given") for key in missing])
    faults = list(contradictions(selection))
    if faults:
        raise InvalidSelection(faults)

    def get(key: str) -> Any:
        return value_of(selection, key)

    return Duty(
        voltage_V=_extremes(selection, "supply.voltage", "V"),
        frequency_Hz=_extremes(selection, "gating.frequency", "Hz"),
        ambient_C=_extremes(selection, "cooling.ambient", "C"),
        loop_inductance_H=get("supply.loop_inductance_H"),
        link_capacitance_F=get("supply.link_capacitance_F"),
        takes_power_back=get("supply.takes_power_back"),
        conduction_deg=get("gating.conduction_deg"),
        blanking_s=get("gating.blanking_s"),
        pulse=get("gating.pulse"),
        connection=get("load.connection"),
        resistance_ohm=as_triple(get("load.resistance_ohm")),
        inductance_H=as_triple(get("load.inductance_H")),
        emf_peak_V=as_triple(get("load.emf_peak_V")),
        light_factor=get("load.light_factor"),
        overload_factor=get("load.overload_factor"),
        feedback_diodes=get("feedback_diodes"),
        on_state_drops=get("on_state_drops"),
        sink_K_per_W=get("cooling.sink_K_per_W"),
        sink_serves=get("cooling.sink_serves"),
        cycle=get("overload_cycle"),
        assumed=assumed_keys(selection),
    )


def as_triple(value: float | Triple) -> Triple:
    """One branch value for all three branches, or three as they are."""
    return value if isinstance(value, tuple) else (value, value, value)


def _extremes(selection: Selection, stem: str, unit: str) -> Extremes:
    return Extremes(
        value_of(selection, f"{stem}_low_{unit}"),
        value_of(selection, f"{stem}_{unit}"),
        value_of(selection, f"{stem}_high_{unit}"),
    )


def contradictions(selection: Selection) -> Iterator[Fault]:
    """Entries that are each in range but cannot stand together."""
    yield from _order_faults(selection, "supply.voltage", "V")
    yield from _order_faults(selection, "gating.frequency", "Hz")
    yield from _order_faults(selection, "cooling.ambient", "C")
    yield from _gating_faults(selection)
    yield from _load_faults(selection)


def _order_faults(selection: Selection, stem: str, unit: str) -> Iterator[Fault]:
    nominal = value_of(selection, f"{stem}_{unit}")
    for level, wrong in (("low", float.__gt__), ("high", float.__lt__)):
        key = f"{stem}_{level}_{unit}"
        value = value_of(selection, key)
        if wrong(float(value), float(nominal)):
            side = "at most" if level == "low" else "at least"
            yield Fault(key, f"must be {side} the nominal {nominal:g} {unit}; got {value:g}")


def _gating_faults(selection: Selection) -> Iterator[Fault]:
    window_s = value_of(selection, "gating.conduction_deg") / (
        360.0 * value_of(selection, "gating.frequency_high_Hz")
    )
    blanking_s = value_of(selection, "gating.blanking_s")
    if blanking_s >= window_s:
        yield Fault(
            "gating.blanking_s",
            f"must be shorter than the gate window, {window_s:.4g} s at the highest frequency; "
            f"got {blanking_s:g}",
        )
    pulse = value_of(selection, "gating.pulse")
    if pulse.form != "block" and pulse.width_s is None:
        yield Fault("gating.pulse.width_s", f"needed for the form '{pulse.form}', not given")
    if pulse.form == "train" and pulse.interval_s is None:
        yield Fault("gating.pulse.interval_s", "needed for the form 'train', not given")


def _load_faults(selection: Selection) -> Iterator[Fault]:
    resistance = as_triple(value_of(selection, "load.resistance_ohm"))
    inductance = as_triple(value_of(selection, "load.inductance_H"))
    emf = as_triple(value_of(selection, "load.emf_peak_V"))
    if any(r == 0.0 and l == 0.0 for r, l in zip(resistance, inductance, strict=True)):
        yield Fault("load.resistance_ohm", "R and L of a branch must not both be 0")
    elif resistance.count(0.0) > (1 if value_of(selection, "load.connection") == "star" else 0):
        yield Fault(
            "load.resistance_ohm",
            "no unique periodic steady state: a star may have one branch without resistance, "
            "a delta none",
        )
    if not value_of(selection, "feedback_diodes") and (any(inductance) or any(emf)):
        yield Fault(
            "feedback_diodes",
            "must be true with an inductive load or an EMF: without them the current of the "
            "load has no path at gate-off",
        )
    if value_of(selection, "load.light_factor") > 1.0:
        yield Fault("load.light_factor", "must be at most 1")
    if value_of(selection, "load.overload_factor") < 1.0:
        yield Fault("load.overload_factor", "must be at least 1")
    if not value_of(selection, "overload_cycle"):
        yield Fault("overload_cycle", "must hold at least one segment")
