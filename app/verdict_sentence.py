"""The verdict of the chosen candidate, and everything else the verdict line says, in words."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from app.entry_names import name_of
from app.looked_at import LookedAt, looked_at_corner
from app.pages.check_pages import chosen_result, deciding_check, key_of_check
from app.picture import Picture, Problem
from engine.checks import Assessment, CandidateResult, Check, Corner, Verdict, Wanted
from engine.quantities import shown

WANTED_SHOWN = 4

_PLAIN = {
    "switch.Tvj": "junction",
    "diode.Tvj": "diode junction",
    "switch.tq_dead": "dead interval",
}


@dataclass(frozen=True, slots=True)
class Statement:
    """What the verdict line says, and where a click on it leads."""

    verdict: Verdict | None = None
    head: str = ""
    """Printed bold, in the verdict's colour."""
    text: str = ""
    key: str = ""
    looked_at: LookedAt | None = None

    def __str__(self) -> str:
        return self.head + self.text


def statement_of(picture: Picture) -> Statement:
    """The chosen candidate's verdict and its worst check; without one, what is wanted."""
    assessment = picture.assessment
    result = chosen_result(assessment)
    worst = deciding_check(result) if result is not None else None
    if result is None or worst is None:
        return _without_candidate(assessment)
    return Statement(
        verdict=result.verdict,
        head=_head(result, worst),
        text=_tail(result, worst),
        key=key_of_check(worst, picture.selection, result.name),
        looked_at=None if worst.corner is None else looked_at_corner(worst.corner, worst.position),
    )


def statement_of_problems(problems: Sequence[Problem]) -> Statement:
    """Why the results shown are older than the entries."""
    if not problems:
        return Statement(text="stale: a new result is on its way")
    first, more = problems[0], len(problems) - 1
    name = f"{name_of(first.key)}: " if first.key else ""
    others = f" (and {more} more)" if more else ""
    return Statement(head="Stale", text=f" – {name}{first.text}{others}", key=first.key)


def statement_of_missing(missing: Sequence[str]) -> Statement:
    """What has to be entered before anything can be computed."""
    if not missing:
        return Statement()
    names = ", ".join(name_of(key) for key in missing)
    return Statement(head="Not assessed:", text=f" needs {names}", key=missing[0])


def _head(result: CandidateResult, worst: Check) -> str:
    return f"{worst.position} {result.verdict}" if worst.position else result.verdict


def _tail(result: CandidateResult, worst: Check) -> str:
    remarks = [part for part in result.remark.split("; ") if part]
    beside = "".join(f" {part}" for part in remarks if part.startswith("without"))
    behind = "".join(f"; {part}" for part in remarks if not part.startswith("without"))
    basis = f", on {result.weakest_basis}" if result.weakest_basis else ""
    return f"{beside}{basis}: {sentence_of(worst)}{behind}"


def sentence_of(check: Check) -> str:
    """'junction 131 °C, 125 °C allowed, at 594 V, 90 Hz, 45 °C'."""
    if check.applied is None or check.allowed is None:
        return f"{check.rating} {check.reason}"
    name = _PLAIN.get(check.id, check.rating)
    applied, allowed = told_apart(check.applied, check.allowed, check.unit)
    if check.at_least:
        figures = f"{applied} needed, {allowed} there"
    else:
        figures = f"{applied}, {allowed} allowed"
    reason = f" ({check.reason})" if check.reason else ""
    return f"{name} {figures}{_place(check.corner)}{reason}"


def told_apart(first: float, second: float, unit: str) -> tuple[str, str]:
    """Both in three figures, or in as many more as show that they differ."""
    texts = rounded(first, unit), rounded(second, unit)
    for figures in range(4, 8):
        if first == second or texts[0] != texts[1]:
            break
        texts = rounded(first, unit, figures), rounded(second, unit, figures)
    return texts


def rounded(value: float, unit: str, figures: int = 3) -> str:
    """'712 V', '131 °C', '20 µs': in three figures, but no figure before the point is lost."""
    whole = len(f"{abs(value):.0f}")
    return shown(value, unit, max(figures, whole))


def _place(corner: Corner | None) -> str:
    return f", at {corner_in_words(corner)}" if corner is not None else ""


def corner_in_words(corner: Corner) -> str:
    """'594 V, 90 Hz, 45 °C', with the load factor where it is not 1."""
    parts = [rounded(corner.voltage_V, "V"), rounded(corner.frequency_Hz, "Hz")]
    if corner.load_factor != 1.0:
        parts.append(f"{corner.load_factor:g} × load")
    return ", ".join([*parts, rounded(corner.ambient_C, "C")])


def _without_candidate(assessment: Assessment) -> Statement:
    head = "No candidate chosen." if assessment.candidates else "No candidate yet."
    wanted = assessment.wanted[:WANTED_SHOWN]
    text = f" Wanted: {', '.join(_wanted_in_words(one) for one in wanted)}" if wanted else ""
    return Statement(head=head, text=text, key="candidates")


def _wanted_in_words(wanted: Wanted) -> str:
    value = wanted.value if wanted.next_class is None else wanted.next_class
    return f"{wanted.rating} {'≤' if wanted.at_most else '≥'} {rounded(value, wanted.unit)}"
