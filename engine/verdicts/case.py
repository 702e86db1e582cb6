"""One candidate at all corners of one duty: what every row of its verdict table looks at."""

from __future__ import annotations

from dataclasses import dataclass

from engine.corners import SolvedDuty
from engine.junction_temperature import (
    Temperatures,
    missing_for_chain,
    temperatures,
    thermal_chain,
)
from engine.losses import (
    DeviceLoss,
    commutation_didt,
    diode_loss,
    missing_for_diode_loss,
    missing_for_switch_loss,
    no_loss,
    switch_loss,
)
from engine.rule_sets import RuleSet
from engine.selection import Candidate
from engine.stress_table import Array


@dataclass(frozen=True, slots=True, eq=False)
class Heat:
    """Losses and temperatures at the thermal corners, ambient high."""

    switches: DeviceLoss
    diodes: DeviceLoss
    temperatures: Temperatures

    @property
    def switch_junction_C(self) -> Array:
        return self.temperatures.junction_C[:, :6]

    @property
    def diode_junction_C(self) -> Array:
        return self.temperatures.junction_C[:, 6:]

    @property
    def switch_case_C(self) -> Array:
        return self.temperatures.case_C[:, :6]

    @property
    def diode_case_C(self) -> Array:
        return self.temperatures.case_C[:, 6:]


@dataclass(frozen=True, slots=True, eq=False)
class Case:
    """A candidate, the solved duty, the rule set. Without `heat`, `heat_needs` lists why."""

    candidate: Candidate
    solved: SolvedDuty
    rules: RuleSet
    heat: Heat | None
    heat_needs: tuple[str, ...]

    @property
    def has_diodes(self) -> bool:
        return self.solved.duty.feedback_diodes


def case_of(candidate: Candidate, solved: SolvedDuty, rules: RuleSet) -> Case:
    """Losses and temperatures of a candidate, as far as its entries allow."""
    needs = heat_needs(candidate, solved)
    heat = None if needs else heat_of(candidate, solved)
    return Case(candidate, solved, rules, heat, needs)


def heat_needs(candidate: Candidate, solved: SolvedDuty) -> tuple[str, ...]:
    """Keys below the candidate, or of the document, that temperatures still need."""
    duty, table = solved.duty, solved.thermal
    needs = [*missing_for_chain(candidate, duty)]
    needs += [f"switch.{key}" for key in missing_for_switch_loss(candidate.switch, table)]
    if duty.feedback_diodes:
        needs += [f"diode.{key}" for key in missing_for_diode_loss(candidate.diode, table)]
        needs += _loop_needs(candidate, solved)
    return tuple(needs)


def _loop_needs(candidate: Candidate, solved: SolvedDuty) -> list[str]:
    """The recovered charge grows with di/dt, which something has to limit."""
    diode = candidate.diode
    if diode.Err_J is not None or diode.Qrr_didt_A_per_s is None:
        return []
    loop_H = solved.duty.loop_inductance_H
    didt = commutation_didt(solved.thermal.recovery, loop_H, candidate.switch)
    unlimited = (didt == float("inf")) & (solved.thermal.recovery.current_A > 0.0)
    return ["supply.loop_inductance_H"] if unlimited.any() else []


def heat_of(candidate: Candidate, solved: SolvedDuty) -> Heat:
    """Losses and temperatures in agreement, at the highest ambient."""
    duty, table = solved.duty, solved.thermal
    switches = switch_loss(candidate.switch, table, duty.feedback_diodes)
    diodes = no_loss(table)
    if duty.feedback_diodes:
        loop_H = duty.loop_inductance_H
        diodes = diode_loss(candidate.diode, candidate.switch, table, loop_H)
    chain = thermal_chain(candidate, duty)
    found = temperatures(chain, duty.ambient_C.high, switches, diodes)
    return Heat(switches, diodes, found)
