"""What each rating must at least be, before there is a candidate."""

from __future__ import annotations

from collections.abc import Sequence

from app.verdict_sentence import corner_in_words, rounded
from app.widgets.plain_table import PlainTable
from engine.checks import Wanted
from parts_library.rating_sheet import DIODE, IGBT, THYRISTOR, Rating, sheet_figure

HEADS = ("", "rating", "", "would just do", "next usual class", "worst at")
ROW_HEIGHT, GAP = 26, 24


def wanted_rating(wanted: Wanted) -> Rating | None:
    """The line of a data sheet that a wanted row speaks of."""
    sheets = (DIODE,) if wanted.id.startswith("diode.") else (THYRISTOR, IGBT)
    return next((rating for sheet in sheets for rating in _of(wanted, sheet)), None)


def wanted_device(wanted: Wanted) -> str:
    """'thyristor', 'IGBT', 'switch' where both have that rating, or 'diode'."""
    if wanted.id.startswith("diode."):
        return "diode"
    of_thyristor, of_igbt = _of(wanted, THYRISTOR), _of(wanted, IGBT)
    if of_thyristor and of_igbt:
        return "switch"
    return "thyristor" if of_thyristor else "IGBT"


def _of(wanted: Wanted, sheet: Sequence[Rating]) -> list[Rating]:
    stem, symbol = wanted.id.partition(".")[2], wanted.rating.partition(",")[0]
    return [each for each in sheet if stem in each.checks and each.symbol == symbol]


class WantedTable(PlainTable):
    """A row a rating: what would just do, the next usual class above, and where it is worst."""

    def __init__(self) -> None:
        super().__init__("Wanted ratings", HEADS, figures=(3, 4), row_height=ROW_HEIGHT)
        self.horizontalHeader().setStretchLastSection(True)

    def show_wanted(self, wanted: Sequence[Wanted]) -> None:
        devices = [wanted_device(each) for each in wanted]
        firsts = [row for row, each in enumerate(devices) if each not in devices[:row]]
        names = [each if row in firsts else "" for row, each in enumerate(devices)]
        self.fill([_texts(name, each) for name, each in zip(names, wanted, strict=True)])
        for row in firsts:
            self.mark_bold(row, (0,))
        self._fit()

    def _fit(self) -> None:
        """Columns as wide as their text with room between them, no taller than its rows."""
        self.resizeColumnsToContents()
        for column in range(self.columnCount() - 1):
            self.setColumnWidth(column, self.columnWidth(column) + GAP)
        rows = self.rowCount() * ROW_HEIGHT
        self.setMaximumHeight(self.horizontalHeader().sizeHint().height() + rows + 2)


def _texts(device: str, wanted: Wanted) -> tuple[str, ...]:
    rating = wanted_rating(wanted)
    return (
        device,
        wanted.rating,
        rating.name if rating is not None else "",
        f"{'≤' if wanted.at_most else '≥'} {_figure(wanted, rating, wanted.value)}",
        _figure(wanted, rating, wanted.next_class),
        f"{wanted.position or ''}  {corner_in_words(wanted.corner)}".strip(),
    )


def _figure(wanted: Wanted, rating: Rating | None, value: float | None) -> str:
    if value is None:
        return "–"
    if rating is None:
        return rounded(value, wanted.unit)
    return f"{sheet_figure(rating, value):g} {rating.sheet_unit}"
