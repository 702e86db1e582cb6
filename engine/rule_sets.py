"""How much of each rating may be used: the permitted fractions and factors, each with its source.

A rule set is data. Fractions are keyed by the id of the check they belong to; factors by what
they multiply. A selection names a built-in rule set, or one with some of its figures replaced.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, replace
from types import MappingProxyType

from engine.duty import value_of
from engine.errors import Fault, InvalidSelection
from engine.selection import RuleSetChange, Selection

PRACTICE = "common practice, no source"

_ONLY_FOR_KIND = {"igbt.V_steady": "switch.V_steady"}
"""Fractions of one kind of switch, and the check whose fraction they stand in for."""


@dataclass(frozen=True, slots=True)
class Permitted:
    """One figure of a rule set, and where it comes from."""

    value: float
    source: str


@dataclass(frozen=True, slots=True)
class RuleSet:
    """The permitted fraction of each rating, the factors on what is needed, the 'tight' band."""

    name: str
    tight_band_pct: float
    fractions: Mapping[str, Permitted]
    factors: Mapping[str, Permitted]
    note: str = ""

    def fraction(self, check_id: str, kind: str = "switch") -> float:
        """Permitted fraction of the rating that a check compares, for a kind of device."""
        _, _, stem = check_id.partition(".")
        own = self.fractions.get(f"{kind}.{stem}")
        return (own or self.fractions[check_id]).value

    def factor(self, name: str) -> float:
        return self.factors[name].value

    @property
    def adequate_share(self) -> float:
        """Largest applied/allowed of a row that is still adequate, not tight."""
        return 1.0 - self.tight_band_pct / 100.0

    @property
    def junction_limit_C(self) -> float:
        """Junction temperature that the rule set allows at most, whatever the device's own."""
        limit = self.factors.get("junction_limit_C")
        return float("inf") if limit is None else limit.value


def _permitted(source: str, **figures: float) -> dict[str, Permitted]:
    return {name.replace("__", "."): Permitted(value, source) for name, value in figures.items()}


_PRACTICE_FRACTIONS = {
    **_permitted(
        f"{PRACTICE}: repetitive peak with overshoot",
        switch__V_DRM=0.8,
        switch__V_RRM=0.8,
        switch__V_CES=0.8,
        diode__V_RRM=0.8,
    ),
    **_permitted(
        f"{PRACTICE}: stability under continuous direct voltage",
        switch__V_steady=0.6,
        igbt__V_steady=2.0 / 3.0,
        diode__V_steady=0.6,
    ),
    **_permitted(
        f"{PRACTICE}: tolerance of the load and of the current sharing",
        switch__I_TAV=0.8,
        switch__I_TRMS=0.8,
        switch__I_TRM=0.8,
        switch__I_C=0.8,
        switch__I_CRM=0.8,
        switch__turn_off_current=0.8,
        diode__I_FAV=0.8,
        diode__I_FRMS=0.8,
        diode__I_FRM=0.8,
    ),
    **_permitted(
        f"{PRACTICE}: faults",
        switch__I_TSM=0.8,
        switch__I2t=0.8,
        switch__tsc=0.8,
        diode__I_FSM=0.8,
        diode__I2t=0.8,
    ),
    **_permitted(
        f"{PRACTICE}: repeated in every period",
        switch__didt=0.5,
        switch__dvdt=0.5,
        diode__didt_recovery=0.8,
    ),
    **_permitted(f"{PRACTICE}: test voltage against working voltage", switch__V_isol=0.5),
}

_PRACTICE_FACTORS = {
    "tq": Permitted(
        1.5,
        "M. D. Singh, K. B. Khanchandani, Power Electronics, 2nd ed., Example 9.24; "
        "B. R. Gupta, V. Singhal, Power Electronics, Example 2.35",
    ),
    "tq_low_reverse_voltage": Permitted(
        1.5, f"{PRACTICE}: t_q is stated for tens of volts, a feedback diode leaves one or two"
    ),
    "tq_per_K": Permitted(
        0.01, f"{PRACTICE}: share by which t_q grows per kelvin above its stated T_vj"
    ),
    "blanking": Permitted(1.2, f"{PRACTICE}: on the spread of delays of two drivers"),
    "transient_overshoot": Permitted(
        1.5, f"{PRACTICE}: peak over link voltage as long as no snubber is there"
    ),
    "junction_margin_K": Permitted(20.0, f"{PRACTICE}: distance kept below T_vj max"),
}

COMMON_PRACTICE = RuleSet(
    name="common practice",
    tight_band_pct=10.0,
    fractions=MappingProxyType(_PRACTICE_FRACTIONS),
    factors=MappingProxyType(_PRACTICE_FACTORS),
    note="Figures that the trade uses; only those that name a book have a source.",
)

