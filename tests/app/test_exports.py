"""Report and tables on disk."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from app import exports
from app.exports import Exports
from app.looked_at import LookedAt
from app.picture import Picture, picture_of
from app.report.options import ReportOptions
from app.selection_file import demo_selection
from tests.app.answers import Answers


@pytest.fixture(scope="module")
def picture() -> Picture:
    return picture_of(demo_selection(), LookedAt())


@pytest.fixture
def answers() -> Answers:
    return Answers()


@pytest.fixture
def writer(qtbot: QtBot, answers: Answers) -> Iterator[Exports]:
    writer = Exports(answers)
    yield writer
    writer.shut_down()


def test_tables_are_written_into_the_chosen_folder(
    qtbot: QtBot, writer: Exports, answers: Answers, picture: Picture, tmp_path: Path
) -> None:
    answers.folder = tmp_path / "tables"
    with qtbot.waitSignal(writer.written, timeout=20_000) as written:
        writer.tables(picture)
    assert written.args == [tmp_path / "tables"]
    assert (tmp_path / "tables" / "checks.csv").read_text().startswith("candidate,")


def test_the_report_is_a_pdf_under_the_name_of_the_document(
    qtbot: QtBot, writer: Exports, answers: Answers, picture: Picture, tmp_path: Path
) -> None:
    answers.save_file = tmp_path / "winch"
    with qtbot.waitSignal(writer.written, timeout=60_000):
        writer.report(picture, "winch", ReportOptions())
    assert answers.said == ["save winch.pdf"]
    assert (tmp_path / "winch.pdf").read_bytes().startswith(b"%PDF")


def test_a_folder_that_cannot_be_written_is_said(
    qtbot: QtBot, writer: Exports, answers: Answers, picture: Picture, tmp_path: Path
) -> None:
    (tmp_path / "file").write_text("")
    answers.folder = tmp_path / "file" / "tables"
    writer.tables(picture)
    qtbot.waitUntil(lambda: bool(answers.said), timeout=20_000)
    assert answers.said[0].startswith("tables cannot be written.\n")


def test_a_mistake_while_writing_is_said_and_logged(
    qtbot: QtBot,
    writer: Exports,
    answers: Answers,
    picture: Picture,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    caplog: pytest.LogCaptureFixture,
) -> None:
    def broken(picture: Picture, folder: Path) -> None:
        raise ZeroDivisionError("by zero")

    monkeypatch.setattr(exports, "_write_tables", broken)
    answers.folder = tmp_path
    writer.tables(picture)
    qtbot.waitUntil(lambda: bool(answers.said), timeout=20_000)
    assert exports.MISTAKE in answers.said[0]
    assert "by zero" in caplog.text


def test_giving_up_the_choice_writes_nothing(
    qtbot: QtBot, writer: Exports, picture: Picture
) -> None:
    with qtbot.assertNotEmitted(writer.busy):
        writer.report(picture, "winch", ReportOptions())
        writer.tables(picture)
