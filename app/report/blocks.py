"""What a report is made of, before any layout: sections of paragraphs, tables and figures."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from engine.checks import Verdict


@dataclass(frozen=True, slots=True)
class Paragraph:
    text: str
    style: Literal["body", "note", "verdict", "heading"] = "body"
    verdict: Verdict | None = None
    """Its mark stands before the text."""


@dataclass(frozen=True, slots=True)
class Row:
    """One line of a table; `below` runs under it over the whole width."""

    cells: tuple[str, ...]
    verdict: Verdict | None = None
    """Its mark and word stand in the last cell."""
    below: str = ""
    strong: bool = False


@dataclass(frozen=True, slots=True)
class Table:
    head: tuple[str, ...]
    rows: tuple[Row, ...]
    align: str
    """One letter a column: l or r."""
    widths: tuple[int, ...] = ()
    """Per cent of the page's width."""


@dataclass(frozen=True, slots=True)
class Figure:
    """A drawing, by the name that the layout knows it by; size in px of 1/96 inch."""

    name: Literal["waveforms"]
    height: int
    caption: str


Block = Paragraph | Table | Figure


@dataclass(frozen=True, slots=True)
class Section:
    title: str
    blocks: tuple[Block, ...]
    new_page: bool = False


def plain_rows(rows: Sequence[Sequence[str]]) -> tuple[Row, ...]:
    """Rows that hold nothing but cells."""
    return tuple(Row(tuple(cells)) for cells in rows)
