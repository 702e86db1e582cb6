"""The rows of the rating sheets, and what stands in each cell; no painting.

A row is one field of the switch or the diode, a column one candidate. Rows that a verdict
needs come first; those that only refine one stand behind a row that folds them.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from typing import Literal, cast

from engine.checks import VERDICTS, CandidateResult, Check
from engine.ratings import USUAL_CONDITIONS, Basis, Diode, Igbt, Switch, Thyristor
from engine.selection import Candidate
from parts_library.rating_sheet import GROUPS, SHEETS, Kind, Rating, rating_of

Section = Literal["switch", "diode", "candidate"]
RowForm = Literal["heading", "fold", "rating", "note"]

SECTION_NAMES = {"switch": "Switch", "diode": "Feedback diode", "candidate": "Candidate"}
KIND_NAMES = {"thyristor": "thyristor", "igbt": "IGBT", "diode": "diode"}


@dataclass(frozen=True, slots=True)
class SheetRow:
    """One row: a heading, the fold of a section, one rating of the kinds that have it, a note."""

    section: Section
    form: RowForm
    key: str = ""
    ratings: dict[Kind, Rating] = field(default_factory=dict)
    folded: bool = False

    @property
    def rating(self) -> Rating | None:
        """The rating as any of the kinds states it, for the row's symbol and name."""
        return next(iter(self.ratings.values()), None)


@dataclass(frozen=True, slots=True)
class Cell:
    """What one candidate has in one row; `rating` is `None` where its kind has no such rating."""

    rating: Rating | None
    value: float | str | bool | None = None
    assumed: bool = False
    basis: Basis = "maximum"
    checks: tuple[Check, ...] = ()
    """Every verdict row that compares this rating, as `checks_of` orders them."""
    missing: bool = False
    """Whether a figure is lacking that a verdict needs."""


def kind_of(device: Switch | Diode) -> Kind:
    """Which sheet a device fills."""
    if isinstance(device, Thyristor):
        return "thyristor"
    return "igbt" if isinstance(device, Igbt) else "diode"


def sheet_rows(candidates: Sequence[Candidate], unfolded: frozenset[Section]) -> list[SheetRow]:
    """All rows for these candidates, the folded ones left out."""
    kinds: list[Kind] = sorted({kind_of(each.switch) for each in candidates}, reverse=True)
    rows = [
        *_section_rows("switch", kinds, "switch" not in unfolded),
        *_section_rows("diode", ["diode"], "diode" not in unfolded),
    ]
    return [*rows, SheetRow("candidate", "note", "note")] if candidates else []


def _section_rows(section: Section, kinds: Sequence[Kind], folded: bool) -> Iterator[SheetRow]:
    rows = [SheetRow(section, "rating", key, _by_kind(key, kinds)) for key in _keys(kinds)]
    yield SheetRow(section, "heading")
    yield from (row for row in rows if _is_needed(row))
    yield SheetRow(section, "fold", folded=folded)
    if not folded:
        yield from (row for row in rows if not _is_needed(row))


def _keys(kinds: Sequence[Kind]) -> list[str]:
    """Every field of the kinds, block by block in the order of the sheets, each once."""
    blocks = (r for group in GROUPS for kind in kinds for r in SHEETS[kind] if r.group == group)
    return list(dict.fromkeys(rating.key for rating in blocks))


def _by_kind(key: str, kinds: Sequence[Kind]) -> dict[Kind, Rating]:
    found = {kind: [r for r in SHEETS[kind] if r.key == key] for kind in kinds}
    return {kind: ratings[0] for kind, ratings in found.items() if ratings}


def _is_needed(row: SheetRow) -> bool:
    return any(rating.needed for rating in row.ratings.values())


def device_of(candidate: Candidate, section: Section) -> Switch | Diode:
    """The record that a section's rows belong to."""
    return candidate.diode if section == "diode" else candidate.switch


def cell_of(candidate: Candidate, row: SheetRow, result: CandidateResult | None) -> Cell:
    """What stands in the cell; `result` gives the verdict rows, where there are any yet."""
    if row.form == "note":
        return Cell(Rating("note", "note", "note on the candidate", form="text"), candidate.note)
    device = device_of(candidate, row.section)
    rating = row.ratings.get(kind_of(device))
    if row.form != "rating" or rating is None:
        return Cell(None)
    value = getattr(device, rating.key)
    usual = USUAL_CONDITIONS.get(rating.key) if value is None else None
    return Cell(
        rating=rating,
        value=usual if value is None else value,
        assumed=usual is not None or device.basis.get(rating.key) == "assumed",
        basis=device.basis.get(rating.key, "maximum"),
        checks=checks_of(result, row.section, rating) if result is not None else (),
        missing=value is None and usual is None and _is_wanted(row.section, rating, result),
    )


def _is_wanted(section: Section, rating: Rating, result: CandidateResult | None) -> bool:
    """Whether a row of the verdict waits for it; without a result, whether one will."""
    if result is None:
        return rating.needed and not rating.condition_of
    return any(f"{section}.{rating.key}" in check.needs for check in result.checks)


def checks_of(result: CandidateResult, section: Section, rating: Rating) -> tuple[Check, ...]:
    """The verdict rows that compare a rating, worst first, those not assessed last.

    A row that still waits for its circuit does not hide what the others come to.
    """
    ids = {f"{section}.{check}" for check in rating.checks}
    found = (check for check in result.checks if check.id in ids)
    return tuple(sorted(found, key=lambda c: (c.verdict == "not assessed", severity(c))))


def severity(check: Check) -> tuple[int, float]:
    """Sorts verdict rows, the worst first; without a headroom before all of the same verdict."""
    headroom = float("-inf") if check.headroom_pct is None else check.headroom_pct
    return VERDICTS.index(check.verdict), headroom


def most_wanted(result: CandidateResult) -> list[tuple[str, int]]:
    """Entries that 'not assessed' rows wait for, and how many rows each would help to settle.

    Most rows first; equal ones in the order of the rows.
    """
    waiting = (check for check in result.checks if check.verdict == "not assessed")
    counted = Counter(key for check in waiting for key in dict.fromkeys(check.needs))
    return counted.most_common()


def symbol_of(candidate: Candidate, key: str) -> str:
    """The symbol of a key below the candidate such as `switch.tq_s`."""
    section, _, name = key.partition(".")
    kind = kind_of(device_of(candidate, cast(Section, section)))
    symbol = rating_of(kind, name).symbol
    return f"{symbol} of the diode" if section == "diode" else symbol
