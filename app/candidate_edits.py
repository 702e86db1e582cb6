"""Making, copying, renaming, choosing and removing candidates: from one selection to the next."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

from msgspec.structs import replace

from engine.ratings import Igbt, Thyristor
from engine.selection import Candidate, Selection, document_faults

EMPTY_SWITCHES = {"thyristor": Thyristor, "igbt": Igbt}


def with_new(selection: Selection, kind: str) -> Selection:
    """A candidate more, its sheets empty. The first one made is the chosen one."""
    stem = {"thyristor": "Thyristor", "igbt": "IGBT"}[kind]
    name = _free_name(stem, _names(selection))
    return _with_candidate(selection, Candidate(name=name, switch=EMPTY_SWITCHES[kind]()))


def with_copy(selection: Selection, index: int) -> Selection:
    """A candidate more, with the sheets of another."""
    original = selection.candidates[index]
    name = _free_name(f"{original.name} copy", _names(selection), first="")
    return _with_candidate(selection, replace(original, name=name))


def without(selection: Selection, index: int) -> Selection:
    """A candidate less; where it was the chosen one, the first of the others is."""
    left = selection.candidates[:index] + selection.candidates[index + 1 :]
    if selection.chosen != selection.candidates[index].name:
        return replace(selection, candidates=left)
    return replace(selection, candidates=left, chosen=left[0].name if left else "")


def with_name(selection: Selection, index: int, name: str) -> Selection:
    """A candidate by another name; it stays chosen where it was."""
    before = selection.candidates[index]
    renamed = _at(selection, index, replace(before, name=name))
    chosen = name if selection.chosen == before.name else selection.chosen
    return replace(renamed, chosen=chosen)


def name_fault(selection: Selection, index: int, name: str) -> str | None:
    """Why a candidate cannot have this name, in one sentence."""
    if len(name) > 200:
        return "at most 200 characters"
    key = f"candidates.{index}.name"
    faults = document_faults(with_name(selection, index, name))
    return next((fault.text for fault in faults if fault.key == key), None)


def with_chosen(selection: Selection, index: int) -> Selection:
    return replace(selection, chosen=selection.candidates[index].name)


def _with_candidate(selection: Selection, candidate: Candidate) -> Selection:
    candidates = (*selection.candidates, candidate)
    return replace(selection, candidates=candidates, chosen=selection.chosen or candidate.name)


def _at(selection: Selection, index: int, candidate: Any) -> Selection:
    before = selection.candidates
    return replace(selection, candidates=(*before[:index], candidate, *before[index + 1 :]))


def _names(selection: Selection) -> set[str]:
    return {candidate.name for candidate in selection.candidates}


def _free_name(stem: str, taken: Iterable[str], first: str = " 1") -> str:
    tries = [f"{stem}{first}", *(f"{stem} {number}" for number in range(2, 2 + len(set(taken))))]
    return next(name for name in tries if name not in taken)
