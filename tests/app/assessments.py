"""Made-up results for tests of what the window says about them; nothing here is computed."""

from __future__ import annotations

from typing import Any

from app.looked_at import LookedAt
from app.picture import Picture
from engine.checks import Assessment, CandidateResult, Check, Corner, Verdict, Wanted
from engine.ratings import Thyristor
from engine.selection import (
    FORMAT,
    Candidate,
    Cooling,
    Gating,
    Load,
    Selection,
    Supply,
)

CORNER = Corner(voltage_V=594.0, frequency_Hz=90.0, load_factor=1.0, ambient_C=45.0)

SELECTION = Selection(
    format=FORMAT,
    version=1,
    supply=Supply(voltage_V=540.0, voltage_low_V=486.0, voltage_high_V=594.0),
    gating=Gating(
        conduction_deg=120.0, frequency_Hz=50.0, frequency_low_Hz=5.0, frequency_high_Hz=90.0
    ),
    load=Load(connection="star", resistance_ohm=9.0, inductance_H=0.012),
    cooling=Cooling(sink_K_per_W=0.08),
    candidates=(
        Candidate(name="first", switch=Thyristor()),
        Candidate(name="second", switch=Thyristor()),
    ),
    chosen="second",
)


def check(id: str, rating: str, verdict: Verdict, unit: str = "V", **figures: Any) -> Check:
    return Check(id=id, rating=rating, unit=unit, verdict=verdict, **figures)


BLOCKING = check(
    "switch.V_DRM",
    "V_DRM",
    "adequate",
    applied=594.0,
    allowed=720.0,
    headroom_pct=17.5,
    position="T1",
    corner=CORNER,
)
JUNCTION = check(
    "switch.Tvj",
    "T_vj",
    "undersized",
    "C",
    applied=131.0,
    allowed=125.0,
    headroom_pct=-7.5,
    position="T3",
    corner=CORNER,
)
DEAD_INTERVAL = check(
    "switch.tq_dead",
    "t_q",
    "tight",
    "s",
    applied=40e-6,
    allowed=43e-6,
    headroom_pct=7.0,
    position="T1",
    corner=CORNER,
    at_least=True,
)
MISSING = check(
    "switch.Tvj",
    "T_vj",
    "not assessed",
    "C",
    reason="needs R_th(j-c) of the switch",
    needs=("switch.Rth_jc_K_per_W",),
)
WAITING = check("switch.dvdt", "(dv/dt)cr", "not assessed", "V/s", reason="waits for the snubber")


def result(verdict: Verdict, *checks: Check, **said: Any) -> CandidateResult:
    """A result of the candidate 'second'."""
    words = {"remark": "", "weakest_basis": None, **said}
    return CandidateResult(
        name="second",
        verdict=verdict,
        switch_loss_W=None,
        diode_loss_W=None,
        switch_losses=None,
        diode_losses=None,
        junction_peak_C=None,
        checks=checks,
        **words,
    )


def wanted(id: str, rating: str, value: float, unit: str, **more: Any) -> Wanted:
    return Wanted(
        id=id, rating=rating, value=value, unit=unit, position="T1", corner=CORNER, **more
    )


WANTED = (
    wanted("switch.V_DRM", "V_DRM", 1188.0, "V", next_class=1200.0),
    wanted("switch.I_TAV", "I_T(AV)", 16.0, "A"),
    wanted("switch.tq_dead", "t_q", 1.2e-3, "s", at_most=True),
)


def picture(
    *results: CandidateResult,
    chosen: str = "second",
    selection: Selection = SELECTION,
) -> Picture:
    """A picture whose state, stress and waveforms are not there."""
    assessment = Assessment(
        program="switchwright",
        version="",
        nominal=None,
        candidates=results,
        wanted=WANTED,
        warnings=(),
        rule_set="common practice",
        fingerprint="",
        chosen=chosen,
    )
    nothing: Any = None
    return Picture(selection, nothing, LookedAt(), CORNER, nothing, nothing, nothing, assessment)
