"""The cautions, in one text for the window and the report."""

from __future__ import annotations

from pathlib import Path

_TEXT = Path(__file__).parent.parent / "resources" / "cautions.txt"


def cautions() -> tuple[str, ...]:
    """One caution a line, the gravest first."""
    return tuple(_paragraphs()[1].splitlines())


def cautions_in_short() -> str:
    """All cautions in one short paragraph."""
    return _paragraphs()[0]


def _paragraphs() -> list[str]:
    return _TEXT.read_text(encoding="utf-8").strip().split("\n\n")
