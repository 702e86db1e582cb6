"""The fingerprint names what is computed with, and nothing else."""

from __future__ import annotations

import hashlib
import json

import msgspec

from engine.fingerprint import fingerprint
from engine.selection import new_selection, with_entry


def _selection():
    return with_entry(new_selection(), "supply.voltage_V", 540.0)


def test_titles_and_notes_do_not_count() -> None:
    for key in ("title", "engineer", "reference", "notes"):
        assert fingerprint(with_entry(_selection(), key, "x")) == fingerprint(_selection())


def test_every_other_entry_counts() -> None:
    assert fingerprint(with_entry(_selection(), "supply.voltage_V", 541.0)) != fingerprint(
        _selection()
    )


def test_it_is_the_digest_of_sorted_json_with_shortest_numbers() -> None:
    text = '{"format":"switchwright selection","supply":{"voltage_V":540.0},"version":1}'
    assert json.loads(text) == msgspec.to_builtins(_selection())
    assert fingerprint(_selection()) == hashlib.sha256(text.encode()).hexdigest()[:12]
