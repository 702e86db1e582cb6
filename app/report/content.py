"""A selection and its assessment as the sections of a report, in the order of reading."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

from app.cautions import cautions
from app.entry_names import assumed_entries, name_of
from app.pages.check_pages import chosen_result, deciding_check
from app.report.blocks import Blanks, Block, Column, Contents, Paragraph, Row, Section, Table
from app.report.candidates import (
    Entrant,
    assumed_conditions,
    candidate_sections,
    entrants_of,
    overview,
)
from app.report.duty import duty_section
from app.report.stresses import (
    bridge_section,
    position_section,
    turn_off_section,
    waveform_section,
)
from app.report.wording import NOTHING, amount, at_corner, sentence
from app.verdict_sentence import sentence_of
from engine.bridge import nominal_bridge
from engine.checks import VERDICTS, Assessment, Wanted
from engine.duty import duty_of
from engine.quantities import printed
from engine.rule_sets import Permitted, RuleSet, rule_set_of
from engine.selection import Selection
from engine.steady_state import solve
from engine.verdicts.wording import named
from engine.waveforms import sampled
from parts_library.rating_sheet import SHEETS

_METHODS = Path(__file__).parent.parent.parent / "resources" / "report" / "methods.txt"
_REOPEN = (
    "To reopen it: the selection travels with this file as the attachment selection.json; save "
    "that and open it with 'python3 -m app selection.json' to see, edit and compute everything "
    "anew. The attachment results.json holds all results in full."
)


def sections_of(selection: Selection, assessment: Assessment) -> tuple[Section, ...]:
    """Every section of the report.

    Raises
    ------
    InvalidSelection, NoSolution
        There is nothing to report on.
    """
    return tuple(_sections(selection, assessment))


def _sections(selection: Selection, assessment: Assessment) -> Iterator[Section]:
    duty, entrants = duty_of(selection), entrants_of(selection, assessment)
    yield _verdict(assessment, entrants)
    yield Section("Cautions", tuple(Paragraph(text) for text in cautions()))
    yield Section("Contents", (Contents(),))
    yield duty_section(selection)
    if assessment.nominal is not None:
        yield bridge_section(assessment.nominal, duty)
    yield waveform_section(sampled(solve(nominal_bridge(duty))), duty)
    if assessment.nominal is not None:
        yield position_section(assessment.nominal)
    if entrants:
        yield from candidate_sections(selection, entrants)
    else:
        yield _wanted(assessment.wanted)
    if assessment.nominal is not None:
        yield turn_off_section(assessment.nominal)
    yield _assumed(selection, assessment, entrants)
    yield _rules(rule_set_of(selection))
    yield _methods()
    yield _sign_off()


# Verdict ----------------------------------------------------------------------------------


def _verdict(assessment: Assessment, entrants: Sequence[Entrant]) -> Section:
    result = chosen_result(assessment)
    entrant = next((each for each in entrants if each.result is result), None)
    if entrant is None:
        head = Paragraph("No candidate chosen" if entrants else "No candidate yet", "verdict")
        said = _without_choice(entrants)
    else:
        text = f"{entrant.result.name}: {entrant.result.verdict}{_bare(entrant)}"
        head = Paragraph(text, "verdict", entrant.result.verdict)
        said = f"{_deciding(entrant)} {_counted(entrant)}"
    table = [overview(entrants, assessment.chosen)] if entrants else []
    return Section("Verdict", (head, Paragraph(f"{said} {_REOPEN}"), *table))


def _without_choice(entrants: Sequence[Entrant]) -> str:
    if entrants:
        return "The candidates were assessed; none of them has been chosen."
    return "This report states what the duty puts on the parts, and what they must at least stand."


def _bare(entrant: Entrant) -> str:
    """What the verdict stands without."""
    remarks = entrant.result.remark.split("; ")
    return "".join(f" {part}" for part in remarks if part.startswith("without"))


def _deciding(entrant: Entrant) -> str:
    """The row that decides, and the weakest basis."""
    result, check = entrant.result, deciding_check(entrant.result)
    if check is None:
        return f"Candidate {entrant.number} has no checks."
    decides = f"Row {entrant.number_of(check)} decides: {sentence_of(check)}."
    if result.weakest_basis:
        return f"{decides} The verdict rests at its weakest on {result.weakest_basis}."
    if result.verdict == "not assessed":
        return decides
    return f"{decides} All ratings it rests on count as maximum ratings."


def _counted(entrant: Entrant) -> str:
    """How many of the checks have which verdict, and how many want an entry."""
    checks = entrant.result.checks
    counts = Counter(check.verdict for check in checks)
    lacking = sum(bool(check.needs) for check in checks)
    missing = {"not assessed": f" ({lacking} for want of an entry listed below)" if lacking else ""}
    told = ", ".join(
        f"{counts[verdict]} {verdict}{missing.get(verdict, '')}"
        for verdict in VERDICTS
        if counts[verdict]
    )
    return f"Of its {len(checks)} checks: {told}."


def _wanted(wanted: Sequence[Wanted]) -> Section:
    columns = (
        Column("no.", 8),
        Column("rating", 26),
        Column("must be", 26, right=True),
        Column("next usual class", 22, right=True),
        Column("position", 18, right=True),
    )
    rows = tuple(_wanted_row(number, each) for number, each in enumerate(wanted, start=1))
    return Section("What the parts must at least stand", (Table(columns, rows),))


def _wanted_row(number: int, wanted: Wanted) -> Row:
    side = "at most" if wanted.at_most else "at least"
    usual = wanted.next_class
    return Row(
        (
            f"W-{number:02d}",
            wanted.rating + (" of the diode" if wanted.id.startswith("diode.") else ""),
            f"{side} {amount(wanted.value, wanted.unit)}",
            NOTHING if usual is None else f"{usual:g} {printed(wanted.unit)}",
            wanted.position or NOTHING,
        ),
        below=f"{wanted.how}. At {at_corner(wanted.corner)}.",
    )


# Assumed or missing -----------------------------------------------------------------------

_SAID_ELSEWHERE = {"rule_set", "assumed"}
"""Warnings whose matter has a section or a table of its own."""


def _assumed(selection: Selection, assessment: Assessment, entrants: Sequence[Entrant]) -> Section:
    columns = (Column("what", 60), Column("state", 40))
    assumed = assumed_entries(selection)
    rows = [Row(("Duty",), strong=True)] if assumed else []
    rows += [Row((name_of(key), "assumed, value under Duty")) for key in assumed]
    for entrant in entrants:
        found = list(_open_entries(entrant))
        name = f"Candidate {entrant.number}: {entrant.result.name}"
        rows += [Row((name,), strong=True), *found] if found else []
    said = [
        Paragraph(sentence(warning.text))
        for warning in assessment.warnings
        if warning.id not in _SAID_ELSEWHERE
    ]
    table = [Table(columns, tuple(rows))] if rows else [Paragraph("Every entry was made.")]
    return Section("What is assumed or missing", (*table, *said))


def _open_entries(entrant: Entrant) -> Iterator[Row]:
    """What keeps rows from being assessed, then the test conditions that nobody entered."""
    waiting: dict[str, list[str]] = {}
    for number, check in entrant.numbered:
        for key in check.needs:
            waiting.setdefault(key, []).append(number)
    for key, numbers in waiting.items():
        yield Row((named(key), f"missing for {', '.join(numbers)}"))
    for part in ("switch", "diode"):
        keys = assumed_conditions(getattr(entrant.candidate, part))
        if keys:
            yield Row((f"{_listed(keys)} of the {part}", "assumed, value side by side"))


def _listed(keys: Sequence[str]) -> str:
    """Test conditions in words: 'case temperature of I_T(AV)'."""
    names = {rating.key: rating.name for sheet in SHEETS.values() for rating in sheet}
    return ", ".join(names[key] for key in keys)


# Rules, methods, sign-off -----------------------------------------------------------------


def _rules(rules: RuleSet) -> Section:
    band = f"'{rules.name}': a headroom under {rules.tight_band_pct:g} % is tight. {rules.note}"
    fractions = _permitted_table("permitted fraction of", rules.fractions)
    factors = _permitted_table("factor", rules.factors)
    return Section("Rule set", (Paragraph(band.strip()), fractions, factors))


_FACTOR_NAMES = {
    "tq": "k of t_q",
    "tq_low_reverse_voltage": "t_q at a low reverse voltage",
    "tq_per_K": "t_q, growth per kelvin",
    "blanking": "k of the blanking",
    "transient_overshoot": "transient over link voltage",
    "junction_margin_K": "kelvin kept below T_vj max",
    "junction_limit_C": "highest T_vj, °C",
}
_DEVICES = {"igbt": "IGBT", "diode": "diode", "thyristor": "thyristor"}


def _permitted_table(head: str, figures: Mapping[str, Permitted]) -> Table:
    """Figures of one value and one source share a line."""
    groups: dict[Permitted, list[str]] = {}
    for key, figure in figures.items():
        groups.setdefault(figure, []).append(_figure_name(key))
    columns = (Column(head, 34), Column("", 10, right=True), Column("source", 56))
    rows = [
        Row((", ".join(names), f"{figure.value:.4g}", figure.source))
        for figure, names in groups.items()
    ]
    return Table(columns, tuple(rows))


def _figure_name(key: str) -> str:
    """'switch.I_TAV' as 'I_T(AV)', 'igbt.V_steady' as 'steady link voltage (IGBT)'."""
    part, _, stem = key.partition(".")
    if not stem:
        return _FACTOR_NAMES.get(key, key)
    device = f" ({_DEVICES[part]})" if part in _DEVICES else ""
    return _SYMBOLS.get(stem, stem) + device


_SYMBOLS = {
    **{r.checks[0]: r.symbol for sheet in SHEETS.values() for r in sheet if r.checks},
    "V_steady": "steady link voltage",
    "turn_off_current": "turned-off current",
    "didt_recovery": "−di/dt at recovery",
}
"""What a check's fraction belongs to."""


def _methods() -> Section:
    blocks: list[Block] = []
    for part in _METHODS.read_text(encoding="utf-8").strip().split("\n\n"):
        title, _, text = part.partition("\n")
        blocks.append(Paragraph(title, "heading"))
        blocks += [Paragraph(line) for line in text.splitlines()]
    return Section("Methods, sources and limits of validity", tuple(blocks))


def _sign_off() -> Section:
    said = Paragraph(
        "Signed for the entries, the assumptions and the choice above, checked against the makers' "
        "current data sheets."
    )
    blanks = Blanks(("Selected by", "Checked by", "Approved by"), ("name", "date", "signature"))
    return Section("Sign-off", (said, blanks), whole=True)
