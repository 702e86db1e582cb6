"""A short name for exactly one set of inputs: two selections that compute alike share it."""

from __future__ import annotations

import hashlib
import json

import msgspec

from engine.selection import Selection

_NOT_COMPUTED_WITH = ("title", "engineer", "reference", "notes")
_DIGITS = 12


def fingerprint(selection: Selection) -> str:
    """First 12 hex digits of SHA-256 over the selection without its titles and notes.

    The text that is hashed has sorted keys and shortest round-trip numbers.
    """
    content = msgspec.to_builtins(selection)
    for key in _NOT_COMPUTED_WITH:
        content.pop(key, None)
    text = json.dumps(content, sort_keys=True, separators=(",", ":"), ensure_ascii=False)
    return hashlib.sha256(text.encode()).hexdigest()[:_DIGITS]
