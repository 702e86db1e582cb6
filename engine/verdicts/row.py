"""From a row of the verdict table to its `Check`: what is missing, the worst place, the words."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

from engine.bridge import POSITIONS
from engine.checks import Check, Corner
from engine.ratings import USUAL_CONDITIONS, Diode, Switch, entered
from engine.verdicts.case import Case
from engine.verdicts.comparison import Comparison, Worst, verdict_of_headroom, worst_of
from engine.verdicts.wording import named, percent

Part = Literal["switch", "diode"]

ENERGY_STEMS = ("Eon", "Eoff", "Err")

BASES = ("maximum", "read from curve", "typical", "assumed")
"""How sure a rating is, the surest first."""


@dataclass(frozen=True, slots=True)
class Open:
    """A row that compares nothing: why, and which entries would change that."""

    reason: str
    needs: tuple[str, ...] = ()
    applies: bool = True


Finding = Comparison | Open | tuple[Comparison, ...]
Judge = Callable[["Case", "Row"], Finding]


@dataclass(frozen=True, slots=True)
class Row:
    """One rating of the verdict table. To add a rating, add a judge and a row.

    `keys` are the ratings without which the row is not assessed, the one that is compared
    first; `conditions` fall back to their usual value; `refines` only sharpen the result.
    `heat`: the row needs temperatures. `applies` gives the reason where the row does not apply.
    """

    id: str
    rating: str
    unit: str
    judge: Judge
    keys: tuple[str, ...] = ()
    conditions: tuple[str, ...] = ()
    refines: tuple[str, ...] = ()
    heat: bool = False
    applies: Callable[[Case], str | None] = lambda case: None

    @property
    def part(self) -> Part:
        """Whether it is a rating of the switch or of the diode."""
        return "switch" if self.id.startswith("switch.") else "diode"

    def device(self, case: Case) -> Switch | Diode:
        return case.candidate.switch if self.part == "switch" else case.candidate.diode

    def compared(self, case: Case) -> float:
        """The rating that the row compares, in SI units. It must have been entered."""
        return entered(self.device(case), self.keys[0])

    def fraction(self, case: Case) -> float:
        """The permitted fraction of the rating."""
        return case.rules.fraction(self.id, type(self.device(case)).__name__.lower())


def does_not_apply(why: str) -> Open:
    """A row whose rating does not matter to the duty."""
    return Open(f"does not apply: {why}", applies=False)


def waits_for(what: str) -> Judge:
    """Judge of a row whose calculation is not part of the program yet."""
    return lambda case, row: Open(f"waits for {what}")


def check_of(row: Row, case: Case) -> Check:
    """Judge one row of a candidate."""
    not_applying = row.applies(case)
    if not_applying is not None:
        return _open_check(row, does_not_apply(not_applying))
    needs = missing_of(row, case)
    if needs:
        return _open_check(row, Open(f"needs {', '.join(map(named, needs))}", needs))
    found = row.judge(case, row)
    if isinstance(found, Open):
        return _open_check(row, found)
    comparisons = found if isinstance(found, tuple) else (found,)
    judged = [(one, worst_of(one, case.rules.adequate_share)) for one in comparisons]
    worsts = [(one, worst) for one, worst in judged if worst is not None]
    if not worsts:
        return _open_check(row, does_not_apply("no position carries current"))
    comparison, worst = min(worsts, key=lambda pair: _headroom(pair[1]))
    return _compared(row, case, comparison, worst, _most_demanding([w for _, w in worsts]))


def missing_of(row: Row, case: Case) -> tuple[str, ...]:
    """Entries that the row needs and that are not there, each once."""
    device = row.device(case)
    own = (f"{row.part}.{key}" for key in row.keys if getattr(device, key) is None)
    heat = case.heat_needs if row.heat else ()
    return tuple(dict.fromkeys((*own, *heat)))


def _open_check(row: Row, why: Open) -> Check:
    return Check(
        id=row.id,
        rating=row.rating,
        unit=row.unit,
        verdict="not assessed",
        reason=why.reason,
        applies=why.applies,
        needs=why.needs,
        how=why.reason,
    )


def _headroom(worst: Worst) -> float:
    return float("-inf") if worst.headroom_pct is None else worst.headroom_pct


def _most_demanding(worsts: list[Worst]) -> float | None:
    """The rating that satisfies every comparison of a row."""
    values = [worst.would_do for worst in worsts]
    return None if None in values else max(value for value in values if value is not None)


def _compared(
    row: Row, case: Case, comparison: Comparison, worst: Worst, would_do: float | None
) -> Check:
    by_position = max(comparison.applied.shape[1], comparison.allowed.shape[1]) > 1
    return Check(
        id=row.id,
        rating=row.rating,
        unit=row.unit,
        verdict=verdict_of_headroom(worst.headroom_pct, case.rules.tight_band_pct),
        applied=worst.applied,
        allowed=worst.allowed,
        fraction=comparison.fraction,
        headroom_pct=worst.headroom_pct,
        position=POSITIONS[worst.place.position] if by_position else None,
        would_do=would_do,
        reason=worst.reason,
        corner=_corner(case, comparison, worst.place.point),
        at_least=comparison.at_least,
        basis=_weakest_basis(row, case),
        how=_with_headroom(comparison.how(worst.place), worst),
    )


def _corner(case: Case, comparison: Comparison, point: int) -> Corner:
    points = comparison.points
    return Corner(
        voltage_V=float(points.voltage_V[point]),
        frequency_Hz=float(points.frequency_Hz[point]),
        load_factor=float(points.load_factor[point]),
        ambient_C=getattr(case.solved.duty.ambient_C, comparison.ambient),
    )


def _with_headroom(how: str, worst: Worst) -> str:
    if worst.headroom_pct is None:
        return f"{how}; {worst.reason}"
    return f"{how}; headroom {percent(worst.headroom_pct)}"


def _weakest_basis(row: Row, case: Case) -> str | None:
    """The weakest basis of the ratings that the row rests on, `None` where none is stated."""
    device = row.device(case)
    bases = [_basis(device, key) for key in (*row.keys, *row.refines, *row.conditions)]
    stated = [basis for basis in bases if basis is not None]
    return max(stated, key=BASES.index, default=None)


def _basis(device: Switch | Diode, key: str) -> str | None:
    if getattr(device, key) is None:
        return "assumed" if key in USUAL_CONDITIONS and _is_used(device, key) else None
    return device.basis.get(key)


def _is_used(device: Switch | Diode, condition_key: str) -> bool:
    """Whether the energy that a condition or an exponent belongs to has been entered."""
    stem, _, _ = condition_key.partition("_")
    energies = {"E": ENERGY_STEMS, "Eon": ("Eon",), "Eoff": ("Eoff",), "Err": ("Err",)}.get(stem)
    if energies is None:
        return True
    return any(getattr(device, f"{name}_J", None) is not None for name in energies)
