"""Slices of a document, one below the other, and where the pages break between them."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, replace

from PySide6.QtCore import QRectF
from PySide6.QtGui import QPainter

from engine.checks import Verdict

_NEARLY_EMPTY = 1.0 / 3.0
"""Share of a page below which it is filled further, also where a new one is asked for."""

Paint = Callable[[QPainter, float], None]
"""Paints a slice whose top lies at a height in px."""
Mark = tuple[Verdict, QRectF]
"""A verdict's mark, and its square from the slice's top left."""


@dataclass(frozen=True, slots=True, eq=False)
class Slice:
    """A strip over the whole width that no page break divides.

    `new_page`: begins a page, unless hardly anything stands on the last one.
    `with_next`: never the last of a page. `gap`: white space, which vanishes at the top of a
    page. `head` is painted again above the slice where it begins a page. `title`: the section
    that begins here. `mark` is painted with it unless
    the pages are stale.
    """

    height: float
    paint: Paint
    with_next: bool = False
    gap: bool = False
    new_page: bool = False
    head: Slice | None = None
    title: str = ""
    mark: Mark | None = None


@dataclass(frozen=True, slots=True, eq=False)
class Placed:
    """A slice at its place on a page."""

    top: float
    slice: Slice


Page = tuple[Placed, ...]


def white(height: float, with_next: bool = False) -> Slice:
    """White space."""
    return Slice(height, lambda painter, top: None, with_next=with_next, gap=True)


def kept_together(slices: Iterable[Slice]) -> list[Slice]:
    """The slices with no page break between them, as far as they fit on a page."""
    found = list(slices)
    return [*(replace(each, with_next=True) for each in found[:-1]), *found[-1:]]


def pages_of(slices: Iterable[Slice], height: float) -> tuple[Page, ...]:
    """Fill pages of a height in px; a run of slices kept together moves on as one."""
    pages: list[list[Placed]] = [[]]
    top = 0.0
    for run in _runs(slices):
        length = sum(each.height for each in run)
        asked = run[0].new_page and top > _NEARLY_EMPTY * height
        if pages[-1] and (asked or top + length > height):
            pages.append([])
            top = 0.0
        for each in run:
            if pages[-1] and top + each.height > height:
                pages.append([])
                top = 0.0
            top = _place(pages[-1], each, top)
    return tuple(tuple(page) for page in pages if page)


def _runs(slices: Iterable[Slice]) -> Iterator[list[Slice]]:
    run: list[Slice] = []
    for each in slices:
        if run and each.new_page:
            yield run
            run = []
        run.append(each)
        if not each.with_next:
            yield run
            run = []
    if run:
        yield run


def _place(page: list[Placed], slice: Slice, top: float) -> float:
    """Put a slice on a page, below its head if it begins the page; returns the next top."""
    if not page and slice.gap:
        return top
    if not page and slice.head is not None:
        page.append(Placed(top, slice.head))
        top += slice.head.height
    page.append(Placed(top, slice))
    return top + slice.height


def pages_of_titles(pages: Iterable[Page]) -> dict[str, int]:
    """The page, from 1, on which each section begins."""
    return {
        placed.slice.title: number
        for number, page in enumerate(pages, start=1)
        for placed in page
        if placed.slice.title
    }
