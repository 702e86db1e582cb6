"""How a data sheet is set out: every rating's symbol, plain name, unit and place.

One table a kind of device, in the order in which data sheets state the figures. The keys are
the fields of `engine.ratings`, in SI units; a sheet prints µs, mΩ, mJ … instead, and this
module is the only place that knows the factor. Symbols are those of IEC 60747-2 (diodes),
60747-6 (thyristors) and 60747-9 (IGBTs).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from decimal import Decimal
from typing import Literal, get_args

from engine.quantities import parse

Kind = Literal["thyristor", "igbt", "diode"]
Form = Literal["number", "choice", "flag", "text"]
Group = Literal["part", "voltage", "current", "turn-off", "on-state", "switching", "thermal"]
GROUPS: tuple[Group, ...] = get_args(Group)
"""Blocks of a sheet in their order; where sheets of two kinds stand side by side, a block of
one stands next to the same block of the other."""


@dataclass(frozen=True, slots=True)
class Rating:
    """One line of a data sheet.

    `unit` is the SI unit as in the key; `exponent` turns the printed `sheet_unit` into it:
    SI value = sheet value · 10^exponent.
    `needed`: a verdict of every candidate rests on it; the others only refine one.
    `checks`: ids of the verdict rows, without the device in front, that compare it.
    `condition_of`: the rating beside which this stands as its test condition.
    """

    key: str
    symbol: str
    name: str
    unit: str = ""
    sheet_unit: str = ""
    exponent: int = 0
    needed: bool = False
    checks: tuple[str, ...] = ()
    condition_of: str = ""
    form: Form = "number"
    choices: tuple[str, ...] = ()
    group: Group = "part"


_SHEET_UNITS: Mapping[str, tuple[str, int]] = {
    "µs": ("s", -6),
    "ms": ("s", -3),
    "Ω": ("ohm", 0),
    "mΩ": ("ohm", -3),
    "mJ": ("J", -3),
    "µC": ("As", -6),
    "mA": ("A", -3),
    "nH": ("H", -9),
    "A/µs": ("A/s", 6),
    "V/µs": ("V/s", 6),
    "A²s": ("A2s", 0),
    "°C": ("C", 0),
}
"""Printed units that are not the key of an SI unit themselves: that key, and the power of ten.

