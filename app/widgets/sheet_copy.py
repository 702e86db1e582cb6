"""The rating sheets as tabbed text for a spreadsheet."""

from __future__ import annotations

from PySide6.QtCore import Qt

from app.widgets.sheet_model import SheetModel


def sheets_as_text(model: SheetModel) -> str:
    """Symbol, unit and every candidate's figure of each row in view; a head line of names."""
    lines = ["\t".join(["", "", *(each.name for each in model.candidates)])]
    for number, row in enumerate(model.rows):
        if row.form in ("rating", "note"):
            unit = row.rating.sheet_unit if row.rating is not None else ""
            symbol = row.rating.symbol if row.rating is not None else "note"
            columns = range(len(model.candidates))
            texts = [
                model.data(model.index(number, c), Qt.ItemDataRole.DisplayRole) for c in columns
            ]
            lines.append("\t".join([symbol, unit, *texts]))
        elif row.form == "heading":
            lines.append(str(model.headerData(number, Qt.Orientation.Vertical)))
    return "\n".join(lines)
