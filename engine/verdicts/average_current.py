"""Average currents against their ratings, by equal loss.

I_T(AV) and I_F(AV) are stated for a half-sine, I_C for a direct current, each at a case
temperature. What is allowed is the average of the real wave that causes the same loss
V_0·I + r·I_rms² as the rated wave. A case hotter than the rating's scales that loss by
(T_vj,max − T_case)/(T_vj,max − T_c); a cooler one does not raise it.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import partial
from typing import TypeVar

import numpy as np

from engine.losses import on_state_drop
from engine.ratings import condition
from engine.stress_table import Array
from engine.verdicts.case import Case
from engine.verdicts.comparison import Comparison, Place
from engine.verdicts.row import Finding, Judge, Open, Row
from engine.verdicts.wording import celsius, named, number, quantity

Number = TypeVar("Number", float, Array)

HALF_SINE_FORM = np.pi / 2.0
"""Rms over average of a half-sine."""
DIRECT_FORM = 1.0
"""The same of a direct current."""


def equal_loss_average(
    threshold_V: float, slope_ohm: float, form: Number, loss_W: Number
) -> Number:
    """Average of a wave of some form factor that causes a loss: V_0·I + r·(form·I)² = loss."""
    if threshold_V == 0.0:
        return (loss_W / slope_ohm) ** 0.5 / form
    square = 4.0 * slope_ohm * form**2 * loss_W
    return 2.0 * loss_W / (threshold_V + (threshold_V**2 + square) ** 0.5)


def cooling_share(case_C: Array, rated_case_C: float, Tvj_max_C: float) -> Array:
    """Share of the rated loss that a case hotter than the rating's still allows, at most 1."""
    return np.clip((Tvj_max_C - case_C) / (Tvj_max_C - rated_case_C), 0.0, 1.0)


def form_factor(average: Array, rms: Array) -> Array:
    """Rms over average, 1 where there is no current."""
    carries = average > 0.0
    return np.where(carries, rms / np.where(carries, average, 1.0), 1.0)


@dataclass(frozen=True, slots=True)
class Rated:
    """A rated average current with its wave and its case temperature."""

    current_A: float
    form: float
    wave: str
    case_C: float
    Tvj_max_C: float
    threshold_V: float
    slope_ohm: float

    def loss_W(self, current_A: float, form: float) -> float:
        return self.threshold_V * current_A + self.slope_ohm * (form * current_A) ** 2

    @property
    def rated_W(self) -> float:
        return self.loss_W(self.current_A, self.form)


@dataclass(frozen=True, slots=True, eq=False)
class Compared:
    """The bridge's own wave beside the rated one, `(n_points, 6)`."""

    rated: Rated
    fraction: float
    average_A: Array
    form: Array
    case_C: Array
    share: Array
    equal_A: Array

    def rating_for(self, target: float, place: Place) -> float | None:
        """The rating whose equal-loss average, times the fraction, is `target`."""
        share = place.of(self.share)
        if share == 0.0:
            return None
        loss_W = self.rated.loss_W(target / self.fraction, place.of(self.form)) / share
        return equal_loss_average(
            self.rated.threshold_V, self.rated.slope_ohm, self.rated.form, loss_W
        )

    def how(self, place: Place) -> str:
        own = (
            f"average {quantity(place.of(self.average_A), 'A')}, "
            f"form factor {number(place.of(self.form))}"
        )
        if np.isinf(place.of(self.case_C)):
            return f"{own}; no case temperature at which losses and cooling agree"
        equal_A = place.of(self.equal_A)
        allowed = f"{number(self.fraction)} = {quantity(equal_A * self.fraction, 'A')}"
        return (
            f"{own}; {self._rated_loss()}{self._hot_case(place)}; with this form factor the same "
            f"loss at {quantity(equal_A, 'A')}, × {allowed}"
        )

    def _rated_loss(self) -> str:
        rated, current = self.rated, quantity(self.rated.current_A, "A")
        rms = current if rated.form == 1.0 else f"{number(rated.form)} × {current}"
        return (
            f"{current} {rated.wave} at a case of {celsius(rated.case_C)}: "
            f"{number(rated.threshold_V)} V × {current} + {quantity(rated.slope_ohm, 'ohm')} × "
            f"({rms})² = {quantity(rated.rated_W, 'W')}"
        )

    def _hot_case(self, place: Place) -> str:
        share = place.of(self.share)
        if share == 1.0:
            return ""
        limit, rated = celsius(self.rated.Tvj_max_C), celsius(self.rated.case_C)
        own = celsius(place.of(self.case_C))
        return f", × ({limit} − {own} case)/({limit} − {rated}) = × {number(share)}"


def average_by_loss(form: float, wave: str) -> Judge:
    """Judge of an average current whose rating is stated for a wave of some form factor.

    The row's first condition is the case temperature of the rating.
    """
    return partial(_average_by_loss, form=form, wave=wave)


def _average_by_loss(case: Case, row: Row, form: float, wave: str) -> Finding:
    device = row.device(case)
    Tvj_max_C, case_C = device.Tvj_max_C, condition(device, row.conditions[0])
    assert Tvj_max_C is not None
    threshold_V, slope_ohm = on_state_drop(device)
    if case_C >= Tvj_max_C:
        key = f"{row.part}.{row.conditions[0]}"
        return Open(f"needs {named(key)} below T_vj max, {celsius(Tvj_max_C)}", (key,))
    if threshold_V == slope_ohm == 0.0:
        key = f"{row.part}.{row.keys[1]}"
        return Open(f"needs {named(key)} above 0, or a slope resistance", (key,))
    current_A = row.compared(case)
    rated = Rated(current_A, form, wave, case_C, Tvj_max_C, threshold_V, slope_ohm)
    return _comparison(case, row, rated)


def _comparison(case: Case, row: Row, rated: Rated) -> Comparison:
    compared = _compared(case, row, rated)
    return Comparison(
        points=case.solved.thermal.points,
        applied=compared.average_A,
        allowed=compared.equal_A * compared.fraction,
        fraction=compared.fraction,
        how=compared.how,
        rating_for=compared.rating_for,
        ambient="high",
        nothing_allowed="the case is as hot as T_vj max",
    )


def _compared(case: Case, row: Row, rated: Rated) -> Compared:
    heat, table = case.heat, case.solved.thermal
    assert heat is not None
    if row.part == "switch":
        average_A, rms_A, case_C = table.switch_average_A, table.switch_rms_A, heat.switch_case_C
    else:
        average_A, rms_A, case_C = table.diode_average_A, table.diode_rms_A, heat.diode_case_C
    form = form_factor(average_A, rms_A)
    share = cooling_share(case_C, rated.case_C, rated.Tvj_max_C)
    loss_W = share * rated.rated_W
    return Compared(
        rated=rated,
        fraction=row.fraction(case),
        average_A=average_A,
        form=form,
        case_C=case_C,
        share=share,
        equal_A=equal_loss_average(rated.threshold_V, rated.slope_ohm, form, loss_W),
    )
