"""Every error that the engine raises on purpose.

SwitchwrightError
├── InvalidSelection   one or more entries cannot be used; carries a Fault for each
├── NoSolution         the bridge has no unique periodic steady state, or is not physical
└── ThermalRunaway     losses and temperature do not come to rest
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Fault:
    """What is wrong with one entry: its key path in the file, and what is allowed."""

    key: str
    text: str

    def __str__(self) -> str:
        return f"{self.key}: {self.text}" if self.key else self.text


class SwitchwrightError(Exception):
    """Root of the errors that are an answer to the user, not a mistake in the program."""


class InvalidSelection(SwitchwrightError):
    """Entries that cannot be used. `faults` holds at least one `Fault`."""

    def __init__(self, faults: list[Fault] | tuple[Fault, ...]) -> None:
        self.faults = tuple(faults)
        super().__init__("\n".join(str(fault) for fault in self.faults))


class NoSolution(SwitchwrightError):
    """No unique periodic steady state; `key` names the entry to change, `reason` says why."""

    def __init__(self, key: str, reason: str) -> None:
        self.key = key
        self.reason = reason
        super().__init__(f"{key}: {reason}" if key else reason)


class ThermalRunaway(SwitchwrightError):
    """Losses grow faster with temperature than the cooling can carry away."""
