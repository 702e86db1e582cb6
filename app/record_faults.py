"""Every fault of raw file content against the records, each under its own key path."""

from __future__ import annotations

from collections.abc import Iterator
from difflib import get_close_matches
from typing import Any

import msgspec.inspect as inspect

from app.entry_limits import Limits, choices_of, limits_of, number_fault, received
from engine.errors import Fault


def faults_in(raw: object, kind: inspect.Type, key: str = "") -> Iterator[Fault]:
    """Faults of a value, and of all that it holds, against the type of a record's field."""
    choices = choices_of(kind)
    structs = [choice for choice in choices if isinstance(choice, inspect.StructType)]
    if structs and (isinstance(raw, dict) or len(structs) == len(choices)):
        yield from _block_faults(raw, structs, key)
    elif raw is None and len(choices) < len(getattr(kind, "types", ())):
        return
    else:
        yield from _leaf_faults(raw, next(c for c in choices if c not in structs), key)


def _block_faults(raw: object, structs: list[inspect.StructType], key: str) -> Iterator[Fault]:
    if not isinstance(raw, dict):
        yield Fault(key, f"must be a block of keys; got {received(raw)}")
        return
    struct, fault = _tagged(raw, structs, key)
    if struct is None:
        yield fault
        return
    fields = {field.encode_name: field for field in struct.fields}
    known = {*fields, struct.tag_field} - {None}
    for name in raw.keys() - known:
        yield Fault(_joined(key, name), "unknown key" + _nearest(name, known))
    for name, field in fields.items():
        if name in raw:
            yield from faults_in(raw[name], field.type, _joined(key, name))
        elif field.required:
            yield Fault(_joined(key, name), "needed, not given")


def _tagged(
    raw: dict[str, Any], structs: list[inspect.StructType], key: str
) -> tuple[inspect.StructType | None, Fault]:
    """The record that the block's tag names; a single record may go without."""
    tag_field = structs[0].tag_field
    if tag_field is None:
        return structs[0], Fault(key, "")
    tags = {struct.tag: struct for struct in structs}
    tag = raw.get(tag_field, structs[0].tag if len(structs) == 1 else None)
    if isinstance(tag, str) and tag in tags:
        return tags[tag], Fault(key, "")
    allowed = " or ".join(repr(name) for name in sorted(map(str, tags)))
    return None, Fault(_joined(key, tag_field), f"must be {allowed}; got {received(tag)}")


def _nearest(name: str, known: set[Any]) -> str:
    near = get_close_matches(name, [str(each) for each in known], n=1)
    return f"; did you mean '{near[0]}'?" if near else ""


def _leaf_faults(raw: object, kind: inspect.Type, key: str) -> Iterator[Fault]:
    if isinstance(kind, inspect.Metadata):
        yield from _per_branch_faults(raw, limits_of(kind) or Limits(), key)
    elif isinstance(kind, inspect.VarTupleType):
        yield from _list_faults(raw, kind.item_type, key)
    elif isinstance(kind, inspect.DictType):
        yield from _table_faults(raw, kind, key)
    else:
        fault = _scalar_fault(raw, kind)
        if fault:
            yield Fault(key, fault)


def _per_branch_faults(raw: object, limits: Limits, key: str) -> Iterator[Fault]:
    """One number, or a list of three."""
    if isinstance(raw, list) and len(raw) != 3:
        yield Fault(key, f"must be one number or three; got {len(raw)}")
        return
    values = enumerate(raw) if isinstance(raw, list) else [(None, raw)]
    for index, value in values:
        fault = number_fault(value, limits)
        if fault:
            yield Fault(key if index is None else f"{key}.{index}", fault)


def _list_faults(raw: object, kind: inspect.Type, key: str) -> Iterator[Fault]:
    if not isinstance(raw, list):
        yield Fault(key, f"must be a list; got {received(raw)}")
        return
    for index, item in enumerate(raw):
        yield from faults_in(item, kind, f"{key}.{index}")


def _table_faults(raw: object, kind: inspect.DictType, key: str) -> Iterator[Fault]:
    if not isinstance(raw, dict):
        yield Fault(key, f"must be a block of keys; got {received(raw)}")
        return
    for name, value in raw.items():
        yield from faults_in(value, kind.value_type, _joined(key, name))


def _scalar_fault(raw: object, kind: inspect.Type) -> str | None:
    limits = limits_of(kind)
    if limits is not None:
        if isinstance(kind, inspect.IntType) and not isinstance(raw, int):
            return f"must be a whole number; got {received(raw)}"
        return number_fault(raw, limits)
    if isinstance(kind, inspect.LiteralType):
        if isinstance(raw, str) and raw in kind.values:
            return None
        allowed = " or ".join(repr(value) for value in sorted(map(str, kind.values)))
        return f"must be {allowed}; got {received(raw)}"
    if isinstance(kind, inspect.BoolType):
        return None if isinstance(raw, bool) else f"must be true or false; got {received(raw)}"
    return _text_fault(raw, kind)


def _text_fault(raw: object, kind: inspect.Type) -> str | None:
    if not isinstance(raw, str):
        return f"must be a text; got {received(raw)}"
    if any("\ud800" <= letter <= "\udfff" for letter in raw):
        return "holds half a character, which no file can keep"
    longest = getattr(kind, "max_length", None)
    if longest is not None and len(raw) > longest:
        return f"must be at most {longest} characters; got {len(raw)}"
    return None


def _joined(key: str, name: object) -> str:
    text = "".join(letter if letter.isprintable() else "?" for letter in str(name))
    shown = text if len(text) <= 60 else text[:57] + "..."
    return f"{key}.{shown}" if key else shown
