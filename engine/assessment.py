"""From a selection to all that is known of it: the one place that runs all steps in order."""

from __future__ import annotations

from collections.abc import Collection, Iterator, Sequence

from engine.checks import Assessment, Warning
from engine.corners import solved
from engine.duty import Duty, duty_of, value_of
from engine.errors import Fault, InvalidSelection
from engine.fingerprint import fingerprint
from engine.ratings import Igbt, Thyristor
from engine.rule_sets import RuleSet, rule_set_of
from engine.selection import Candidate, Selection, document_faults
from engine.verdicts.candidate import candidate_result
from engine.version import VERSION
from engine.wanted import Kind, wanted_of

PROGRAM = "switchwright"


def assess(selection: Selection, names: Collection[str] | None = None) -> Assessment:
    """Solve the bridge of a selection at all corners and judge its candidates.

    `names` restricts the candidates. A candidate whose temperature runs away is undersized and
    says so; it is no error.

    Raises
    ------
    InvalidSelection
        Entries that are missing or cannot be used, or a name that no candidate has.
    NoSolution
        The bridge has no unique periodic steady state.
    """
    faults = tuple(document_faults(selection))
    if faults:
        raise InvalidSelection(faults)
    candidates = _named(selection, names)
    rules, duty = rule_set_of(selection), duty_of(selection)
    bridge = solved(duty)
    return Assessment(
        program=PROGRAM,
        version=VERSION,
        nominal=bridge.nominal,
        candidates=tuple(candidate_result(one, bridge, rules) for one in candidates),
        wanted=wanted_of(bridge, rules, _kinds(selection.candidates)),
        warnings=tuple(_warnings(selection, duty, rules)),
        rule_set=rules.name,
        fingerprint=fingerprint(selection),
        chosen=selection.chosen,
    )


def _named(selection: Selection, names: Collection[str] | None) -> Sequence[Candidate]:
    if names is None:
        return selection.candidates
    known = {one.name for one in selection.candidates}
    unknown = [name for name in names if name not in known]
    if unknown:
        raise InvalidSelection([Fault("candidates", f"none is named '{n}'") for n in unknown])
    return [one for one in selection.candidates if one.name in names]


def _kinds(candidates: Sequence[Candidate]) -> Sequence[Kind]:
    """Kinds of switch among the candidates; a thyristor before there are any."""
    kinds: dict[type, Kind] = {Thyristor: "thyristor", Igbt: "igbt"}
    found = dict.fromkeys(kinds[type(one.switch)] for one in candidates)
    return tuple(found) or ("thyristor",)


def _warnings(selection: Selection, duty: Duty, rules: RuleSet) -> Iterator[Warning]:
    """What the user should know beside the verdicts."""
    yield from _not_yet(selection)
    if rules.note:
        yield Warning(id="rule_set", key="rule_set", text=rules.note)
    for index, candidate in enumerate(selection.candidates):
        yield from _of_candidate(f"candidates.{index}", candidate)
    if duty.assumed:
        text = f"{len(duty.assumed)} entries of the duty are assumed, not entered"
        yield Warning(id="assumed", key=duty.assumed[0], text=text)


def _not_yet(selection: Selection) -> Iterator[Warning]:
    """Entries that are kept in the file but do not act on the results yet."""
    for key, text in _DO_NOT_ACT.items():
        if value_of(selection, key):
            yield Warning(id="does_not_act", key=key, text=text)
    if not value_of(selection, "gating.soft_start"):
        yield Warning(id="does_not_act", key="gating.soft_start", text=_NO_START)
    yield Warning(id="mean_temperatures", key="cooling", text=_MEAN_TEMPERATURES)


def _of_candidate(key: str, candidate: Candidate) -> Iterator[Warning]:
    for part, device in (("switch", candidate.switch), ("diode", candidate.diode)):
        if device.Rth_wave not in (None, "dc"):
            yield Warning(
                id="thermal_resistance_wave",
                key=f"{key}.{part}.Rth_wave",
                text=f"{candidate.name}: R_th(j-c) of the {part} is stated for "
                f"{_WAVES[device.Rth_wave]} and already holds some ripple; the value for "
                "direct current goes with computed temperatures",
            )


_WAVES = {"sine180": "a half-sine", "block120": "120° blocks"}

_DO_NOT_ACT = {
    "on_state_drops": "the on-state drops do not act in the circuit yet; currents are on the "
    "safe side without them",
    "supply.follows_frequency": "the link voltage does not follow the frequency yet; every "
    "voltage is tested with every frequency, which is on the safe side",
}
_NO_START = (
    "peak and turn-off currents are those of the steady state; those of switching on from rest "
    "can be higher and are not computed yet"
)
_MEAN_TEMPERATURES = (
    "junction temperatures are means over the period; at a few hertz the ripple adds to them and "
    "is not computed yet"
)
