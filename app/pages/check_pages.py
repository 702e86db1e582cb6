"""Which page a check belongs to, and where a click on it leads.

A check whose page does not exist in the window stands on Candidates, whose sheets show every
rating with its applied value. If it is not assessed and no entry would help, it waits for
something that is not there yet, or does not apply: it then stands on Report alone, which lists
it, so that it does not hide what the ratings on Candidates come to.
"""

from __future__ import annotations

from collections.abc import Collection

from engine.checks import VERDICTS, Assessment, CandidateResult, Check, Verdict
from engine.ratings import Diode, Igbt, Switch, Thyristor
from engine.selection import Selection
from parts_library.rating_sheet import SHEETS, Kind

DUTY, CANDIDATES, SNUBBER, TURN_OFF, LINK, HEAT, ENVELOPE, REPORT = (
    "Duty",
    "Candidates",
    "Snubber",
    "Turn-off",
    "Link",
    "Heat",
    "Envelope",
    "Report",
)

_PAGE_OF_STEM = {
    **dict.fromkeys(("dvdt", "didt", "didt_recovery", "overshoot"), SNUBBER),
    **dict.fromkeys(
        ("tq_dead", "tq_commutation", "I_L", "I_H", "gate_pulse", "blanking"), TURN_OFF
    ),
    **dict.fromkeys(("I_TSM", "I_FSM", "I2t", "tsc"), LINK),
    "Tvj": HEAT,
}
_PAGE_OF_PART = {
    "snubber": SNUBBER,
    "commutation": TURN_OFF,
    "fuse": LINK,
    "link_capacitor": LINK,
    "life": HEAT,
    "probability": ENVELOPE,
}

_ENTRY_OF_STEM = {"gate_pulse": "gating.pulse.form", "blanking": "gating.blanking_s"}
"""Checks that are mended by an entry of the duty rather than by another rating."""


def page_of(check_id: str) -> str:
    """The page that a check belongs to when every page exists."""
    part, _, stem = check_id.partition(".")
    return _PAGE_OF_PART.get(part) or _PAGE_OF_STEM.get(stem, CANDIDATES)


def shown_on(check: Check, pages: Collection[str]) -> str:
    """The page among those of the window that shows the check's verdict."""
    page = page_of(check.id)
    if page in pages:
        return page
    waits = check.verdict == "not assessed" and not check.needs
    return REPORT if waits else CANDIDATES


def worst_by_page(result: CandidateResult, pages: Collection[str]) -> dict[str, Verdict]:
    """The worst verdict of each page that has a check. Report carries none: it counts."""
    worst: dict[str, Verdict] = {}
    for check in result.checks:
        page = shown_on(check, pages)
        if page != REPORT and check.applies:
            worst[page] = min(check.verdict, worst.get(page, "adequate"), key=VERDICTS.index)
    return worst


def missing_count(result: CandidateResult | None) -> int:
    """Number of entries that would let checks be assessed which are not."""
    checks = result.checks if result is not None else ()
    return len({key for check in checks for key in check.needs})


def chosen_result(assessment: Assessment) -> CandidateResult | None:
    """The chosen candidate's result."""
    found = (one for one in assessment.candidates if one.name == assessment.chosen)
    return next(found, None)


def deciding_check(result: CandidateResult) -> Check | None:
    """Of the checks that have the candidate's verdict, the one with the least headroom.

    Of those that are not assessed, the first that an entry would help.
    """
    alike = (check for check in result.checks if check.verdict == result.verdict)
    return min(alike, key=_urgency, default=None)


def _urgency(check: Check) -> tuple[bool, float]:
    hopeless = check.verdict == "not assessed" and not check.needs
    return hopeless, float("-inf") if check.headroom_pct is None else check.headroom_pct


def key_of_check(check: Check, selection: Selection, candidate_name: str) -> str:
    """The entry to look at: what the check needs, else the rating it is about.

    '' where the candidate does not exist any more.
    """
    names = [candidate.name for candidate in selection.candidates]
    if candidate_name not in names:
        return ""
    index = names.index(candidate_name)
    wanted = check.needs[0] if check.needs else _rating_key(check.id, selection, index)
    if wanted.partition(".")[0] in ("switch", "diode"):
        return f"candidates.{index}.{wanted}"
    return wanted


def _rating_key(check_id: str, selection: Selection, index: int) -> str:
    part, _, stem = check_id.partition(".")
    if stem in _ENTRY_OF_STEM:
        return _ENTRY_OF_STEM[stem]
    if part not in ("switch", "diode"):
        return part
    record = getattr(selection.candidates[index], part)
    return f"{part}.{_field(record, stem)}"


def _field(record: Switch | Diode, stem: str) -> str:
    """The rating that a check compares."""
    kinds: dict[type, Kind] = {Thyristor: "thyristor", Igbt: "igbt", Diode: "diode"}
    sheet = SHEETS[kinds[type(record)]]
    return next((rating.key for rating in sheet if stem in rating.checks), "")
