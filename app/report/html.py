"""Blocks as the subset of HTML that Qt's rich text lays out.

Verdict marks and figures cannot be written in it; they stand as named tokens, which
`app.report.document` replaces by drawings.
"""

from __future__ import annotations

from collections.abc import Iterable
from html import escape

from app.report.blocks import Block, Figure, Paragraph, Row, Section, Table

TOKEN_START, TOKEN_END = "\ue000", "\ue001"
"""Private characters around a token; no entry can hold them by typing."""

_STYLES = {
    "body": "font-size:11px",
    "note": "font-size:10px; color:#4F5954",
    "verdict": "font-size:20px; font-weight:bold",
    "heading": "font-size:12px; font-weight:bold",
}
_CELL = "padding:2px 6px 2px 6px"


def html_of(sections: Iterable[Section]) -> str:
    """The whole report as one HTML text."""
    return "<body>" + "".join(_section(section) for section in sections) + "</body>"


def token(name: str) -> str:
    return f"{TOKEN_START}{name}{TOKEN_END}"


def _section(section: Section) -> str:
    page = "page-break-before:always; " if section.new_page else ""
    title = (
        f'<h2 style="{page}font-size:16px; margin-top:20px; margin-bottom:6px">'
        f"{_text(section.title)}</h2>"
    )
    return title + "".join(_block(block) for block in section.blocks)


def _block(block: Block) -> str:
    if isinstance(block, Paragraph):
        return _paragraph(block)
    if isinstance(block, Figure):
        return _figure(block)
    return _table(block)


def _paragraph(block: Paragraph) -> str:
    side = 16 if block.style == "verdict" else 9
    mark = token(f"mark {block.verdict},{side}") + "&nbsp;" if block.verdict else ""
    above = 8 if block.style == "heading" else 0
    return (
        f'<p style="{_STYLES[block.style]}; margin-top:{above}px; margin-bottom:5px">'
        f"{mark}{_text(block.text)}</p>"
    )


def _figure(block: Figure) -> str:
    return (
        f'<p style="margin-bottom:2px">{token(f"figure {block.name} {block.height}")}</p>'
        f'<p style="{_STYLES["note"]}">{_text(block.caption)}</p>'
    )


def _table(table: Table) -> str:
    head = "".join(
        f'<th align="{_side(side)}"{_width(table, column)} style="{_CELL}; font-size:10px">'
        f"{_text(cell)}</th>"
        for column, (cell, side) in enumerate(zip(table.head, table.align, strict=True))
    )
    rows = "".join(_row(row, table.align) for row in table.rows)
    return (
        '<table width="100%" cellspacing="0" cellpadding="0" '
        'style="margin-top:4px; margin-bottom:8px; border-collapse:collapse">'
        f"<thead><tr>{head}</tr></thead>{rows}</table>"
    )


def _width(table: Table, column: int) -> str:
    return f' width="{table.widths[column]}%"' if table.widths else ""


def _side(letter: str) -> str:
    return "right" if letter == "r" else "left"


def _row(row: Row, align: str) -> str:
    rule = "border-top:1px solid #C9CEC9"
    weight = "font-weight:bold; " if row.strong else ""
    cells = list(map(_text, row.cells))
    if row.verdict:
        cells[-1] = f"{token(f'mark {row.verdict},9')}&nbsp;{row.verdict}"
    line = "".join(
        f'<td align="{_side(side)}" style="{weight}{_CELL}; font-size:10px; {rule}">{cell}</td>'
        for cell, side in zip(cells, align, strict=True)
    )
    below = (
        f'<tr><td></td><td colspan="{len(align) - 1}" '
        f'style="font-size:9px; color:#4F5954; padding:0 6px 3px 6px">{_text(row.below)}</td></tr>'
        if row.below
        else ""
    )
    return f"<tr>{line}</tr>{below}"


def _text(text: str) -> str:
    cleaned = text.replace(TOKEN_START, "").replace(TOKEN_END, "")
    return escape(cleaned).replace("\n", "<br>").replace("  ", "&nbsp; ")
