"""Numbers as a report prints them: four figures, a true minus, one unit a column."""

from __future__ import annotations

from collections.abc import Sequence

from engine.checks import Check, Corner
from engine.quantities import number_shown, printed, shown

DIGITS = 4
NOTHING = "–"
"""Stands where there is no figure."""


def amount(value: float | None, unit: str, digits: int = DIGITS) -> str:
    """'1.852 ms', '−10 °C'; a dash for `None`."""
    return NOTHING if value is None else minus(shown(value, unit, digits))


def minus(text: str) -> str:
    """The text with a true minus sign in front of its number."""
    return "\u2212" + text[1:] if text.startswith("-") else text


_SMALL = {"A": 0.1, "V": 0.1}
"""Largest values below which a column takes a prefix."""


def in_one_unit(values: Sequence[float | None], unit: str) -> tuple[str, list[str]]:
    """The unit that suits the largest value, and all values in it."""
    largest = max((abs(value) for value in values if value is not None), default=0.0)
    plain = not 0.0 < largest < _SMALL.get(unit, 1.0)
    number, name = ("1", printed(unit)) if plain else number_shown(largest, unit, 15)
    scale = 1.0 if plain else float(number) / largest
    numbers = [NOTHING if v is None else minus(f"{v * scale:.{DIGITS}g}") for v in values]
    return name, numbers


def percent(value: float | None) -> str:
    return NOTHING if value is None else minus(f"{value:.1f} %")


def at_corner(corner: Corner) -> str:
    """'594 V, 90 Hz, load × 1, 45 °C'."""
    return (
        f"{amount(corner.voltage_V, 'V')}, {amount(corner.frequency_Hz, 'Hz')}, "
        f"load × {corner.load_factor:g}, {amount(corner.ambient_C, 'C')}"
    )


def number_of(candidate: int, row: int) -> str:
    """The number of a check: 'C2-07' is row 7 of candidate 2."""
    return f"C{candidate}-{row:02d}"


_APART = {
    "switch.tq_dead": "t_q, dead interval",
    "switch.tq_commutation": "t_q, commutation",
    "switch.turn_off_current": "I_CRM, turned off",
    "switch.blanking": "blanking",
}
"""Names of checks whose symbol alone is that of another check, or only a part of it."""


def name_of_check(check: Check) -> str:
    """The symbol, with what tells it from other checks of the same symbol."""
    return _APART.get(check.id, check.rating)


def sentence(text: str) -> str:
    return text[:1].upper() + text[1:] + ("" if text.endswith(".") else ".")
