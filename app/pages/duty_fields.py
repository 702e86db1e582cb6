"""The entries of the Duty page that are one number, or one word, each."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from app.widgets.choice_entry import YES_NO


@dataclass(frozen=True, slots=True)
class NumberField:
    """One row: its keys (one, or low, nominal and high), and how its numbers are shown.

    A number typed alone counts in `shown_in`, which is `scale` of the SI `unit`.
    """

    name: str
    keys: tuple[str, ...]
    unit: str
    shown_in: str
    scale: float = 1.0
    short_name: str = ""


@dataclass(frozen=True, slots=True)
class ChoiceField:
    name: str
    key: str
    choices: Mapping[object, str]
    short_name: str = ""


def _extremes(stem: str, unit: str) -> tuple[str, ...]:
    return f"{stem}_low_{unit}", f"{stem}_{unit}", f"{stem}_high_{unit}"


def _same(*words: str) -> Mapping[object, str]:
    return {word: word for word in words}


LEVELS = ("low", "nominal", "high")

VOLTAGE = NumberField("Link voltage", _extremes("supply.voltage", "V"), "V", "V")
LOOP = NumberField("Loop inductance", ("supply.loop_inductance_H",), "H", "nH", 1e-9, "Loop L")

CONDUCTION = NumberField("Conduction", ("gating.conduction_deg",), "deg", "°")
FREQUENCY = NumberField("Frequency", _extremes("gating.frequency", "Hz"), "Hz", "Hz")
BLANKING = NumberField("Blanking", ("gating.blanking_s",), "s", "µs", 1e-6)

SOFT_START = ChoiceField("Soft start", "gating.soft_start", YES_NO)

CONNECTION = ChoiceField("Connection", "load.connection", _same("star", "delta"))
BRANCHES = ChoiceField("Branches", "", {False: "alike", True: "differ"})
LOAD_FACTOR = NumberField("Load factor", ("load.light_factor", "", "load.overload_factor"), "", "×")
"""At nominal it is 1 by definition."""
DIODES = ChoiceField("Feedback diodes", "feedback_diodes", YES_NO, "Diodes")

AMBIENT = NumberField("Ambient", _extremes("cooling.ambient", "C"), "C", "°C")
SINK = NumberField("Heatsink", ("cooling.sink_K_per_W",), "K/W", "K/W")
SERVES = ChoiceField(
    "Heatsink serves", "cooling.sink_serves", _same("all", "leg", "position"), "Sink serves"
)

PULSE_FORMS = _same("block", "single", "train")
