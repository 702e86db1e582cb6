"""Blocks as slices: what each looks like on paper."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from functools import partial
from itertools import accumulate

from PySide6.QtCore import QRectF
from PySide6.QtGui import QColor, QFont, QPainter

from app.report.blocks import (
    Blanks,
    Block,
    Column,
    Figure,
    Paragraph,
    Row,
    Section,
    Style,
    Table,
)
from app.report.flow import Mark, Page, Slice, kept_together, pages_of, pages_of_titles, white
from app.report.text import Text, print_font
from app.report.waveform_figure import draw_waveforms
from app.theme import AXIS, BODY, LIGHT, REPORT_VERDICT, TABLE, TITLE
from engine.checks import Verdict

_PAD = 6.0
_AFTER_NUMBER = 14.0
_ROW_PAD = 3.0
_HAIR, _RULE = 0.6, 1.0
_MARK_GAP = 6.0
_BLANK_HEIGHT = 40.0
_CONTENTS_HEIGHT = 18.0
_SECTION_GAP, _BLOCK_GAP, _PARAGRAPH_GAP, _TITLE_GAP = 26.0, 12.0, 6.0, 8.0

_LOOK: dict[Style, tuple[int, bool, QColor]] = {
    "body": (BODY, False, LIGHT.ink),
    "note": (AXIS, False, LIGHT.second_ink),
    "heading": (BODY, True, LIGHT.ink),
    "verdict": (REPORT_VERDICT, True, LIGHT.ink),
}
"""Size, weight and colour of a paragraph."""


def laid_out(sections: Sequence[Section], width: float, height: float) -> tuple[Page, ...]:
    """The sections on pages of a size in px of 1/96 inch, without header and footer."""
    numbers: dict[str, int] = {}
    layout = _Layout(width, sections, numbers)
    pages = pages_of(layout.slices(), height)
    numbers.update(pages_of_titles(pages))
    return pages


class _Layout:
    """Turns sections into slices of one width; `numbers` is filled when the pages are known."""

    def __init__(self, width: float, sections: Sequence[Section], numbers: dict[str, int]) -> None:
        self._width, self._sections, self._numbers = width, sections, numbers

    def slices(self) -> Iterator[Slice]:
        for number, section in enumerate(self._sections):
            if number:
                yield white(_SECTION_GAP)
            blocks = list(self._blocks(section, number))
            yield from kept_together(blocks) if section.whole else blocks

    def _blocks(self, section: Section, number: int) -> Iterator[Slice]:
        yield self._title(section)
        for place, block in enumerate(section.blocks):
            following = section.blocks[place + 1 :][:1]
            slices = [*self._block(block, number), *self._gap(block, *following)]
            leads = _leads(block, *following)
            yield from ((replace(each, with_next=True) for each in slices) if leads else slices)

    def _gap(self, block: Block, *following: Block) -> Iterator[Slice]:
        if following:
            apart = _is_table(block, *following) or _is_heading(*following)
            yield white(_BLOCK_GAP if apart else _PARAGRAPH_GAP)

    def _title(self, section: Section) -> Slice:
        text = Text(section.title, self._width, print_font(TITLE, bold=True), LIGHT.ink)
        return Slice(
            text.height + _TITLE_GAP,
            lambda painter, top: text.paint(painter, 0.0, top),
            with_next=True,
            new_page=section.new_page,
            title=section.title,
        )

    def _block(self, block: Block, section: int) -> Iterator[Slice]:
        if isinstance(block, Paragraph):
            return paragraph_slices(block, self._width)
        if isinstance(block, Table):
            return iter(table_slices(block, self._width))
        if isinstance(block, Figure):
            return iter((self._figure(block),))
        if isinstance(block, Blanks):
            return iter(kept_together(self._blanks(block)))
        return self._contents(section)

    def _figure(self, figure: Figure) -> Slice:
        def paint(painter: QPainter, top: float) -> None:
            draw_waveforms(painter, QRectF(0.0, top, self._width, figure.height), figure)

        return Slice(figure.height, paint, with_next=True)

    def _blanks(self, blanks: Blanks) -> Iterator[Slice]:
        """Names with lines to write on, under small heads."""
        share = self._width / (len(blanks.heads) + 1)
        lefts = [share * (1 + place) for place in range(len(blanks.heads))]
        for name in blanks.names:
            yield Slice(_BLANK_HEIGHT, partial(_paint_blanks, name, blanks.heads, lefts, share))

    def _contents(self, section: int) -> Iterator[Slice]:
        for each in self._sections[section + 1 :]:
            yield Slice(_CONTENTS_HEIGHT, partial(self._paint_contents, each.title))

    def _paint_contents(self, title: str, painter: QPainter, top: float) -> None:
        font = print_font(TABLE)
        Text(str(self._numbers[title]), 18.0, font, LIGHT.ink, right=True).paint(painter, 0.0, top)
        Text(title, self._width - 34.0, font, LIGHT.ink).paint_line(0, 34.0, painter, top)


def _leads(block: Block, *following: Block) -> bool:
    """Whether what follows a paragraph must stand on the same page."""
    return isinstance(block, Paragraph) and (_is_heading(block) or _is_table(*following))


def _is_heading(*blocks: Block) -> bool:
    return any(isinstance(block, Paragraph) and block.style == "heading" for block in blocks)


def _is_table(*blocks: Block) -> bool:
    return any(isinstance(block, Table | Figure | Blanks) for block in blocks)


def _paint_blanks(
    name: str,
    heads: Sequence[str],
    lefts: Sequence[float],
    share: float,
    painter: QPainter,
    top: float,
) -> None:
    foot = top + _BLANK_HEIGHT - 14.0
    Text(name, share, print_font(TABLE), LIGHT.ink).paint(painter, 0.0, foot - 15.0)
    for head, left in zip(heads, lefts, strict=True):
        _rule(painter, left, foot, share - 16.0, LIGHT.field_edge, _RULE)
        Text(head, share, print_font(AXIS), LIGHT.second_ink).paint(painter, left, foot + 1.0)


def _rule(
    painter: QPainter, left: float, top: float, width: float, colour: QColor, weight: float
) -> None:
    painter.fillRect(QRectF(left, top, width, weight), colour)


# Paragraphs -------------------------------------------------------------------------------


def paragraph_slices(paragraph: Paragraph, width: float) -> Iterator[Slice]:
    """A slice a line; first and last two lines stay together, a heading with what it heads."""
    size, bold, colour = _LOOK[paragraph.style]
    indent = size + _MARK_GAP if paragraph.verdict else 0.0
    text = Text(paragraph.text, width - indent, print_font(size, bold), colour)
    heads = paragraph.style in ("heading", "verdict")
    for line in range(text.lines):
        yield Slice(
            text.line_height,
            partial(text.paint_line, line, indent),
            with_next=heads or line == 0 < text.lines - 1 or line == text.lines - 2,
            mark=_mark_before(text, size, paragraph.verdict) if line == 0 else None,
        )
    if paragraph.style == "verdict":
        yield white(2.0, with_next=True)


def _mark_before(text: Text, side: float, verdict: Verdict | None) -> Mark | None:
    if verdict is None:
        return None
    return verdict, QRectF(0.0, (text.line_height - side) / 2.0, side, side)


# Tables -----------------------------------------------------------------------------------


class _Grid:
    """The columns of a table in px; `lefts` ends with the right edge of the last."""

    def __init__(self, columns: Sequence[Column], width: float) -> None:
        self.columns, self.width = columns, width
        whole = sum(column.width for column in columns)
        self.lefts = [0.0, *accumulate(width * column.width / whole for column in columns)]

    def cell(self, column: int, text: str, font: QFont, colour: QColor) -> _Cell:
        right = self.columns[column].right
        left = self.left_of(column) + (_PAD if right else 0.0)
        width = self.lefts[column + 1] - left - (0.0 if right else _PAD)
        return _Cell(Text(text, width, font, colour, right), left)

    def left_of(self, column: int) -> float:
        """Where a column begins; wider apart where a number on its right side stands before."""
        after_number = column > 0 and self.columns[column - 1].right
        both = after_number and not self.columns[column].right
        return self.lefts[column] + (_AFTER_NUMBER if both else 0.0)

    def from_column(self, column: int, end: int, text: str, font: QFont, colour: QColor) -> _Cell:
        """A text over some columns."""
        left = self.lefts[column] + (_PAD if self.columns[column].right else 0.0)
        return _Cell(Text(text, self.lefts[end] - left - _PAD, font, colour), left)


class _Cell:
    """A text at its place in a row."""

    def __init__(self, text: Text, left: float) -> None:
        self.text, self.left = text, left


def table_slices(table: Table, width: float) -> list[Slice]:
    """The head, then a slice each row with what stands below it."""
    grid = _Grid(table.columns, width)
    head = _head(grid)
    heads = [head] if any(column.head for column in table.columns) else []
    rows = [_row(grid, row, heads) for row in table.rows]
    if len(rows) > 2:
        rows[0] = replace(rows[0], with_next=True)
    slices = [*heads, *rows, _foot(grid)]
    if table.whole:
        return kept_together(slices)
    return [*slices[:-3], *kept_together(slices[-3:])]


def _head(grid: _Grid) -> Slice:
    font = print_font(AXIS, bold=True)
    cells = [
        grid.cell(place, column.head, font, LIGHT.second_ink)
        for place, column in enumerate(grid.columns)
    ]
    inner = max(cell.text.height for cell in cells)

    def paint(painter: QPainter, top: float) -> None:
        for cell in cells:
            cell.text.paint(painter, cell.left, top + inner - cell.text.height)
        _rule(painter, 0.0, top + inner + 3.0, grid.width, LIGHT.ink, _RULE)

    return Slice(inner + 3.0 + _RULE, paint, with_next=True)


def _foot(grid: _Grid) -> Slice:
    return Slice(
        _RULE, lambda painter, top: _rule(painter, 0.0, top, grid.width, LIGHT.rule, _RULE)
    )


def _row(grid: _Grid, row: Row, heads: Sequence[Slice]) -> Slice:
    cells = list(_cells(grid, row))
    inner = max(cell.text.height for cell in cells)
    below = _below(grid, row)
    height = inner + 2 * _ROW_PAD + (below.text.height + 2.0 if below else 0.0)

    def paint(painter: QPainter, top: float) -> None:
        if row.strong:
            band = QRectF(-_PAD, top, grid.width + 2 * _PAD, height)
            painter.fillRect(band, LIGHT.band)
        _rule(painter, 0.0, top, grid.width, LIGHT.rule, _HAIR)
        for cell in cells:
            cell.text.paint(painter, cell.left, top + _ROW_PAD)
        if below:
            below.text.paint(painter, below.left, top + _ROW_PAD + inner + 2.0)

    return Slice(
        height,
        paint,
        with_next=row.strong,
        head=heads[0] if heads else None,
        mark=_mark_in(grid, row.verdict),
    )


def _mark_in(grid: _Grid, verdict: Verdict | None) -> Mark | None:
    """The mark in front of the word in the last column."""
    if verdict is None:
        return None
    left = grid.left_of(len(grid.columns) - 1)
    return verdict, QRectF(left, _ROW_PAD + 1.0, TABLE, TABLE)


def _cells(grid: _Grid, row: Row) -> Iterable[_Cell]:
    for place, text in enumerate(row.cells):
        font = print_font(TABLE, row.strong, place in row.assumed)
        if row.strong:
            yield grid.from_column(place, len(grid.columns), text, font, LIGHT.ink)
        else:
            yield grid.cell(place, text, font, LIGHT.ink)
    if row.instead:
        end = len(grid.columns) - (1 if row.verdict else 0)
        font = print_font(TABLE)
        colour = LIGHT.second_ink if row.verdict else LIGHT.ink
        yield grid.from_column(len(row.cells), end, row.instead, font, colour)
    if row.verdict is not None:
        left = grid.left_of(len(grid.columns) - 1) + TABLE + _MARK_GAP
        word = Text(row.verdict, grid.width - left, print_font(TABLE), LIGHT.ink)
        yield _Cell(word, left)


def _below(grid: _Grid, row: Row) -> _Cell | None:
    if not row.below:
        return None
    font = print_font(AXIS)
    return grid.from_column(1, len(grid.columns), row.below, font, LIGHT.second_ink)
