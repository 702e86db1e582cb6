"""What each key of a selection may hold, read from the records themselves.

The file reader and the entry fields of the window refuse a value by the same rule and with
the same sentence.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import isfinite
from typing import Any

import msgspec.inspect as inspect

from engine.selection import Candidate, Selection


@dataclass(frozen=True, slots=True)
class Limits:
    """The range of a number: an open or closed lower end, a closed upper end."""

    above: float | None = None
    at_least: float | None = None
    below: float | None = None
    at_most: float | None = None

    def in_words(self) -> str:
        parts = (
            ("above", self.above),
            ("at least", self.at_least),
            ("below", self.below),
            ("at most", self.at_most),
        )
        return " and ".join(f"{word} {bound:g}" for word, bound in parts if bound is not None)

    def hold(self, value: float) -> bool:
        return (
            isfinite(value)
            and (self.above is None or value > self.above)
            and (self.at_least is None or value >= self.at_least)
            and (self.below is None or value < self.below)
            and (self.at_most is None or value <= self.at_most)
        )


def number_fault(value: object, limits: Limits) -> str | None:
    """Why a value is not a number within the limits, `None` when it is."""
    wanted = f"must be a number {limits.in_words()}".rstrip()
    if isinstance(value, bool) or not isinstance(value, int | float):
        return f"{wanted}; got {received(value)}"
    try:
        number = float(value)
    except OverflowError:
        return f"{wanted}; got a number too large to read"
    return None if limits.hold(number) else f"{wanted}; got {number:g}"


def received(value: object) -> str:
    """A value as a message names it, kept short."""
    names = {dict: "a block", list: "a list", tuple: "a list", type(None): "nothing"}
    if type(value) in names:
        return names[type(value)]
    if isinstance(value, bool):
        return "true" if value else "false"
    text = repr(value) if isinstance(value, str) else str(value)
    return text if len(text) <= 40 else text[:37] + "..."


def limits_of(kind: inspect.Type) -> Limits | None:
    """The limits of a number's type, `None` when it is no number."""
    if isinstance(kind, inspect.Metadata):
        extra = kind.extra or {}
        return Limits(at_least=extra.get("ge"), at_most=extra.get("le"))
    if isinstance(kind, inspect.FloatType | inspect.IntType):
        return Limits(kind.gt, kind.ge, kind.lt, kind.le)
    return None


@lru_cache(maxsize=1024)
def field_limits(key: str) -> Limits:
    """The limits of a number entry by its dotted key, such as `supply.voltage_V`.

    Raises
    ------
    KeyError
        There is no such number in a selection.
    """
    for kind in _kinds_at(key):
        for choice in choices_of(kind):
            limits = limits_of(choice)
            if limits is not None:
                return limits
    raise KeyError(key)


def value_fault(key: str, value: object) -> str | None:
    """Why an entry may not hold a value, `None` when it may; empty (`None`) is always allowed."""
    if value is None:
        return None
    values = value if isinstance(value, tuple) else (value,)
    faults = (number_fault(each, field_limits(key)) for each in values)
    return next((fault for fault in faults if fault), None)


def choices_of(kind: inspect.Type) -> tuple[inspect.Type, ...]:
    """The types a value may have, those of an optional entry without its 'nothing'."""
    if isinstance(kind, inspect.UnionType):
        return tuple(t for t in kind.types if not isinstance(t, inspect.NoneType))
    return (kind,)


@lru_cache(maxsize=1)
def document_type() -> inspect.StructType:
    """The selection's own type, taken apart."""
    return _struct(Selection)


def _struct(cls: type) -> inspect.StructType:
    kind = inspect.type_info(cls)
    assert isinstance(kind, inspect.StructType)
    return kind


def _kinds_at(key: str) -> list[inspect.Type]:
    """Every type that may stand at a key; `switch.` and `diode.` may begin one by themselves."""
    names = [name for name in key.split(".") if not name.isdigit()]
    root: list[inspect.Type] = [document_type()]
    if names[0] in {"switch", "diode"}:
        root = [_struct(Candidate)]
    for name in names:
        root = [field.type for kind in root for field in _fields(kind) if field.name == name]
    return root


def _fields(kind: inspect.Type) -> tuple[Any, ...]:
    found: list[Any] = []
    for choice in choices_of(kind):
        if isinstance(choice, inspect.VarTupleType):
            found += _fields(choice.item_type)
        elif isinstance(choice, inspect.StructType):
            found += choice.fields
    return tuple(found)
