"""What each rating must at least be for a duty, before any candidate exists.

The same stresses and permitted fractions as in the verdict rows, solved for the rating that is
just adequate. Where a row depends on the device itself (the form factor of its loss, the case,
the overshoot of its fall time) the stated figure is the simplest one, and `how` says so.
"""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import partial
from typing import Literal

import numpy as np

from engine.bridge import POSITIONS
from engine.checks import Corner, Wanted
from engine.corners import SolvedDuty
from engine.rule_sets import RuleSet
from engine.stress_table import Array, StressTable
from engine.verdicts.comparison import ROUNDING_PCT
from engine.verdicts.wording import number, quantity

Kind = Literal["thyristor", "igbt"]

VOLTAGE_CLASSES_V = (
    *range(200, 2000, 200),
    *(2000, 2200, 2500, 2800, 3200, 3600, 4200, 4500, 5200, 6500),
)
"""Classes in which thyristors and diodes are sold (common practice, no source)."""
IGBT_CLASSES_V = (600, 650, 1200, 1700, 2500, 3300, 4500, 6500)
"""Classes in which IGBTs are sold (common practice, no source)."""


Stress = Callable[[StressTable, RuleSet], Array]


@dataclass(frozen=True, slots=True)
class _Want:
    """One line: which stress becomes which rating. `kind`: whose permitted fraction holds.

    Thermal stresses are looked up at the load factors of the overload cycle, at high ambient;
    the others at light, nominal and overload.
    """

    id: str
    rating: str
    unit: str
    stress: Stress
    words: str
    thermal: bool = False
    classes: Sequence[int] = ()
    kind: str = "switch"


def wanted_of(solved: SolvedDuty, rules: RuleSet, kinds: Sequence[Kind]) -> tuple[Wanted, ...]:
    """Wanted ratings for some kinds of switch and the feedback diode, weightiest first."""
    lines: list[Wanted] = []
    for kind in kinds:
        own = [_wanted(want, solved, rules) for want in _SWITCH[kind]]
        own[2:2] = _wanted_tq(solved, rules) if kind == "thyristor" else []
        lines += own
    if solved.duty.feedback_diodes:
        lines += [_wanted(want, solved, rules) for want in _DIODE]
    return tuple(lines)


def _wanted(want: _Want, solved: SolvedDuty, rules: RuleSet) -> Wanted:
    table = solved.thermal if want.thermal else solved.instantaneous
    stress = want.stress(table, rules)
    point, position = _first_of(stress, np.nanmax(stress))
    applied = float(stress[point, position])
    fraction = rules.fraction(want.id, want.kind)
    value = applied / (fraction * rules.adequate_share)
    return Wanted(
        id=want.id,
        rating=want.rating,
        value=value,
        unit=want.unit,
        position=POSITIONS[position] if stress.shape[1] > 1 else None,
        corner=_corner(solved, table, point, "high" if want.thermal else "nominal"),
        next_class=_next_class(value, want.classes),
        how=f"{want.words} {quantity(applied, want.unit)}/({number(fraction)} × "
        f"{number(rules.adequate_share)}) = {quantity(value, want.unit)}",
    )


def _first_of(values: Array, extreme: float) -> tuple[int, int]:
    """The first place that comes as near to the extreme as rounding allows."""
    near = np.abs(values - extreme) <= abs(extreme) * ROUNDING_PCT / 100.0
    point, position = np.argwhere(near)[0]
    return int(point), int(position)


def _corner(
    solved: SolvedDuty, table: StressTable, point: int, ambient: Literal["nominal", "high"]
) -> Corner:
    points = table.points
    return Corner(
        voltage_V=float(points.voltage_V[point]),
        frequency_Hz=float(points.frequency_Hz[point]),
        load_factor=float(points.load_factor[point]),
        ambient_C=getattr(solved.duty.ambient_C, ambient),
    )


