"""Making, copying, renaming, choosing and removing candidates."""

from __future__ import annotations

import pytest

from app.candidate_edits import (
    name_fault,
    with_chosen,
    with_copy,
    with_name,
    with_new,
    without,
)
from engine.ratings import Igbt, Thyristor
from engine.selection import Selection, document_faults, new_selection


def names(selection: Selection) -> list[str]:
    return [candidate.name for candidate in selection.candidates]


def three() -> Selection:
    selection = new_selection()
    for kind in ("thyristor", "igbt", "thyristor"):
        selection = with_new(selection, kind)
    return selection


def test_new_candidates_get_names_of_their_own_and_the_first_is_chosen() -> None:
    selection = three()
    assert names(selection) == ["Thyristor 1", "IGBT 1", "Thyristor 2"]
    assert [type(each.switch) for each in selection.candidates] == [Thyristor, Igbt, Thyristor]
    assert selection.chosen == "Thyristor 1"
    assert not list(document_faults(selection))


def test_a_copy_has_the_sheets_of_the_original() -> None:
    selection = with_copy(with_copy(three(), 1), 1)
    assert names(selection)[3:] == ["IGBT 1 copy", "IGBT 1 copy 2"]
    assert selection.candidates[3].switch == selection.candidates[1].switch


def test_a_renamed_candidate_stays_chosen() -> None:
    assert with_name(three(), 0, "Anker").chosen == "Anker"
    assert with_name(three(), 1, "Anker").chosen == "Thyristor 1"


@pytest.mark.parametrize(
    ("name", "said"),
    [("IGBT 1", "must differ"), (" ", "needed"), ("x" * 201, "at most 200"), ("Anker", None)],
)
def test_a_name_is_refused_for_a_reason(name: str, said: str | None) -> None:
    fault = name_fault(three(), 0, name)
    assert fault is None if said is None else said in (fault or "")


def test_without_the_chosen_one_the_first_of_the_others_is_chosen() -> None:
    selection = with_chosen(three(), 2)
    assert without(selection, 2).chosen == "Thyristor 1"
    assert without(selection, 0).chosen == "Thyristor 2"
    assert without(with_new(new_selection(), "igbt"), 0).chosen == ""
