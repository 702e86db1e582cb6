"""The candidates in a report: an overview, their sheets side by side, every check by number."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

from app.pages.check_pages import deciding_check, key_of_check
from app.report.blocks import Block, Column, Paragraph, Row, Section, Table
from app.report.wording import (
    NOTHING,
    amount,
    at_corner,
    minus,
    name_of_check,
    number_of,
    percent,
)
from engine.checks import Assessment, CandidateResult, Check, Losses
from engine.ratings import USUAL_CONDITIONS, Diode, Igbt, Switch, Thyristor
from engine.selection import Candidate, Selection, entry
from parts_library.rating_sheet import GROUPS, SHEETS, Kind, Rating, rating_of, sheet_number

_SIDE_BY_SIDE = 4
_KIND_NAMES: Mapping[Kind, str] = {"thyristor": "thyristor", "igbt": "IGBT", "diode": "diode"}


class Entrant:
    """A candidate with its result and the number that its checks carry."""

    def __init__(self, number: int, candidate: Candidate, result: CandidateResult) -> None:
        self.number, self.candidate, self.result = number, candidate, result
        rows = enumerate(result.checks, start=1)
        self.numbered = tuple((number_of(number, row), check) for row, check in rows)

    def number_of(self, check: Check) -> str:
        return next(number for number, each in self.numbered if each is check)


def entrants_of(selection: Selection, assessment: Assessment) -> tuple[Entrant, ...]:
    """The candidates that were assessed, numbered by their place in the selection."""
    results = {result.name: result for result in assessment.candidates}
    return tuple(
        Entrant(number, candidate, results[candidate.name])
        for number, candidate in enumerate(selection.candidates, start=1)
        if candidate.name in results
    )


def overview(entrants: Sequence[Entrant], chosen: str) -> Table:
    """A line each candidate: the row that decides, its headroom, the verdict."""
    columns = (
        Column("no.", 7),
        Column("candidate", 36),
        Column("deciding row", 26),
        Column("headroom", 13, right=True),
        Column("verdict", 18),
    )
    return Table(columns, tuple(_overview_row(each, chosen) for each in entrants))


def _overview_row(entrant: Entrant, chosen: str) -> Row:
    result, check = entrant.result, deciding_check(entrant.result)
    name = f"{result.name} (chosen)" if result.name == chosen else result.name
    row = "" if check is None else f"{entrant.number_of(check)}  {_short_name(check)}"
    headroom = "" if check is None else percent(check.headroom_pct)
    return Row(
        (f"C{entrant.number}", name, row, headroom), verdict=result.verdict, below=result.remark
    )


def _short_name(check: Check) -> str:
    of_diode = check.id.startswith("diode.")
    return name_of_check(check) + (" of the diode" if of_diode else "")


def candidate_sections(selection: Selection, entrants: Sequence[Entrant]) -> Iterator[Section]:
    """Candidates side by side, then each candidate's checks."""
    sheets = [
        block
        for first in range(0, len(entrants), _SIDE_BY_SIDE)
        for block in _sheets(entrants[first : first + _SIDE_BY_SIDE])
    ]
    yield Section("Candidates side by side", (*sheets, Paragraph(_BASIS_NOTE, "note")))
    for entrant in entrants:
        said = (Paragraph(_HOW_TO_READ, "note"),) if entrant is entrants[0] else ()
        yield _checks(selection, entrant, said)


_BASIS_NOTE = (
    "Ratings as entered, in the units of data sheets. A figure without a word is a maximum (or "
    "minimum) rating; 'assumed' marks a test condition that nobody entered. A dash: needed by a "
    "check and not entered."
)


# Sheets -----------------------------------------------------------------------------------


def _sheets(group: Sequence[Entrant]) -> Iterator[Block]:
    columns = (
        Column("", 22),
        *(
            Column(f"{each.number}  {each.candidate.name}", 78 / len(group), right=True)
            for each in group
        ),
    )
    rows = (
        *_outcome_rows(group),
        Row(("Switch",), strong=True),
        *_sheet_rows(group, "switch"),
        Row(("Feedback diode",), strong=True),
        *_sheet_rows(group, "diode"),
    )
    yield Table(columns, rows)
    for each in group:
        if each.candidate.note.strip():
            yield Paragraph(f"Note on {each.candidate.name}: {each.candidate.note.strip()}", "note")