I²t stands in A²s: kA²s is read as 10³ A²s by some and as (kA)²s by others.
"""


def _rating(
    key: str, symbol: str, name: str, sheet_unit: str = "", checks: str = "", needed: bool = False
) -> Rating:
    unit, exponent = _SHEET_UNITS.get(sheet_unit, (sheet_unit, 0))
    return Rating(key, symbol, name, unit, sheet_unit, exponent, needed, tuple(checks.split()))


def _needed(key: str, symbol: str, name: str, sheet_unit: str, checks: str = "") -> Rating:
    return _rating(key, symbol, name, sheet_unit, checks, needed=True)


def _under(rating: Rating, *conditions: Rating) -> tuple[Rating, ...]:
    """A rating with its test conditions; they fold with it."""
    return (
        rating,
        *(replace(each, condition_of=rating.key, needed=rating.needed) for each in conditions),
    )


def _block(group: Group, *ratings: Rating) -> tuple[Rating, ...]:
    return tuple(replace(rating, group=group) for rating in ratings)


def _text(key: str, symbol: str, name: str) -> Rating:
    return Rating(key, symbol, name, form="text")


_PART = _text("part", "part", "maker's part number")

_THERMAL: tuple[Rating, ...] = (
    _needed("Tvj_max_C", "T_vj max", "highest junction temperature", "°C", "Tvj"),
    *_under(
        _needed("Rth_jc_K_per_W", "R_th(j-c)", "thermal resistance, junction to case", "K/W"),
        Rating(
            "Rth_wave",
            "wave",
            "shape of the current for which R_th(j-c) is stated",
            form="choice",
            choices=("dc", "sine180", "block120"),
        ),
    ),
    _needed("Rth_ch_K_per_W", "R_th(c-h)", "thermal resistance, case to heatsink", "K/W"),
    _rating("leakage_A", "I_leak", "leakage at T_vj max and rated voltage", "mA"),
    _rating("price", "price", "price of one, in any one currency"),
    _text("note", "note", "note on this device"),
)

_OF_A_SWITCH = (_needed("V_isol_V", "V_isol", "isolation voltage", "V", "V_isol"), *_THERMAL)
_OF_A_DIODE = (_rating("V_isol_V", "V_isol", "isolation voltage", "V"), *_THERMAL)

THYRISTOR: tuple[Rating, ...] = (
    _PART,
    *_block(
        "voltage",
        _needed("V_DRM_V", "V_DRM", "repetitive peak off-state voltage", "V", "V_DRM V_steady"),
        _needed("V_RRM_V", "V_RRM", "repetitive peak reverse voltage", "V", "V_RRM"),
        _rating("V_RSM_V", "V_RSM", "non-repetitive peak reverse voltage", "V"),
    ),
    *_block(
        "current",
        *_under(
            _needed("I_TAV_A", "I_T(AV)", "mean on-state current, half-sine", "A", "I_TAV"),
            _rating("I_TAV_case_C", "T_c", "case temperature of I_T(AV)", "°C"),
        ),
        _needed("I_TRMS_A", "I_T(RMS)", "rms on-state current", "A", "I_TRMS"),
        _needed("I_TRM_A", "I_TRM", "repetitive peak on-state current", "A", "I_TRM"),
        *_under(
            _needed("I_TSM_A", "I_TSM", "surge on-state current", "A", "I_TSM"),
            _rating("I_TSM_duration_s", "t_p", "duration of the surge half-sine", "ms"),
        ),
        _needed("I2t_A2s", "I²t", "I²t value for fusing", "A²s", "I2t"),
    ),
    *_block(
        "turn-off",
        _needed("didt_A_per_s", "(di/dt)cr", "critical rate of rise of current", "A/µs", "didt"),
        _needed("dvdt_V_per_s", "(dv/dt)cr", "critical rate of rise of voltage", "V/µs", "dvdt"),
        *_under(
            _needed(
                "tq_s", "t_q", "circuit-commutated turn-off time", "µs", "tq_dead tq_commutation"
            ),
            _rating("tq_reverse_V", "V_R", "reverse voltage at which t_q is stated", "V"),
            _rating("tq_dvdt_V_per_s", "dv/dt", "reapplied dv/dt at which t_q is stated", "V/µs"),
            _rating("tq_Tvj_C", "T_vj", "junction temperature at which t_q is stated", "°C"),
        ),
        _needed("I_L_A", "I_L", "latching current", "mA", "I_L gate_pulse"),
        _needed("I_H_A", "I_H", "holding current", "mA", "I_H"),
    ),
    *_block(
        "on-state",
        _needed("V_T0_V", "V_T0", "threshold voltage, hot", "V"),
        _needed("r_T_ohm", "r_T", "slope resistance, hot", "mΩ"),
        _rating("V_T0_25C_V", "V_T0 25 °C", "threshold voltage at 25 °C", "V"),
        _rating("r_T_25C_ohm", "r_T 25 °C", "slope resistance at 25 °C", "mΩ"),
    ),
    *_block(
        "switching",
        *_under(
            _rating("Qrr_As", "Q_rr", "recovered charge", "µC"),
            _rating("Qrr_current_A", "I_T", "current at which Q_rr is stated", "A"),
            _rating("Qrr_didt_A_per_s", "−di/dt", "rate of fall at which Q_rr is stated", "A/µs"),
        ),
        *_under(
            _rating("Eon_J", "E_on", "turn-on energy of one pulse", "mJ"),
            _rating("Eon_didt_A_per_s", "di/dt", "rate of rise at which E_on is stated", "A/µs"),
        ),
        _rating("I_GT_A", "I_GT", "gate trigger current", "mA"),
        _rating("V_GT_V", "V_GT", "gate trigger voltage", "V"),
    ),
    *_block("thermal", *_OF_A_SWITCH),
)

IGBT: tuple[Rating, ...] = (
    _PART,
    *_block(
        "voltage",
        _needed("V_CES_V", "V_CES", "collector-emitter voltage", "V", "V_CES V_steady"),
    ),
    *_block(
        "current",
        *_under(
            _needed("I_C_A", "I_C", "continuous collector current", "A", "I_C"),
            _rating("I_C_case_C", "T_c", "case temperature of I_C", "°C"),
        ),
        _needed(
            "I_CRM_A", "I_CRM", "repetitive peak collector current", "A", "I_CRM turn_off_current"
        ),
    ),
    *_block(
        "on-state",
        _needed("V_CE0_V", "V_CE0", "threshold voltage, hot", "V"),
        _needed("r_CE_ohm", "r_CE", "slope resistance, hot", "mΩ"),
        _rating("V_CE0_25C_V", "V_CE0 25 °C", "threshold voltage at 25 °C", "V"),
        _rating("r_CE_25C_ohm", "r_CE 25 °C", "slope resistance at 25 °C", "mΩ"),
    ),
    *_block(
        "switching",
        _needed("Eon_J", "E_on", "turn-on energy of one pulse", "mJ"),
        *_under(
            _needed("Eoff_J", "E_off", "turn-off energy of one pulse", "mJ"),
            _rating("E_current_A", "I", "current at which E_on and E_off are stated", "A"),
            _rating("E_voltage_V", "V", "voltage at which E_on and E_off are stated", "V"),
            _rating("E_Tvj_C", "T_vj", "junction temperature of E_on and E_off", "°C"),
        ),
        _needed("tdon_min_s", "t_d(on)", "turn-on delay, shortest", "µs"),
        _needed("tdoff_max_s", "t_d(off)", "turn-off delay, longest", "µs", "blanking"),
        _rating("tr_s", "t_r", "rise time", "µs"),
        _needed("tf_s", "t_f", "fall time", "µs"),
        _rating("driver_skew_s", "t_skew", "difference of delay between two drivers", "µs"),
        *_under(
            _rating("tsc_s", "t_psc", "short-circuit withstand time", "µs", "tsc"),
            _rating("tsc_voltage_V", "V_CC", "voltage at which t_psc is stated", "V"),
        ),
        _rating("package_inductance_H", "L_p", "inductance of the package", "nH"),
        _rating("Eon_current_exponent", "E_on: k_i", "exponent of E_on over current"),
        _rating("Eon_voltage_exponent", "E_on: k_v", "exponent of E_on over voltage"),
        _rating("Eon_per_K", "E_on: α", "change of E_on per kelvin"),
        _rating("Eoff_current_exponent", "E_off: k_i", "exponent of E_off over current"),
        _rating("Eoff_voltage_exponent", "E_off: k_v", "exponent of E_off over voltage"),
        _rating("Eoff_per_K", "E_off: α", "change of E_off per kelvin"),
    ),
    *_block("thermal", *_OF_A_SWITCH),
)

DIODE: tuple[Rating, ...] = (
    _PART,
    Rating("co_packed", "case", "whether it shares the switch's case", needed=True, form="flag"),
    *_block(
        "voltage",
        _needed("V_RRM_V", "V_RRM", "repetitive peak reverse voltage", "V", "V_RRM V_steady"),
    ),
    *_block(
        "current",
        *_under(
            _needed("I_FAV_A", "I_F(AV)", "mean forward current, half-sine", "A", "I_FAV"),
            _rating("I_FAV_case_C", "T_c", "case temperature of I_F(AV)", "°C"),
        ),
        _needed("I_FRMS_A", "I_F(RMS)", "rms forward current", "A", "I_FRMS"),
        _needed("I_FRM_A", "I_FRM", "repetitive peak forward current", "A", "I_FRM"),
        *_under(
            _needed("I_FSM_A", "I_FSM", "surge forward current", "A", "I_FSM"),
            _rating("I_FSM_duration_s", "t_p", "duration of the surge half-sine", "ms"),
        ),
        _needed("I2t_A2s", "I²t", "I²t value for fusing", "A²s", "I2t"),
    ),
    *_block(
        "on-state",
        _needed("V_F0_V", "V_F0", "threshold voltage, hot", "V"),
        _needed("r_F_ohm", "r_F", "slope resistance, hot", "mΩ"),
        _rating("V_F0_25C_V", "V_F0 25 °C", "threshold voltage at 25 °C", "V"),
        _rating("r_F_25C_ohm", "r_F 25 °C", "slope resistance at 25 °C", "mΩ"),
    ),
    *_block(
        "switching",
        *_under(
            _rating("Err_J", "E_rr", "recovery energy of one pulse", "mJ"),
            _rating("E_current_A", "I", "current at which E_rr is stated", "A"),
            _rating("E_voltage_V", "V", "voltage at which E_rr is stated", "V"),
            _rating("E_Tvj_C", "T_vj", "junction temperature of E_rr", "°C"),
        ),
        *_under(
            _rating("Qrr_As", "Q_rr", "recovered charge", "µC", "didt_recovery"),
            _rating("Qrr_current_A", "I_F", "current at which Q_rr is stated", "A"),
            _rating("Qrr_didt_A_per_s", "−di/dt", "rate of fall at which Q_rr is stated", "A/µs"),
        ),
        _rating("Err_current_exponent", "E_rr: k_i", "exponent of E_rr over current"),
        _rating("Err_voltage_exponent", "E_rr: k_v", "exponent of E_rr over voltage"),
        _rating("Err_per_K", "E_rr: α", "change of E_rr per kelvin"),
    ),
    *_block("thermal", *_OF_A_DIODE),
)

SHEETS: Mapping[Kind, tuple[Rating, ...]] = {"thyristor": THYRISTOR, "igbt": IGBT, "diode": DIODE}


def rating_of(kind: Kind, key: str) -> Rating:
    """The line of a field. Raises `KeyError` where that kind of device has no such rating."""
    for rating in SHEETS[kind]:
        if rating.key == key:
            return rating
    raise KeyError(f"a {kind} has no rating '{key}'")


def sheet_number(rating: Rating, value: float) -> str:
    """An SI value in the sheet's unit, every digit of it, without the unit."""
    return f"{_shifted(value, -rating.exponent):f}"


def sheet_figure(rating: Rating, value: float, digits: int = 4) -> float:
    """An SI value in the sheet's unit, rounded to some significant digits, for reading only."""
    return float(f"{float(_shifted(value, -rating.exponent)):.{digits}g}")


def si_value(rating: Rating, text: str) -> float:
    """What was typed into a sheet, as an SI value.

    A bare number counts in the sheet's unit; with a unit, also a prefixed one, it is what it
    says: for t_q `150`, `150 µs`, `150us` and `0,15 ms` are the same.

    Raises
    ------
    QuantityFault
        With a plain sentence where the text is no such quantity.
    """
    return parse(text, rating.unit, 10.0**rating.exponent)


def _shifted(value: float, exponent: int) -> Decimal:
    # A shift of the decimal point is exact: 150 µs is the double nearest to 0.00015.
    shifted = Decimal(repr(float(value))).scaleb(exponent)
    return shifted.quantize(Decimal(1)) if shifted == shifted.to_integral() else shifted.normalize()
