"""All rows of one candidate, and what they come to."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from engine.checks import CandidateResult, Check, Losses, Verdict
from engine.corners import SolvedDuty
from engine.losses import DeviceLoss
from engine.ratings import Igbt, Thyristor
from engine.rule_sets import RuleSet
from engine.selection import Candidate
from engine.stress_table import Array
from engine.verdicts import diode, igbt, thyristor
from engine.verdicts.case import Case, Heat, case_of
from engine.verdicts.row import BASES, Row, check_of

ROWS: dict[type, tuple[Row, ...]] = {
    Thyristor: (*thyristor.ROWS, *diode.ROWS),
    Igbt: (*igbt.ROWS, *diode.ROWS),
}

NEEDED_BY_EVERY_SELECTION = frozenset(
    {
        "switch.V_DRM",
        "switch.V_CES",
        "switch.I_TAV",
        "switch.I_TRMS",
        "switch.I_C",
        "switch.I_CRM",
        "switch.tq_dead",
        "switch.Tvj",
        "diode.V_RRM",
        "diode.I_FAV",
        "diode.I_FRMS",
        "diode.Tvj",
    }
)
"""Rows whose missing rating leaves the whole candidate not assessed."""

WITHOUT_CIRCUIT = "without its commutation circuit"


def candidate_result(candidate: Candidate, solved: SolvedDuty, rules: RuleSet) -> CandidateResult:
    """Judge one candidate in all six positions at all corners."""
    case = case_of(candidate, solved, rules)
    checks = tuple(check_of(row, case) for row in ROWS[type(candidate.switch)])
    hottest = _hottest(case.heat)
    return CandidateResult(
        name=candidate.name,
        verdict=verdict_of(checks),
        remark=_remark(case, checks),
        weakest_basis=weakest_basis(checks),
        switch_loss_W=hottest.switch_W,
        diode_loss_W=hottest.diode_W if case.has_diodes else None,
        switch_losses=hottest.switch,
        diode_losses=hottest.diode if case.has_diodes else None,
        junction_peak_C=hottest.junction_C,
        checks=checks,
    )


def verdict_of(checks: Iterable[Check]) -> Verdict:
    """Undersized if any row is; else tight if any is; else not assessed if one that every
    selection needs is missing a rating; else adequate.
    """
    checks = tuple(checks)
    verdicts = {check.verdict for check in checks}
    if "undersized" in verdicts:
        return "undersized"
    if "tight" in verdicts:
        return "tight"
    lacking = any(check.needs and check.id in NEEDED_BY_EVERY_SELECTION for check in checks)
    return "not assessed" if lacking else "adequate"


def weakest_basis(checks: Sequence[Check]) -> str | None:
    """'a typical t_q': the row that rests on the weakest ground, the surest grounds unsaid."""
    unsure = [check for check in checks if check.basis not in (None, "maximum")]
    if not unsure:
        return None
    weakest = max(unsure, key=lambda check: BASES.index(str(check.basis)))
    if weakest.basis == "read from curve":
        return f"{weakest.rating} read from a curve"
    article = "an" if weakest.basis == "assumed" else "a"
    return f"{article} {weakest.basis} {weakest.rating}"


def _remark(case: Case, checks: Sequence[Check]) -> str:
    forced = isinstance(case.candidate.switch, Thyristor) and case.solved.base.forced.any()
    lacking = [check.rating for check in checks if check.needs]
    counted = f"{len(lacking)} not assessed: {', '.join(lacking)}" if lacking else ""
    return "; ".join(part for part in (WITHOUT_CIRCUIT if forced else "", counted) if part)


@dataclass(frozen=True, slots=True)
class _Hottest:
    """Losses of one switch and one diode, the worst positions, where the junction is hottest."""

    junction_C: float | None = None
    switch_W: float | None = None
    diode_W: float | None = None
    switch: Losses | None = None
    diode: Losses | None = None


def _hottest(heat: Heat | None) -> _Hottest:
    if heat is None or heat.temperatures.runaway.any():
        return _Hottest()
    found = heat.temperatures
    point = int(found.junction_C.max(axis=1).argmax())
    loss_W = found.loss_W[point]
    return _Hottest(
        junction_C=float(found.junction_C[point].max()),
        switch_W=float(loss_W[:6].max()),
        diode_W=float(loss_W[6:].max()),
        switch=_losses(heat.switches, heat.switch_junction_C, point, int(loss_W[:6].argmax())),
        diode=_losses(heat.diodes, heat.diode_junction_C, point, int(loss_W[6:].argmax())),
    )


def _losses(device: DeviceLoss, junction_C: Array, point: int, position: int) -> Losses:
    def of(values: Array) -> float:
        return float(np.asarray(values)[point, position])

    return Losses(
        on_state_W=of(device.on_state.at(junction_C)),
        switching_W=of(device.switching.at(junction_C)),
        recovery_W=of(device.recovery.at(junction_C)),
        leakage_W=of(device.leakage_at(junction_C)),
    )
