"""What a report is made of, before any layout: sections of paragraphs, tables and figures."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Literal

from engine.checks import Verdict
from engine.waveforms import Waveforms

Style = Literal["body", "note", "heading", "verdict"]


@dataclass(frozen=True, slots=True)
class Paragraph:
    text: str
    style: Style = "body"
    verdict: Verdict | None = None
    """Its mark stands before the text."""


@dataclass(frozen=True, slots=True)
class Column:
    """Head, side and share of the table's width, in any unit that the columns share."""

    head: str
    width: float
    right: bool = False


@dataclass(frozen=True, slots=True)
class Row:
    """One line of a table.

    There may be fewer cells than columns: `instead` then stands in place of the rest, up to the
    verdict, whose mark and word take the last column. `below` runs under the row, from the
    second column. A `strong` row heads those that follow it. The columns in `assumed` hold
    values that nobody entered.
    """

    cells: tuple[str, ...]
    instead: str = ""
    verdict: Verdict | None = None
    below: str = ""
    strong: bool = False
    assumed: frozenset[int] = frozenset()


@dataclass(frozen=True, slots=True)
class Table:
    """Short tables stay on one page, `whole`; others repeat their head on each."""

    columns: tuple[Column, ...]
    rows: tuple[Row, ...]
    whole: bool = False


@dataclass(frozen=True, slots=True, eq=False)
class Figure:
    """The waveforms of one period; height in px of 1/96 inch."""

    waveforms: Waveforms
    delta: bool
    height: float


@dataclass(frozen=True, slots=True)
class Blanks:
    """Lines to be filled in by hand: a name in front of the fields of `heads`."""

    names: tuple[str, ...]
    heads: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Contents:
    """The titles of all sections after this one, with their pages."""


Block = Paragraph | Table | Figure | Blanks | Contents


@dataclass(frozen=True, slots=True)
class Section:
    title: str
    blocks: tuple[Block, ...]
    new_page: bool = False
    whole: bool = False
    """Stays on one page."""


def plain_rows(rows: Iterable[Sequence[str]]) -> tuple[Row, ...]:
    """Rows that hold nothing but cells."""
    return tuple(Row(tuple(cells)) for cells in rows)
