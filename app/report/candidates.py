"""The candidates in a report: their sheets side by side, and every check with its number."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from app.report.blocks import Block, Paragraph, Row, Section, Table
from engine.checks import Assessment, CandidateResult, Check, Corner
from engine.quantities import shown
from engine.ratings import Diode, Igbt, Switch, Thyristor
from engine.selection import Candidate, Selection
from parts_library.rating_sheet import SHEETS, Kind, Rating, sheet_number

_SIDE_BY_SIDE = 4


def candidate_sections(selection: Selection, assessment: Assessment) -> list[Section]:
    """Candidates side by side, then each candidate's checks."""
    shown_names = {result.name for result in assessment.candidates}
    candidates = [each for each in selection.candidates if each.name in shown_names]
    results = {result.name: result for result in assessment.candidates}
    sheets: list[Block] = []
    for first in range(0, len(candidates), _SIDE_BY_SIDE):
        group = candidates[first : first + _SIDE_BY_SIDE]
        sheets += _sheets(group, [results[each.name] for each in group])
    sections = [Section("Candidates side by side", tuple(sheets))]
    numbers = {each.name: n for n, each in enumerate(selection.candidates, start=1)}
    for result in assessment.candidates:
        sections.append(_checks(result, numbers[result.name]))
    return sections


def _sheets(group: Sequence[Candidate], results: Sequence[CandidateResult]) -> Iterator[Block]:
    width = 76 // len(group)
    widths = (24, *(width,) * len(group))
    align = "l" + "r" * len(group)
    yield Table(
        ("", *(each.name for each in group)),
        (
            Row(("verdict", *(result.verdict for result in results)), strong=True),
            *_sheet_rows([each.switch for each in group], "switch"),
            *_sheet_rows([each.diode for each in group], "diode"),
            Row(("note", *(each.note for each in group))),
        ),
        align,
        widths,
    )


def _sheet_rows(devices: Sequence[Switch | Diode], part: str) -> Iterator[Row]:
    """A row for each rating that at least one of the devices states."""
    kinds = [_kind_of(device) for device in devices]
    if part == "switch":
        yield Row((part, *kinds), strong=True)
    else:
        yield Row((part, *("" for _ in devices)), strong=True)
    seen: set[str] = set()
    for kind in dict.fromkeys(kinds):
        for rating in SHEETS[kind]:
            if rating.key not in seen and rating.key not in {"part", "note"}:
                seen.add(rating.key)
                cells = [_cell(device, rating) for device in devices]
                if any(cells):
                    yield Row((_label(rating), *cells))


def _kind_of(device: Switch | Diode) -> Kind:
    kinds: dict[type, Kind] = {Thyristor: "thyristor", Igbt: "igbt", Diode: "diode"}
    return kinds[type(device)]


def _label(rating: Rating) -> str:
    under = "  " if rating.condition_of else ""
    unit = f", {rating.sheet_unit}" if rating.sheet_unit else ""
    return f"{under}{rating.symbol}{unit}"


def _cell(device: Switch | Diode, rating: Rating) -> str:
    value = getattr(device, rating.key, None)
    if value is None or value == "" or value is False:
        return ""
    if rating.form != "number":
        return "yes" if value is True else str(value)
    basis = device.basis.get(rating.key, "")
    return sheet_number(rating, value) + (f" ({basis})" if basis and basis != "maximum" else "")


def _checks(result: CandidateResult, number: int) -> Section:
    remark = f" ({result.remark})" if result.remark else ""
    heat = [
        f"{name} {shown(value, unit, 4)}"
        for name, value, unit in (
            ("switch loss", result.switch_loss_W, "W"),
            ("diode loss", result.diode_loss_W, "W"),
            ("hottest junction", result.junction_peak_C, "C"),
        )
        if value is not None
    ]
    rows = tuple(_check_row(check, number, n) for n, check in enumerate(result.checks, start=1))
    blocks: list[Block] = [Paragraph(f"{result.verdict}{remark}", "body", result.verdict)]
    if heat:
        blocks.append(Paragraph("Worst position at its worst corner: " + ", ".join(heat) + "."))
    blocks.append(
        Table(
            (
                "no.",
                "rating",
                "applied",
                "allowed",
                "of rating",
                "headroom",
                "would do",
                "",
                "verdict",
            ),
            rows,
            "llrrrrrll",
            (7, 16, 11, 11, 9, 11, 11, 5, 19),
        )
    )
    return Section(f"Checks of candidate {number}: {result.name}", tuple(blocks))


def _check_row(check: Check, candidate: int, number: int) -> Row:
    return Row(
        (
            f"C{candidate}-{number:02d}",
            check.rating + (", diode" if check.id.startswith("diode.") else ""),
            _amount(check.applied, check.unit),
            _amount(check.allowed, check.unit),
            "" if check.fraction is None else f"× {check.fraction:.3g}",
            "" if check.headroom_pct is None else f"{check.headroom_pct:.1f} %",
            _amount(check.would_do, check.unit),
            check.position or "",
            "",
        ),
        verdict=check.verdict,
        below=_below(check),
    )


def _below(check: Check) -> str:
    """The law with its numbers, the corner, and the reason where there is one."""
    parts = dict.fromkeys(part for part in (check.reason, check.how) if part)
    at = [] if check.corner is None else ["at " + _at(check.corner)]
    return "; ".join([*parts, *at])


def _at(corner: Corner) -> str:
    return (
        f"{corner.voltage_V:g} V, {corner.frequency_Hz:g} Hz, load × {corner.load_factor:g}, "
        f"{corner.ambient_C:g} °C"
    )


def _amount(value: float | None, unit: str) -> str:
    return "" if value is None else shown(value, unit, digits=4)
