"""The selection file: every fault by its key, and the round trip."""

from __future__ import annotations

import json
import random
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from app.selection_file import (
    demo_selection,
    read_selection,
    selection_bytes,
    selection_from_bytes,
)
from engine.errors import InvalidSelection
from engine.selection import Selection, new_selection, with_entry

HEAD = '{"format": "switchwright selection", "version": 1'


def faults_of(text: str | bytes) -> list[str]:
    with pytest.raises(InvalidSelection) as caught:
        selection_from_bytes(text.encode() if isinstance(text, str) else text)
    return [str(fault) for fault in caught.value.faults]


def test_what_is_written_is_read_back() -> None:
    assert selection_from_bytes(selection_bytes(demo_selection())) == demo_selection()


def test_an_incomplete_document_is_kept_too() -> None:
    assert selection_from_bytes(selection_bytes(new_selection())) == new_selection()


def test_entries_nobody_made_are_left_out_of_the_file() -> None:
    content = json.loads(selection_bytes(with_entry(new_selection(), "supply.voltage_V", 540.0)))
    assert content["supply"] == {"voltage_V": 540.0}


def test_a_byte_order_mark_is_passed_over() -> None:
    assert selection_from_bytes(b"\xef\xbb\xbf" + selection_bytes(new_selection()))


def test_all_faults_are_named_at_once_each_by_its_key() -> None:
    text = (
        HEAD + ', "supply": {"voltage_V": -5, "voltag_low_V": 1, "voltage_high_V": "a"}, '
        '"gating": {"conduction_deg": 200}, "load": {"resistance_ohm": [1, 2], '
        '"inductance_H": [1, -2, 3], "connection": "ring"}, "extra": 1}'
    )
    assert sorted(faults_of(text)) == [
        "extra: unknown key",
        "gating.conduction_deg: must be a number at least 120 and at most 180; got 200",
        "load.connection: must be 'delta' or 'star'; got 'ring'",
        "load.inductance_H.1: must be a number at least 0 and at most 1000; got -2",
        "load.resistance_ohm: must be one number or three; got 2",
        "supply.voltag_low_V: unknown key; did you mean 'voltage_low_V'?",
        "supply.voltage_V: must be a number above 0 and at most 100000; got -5",
        "supply.voltage_high_V: must be a number above 0 and at most 100000; got 'a'",
    ]


@pytest.mark.parametrize(
    ("text", "fault"),
    [
        ("", "file: is empty"),
        (HEAD, "file: is not complete JSON"),
        (b"\x00\x80\xff", "file: is not text in UTF-8"),
        ("[" * 200_000, "file: is nested too deeply"),
        ("[1]", "format: must be 'switchwright selection'"),
        ('{"format": "other"}', "format: must be 'switchwright selection'"),
        (HEAD.replace("1", "2") + "}", "version: must be at most 1; got 2, from a later program"),
        (HEAD + ', "supply": {"voltage_V": NaN}}', "file: holds NaN"),
        (HEAD + ', "supply": {"voltage_V": 1e999}}', "supply.voltage_V: must be a number"),
        (HEAD + ', "supply": {"voltage_V": true}}', "supply.voltage_V: must be a number"),
        (HEAD + ', "supply": {"voltage_V": "540"}}', "supply.voltage_V: must be a number"),
        (HEAD + ', "supply": {"voltage_V": 0}}', "supply.voltage_V: must be a number above 0"),
        (HEAD + ', "supply": {"voltage_V": 1' + "0" * 400 + "}}", "supply.voltage_V: must be"),
        (HEAD + ', "supply": {"voltage_V": 1' + "0" * 9999 + "}}", "file: holds a number too"),
        (HEAD + ', "supply": []}', "supply: must be a block of keys; got a list"),
        (HEAD + ', "supply": {"voltage_V": 1, "voltage_V": 2}}', "voltage_V: given twice"),
        (HEAD + ', "feedback_diodes": 1}', "feedback_diodes: must be true or false; got 1"),
        (HEAD + ', "title": "\\ud800"}', "title: holds half a character"),
        (HEAD + ', "candidates": [{"name": "a"}]}', "candidates.0.switch: needed, not given"),
        (
            HEAD + ', "candidates": [{"name": "a", "switch": {"kind": "valve"}}]}',
            "candidates.0.switch.kind: must be 'igbt' or 'thyristor'; got 'valve'",
        ),
        (
            HEAD + ', "candidates": [{"name": "a", "switch": {"kind": "igbt"}}, '
            '{"name": "a", "switch": {"kind": "igbt"}}]}',
            "candidates.0.name: must differ from the others; 'a' stands twice",
        ),
        (HEAD + ', "chosen": "b"}', "chosen: must name one of the candidates; got 'b'"),
    ],
)
def test_each_bad_file_gets_a_clear_line(text: str | bytes, fault: str) -> None:
    assert faults_of(text)[0].startswith(fault)


def test_a_missing_file_and_a_folder_are_said_in_one_line(tmp_path: Path) -> None:
    for path in (tmp_path / "none.json", tmp_path):
        with pytest.raises(InvalidSelection, match="file: cannot be read"):
            read_selection(path)


def _mutated(random_source: random.Random) -> bytes:
    """The demo's file with some bytes changed, cut, doubled or swapped."""
    data = bytearray(selection_bytes(demo_selection()))
    for _ in range(random_source.randint(1, 6)):
        at = random_source.randrange(len(data))
        kind = random_source.randrange(4)
        if kind == 0:
            data[at] = random_source.randrange(256)
        elif kind == 1:
            del data[at : at + random_source.randrange(1, 30)]
        elif kind == 2:
            data[at:at] = data[at : at + random_source.randrange(1, 30)]
        else:
            data[at:at] = random_source.choice([b"1e999", b"NaN", b"{", b"]", b"-", b"null"])
    return bytes(data)


def _opens_or_is_refused(data: bytes) -> None:
    try:
        selection = selection_from_bytes(data)
    except InvalidSelection as error:
        assert error.faults
        assert all("\n" not in str(fault) for fault in error.faults)
    else:
        assert isinstance(selection, Selection)
        assert selection_from_bytes(selection_bytes(selection)) == selection


@given(st.integers(0, 2**32))
@settings(max_examples=300)
def test_a_damaged_file_opens_or_is_refused_and_nothing_else(seed: int) -> None:
    _opens_or_is_refused(_mutated(random.Random(seed)))


@pytest.mark.long
def test_a_hundred_thousand_damaged_files_open_or_are_refused() -> None:
    source = random.Random(1)
    for _ in range(100_000):
        _opens_or_is_refused(_mutated(source))


_JSON = st.recursive(
    st.none() | st.booleans() | st.floats() | st.integers() | st.text(max_size=5),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=5), inner),
    max_leaves=8,
)


@given(st.sampled_from(sorted(Selection.__struct_fields__)), _JSON)
@settings(max_examples=300)
def test_any_value_at_any_key_is_taken_or_named(key: str, value: object) -> None:
    content = {"format": "switchwright selection", "version": 1, key: value}
    _opens_or_is_refused(json.dumps(content).encode())