_DIODES_975M = "MIL-STD-975M (5 August 1994, cancelled 5 May 1998), Appendix A, 3.4, diodes"
_TRANSISTORS_975M = (
    "MIL-STD-975M (5 August 1994, cancelled 5 May 1998), Appendix A, 3.15, transistors"
)


def _falling_back(figures: Mapping[str, Permitted], standard: str) -> dict[str, Permitted]:
    """Common practice's figures, each saying that the standard does not state it."""
    return {
        name: replace(figure, source=f"not stated in {standard}; {figure.source}")
        for name, figure in figures.items()
    }


MIL_STD_975M = RuleSet(
    name="MIL-STD-975M",
    tight_band_pct=10.0,
    fractions=MappingProxyType(
        {
            **_falling_back(_PRACTICE_FRACTIONS, "MIL-STD-975M"),
            **_permitted(
                f"{_DIODES_975M}: peak inverse voltage",
                switch__V_DRM=0.70,
                switch__V_RRM=0.70,
                diode__V_RRM=0.70,
            ),
            **_permitted(
                f"{_DIODES_975M}: forward current",
                switch__I_TAV=0.50,
                switch__I_TRMS=0.50,
                diode__I_FAV=0.50,
                diode__I_FRMS=0.50,
            ),
            **_permitted(f"{_DIODES_975M}: surge", switch__I_TSM=0.50, diode__I_FSM=0.50),
            **_permitted(
                f"{_TRANSISTORS_975M} (IGBTs are not listed): direct, peak and transient voltage",
                switch__V_CES=0.75,
            ),
            **_permitted(
                f"{_TRANSISTORS_975M} (IGBTs are not listed): current",
                switch__I_C=0.75,
                switch__I_CRM=0.75,
                switch__turn_off_current=0.75,
            ),
        }
    ),
    factors=MappingProxyType(
        {
            **_falling_back(_PRACTICE_FACTORS, "MIL-STD-975M"),
            "junction_limit_C": Permitted(
                125.0, f"{_DIODES_975M}, and 3.15, transistors: junction temperature"
            ),
        }
    ),
    note="The standard is cancelled, and named here for what it lists. Thyristors stand under "
    "its diodes. The clauses were read in a transcription, not in the printed standard.",
)

BUILT_IN: Mapping[str, RuleSet] = MappingProxyType(
    {one.name: one for one in (COMMON_PRACTICE, MIL_STD_975M)}
)


def rule_set_of(selection: Selection) -> RuleSet:
    """The rule set that a selection is judged by.

    Raises
    ------
    InvalidSelection
        For a rule set, a fraction or a factor that does not exist, with its key path.
    """
    wanted = value_of(selection, "rule_set")
    if isinstance(wanted, str):
        return _built_in(wanted, "rule_set")
    base = _built_in(wanted.based_on, "rule_set.based_on")
    faults = [
        *_unknown(wanted.fractions, base.fractions, "rule_set.fractions"),
        *_unknown(wanted.factors, base.factors, "rule_set.factors"),
    ]
    if faults:
        raise InvalidSelection(faults)
    return _changed(base, wanted)


def _built_in(name: str, key: str) -> RuleSet:
    if name not in BUILT_IN:
        raise InvalidSelection([Fault(key, f"must be one of {_listed(BUILT_IN)}; got '{name}'")])
    return BUILT_IN[name]


def _unknown(given: Iterable[str], known: Mapping[str, Permitted], key: str) -> Iterator[Fault]:
    for name in given:
        if name not in known:
            yield Fault(f"{key}.{name}", f"unknown; known are {_listed(known)}")


def _listed(names: Iterable[str]) -> str:
    return ", ".join(names)


def _changed(base: RuleSet, change: RuleSetChange) -> RuleSet:
    source = "set in this selection" + (f": {change.note}" if change.note else "")
    # A fraction set for a check holds for every kind of switch that the check serves.
    kept = {
        name: figure
        for name, figure in base.fractions.items()
        if _ONLY_FOR_KIND.get(name) not in change.fractions
    }
    band = change.tight_band_pct
    return RuleSet(
        name=f"{base.name}, changed",
        tight_band_pct=base.tight_band_pct if band is None else band,
        fractions={**kept, **_given(change.fractions, source)},
        factors={**base.factors, **_given(change.factors, source)},
        note=change.note or base.note,
    )


def _given(figures: Mapping[str, float], source: str) -> dict[str, Permitted]:
    return {name: Permitted(value, source) for name, value in figures.items()}
