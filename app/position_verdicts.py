"""What the chosen candidate's verdict comes to at each of the six positions."""

from __future__ import annotations

from app.pages.check_pages import chosen_result
from app.picture import Picture
from engine.bridge import POSITIONS
from engine.checks import VERDICTS, Check, Verdict
from engine.duty import Duty

PositionVerdicts = tuple[Verdict | None, ...]
NONE: PositionVerdicts = (None,) * 6


def position_verdicts(picture: Picture) -> PositionVerdicts:
    """The worst verdict at each of T1..T6, `None` where it is not known.

    A row names the position at which it is worst. Where all branches are alike, so are all
    positions, and the row holds for each. Else a position of which some row names another one
    as worse is left without a verdict: it may be as bad or better.
    """
    result = chosen_result(picture.assessment)
    checks = [check for check in result.checks if not _waits(check)] if result else []
    if not checks:
        return NONE
    alike = _is_balanced(picture.duty)
    return tuple(_verdict_at(name, checks, alike) for name in POSITIONS)


def _verdict_at(position: str, checks: list[Check], alike: bool) -> Verdict | None:
    worst = min((check.verdict for check in checks), key=VERDICTS.index)
    here = [check.verdict for check in checks if alike or check.position in (None, position)]
    known: Verdict = min(here, key=VERDICTS.index, default="adequate")
    return known if known == worst else None


def _waits(check: Check) -> bool:
    """Not assessed for want of something that no entry can give."""
    return check.verdict == "not assessed" and not check.needs


def _is_balanced(duty: Duty) -> bool:
    branches = (duty.resistance_ohm, duty.inductance_H, duty.emf_peak_V)
    return all(len(set(values)) == 1 for values in branches)
