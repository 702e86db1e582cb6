"""`assess`: the verdict table, and the results as JSON, CSV and PDF."""

from __future__ import annotations

import os
import sys
from collections import Counter
from collections.abc import Collection, Sequence
from dataclasses import dataclass
from pathlib import Path

from app.commands import UNDERSIZED, Refusal, write_or_refuse
from app.export import results_json, write_tables
from app.selection_file import demo_selection, read_selection
from engine.assessment import assess
from engine.checks import Assessment, CandidateResult, Check, Verdict, Wanted
from engine.errors import Fault, InvalidSelection
from engine.quantities import shown
from engine.selection import Selection

_COUNTED: tuple[Verdict, ...] = ("adequate", "tight", "undersized", "not assessed")


@dataclass(frozen=True)
class AssessOptions:
    """The words of the command."""

    file: Path
    json: bool = False
    pdf: Path | None = None
    csv: Path | None = None
    candidate: str | None = None
    strict: bool = False


def assess_file(options: AssessOptions) -> int:
    """Assess a file and put out what was asked for; returns the exit status.

    Raises
    ------
    SwitchwrightError, Refusal
        The file or the duty cannot be used, or a result cannot be written.
    """
    selection = read_selection(options.file).selection
    return _put_out(selection, options)


def assess_demo(pdf: Path) -> int:
    """Assess the demo and write its report."""
    print(f"Assessing the demo instead; its report goes to {pdf}.", file=sys.stderr)
    _put_out(demo_selection(), AssessOptions(Path("demo"), pdf=pdf))
    return 0


def _put_out(selection: Selection, options: AssessOptions) -> int:
    assessment = assess(selection, _names(selection, options.candidate))
    if options.json:
        sys.stdout.buffer.write(results_json(assessment))
    else:
        print("\n".join(table_lines(assessment)))
    sys.stdout.flush()
    if options.pdf is not None:
        _write_report(selection, assessment, options.pdf)
    if options.csv is not None:
        _write_tables(selection, assessment, options.csv)
    return _status(selection, assessment, options)


def _names(selection: Selection, name: str | None) -> Collection[str] | None:
    if name is None:
        return None
    names = [candidate.name for candidate in selection.candidates]
    if name not in names:
        known = ", ".join(repr(each) for each in names) or "none"
        raise InvalidSelection([Fault("--candidate", f"must be one of: {known}; got {name!r}")])
    return [name]


def _write_report(selection: Selection, assessment: Assessment, path: Path) -> None:
    from app.bootstrap import name_missing_libraries

    name_missing_libraries()
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    os.environ.setdefault("QT_HASH_SEED", "0")  # equal input, equal file
    from app.report.pdf import report_pdf

    write_or_refuse(path, report_pdf(selection, assessment))


def _write_tables(selection: Selection, assessment: Assessment, folder: Path) -> None:
    try:
        write_tables(selection, assessment, folder)
    except OSError as error:
        raise Refusal(f"{folder} cannot be written: {error.strerror or error}") from None


def _status(selection: Selection, assessment: Assessment, options: AssessOptions) -> int:
    """1 when the candidate that counts fails: the one asked for, else the chosen one, else any."""
    counts = options.candidate or selection.chosen
    failing = {"undersized", "not assessed"} if options.strict else {"undersized"}
    verdicts = [
        result.verdict for result in assessment.candidates if not counts or result.name == counts
    ]
    return UNDERSIZED if failing.intersection(verdicts) else 0


def table_lines(assessment: Assessment) -> list[str]:
    """The verdict table as text; its last line counts the four verdicts over all rows."""
    lines: list[str] = []
    for result in assessment.candidates:
        lines += [_headline(result), *_aligned([_row(check) for check in result.checks]), ""]
    if not assessment.candidates:
        lines += ["No candidate yet. Wanted:", *_aligned(map(_wanted, assessment.wanted)), ""]
    lines += [f"note: {warning.text}" for warning in assessment.warnings]
    counts = Counter(check.verdict for r in assessment.candidates for check in r.checks)
    return [*lines, ", ".join(f"{counts[verdict]} {verdict}" for verdict in _COUNTED)]


def _headline(result: CandidateResult) -> str:
    remark = f" ({result.remark})" if result.remark else ""
    return f"{result.name}: {result.verdict}{remark}"


def _row(check: Check) -> Sequence[str]:
    headroom = "" if check.headroom_pct is None else f"{check.headroom_pct:.1f} %"
    where = check.reason or "" if check.corner is None else _corner(check)
    return (
        "  " + check.id,
        check.verdict,
        headroom,
        _amount(check.applied, check.unit),
        "of" if check.allowed is not None else "",
        _amount(check.allowed, check.unit),
        check.position or "",
        where,
    )


def _amount(value: float | None, unit: str) -> str:
    return "" if value is None else shown(value, unit, digits=4)


def _corner(check: Check) -> str:
    corner = check.corner
    assert corner is not None
    return (
        f"{corner.voltage_V:g} V, {corner.frequency_Hz:g} Hz, load × {corner.load_factor:g}, "
        f"{corner.ambient_C:g} °C"
    )


def _wanted(wanted: Wanted) -> Sequence[str]:
    sign = "≤" if wanted.at_most else "≥"
    usual = "" if wanted.next_class is None else f"usual class {wanted.next_class:g} {wanted.unit}"
    return "  " + wanted.id, sign, shown(wanted.value, wanted.unit, digits=4), usual


def _aligned(rows: Collection[Sequence[str]] | map[Sequence[str]]) -> list[str]:
    rows = list(rows)
    widths = [max(map(len, column)) for column in zip(*rows, strict=True)] if rows else []
    return [
        "  ".join(cell.ljust(width) for cell, width in zip(row, widths, strict=True)).rstrip()
        for row in rows
    ]
