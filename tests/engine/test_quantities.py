"""Entries with units: what an engineer types is what is understood, never off by a factor."""

from __future__ import annotations

import math

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from engine.quantities import QuantityFault, number_shown, parse, printed, shown

UNITS = (
    "V", "A", "ohm", "H", "F", "s", "Hz", "W", "J", "K", "C", "As", "A2s", "A/s", "V/s", "K/W",
    "deg", "%",
)  # fmt: skip

UNDERSTOOD = [
    ("35u", "H", 35e-6),
    ("35 uH", "H", 35e-6),
    ("35µH", "H", 35e-6),  # micro sign
    ("35μH", "H", 35e-6),  # Greek mu
    ("35\u202fµH", "H", 35e-6),  # thin space
    ("1.2 kV", "V", 1200.0),
    ("1.2 KV", "V", 1200.0),
    ("1,2 kV", "V", 1200.0),
    ("1,5", "V", 1.5),
    ("1.5", "V", 1.5),
    (",5", "V", 0.5),
    ("5.", "V", 5.0),
    ("−5", "V", -5.0),  # minus sign
    ("+5", "V", 5.0),
    ("1e3", "V", 1000.0),
    ("1E-3 s", "s", 1e-3),
    ("5K", "V", 5000.0),
    ("5K", "K", 5.0),
    ("5 K/W", "K/W", 5.0),
    ("20 K/kW", "K/W", 0.02),
    ("0,08", "K_per_W", 0.08),
    ("3 mΩ", "ohm", 3e-3),
    ("3 mΩ", "ohm", 3e-3),  # ohm sign
    ("3 mohm", "ohm", 3e-3),
    ("3 MΩ", "ohm", 3e6),
    ("3m", "ohm", 3e-3),
    ("3M", "ohm", 3e6),
    ("200 A/µs", "A/s", 200e6),
    ("200 A/us", "A_per_s", 200e6),
    ("1 kV/ms", "V/s", 1e6),
    ("45000 A²s", "A2s", 45000.0),
    ("45k", "A2s", 45000.0),
    ("12 µC", "As", 12e-6),
    ("40 °C", "C", 40.0),
    ("40", "C", 40.0),
    ("120°", "deg", 120.0),
    ("10 %", "%", 10.0),
    ("90 hz", "Hz", 90.0),
    ("2.2 mF", "F", 2.2e-3),
]


@pytest.mark.parametrize(("text", "unit", "value"), UNDERSTOOD)
def test_what_is_typed_is_understood(text: str, unit: str, value: float) -> None:
    assert parse(text, unit) == pytest.approx(value, rel=1e-15)


REFUSED = [
    ("1,234.5", "V", "thousands"),
    ("1.234,5", "V", "thousands"),
    ("1 234", "V", "thousands"),
    ("1\u202f234", "V", "thousands"),
    ("1.2.3", "V", "thousands"),
    ("", "V", "a number in V is needed"),
    ("  ", "V", "a number in V is needed"),
    ("abc", "V", "not a number in V"),
    ("nan", "V", "not a number in V"),
    ("inf", "V", "not a number in V"),
    ("1e400", "V", "too large"),
    ("5 A", "V", "not a number in V"),
    ("5 mm", "V", "not a number in V"),
    ("2u2", "H", "not a number in H"),
    ("45 kA²s", "A2s", "not a number in A²s"),  # 10³ A²s to some, (kA)²s to others
    ("5 kC", "C", "not a number in °C"),
    ("5 A/s/s", "A/s", "not a number in A/s"),
    ("٣", "V", "not a number in V"),
    ("--5", "V", "not a number in V"),
]


@pytest.mark.parametrize(("text", "unit", "reason"), REFUSED)
def test_what_is_ambiguous_or_no_quantity_is_refused(text: str, unit: str, reason: str) -> None:
    with pytest.raises(QuantityFault, match=reason):
        parse(text, unit)


def test_a_bare_number_takes_the_unit_of_its_column() -> None:
    assert parse("35", "s", bare_scale=1e-6) == 35e-6
    assert parse("35u", "s", bare_scale=1e-6) == 35e-6
    assert parse("35 ms", "s", bare_scale=1e-6) == 35e-3


@pytest.mark.parametrize(
    ("value", "unit", "text"),
    [
        (0.012, "H", "12 mH"),
        (540.0, "V", "540 V"),
        (1200.0, "V", "1200 V"),
        (25000.0, "V", "25 kV"),
        (50e6, "A/s", "50 A/µs"),
        (0.0, "A", "0 A"),
        (2e-7, "H", "200 nH"),
        (125.0, "C", "125 °C"),
        (120.0, "deg", "120°"),
        (0.08, "K_per_W", "0.08 K/W"),
        (999.9999999999999, "ohm", "1 kΩ"),
    ],
)
def test_a_quantity_is_printed_as_engineers_write_it(value: float, unit: str, text: str) -> None:
    assert shown(value, unit) == text


@given(st.floats(1e-12, 1e12), st.sampled_from(UNITS), st.sampled_from([1.0, -1.0]))
@example(999.9999999999999, "ohm", 1.0)
def test_what_is_shown_is_read_back(value: float, unit: str, sign: float) -> None:
    assert parse(shown(sign * value, unit), unit) == pytest.approx(sign * value, rel=1e-11)


@given(st.floats(1e-9, 1e9), st.sampled_from(UNITS))
def test_number_and_unit_shown_apart_are_the_whole(value: float, unit: str) -> None:
    number, name = number_shown(value, unit)
    assert parse(number + name, unit) == pytest.approx(value, rel=1e-11)


_LETTERS = st.text(alphabet="0123456789.,+-eE uµμmkKMGnpVAHFΩsHzWJ/²°% \u00a0\u202f", max_size=12)


def _answers(text: str, unit: str) -> None:
    try:
        value = parse(text, unit)
    except QuantityFault as fault:
        assert str(fault)
    else:
        assert math.isfinite(value)


@given(_LETTERS | st.text(max_size=8), st.sampled_from(UNITS))
@settings(max_examples=800)
def test_any_text_gives_a_finite_value_or_a_sentence(text: str, unit: str) -> None:
    _answers(text, unit)


@pytest.mark.long
@given(_LETTERS | st.text(max_size=8), st.sampled_from(UNITS))
@settings(max_examples=100_000)
def test_a_hundred_thousand_texts_give_a_finite_value_or_a_sentence(text: str, unit: str) -> None:
    _answers(text, unit)


def test_units_are_printed_with_their_signs() -> None:
    assert printed("ohm") == "Ω"
    assert printed("A2s") == "A²s"
    assert printed("K_per_W") == "K/W"
