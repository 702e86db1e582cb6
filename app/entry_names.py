"""What the entries of the duty are called on the screen, by their key in the file."""

from __future__ import annotations

from engine.duty import assumed_keys
from engine.selection import Selection
from parts_library.rating_sheet import SHEETS, Kind

NAMES = {
    "supply.voltage_V": "link voltage",
    "supply.voltage_low_V": "lowest link voltage",
    "supply.voltage_high_V": "highest link voltage",
    "supply.loop_inductance_H": "loop inductance",
    "supply.link_capacitance_F": "link capacitance",
    "supply.takes_power_back": "takes power back",
    "gating.conduction_deg": "conduction angle",
    "gating.frequency_Hz": "frequency",
    "gating.frequency_low_Hz": "lowest frequency",
    "gating.frequency_high_Hz": "highest frequency",
    "gating.blanking_s": "blanking",
    "gating.soft_start": "soft start",
    "gating.pulse": "gate pulse",
    "gating.pulse.form": "gate pulse",
    "gating.pulse.width_s": "pulse width",
    "gating.pulse.interval_s": "pulse interval",
    "load.connection": "connection",
    "load.resistance_ohm": "R",
    "load.inductance_H": "L",
    "load.light_factor": "light load",
    "load.overload_factor": "overload",
    "feedback_diodes": "feedback diodes",
    "on_state_drops": "on-state drops",
    "cooling.ambient_C": "ambient",
    "cooling.ambient_low_C": "lowest ambient",
    "cooling.ambient_high_C": "highest ambient",
    "cooling.sink_K_per_W": "heatsink",
    "cooling.sink_serves": "heatsink serves",
    "overload_cycle": "overload cycle",
    "rule_set": "rule set",
}

WITHOUT_FIELD = {"supply.link_capacitance_F", "supply.takes_power_back", "on_state_drops"}
"""Entries of the file that nothing is computed with yet: no page shows them."""


def name_of(key: str) -> str:
    """The name of an entry, or of the entry that it is part of; the symbol of a rating."""
    stem = key
    while stem and stem not in NAMES:
        stem = stem.rpartition(".")[0]
    return NAMES.get(stem) or symbol_of(key) or key


def symbol_of(key: str) -> str:
    """The symbol of a rating at a key that ends in `switch.…` or `diode.…`, else ''."""
    part, _, field = ".".join(key.split(".")[-2:]).partition(".")
    kinds: dict[str, tuple[Kind, ...]] = {"switch": ("thyristor", "igbt"), "diode": ("diode",)}
    sheets = (SHEETS[kind] for kind in kinds.get(part, ()))
    return next((one.symbol for sheet in sheets for one in sheet if one.key == field), "")


def assumed_entries(selection: Selection) -> tuple[str, ...]:
    """Keys of the entries on the screen whose value nobody entered or confirmed."""
    return tuple(key for key in assumed_keys(selection) if key in NAMES.keys() - WITHOUT_FIELD)
