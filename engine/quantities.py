"""Numbers with units as engineers write them: '35u', '1.2 kV', '1,5 mΩ', '200 A/µs'.

Point and comma both mark the decimals; there are no thousands separators, so a text with two
such marks is refused rather than guessed. A bare number is in the unit of the field. The case
of a prefix counts (m is milli, M is mega) but for kilo, which is often typed K.
"""

from __future__ import annotations

import re
from math import floor, isfinite, log10

_NUMBER = re.compile(r"([+-]?)(\d*)(?:[.,](\d*))?(?:[eE]([+-]?\d{1,4}))?(?![\d.,])", re.ASCII)
_SPACES = dict.fromkeys(map(ord, " \t\u00a0\u2007\u2009\u202f"), None)
_LOOKALIKES = str.maketrans(
    {"\u00b5": "u", "\u03bc": "u", "\u2212": "-", "\u2126": "\u03a9", "\u00b2": "2", "\u2215": "/"}
)
_PREFIXES = {
    "": 1.0, "p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "k": 1e3, "K": 1e3, "M": 1e6, "G": 1e9,
}  # fmt: skip
_SPELLINGS = {
    "V": ("V", "v"),
    "A": ("A", "a"),
    "ohm": ("Ω", "ohm", "Ohm", "OHM"),
    "H": ("H", "h"),
    "F": ("F", "f"),
    "s": ("s",),
    "Hz": ("Hz", "hz", "HZ"),
    "W": ("W", "w"),
    "J": ("J", "j"),
    "K": ("K",),
    "As": ("As", "C"),
    "A2s": ("A2s",),
}
"""Spellings of the units that take prefixes, after lookalike letters have been made one."""
_PLAIN = {"": ("",), "C": ("", "°C", "°c", "C", "degC"), "deg": ("", "°", "deg"), "%": ("", "%")}
"""Spellings of the units that take none."""
_PRINTED = {"ohm": "Ω", "C": "°C", "A2s": "A²s", "deg": "°", "As": "C"}
_WITHOUT_KILO = {"V", "A", "W", "Hz"}
"""Units in which 5400 is read more easily than 5.4 k."""


class QuantityFault(ValueError):
    """A text that is no quantity of the unit asked for; the message says what is."""


def parse(text: str, unit: str, bare_scale: float = 1.0) -> float:
    """The SI value of a text.

    Parameters
    ----------
    unit : the SI unit as in the key of a file, such as 'V', 'ohm', 'A_per_s' or 'A/s'.
    bare_scale : SI value of 1 when neither unit nor prefix is written (1e-6 in a µs column).

    Raises
    ------
    QuantityFault
        The text is no finite number, or its unit is another.
    """
    unit = unit.replace("_per_", "/")
    cleaned = text.translate(_LOOKALIKES).strip()
    squeezed = cleaned.translate(_SPACES)
    if _inner_space(cleaned) or sum(map(squeezed.count, ".,")) > 1:
        raise QuantityFault("write the number without thousands separators: 1234.5")
    match = _NUMBER.match(squeezed)
    if match is None or not (match[2] or match[3]):
        raise QuantityFault(_expected(unit, text))
    suffix = squeezed[match.end() :]
    scale = bare_scale if not suffix else _scale(suffix, unit)
    if scale is None:
        raise QuantityFault(_expected(unit, text))
    mantissa = f"{match[1]}{match[2] or 0}.{match[3] or 0}"
    value = _times_power(mantissa, int(match[4] or 0), scale)
    if not isfinite(value):
        raise QuantityFault("too large")
    return value


def _times_power(mantissa: str, exponent: int, scale: float) -> float:
    """Mantissa · 10^exponent · scale, rounded once where the scale is a power of ten."""
    power = log10(scale)
    if abs(power - round(power)) < 1e-9:
        return float(f"{mantissa}e{exponent + round(power)}")
    return float(f"{mantissa}e{exponent}") * scale


def _inner_space(text: str) -> bool:
    """Whether a space stands between two digits, as a thousands separator would."""
    return re.search(r"\d[ \t\u00a0\u2007\u2009\u202f]+[\d.,]", text) is not None


def _expected(unit: str, text: str) -> str:
    shown_text = text.strip()[:24]
    if not shown_text:
        return f"a number in {printed(unit)} is needed"
    return f"'{shown_text}' is not a number in {printed(unit)}"


def _scale(suffix: str, unit: str) -> float | None:
    """What a written unit or prefix is in SI, `None` when it is not of this unit."""
    if unit in _PLAIN:
        return 1.0 if suffix in _PLAIN[unit] else None
    if suffix in _PREFIXES and not (suffix == "K" and unit.startswith("K")):
        return _PREFIXES[suffix]
    top, _, bottom = unit.partition("/")
    written_top, slash, written_bottom = suffix.partition("/")
    over = _part_scale(written_top, top)
    if not bottom:
        return None if slash else over
    under = _part_scale(written_bottom, bottom) if slash else None
    return over / under if over is not None and under is not None else None


def _part_scale(written: str, unit: str) -> float | None:
    for spelling in _SPELLINGS[unit]:
        if not written.endswith(spelling):
            continue
        prefix = written[: len(written) - len(spelling)]
        # kA²s is read as 10³ A²s by some and as (kA)²s by others.
        if unit == "A2s" and prefix:
            return None
        if prefix in _PREFIXES:
            return _PREFIXES[prefix]
    if unit == "K" and written == "°C":
        return 1.0
    return None


def printed(unit: str) -> str:
    """A unit as it is printed: Ω, °C, A/s."""
    return "/".join(_PRINTED.get(part, part) for part in unit.replace("_per_", "/").split("/"))


def number_shown(value: float, unit: str, digits: int = 12) -> tuple[str, str]:
    """Number and unit for display: (0.012, 'H') gives ('12', 'mH').

    At most `digits` significant digits; parsing the two together gives the value back to
    that many.
    """
    unit = unit.replace("_per_", "/")
    if unit in {"A/s", "V/s"} and abs(value) >= 1e4:
        return _trimmed(value * 1e-6, digits), unit[0] + "/µs"
    prefix, factor = _prefix_for(value, unit)
    return _trimmed(value / factor, digits), prefix + printed(unit)


def shown(value: float, unit: str, digits: int = 12) -> str:
    """A quantity as it is printed: '12 mH', '540 V', '50 A/µs'."""
    number, name = number_shown(value, unit, digits)
    return number + ("" if name == "°" else " ") + name


def _prefix_for(value: float, unit: str) -> tuple[str, float]:
    if value == 0.0 or unit in _PLAIN or unit in {"K", "A2s", "K/W", "A/s", "V/s"}:
        return "", 1.0
    if unit in _WITHOUT_KILO and 1.0 <= abs(value) < 1e4:
        return "", 1.0
    power = 3 * floor(log10(abs(value)) / 3.0 + 1e-12)
    power = max(-12, min(9, power))
    name = {-12: "p", -9: "n", -6: "µ", -3: "m", 0: "", 3: "k", 6: "M", 9: "G"}[power]
    return name, 10.0**power


def _trimmed(value: float, digits: int) -> str:
    return f"{value:.{digits}g}"
