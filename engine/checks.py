"""The form of a verdict: one row a rating, a candidate's rows together, the whole assessment.

Field names are those of the results contract.
"""

from __future__ import annotations

from typing import Literal

from engine.stress import BridgeStress, Result

Verdict = Literal["adequate", "tight", "undersized", "not assessed"]
VERDICTS: tuple[Verdict, ...] = ("undersized", "tight", "not assessed", "adequate")
"""Worst first."""


class Corner(Result, frozen=True, kw_only=True):
    """One combination of extremes, at which a row is at its worst."""

    voltage_V: float
    frequency_Hz: float
    load_factor: float
    ambient_C: float


class Check(Result, frozen=True, kw_only=True):
    """One rating against what the duty applies to it.

    `needs` names the entries that would let a 'not assessed' row be assessed, as keys below
    the candidate (`switch.tq_s`) or of the document (`cooling.sink_K_per_W`). `how` is the
    law with the numbers put in.
    """

    id: str
    rating: str
    unit: str
    verdict: Verdict
    applied: float | None = None
    allowed: float | None = None
    fraction: float | None = None
    headroom_pct: float | None = None
    position: str | None = None
    would_do: float | None = None
    reason: str | None = None
    corner: Corner | None = None
    at_least: bool = False
    """Whether applied is what is needed and allowed what there is (times, latching, holding)."""
    basis: str | None = None
    applies: bool = True
    """False where the rating does not matter to this duty: nothing is missing then."""
    needs: tuple[str, ...] = ()
    how: str = ""


class Losses(Result, frozen=True, kw_only=True):
    """Loss of one device at the corner of its highest junction temperature, by cause."""

    on_state_W: float
    switching_W: float
    recovery_W: float
    leakage_W: float = 0.0


class CandidateResult(Result, frozen=True, kw_only=True):
    """All rows of one candidate, and what they come to."""

    name: str
    verdict: Verdict
    remark: str
    """Stands beside the verdict's word: 'without its commutation circuit', what is missing."""
    weakest_basis: str | None
    switch_loss_W: float | None
    diode_loss_W: float | None
    switch_losses: Losses | None
    diode_losses: Losses | None
    junction_peak_C: float | None
    checks: tuple[Check, ...]


class Wanted(Result, frozen=True, kw_only=True):
    """What one rating must at least be for this duty, before any candidate exists."""

    id: str
    rating: str
    value: float
    unit: str
    position: str | None
    corner: Corner
    at_most: bool = False
    """True where a smaller rating is the better one (t_q)."""
    next_class: float | None = None
    """The next usual class above, where the trade has classes."""
    how: str = ""


class Warning(Result, frozen=True, kw_only=True):
    """Something the user should know that is no verdict."""

    id: str
    key: str
    text: str


class Assessment(Result, frozen=True, kw_only=True):
    """Everything that is known of a selection."""

    program: str
    version: str
    nominal: BridgeStress | None
    candidates: tuple[CandidateResult, ...]
    wanted: tuple[Wanted, ...]
    warnings: tuple[Warning, ...]
    rule_set: str
    fingerprint: str
    chosen: str
