"""Numbers from a spreadsheet into the rating sheets."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

import msgspec

from app.entry_limits import value_fault
from app.widgets.sheet_rows import SheetRow, cell_of, device_of, kind_of
from engine.errors import Fault, InvalidSelection
from engine.quantities import QuantityFault
from engine.selection import Candidate, Selection
from parts_library.rating_sheet import Rating, si_value

EMPTY = ("", "-", "–", "—")


@dataclass(frozen=True, slots=True)
class _Target:
    """Where one pasted field goes."""

    line: int
    column: int
    row: SheetRow
    text: str


def with_pasted(
    selection: Selection, rows: Sequence[SheetRow], row: int, column: int, text: str
) -> Selection:
    """The selection with a block of numbers put in, from one cell downwards.

    Lines whose first field is a symbol or a key of the sheets go to that rating of the
    candidate. Otherwise each line goes to the next row, further fields to the candidates at
    its right. Empty fields and '–' leave a rating as it is.

    Raises
    ------
    InvalidSelection
        Naming every line that is no number or out of range; nothing is taken then.
    """
    targets = list(_targets(selection, rows, row, column, text))
    candidates, faults = list(selection.candidates), []
    for target in targets:
        try:
            candidates[target.column] = _entered(candidates[target.column], target)
        except QuantityFault as fault:
            faults.append(Fault(f"line {target.line}", str(fault)))
    if faults or not targets:
        raise InvalidSelection(faults or [Fault("", "nothing on the clipboard fits in here")])
    return msgspec.structs.replace(selection, candidates=tuple(candidates))


def _targets(
    selection: Selection, rows: Sequence[SheetRow], row: int, column: int, text: str
) -> Iterator[_Target]:
    lines = [line.split("\t") for line in text.replace("\r\n", "\n").split("\n")]
    free = [each for each in rows[row:] if each.form == "rating"]
    named = _named_rows(rows, rows[row].section)
    by_name = any(fields[0].strip() in named for fields in lines if len(fields) > 1)
    for number, fields in enumerate(lines, start=1):
        if by_name and fields[0].strip() in named:
            places = [(named[fields[0].strip()], column, fields[1])]
        elif by_name or number > len(free):
            continue
        else:
            places = [(free[number - 1], column + i, each) for i, each in enumerate(fields)]
        for target_row, target_column, field in places:
            if field.strip() not in EMPTY and target_column < len(selection.candidates):
                yield _Target(number, target_column, target_row, field.strip())


def _named_rows(rows: Sequence[SheetRow], section: str) -> dict[str, SheetRow]:
    named: dict[str, SheetRow] = {}
    for row in sorted(rows, key=lambda each: each.section != section):
        for rating in row.ratings.values():
            named.setdefault(rating.symbol, row)
            named.setdefault(rating.key, row)
    return named


def _entered(candidate: Candidate, target: _Target) -> Candidate:
    rating = cell_of(candidate, target.row, None).rating
    section = target.row.section
    if rating is None:
        kind = kind_of(device_of(candidate, section))
        raise QuantityFault(f"the sheet of '{candidate.name}' ({kind}) has no such rating")
    value = _value_readers[rating.form](rating, target.text)
    fault = value_fault(f"candidates.{target.column}.{section}.{rating.key}", value)
    if fault:
        raise QuantityFault(f"{rating.symbol} {fault}")
    device = msgspec.structs.replace(device_of(candidate, section), **{rating.key: value})
    return msgspec.structs.replace(candidate, **{section: device})


def _choice(rating: Rating, text: str) -> str:
    if text not in rating.choices:
        raise QuantityFault(f"{rating.name}: one of {', '.join(rating.choices)}; got '{text}'")
    return text


_value_readers: dict[str, Callable[[Rating, str], object]] = {
    "number": si_value,
    "text": lambda rating, text: text,
    "choice": _choice,
    "flag": lambda rating, text: text.lower() in ("true", "yes", "1", "shared"),
}
