"""New, open and save never cost work."""

from __future__ import annotations

from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from app.document_files import DocumentFiles
from app.open_selection import OpenSelection
from app.selection_file import demo_selection, read_selection
from app.settings import Settings
from engine.selection import new_selection, with_entry
from tests.app.answers import Answers

VOLTAGE = "supply.voltage_V"


class Desk:
    """A document with its file actions, and everything they ask."""

    def __init__(self) -> None:
        self.document = OpenSelection()
        self.settings = Settings()
        self.answers = Answers()
        self.files = DocumentFiles(self.document, self.settings, self.answers)
        self.document.open(demo_selection(), None)

    def edit(self, voltage_V: float = 537.0) -> None:
        self.document.set_entry(VOLTAGE, voltage_V, "Edit link voltage")


@pytest.fixture
def desk(qtbot: QtBot) -> Desk:
    return Desk()


def test_saving_an_untitled_document_asks_for_a_file_and_writes_it(
    desk: Desk, tmp_path: Path
) -> None:
    desk.edit()
    desk.answers.save_file = tmp_path / "winch"
    assert desk.files.save()
    assert desk.document.path == tmp_path / "winch.json"
    assert read_selection(tmp_path / "winch.json").selection == desk.document.selection
    assert desk.document.undo_stack.isClean()
    assert desk.settings.recent_files == (tmp_path / "winch.json",)
    assert desk.settings.last_file == tmp_path / "winch.json"


def test_saving_again_writes_the_same_file_without_a_question(desk: Desk, tmp_path: Path) -> None:
    desk.answers.save_file = tmp_path / "winch.json"
    desk.files.save()
    desk.answers.said.clear()
    desk.edit()
    assert desk.files.save()
    assert desk.answers.said == []
    assert read_selection(tmp_path / "winch.json").selection.supply.voltage_V == 537.0


def test_giving_up_the_choice_of_a_file_saves_nothing(desk: Desk) -> None:
    desk.edit()
    assert not desk.files.save()
    assert not desk.document.undo_stack.isClean()


def test_a_folder_that_cannot_be_written_is_said_and_the_document_stays_unsaved(
    desk: Desk, tmp_path: Path
) -> None:
    desk.edit()
    desk.answers.save_file = tmp_path / "missing" / "winch.json"
    assert not desk.files.save()
    assert "winch.json cannot be saved." in desk.answers.said[-1]
    assert desk.document.path is None
    assert not desk.document.undo_stack.isClean()


def test_an_incomplete_document_can_be_saved_and_opened(desk: Desk, tmp_path: Path) -> None:
    desk.files.new()
    desk.edit()
    desk.answers.save_file = tmp_path / "half.json"
    desk.files.save()
    saved = desk.document.selection
    desk.files.new()
    assert desk.document.selection == new_selection()
    assert desk.files.open(tmp_path / "half.json")
    assert desk.document.selection == saved


@pytest.mark.parametrize(
    "content",
    [b"", b"\x00\xff\x13", b"{", b'{"format": "switchwright selection", "version": 99}', b"[]"],
)
def test_a_bad_file_is_explained_and_costs_nothing(
    desk: Desk, tmp_path: Path, content: bytes
) -> None:
    bad = tmp_path / "bad.json"
    bad.write_bytes(content)
    desk.edit()
    before = desk.document.selection
    assert not desk.files.open(bad)
    assert desk.answers.said[-1].startswith("bad.json cannot be opened.\n")
    assert desk.document.selection is before
    assert desk.document.undo_stack.count() == 1


def test_a_missing_file_is_explained(desk: Desk, tmp_path: Path) -> None:
    assert not desk.files.open(tmp_path / "gone.json")
    assert "gone.json cannot be opened." in desk.answers.said[-1]


def test_cancelling_the_unsaved_question_keeps_the_document(desk: Desk) -> None:
    desk.edit()
    before = desk.document.selection
    desk.files.new()
    assert desk.answers.said[-1].startswith("unsaved ")
    assert desk.document.selection is before


def test_going_on_without_saving_gives_the_changes_up(desk: Desk) -> None:
    desk.edit()
    desk.answers.unsaved = "discard"
    desk.files.new()
    assert desk.document.selection == new_selection()


def test_saving_from_the_question_saves_first(desk: Desk, tmp_path: Path) -> None:
    desk.edit()
    edited = desk.document.selection
    desk.answers.unsaved = "save"
    desk.answers.save_file = tmp_path / "winch.json"
    desk.files.new()
    assert read_selection(tmp_path / "winch.json").selection == edited
    assert desk.document.selection == new_selection()


def test_a_save_that_fails_in_the_question_keeps_the_document(desk: Desk, tmp_path: Path) -> None:
    desk.edit()
    before = desk.document.selection
    desk.answers.unsaved = "save"
    desk.answers.save_file = tmp_path / "missing" / "winch.json"
    desk.files.new()
    assert desk.document.selection is before


def test_a_saved_document_is_left_without_a_question(desk: Desk) -> None:
    assert desk.files.may_leave()
    assert desk.answers.said == []


def test_the_name_is_the_file_else_the_title(desk: Desk, tmp_path: Path) -> None:
    assert desk.files.name == desk.document.selection.title
    desk.document.saved_as(tmp_path / "winch.json")
    assert desk.files.name == "winch"
    desk.document.open(new_selection(), None)
    assert desk.files.name == "Untitled"


def test_the_suggested_file_name_is_one_that_every_system_takes(desk: Desk) -> None:
    title = 'Winch: "A/B" * 2?'
    desk.document.open(with_entry(new_selection(), "title", title), None, unsaved=True)
    desk.files.save_as()
    assert desk.answers.said[-1] == "save Winch A B 2.json"