def _outcome_rows(group: Sequence[Entrant]) -> Iterator[Row]:
    results = [each.result for each in group]
    yield Row(("verdict", *(result.verdict for result in results)))
    yield Row(("loss of a switch", *(amount(result.switch_loss_W, "W") for result in results)))
    yield Row(("loss of a diode", *(amount(result.diode_loss_W, "W") for result in results)))
    yield Row(("hottest junction", *(amount(r.junction_peak_C, "C") for r in results)))
    yield Row(("weakest basis", *(result.weakest_basis or NOTHING for result in results)))


def _sheet_rows(group: Sequence[Entrant], part: str) -> Iterator[Row]:
    """A row for each rating that one of the devices states, or that one of their checks needs."""
    devices = [getattr(each.candidate, part) for each in group]
    kinds = [kind_of(device) for device in devices]
    if part == "switch":
        yield Row(("kind", *(_KIND_NAMES[kind] for kind in kinds)))
    for rating in _ratings(kinds):
        cells = [_cell(each, part, rating.key) for each in group]
        if any(cells):
            yield Row((_label(rating), *cells))


def _ratings(kinds: Sequence[Kind]) -> Iterator[Rating]:
    """Every line of the kinds' sheets, block by block, each once."""
    seen = {"note"}
    for group in GROUPS:
        for kind in dict.fromkeys(kinds):
            for rating in SHEETS[kind]:
                if rating.group == group and rating.key not in seen:
                    seen.add(rating.key)
                    yield rating


def kind_of(device: Switch | Diode) -> Kind:
    kinds: dict[type, Kind] = {Thyristor: "thyristor", Igbt: "igbt", Diode: "diode"}
    return kinds[type(device)]


def _label(rating: Rating) -> str:
    unit = f", {rating.sheet_unit}" if rating.sheet_unit else ""
    if rating.condition_of:
        return f"\u2003at {rating.symbol}{unit}"
    return f"{rating.symbol}{unit}"


def _cell(entrant: Entrant, part: str, key: str) -> str:
    device = getattr(entrant.candidate, part)
    if not hasattr(device, key):
        return ""
    value = getattr(device, key)
    if value is None and key in assumed_conditions(device):
        return f"{_told(device, key, USUAL_CONDITIONS[key])} (assumed)"
    if value is None:
        needed = any(f"{part}.{key}" in check.needs for check in entrant.result.checks)
        return NOTHING if needed else ""
    if value in ("", False):
        return ""
    basis = device.basis.get(key, "maximum")
    return _told(device, key, value) + ("" if basis == "maximum" else f" ({basis})")


def _told(device: Switch | Diode, key: str, value: object) -> str:
    if isinstance(value, bool):
        return "yes"
    if isinstance(value, float | int):
        return minus(sheet_number(rating_of(kind_of(device), key), value))
    return str(value)


def assumed_conditions(device: Switch | Diode) -> tuple[str, ...]:
    """Test conditions left empty whose rating has been entered: the usual ones are taken."""
    sheet = SHEETS[kind_of(device)]
    return tuple(
        rating.key
        for rating in sheet
        if rating.key in USUAL_CONDITIONS
        and getattr(device, rating.key) is None
        and getattr(device, _condition_of(rating), None) is not None
    )


def _condition_of(rating: Rating) -> str:
    """The rating that a test condition, or the exponent of an energy, belongs to."""
    return rating.condition_of or f"{rating.key.partition('_')[0]}_J"


# Checks -----------------------------------------------------------------------------------

_CHECK_COLUMNS = (
    Column("no.", 52),
    Column("rating", 118),
    Column("applied", 78, right=True),
    Column("rated", 78, right=True),
    Column("fraction", 62, right=True),
    Column("allowed", 78, right=True),
    Column("headroom", 76, right=True),
    Column("verdict", 128),
)


_HOW_TO_READ = (
    "C2-07 is row 7 of candidate 2. Allowed = rated × permitted fraction, unless the line below "
    "says otherwise; headroom = 1 − applied/allowed, of temperatures by their rise over the "
    "ambient. In rows of times, latching and holding, applied is what is needed and allowed what "
    "there is. 'Would do' is the rating at which the row is just adequate."
)