def _next_class(value: float, classes: Sequence[int]) -> float | None:
    index = bisect_left(classes, value * (1.0 - ROUNDING_PCT / 100.0))
    return float(classes[index]) if index < len(classes) else None


def _wanted_tq(solved: SolvedDuty, rules: RuleSet) -> list[Wanted]:
    """The longest t_q that is still adequate; none where no position carries current."""
    table = solved.instantaneous
    there_s = table.turn_off_time_s
    if np.isnan(there_s).all():
        return []
    point, position = _first_of(there_s, np.nanmin(there_s))
    factors = [rules.factor("tq")]
    factors += [rules.factor("tq_low_reverse_voltage")] if solved.duty.feedback_diodes else []
    there = float(there_s[point, position])
    value = there * rules.adequate_share / float(np.prod(factors))
    return [
        Wanted(
            id="switch.tq_dead",
            rating="t_q",
            value=value,
            unit="s",
            position=POSITIONS[position],
            corner=_corner(solved, table, point, "high"),
            at_most=True,
            how=f"{quantity(there, 's')} × {number(rules.adequate_share)}/"
            f"({' × '.join(number(one) for one in factors)}) = {quantity(value, 's')}",
        )
    ]


def _link(table: StressTable, rules: RuleSet) -> Array:
    return table.points.voltage_V[:, None]


def _link_peak(table: StressTable, rules: RuleSet) -> Array:
    return _link(table, rules) * rules.factor("transient_overshoot")


def _column(name: str) -> Stress:
    return lambda table, rules: getattr(table, name)


def _nominal_peak(table: StressTable, rules: RuleSet) -> Array:
    return np.where(table.points.load_factor[:, None] == 1.0, table.switch_peak_A, np.nan)


_peak = partial(_Want, unit="V", stress=_link_peak, words="link voltage × transient factor")
_steady = partial(_Want, unit="V", stress=_link, words="link voltage")
_average = partial(
    _Want,
    unit="A",
    words="real average, its form factor and the case temperature left out,",
    thermal=True,
)
_rms = partial(_Want, unit="A", words="rms", thermal=True)
_peak_current = partial(_Want, unit="A", words="peak")
_BARE_LINK = "link voltage, without the overshoot of its own fall time"

_SWITCH: dict[Kind, tuple[_Want, ...]] = {
    "thyristor": (
        _peak("switch.V_DRM", "V_DRM", classes=VOLTAGE_CLASSES_V),
        _average("switch.I_TAV", "I_T(AV)", stress=_column("switch_average_A")),
        _rms("switch.I_TRMS", "I_T(RMS)", stress=_column("switch_rms_A")),
        _peak_current("switch.I_TRM", "I_TRM", stress=_column("switch_peak_A")),
        _steady("switch.V_steady", "V_DRM, steady", classes=VOLTAGE_CLASSES_V),
        _steady("switch.V_isol", "V_isol"),
    ),
    "igbt": (
        _steady("switch.V_CES", "V_CES", words=_BARE_LINK, classes=IGBT_CLASSES_V),
        _Want("switch.I_C", "I_C", "A", _nominal_peak, "peak at nominal load"),
        _peak_current("switch.I_CRM", "I_CRM", stress=_column("switch_peak_A")),
        _steady("switch.V_steady", "V_CES, steady", classes=IGBT_CLASSES_V, kind="igbt"),
    ),
}

_DIODE: tuple[_Want, ...] = (
    _peak("diode.V_RRM", "V_RRM", classes=VOLTAGE_CLASSES_V),
    _average("diode.I_FAV", "I_F(AV)", stress=_column("diode_average_A")),
    _rms("diode.I_FRMS", "I_F(RMS)", stress=_column("diode_rms_A")),
    _peak_current("diode.I_FRM", "I_FRM", stress=_column("diode_peak_A")),
    _steady("diode.V_steady", "V_RRM, steady", classes=VOLTAGE_CLASSES_V),
)
