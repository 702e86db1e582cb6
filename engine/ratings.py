"""What a data sheet says of one switch or one diode.

Field names are the letter symbols of IEC 60747 with the SI unit as the last part.
`None` means that the sheet's figure has not been entered: a check that needs it is
'not assessed', never passed. Test conditions that nobody entered fall back to
`USUAL_CONDITIONS`, and are then counted as assumed.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Annotated, Literal

import msgspec
from msgspec import Meta

Positive = Annotated[float, Meta(gt=0.0, le=1e9)]
NonNegative = Annotated[float, Meta(ge=0.0, le=1e9)]
Volts = Annotated[float, Meta(gt=0.0, le=1e5)]
Amperes = Annotated[float, Meta(gt=0.0, le=1e6)]
Seconds = Annotated[float, Meta(gt=0.0, le=10.0)]
Celsius = Annotated[float, Meta(ge=-100.0, le=1000.0)]
Exponent = Annotated[float, Meta(ge=0.0, le=5.0)]
Slope = Annotated[float, Meta(gt=0.0, le=1e15)]

USUAL_CONDITIONS: Mapping[str, float | str] = {
    "I_TAV_case_C": 85.0,
    "I_C_case_C": 80.0,
    "I_FAV_case_C": 85.0,
    "I_TSM_duration_s": 0.01,
    "I_FSM_duration_s": 0.01,
    "tq_reverse_V": 50.0,
    "E_Tvj_C": 125.0,
    "Eon_current_exponent": 1.0,
    "Eon_voltage_exponent": 1.3,
    "Eon_per_K": 0.003,
    "Eoff_current_exponent": 1.0,
    "Eoff_voltage_exponent": 1.3,
    "Eoff_per_K": 0.003,
    "Err_current_exponent": 0.6,
    "Err_voltage_exponent": 0.6,
    "Err_per_K": 0.006,
    "Rth_wave": "dc",
}
"""Test conditions, and the scaling of energies from them, that are taken as assumed where a
sheet's have not been entered (common practice, no source)."""

Basis = Literal["maximum", "typical", "read from curve", "assumed"]
RthWave = Literal["dc", "sine180", "block120"]


class Ratings(
    msgspec.Struct, frozen=True, forbid_unknown_fields=True, omit_defaults=True, kw_only=True
):
    """What every device's sheet may state."""

    part: Annotated[str, Meta(max_length=200)] = ""
    Tvj_max_C: Celsius | None = None
    Rth_jc_K_per_W: Positive | None = None
    Rth_wave: RthWave | None = None
    Rth_ch_K_per_W: NonNegative | None = None
    leakage_A: NonNegative | None = None
    V_isol_V: Volts | None = None
    price: NonNegative | None = None
    note: Annotated[str, Meta(max_length=2000)] = ""
    basis: dict[str, Basis] = {}


class Thyristor(Ratings, frozen=True, kw_only=True, tag_field="kind", tag="thyristor"):
    """Ratings and characteristics of a thyristor (symbols of IEC 60747-6)."""

    V_DRM_V: Volts | None = None
    V_RRM_V: Volts | None = None
    V_RSM_V: Volts | None = None
    I_TAV_A: Amperes | None = None
    I_TAV_case_C: Celsius | None = None
    I_TRMS_A: Amperes | None = None
    I_TRM_A: Amperes | None = None
    I_TSM_A: Amperes | None = None
    I_TSM_duration_s: Seconds | None = None
    I2t_A2s: Positive | None = None
    didt_A_per_s: Slope | None = None
    dvdt_V_per_s: Slope | None = None
    tq_s: Seconds | None = None
    tq_reverse_V: Volts | None = None
    tq_dvdt_V_per_s: Slope | None = None
    tq_Tvj_C: Celsius | None = None
    I_L_A: Amperes | None = None
    I_H_A: Amperes | None = None
    V_T0_V: NonNegative | None = None
    r_T_ohm: NonNegative | None = None
    V_T0_25C_V: NonNegative | None = None
    r_T_25C_ohm: NonNegative | None = None
    Qrr_As: Positive | None = None
    Qrr_current_A: Amperes | None = None
    Qrr_didt_A_per_s: Slope | None = None
    Eon_J: NonNegative | None = None
    Eon_didt_A_per_s: Slope | None = None
    I_GT_A: Amperes | None = None
    V_GT_V: Volts | None = None


class Igbt(Ratings, frozen=True, kw_only=True, tag_field="kind", tag="igbt"):
    """Ratings and characteristics of an IGBT (symbols of IEC 60747-9)."""

    V_CES_V: Volts | None = None
    I_C_A: Amperes | None = None
    I_C_case_C: Celsius | None = None
    I_CRM_A: Amperes | None = None
    V_CE0_V: NonNegative | None = None
    r_CE_ohm: NonNegative | None = None
    V_CE0_25C_V: NonNegative | None = None
    r_CE_25C_ohm: NonNegative | None = None
    Eon_J: NonNegative | None = None
    Eoff_J: NonNegative | None = None
    E_current_A: Amperes | None = None
    E_voltage_V: Volts | None = None
    E_Tvj_C: Celsius | None = None
    Eon_current_exponent: Exponent | None = None
    Eon_voltage_exponent: Exponent | None = None
    Eon_per_K: Annotated[float, Meta(ge=-0.1, le=0.1)] | None = None
    Eoff_current_exponent: Exponent | None = None
    Eoff_voltage_exponent: Exponent | None = None
    Eoff_per_K: Annotated[float, Meta(ge=-0.1, le=0.1)] | None = None
    tdon_min_s: NonNegative | None = None
    tdoff_max_s: Seconds | None = None
    tr_s: Seconds | None = None
    tf_s: Seconds | None = None
    driver_skew_s: NonNegative | None = None
    tsc_s: Seconds | None = None
    tsc_voltage_V: Volts | None = None
    package_inductance_H: NonNegative | None = None


class Diode(Ratings, frozen=True, kw_only=True, tag_field="kind", tag="diode"):
    """Ratings and characteristics of a feedback diode (symbols of IEC 60747-2)."""

    V_RRM_V: Volts | None = None
    I_FAV_A: Amperes | None = None
    I_FAV_case_C: Celsius | None = None
    I_FRMS_A: Amperes | None = None
    I_FRM_A: Amperes | None = None
    I_FSM_A: Amperes | None = None
    I_FSM_duration_s: Seconds | None = None
    I2t_A2s: Positive | None = None
    V_F0_V: NonNegative | None = None
    r_F_ohm: NonNegative | None = None
    V_F0_25C_V: NonNegative | None = None
    r_F_25C_ohm: NonNegative | None = None
    Err_J: NonNegative | None = None
    E_current_A: Amperes | None = None
    E_voltage_V: Volts | None = None
    E_Tvj_C: Celsius | None = None
    Err_current_exponent: Exponent | None = None
    Err_voltage_exponent: Exponent | None = None
    Err_per_K: Annotated[float, Meta(ge=-0.1, le=0.1)] | None = None
    Qrr_As: Positive | None = None
    Qrr_current_A: Amperes | None = None
    Qrr_didt_A_per_s: Slope | None = None
    co_packed: bool = False


Switch = Thyristor | Igbt


def entered(device: Switch | Diode, key: str) -> float:
    """A rating that is known to have been entered."""
    value: float | None = getattr(device, key)
    assert value is not None, f"{key} has not been entered"
    return value


def condition(device: Switch | Diode, key: str) -> float:
    """A numeric test condition, or exponent, as entered, else the usual one."""
    own = getattr(device, key)
    return float(USUAL_CONDITIONS[key] if own is None else own)