def _checks(selection: Selection, entrant: Entrant, said: Sequence[Block]) -> Section:
    result = entrant.result
    remark = f" ({result.remark})" if result.remark else ""
    blocks: list[Block] = [Paragraph(f"{result.verdict}{remark}", "body", result.verdict)]
    heat = _heat(result)
    blocks += [Paragraph(heat)] if heat else []
    blocks += said
    blocks.append(Table(_CHECK_COLUMNS, tuple(_check_rows(selection, entrant))))
    title = f"Checks of candidate {entrant.number}: {result.name}"
    return Section(title, tuple(blocks), new_page=True)


def _heat(result: CandidateResult) -> str:
    """The losses at the corner of the hottest junction, by cause."""
    if result.junction_peak_C is None or result.switch_losses is None:
        return ""
    parts = []
    for name, losses in (("switch", result.switch_losses), ("diode", result.diode_losses)):
        if losses is not None:
            parts.append(f"{name}: {_causes(losses)}")
    peak = amount(result.junction_peak_C, "C")
    return f"Loss of one device where the junction is hottest ({peak}): {'; '.join(parts)}."


def _causes(losses: Losses) -> str:
    """The loss by cause; what costs nothing is left out."""
    named = (
        ("on-state", losses.on_state_W),
        ("switching", losses.switching_W),
        ("recovery", losses.recovery_W),
        ("leakage", losses.leakage_W),
    )
    told = [f"{name} {amount(value, 'W')}" for name, value in named if value]
    return ", ".join(told) or "none"


def _check_rows(selection: Selection, entrant: Entrant) -> Iterator[Row]:
    part = ""
    for number, check in entrant.numbered:
        if check.id.partition(".")[0] != part:
            part = check.id.partition(".")[0]
            yield Row((_part_name(part, entrant.candidate),), strong=True)
        yield _check_row(selection, entrant.candidate.name, number, check)


def _part_name(part: str, candidate: Candidate) -> str:
    if part == "switch":
        return f"Switch ({_KIND_NAMES[kind_of(candidate.switch)]})"
    return "Feedback diode" if part == "diode" else part.replace("_", " ").capitalize()


def _check_row(selection: Selection, name: str, number: str, check: Check) -> Row:
    if check.corner is None:
        why = check.reason or check.how
        return Row((number, name_of_check(check)), instead=why, verdict=check.verdict)
    figures = (
        amount(check.applied, check.unit),
        _rated(selection, name, check),
        NOTHING if check.fraction is None else f"× {check.fraction:.4g}",
        amount(check.allowed, check.unit),
        percent(check.headroom_pct),
    )
    return Row((number, name_of_check(check), *figures), verdict=check.verdict, below=_below(check))


def _rated(selection: Selection, name: str, check: Check) -> str:
    """The rating as entered, which the check compares."""
    key = key_of_check(check, selection, name)
    if not key.startswith("candidates."):
        return NOTHING
    candidate, _, field = key.rpartition(".")
    rating = rating_of(kind_of(entry(selection, candidate)), field)
    value = entry(selection, key)
    return amount(value, rating.unit) if isinstance(value, float | int) else NOTHING


def _below(check: Check) -> str:
    """The law with its numbers, then where it is at its worst, and what rating would do."""
    assert check.corner is not None
    place = f"{check.position} at" if check.position else "at"
    reason = "" if check.reason is None or check.reason in check.how else f"{check.reason}; "
    parts = [f"{reason}{check.how}.", f"Worst: {place} {at_corner(check.corner)}."]
    if check.would_do is not None:
        side = "at most" if _smaller_is_better(check) else "at least"
        parts.append(f"Would do: {side} {amount(check.would_do, check.unit)}.")
    if check.basis not in (None, "maximum"):
        parts.append(f"Basis: {check.basis}.")
    return " ".join(parts)


def _smaller_is_better(check: Check) -> bool:
    """Whether the rating is a need of the device (t_q, I_L, I_H), not a strength of it."""
    return check.at_least and check.id != "switch.gate_pulse"
