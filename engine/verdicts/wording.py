"""Numbers and symbols as the 'how' lines print them."""

from __future__ import annotations

from engine.quantities import shown

DIGITS = 4

_UNITS = ("_K_per_W", "_ohm", "_As", "_V", "_A", "_C", "_s", "_J", "_H")
_SYMBOLS = {
    "Rth_jc": "R_th(j-c)",
    "Rth_ch": "R_th(c-h)",
    "Tvj_max": "T_vj max",
    "tq": "t_q",
    "I_TAV": "I_T(AV)",
    "I_TRMS": "I_T(RMS)",
    "I_FAV": "I_F(AV)",
    "I_FRMS": "I_F(RMS)",
    "Eon": "E_on",
    "Eoff": "E_off",
    "Err": "E_rr",
    "E_current": "the current of E_on, E_off, E_rr",
    "E_voltage": "the voltage of E_on, E_off, E_rr",
    "tf": "t_f",
    "tdon_min": "t_d(on)",
    "tdoff_max": "t_d(off)",
    "I_TAV_case": "T_c of I_T(AV)",
    "I_C_case": "T_c of I_C",
    "I_FAV_case": "T_c of I_F(AV)",
}
"""Symbols that the key itself does not spell."""
_ENTRIES = {
    "cooling.sink_K_per_W": "the heatsink's thermal resistance",
    "supply.loop_inductance_H": "a loop inductance above 0",
}


def named(key: str) -> str:
    """An entry in words: 'R_th(j-c) of the switch'."""
    if key in _ENTRIES:
        return _ENTRIES[key]
    part, _, rating = key.partition(".")
    return f"{symbol_of(rating)} of the {part}"


def symbol_of(rating_key: str) -> str:
    """The letter symbol of a rating's key: 'V_DRM_V' → 'V_DRM', 'tq_s' → 't_q'."""
    stem = next((rating_key.removesuffix(u) for u in _UNITS if rating_key.endswith(u)), rating_key)
    return _SYMBOLS.get(stem, stem)


def quantity(value: float, unit: str) -> str:
    """A value with its unit, four significant digits: '1.852 ms'."""
    return shown(value, unit, DIGITS)


def number(value: float) -> str:
    """A plain number with four significant digits and a true minus sign."""
    return f"{value:.{DIGITS}g}".replace("-", "−")


def percent(value: float) -> str:
    return f"{value:.1f} %".replace("-", "−")


def celsius(value: float) -> str:
    return f"{value:.1f} °C".replace("-", "−")
