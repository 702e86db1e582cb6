"""The selection file: JSON in UTF-8, read with every fault named, written whole.

A file that cannot be used raises `InvalidSelection` with one fault a line; nothing of it is
taken. What the entries mean together is not judged here: an incomplete document, or one
whose entries contradict each other, opens, and `engine.duty.duty_of` says what is wrong.
"""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import Any

import msgspec

from app.entry_limits import document_type, received
from app.record_faults import faults_in
from app.report_file import attached_selection, is_report
from engine.errors import Fault, InvalidSelection
from engine.selection import FORMAT, VERSION, Selection, document_faults

_MOST_BYTES = 20_000_000
_MOST_FAULTS = 100
_DEMO = Path(__file__).parent.parent / "resources" / "demo.json"


@dataclass(frozen=True, slots=True)
class Opened:
    """A document that was read."""

    selection: Selection
    path: Path | None
    """Where it may be saved; `None` for a selection out of a report, which is never saved into."""


def read_selection(path: str | Path) -> Opened:
    """Read a selection file, or the selection that a report carries.

    Raises
    ------
    InvalidSelection
        The file cannot be read, or is no usable selection: every fault with its key path.
    """
    path = Path(path)
    try:
        with path.open("rb") as file:
            data = file.read(_MOST_BYTES + 1)
    except OSError as error:
        raise _unusable(f"cannot be read: {error.strerror or error}") from None
    if not is_report(data):
        return Opened(selection_from_bytes(data), path)
    attached = attached_selection(data)
    if attached is None:
        raise _unusable("no selection in this PDF; ask for the original file")
    return Opened(selection_from_bytes(attached), None)


def selection_from_bytes(data: bytes) -> Selection:
    """The selection that a file's content holds.

    Raises
    ------
    InvalidSelection
        As for `read_selection`.
    """
    raw = _json(data)
    if not isinstance(raw, dict) or raw.get("format") != FORMAT:
        raise InvalidSelection([Fault("format", f"must be '{FORMAT}': this is no selection file")])
    version = raw.get("version")
    if isinstance(version, int) and version > VERSION:
        text = f"must be at most {VERSION}; got {received(version)}, from a later program"
        raise InvalidSelection([Fault("version", text)])
    faults = list(faults_in(raw, document_type()))
    if not faults:
        selection = msgspec.convert(raw, Selection)
        faults = list(document_faults(selection))
    if faults:
        raise InvalidSelection(faults[:_MOST_FAULTS])
    return selection


def selection_bytes(selection: Selection) -> bytes:
    """The file content of a selection: entries that nobody made are left out."""
    return msgspec.json.format(msgspec.json.encode(selection), indent=2) + b"\n"


@lru_cache(maxsize=1)
def demo_selection() -> Selection:
    """The shipped demo; its scenario and its parts are invented."""
    return selection_from_bytes(_DEMO.read_bytes())


def _unusable(text: str) -> InvalidSelection:
    return InvalidSelection([Fault("file", text)])


def _json(data: bytes) -> Any:
    """JSON content, refusing what JSON readers let pass: NaN, Infinity, a key given twice."""
    if len(data) > _MOST_BYTES:
        raise _unusable(f"is larger than {_MOST_BYTES // 1_000_000} MB")
    if not data.strip():
        raise _unusable("is empty")
    try:
        text = data.decode("utf-8-sig")
        return json.loads(text, object_pairs_hook=_unique, parse_constant=_refused)
    except UnicodeDecodeError:
        raise _unusable("is not text in UTF-8") from None
    except json.JSONDecodeError as error:
        where = f"line {error.lineno}, column {error.colno}"
        raise _unusable(f"is not complete JSON: {error.msg} at {where}") from None
    except RecursionError:
        raise _unusable("is nested too deeply") from None
    except ValueError:
        raise _unusable("holds a number too large to read") from None


def _unique(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    content = dict(pairs)
    if len(content) < len(pairs):
        names = [name for name, _ in pairs]
        twice = next(name for name in names if names.count(name) > 1)
        raise InvalidSelection([Fault(twice[:60], "given twice in one block")])
    return content


def _refused(constant: str) -> float:
    raise InvalidSelection([Fault("file", f"holds {constant}, which is no number")])
