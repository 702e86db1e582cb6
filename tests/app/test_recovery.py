"""Unsaved work survives a crash, and a second one."""

from __future__ import annotations

import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import QLockFile
from pytestqt.qtbot import QtBot

from app.open_selection import OpenSelection
from app.recovery import LeftBehind, Recovery, differing_keys, left_behind
from engine.selection import new_selection, with_entry

VOLTAGE = "supply.voltage_V"


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    return tmp_path / "recovery"


class Window:
    """A document and its guard; `crash` drops the guard as a killed process would."""

    def __init__(self, folder: Path) -> None:
        self.document = OpenSelection()
        self.recovery = Recovery(self.document, folder)

    def edit(self, voltage_V: float) -> None:
        self.document.set_entry(VOLTAGE, voltage_V, "Edit link voltage")
        self.document.leave_field()

    def crash(self) -> Path:
        self.recovery._lock.unlock()
        return self.recovery.file


@pytest.fixture
def window(folder: Path, qtbot: QtBot) -> Iterator[Window]:
    window = Window(folder)
    yield window
    window.recovery.close()


def found(folder: Path) -> list[LeftBehind]:
    behind = list(left_behind(folder))
    for each in behind:
        each.lock.unlock()
    return behind


def test_an_edit_is_on_disk_within_a_second_even_while_typing_goes_on(
    window: Window, qtbot: QtBot
) -> None:
    typed = iter(range(1, 100))
    for _ in range(20):
        window.edit(float(next(typed)))
        qtbot.wait(50)
    assert window.recovery.file.exists()


def test_an_untitled_document_is_found_after_a_crash(window: Window, folder: Path) -> None:
    window.edit(540.0)
    window.recovery.write()
    window.crash()
    (behind,) = found(folder)
    assert behind.selection == window.document.selection
    assert behind.path is None


def test_the_file_it_belongs_to_is_remembered(window: Window, folder: Path, tmp_path: Path) -> None:
    window.document.open(new_selection(), tmp_path / "winch.json")
    window.edit(540.0)
    window.recovery.write()
    window.crash()
    assert found(folder)[0].path == tmp_path / "winch.json"


def test_a_window_that_runs_has_not_crashed(window: Window, folder: Path) -> None:
    window.edit(540.0)
    window.recovery.write()
    assert found(folder) == []


def test_saving_or_undoing_to_the_saved_state_removes_the_file(
    window: Window, tmp_path: Path
) -> None:
    window.edit(540.0)
    window.recovery.write()
    window.document.saved_as(tmp_path / "winch.json")
    assert not window.recovery.file.exists()
    window.edit(600.0)
    window.recovery.write()
    assert window.recovery.file.exists()
    window.document.undo_stack.undo()
    window.recovery.write()
    assert not window.recovery.file.exists()


def test_a_clean_end_leaves_nothing(window: Window, folder: Path, qtbot: QtBot) -> None:
    other = Window(folder)
    other.edit(540.0)
    other.recovery.write()
    other.recovery.close()
    assert [file.name for file in folder.iterdir() if file.suffix == ".recovery"] == []


def test_a_second_crash_loses_nothing(window: Window, folder: Path) -> None:
    window.edit(540.0)
    window.recovery.write()
    window.crash()
    second = Window(folder)
    (behind,) = list(left_behind(folder))
    second.recovery.adopt(behind)
    second.document.open(behind.selection, behind.path, unsaved=True)
    second.crash()
    (again,) = found(folder)
    assert again.selection == behind.selection
    again.discard()
    assert found(folder) == []


def test_later_leaves_the_work_for_the_next_start(window: Window, folder: Path) -> None:
    window.edit(540.0)
    window.recovery.write()
    window.crash()
    assert len(found(folder)) == 1
    assert len(found(folder)) == 1


def test_a_damaged_recovery_file_is_passed_over(window: Window, folder: Path) -> None:
    (folder / "1-1.recovery").write_bytes(b"\x00\xff not ours")
    (folder / "1-2.recovery").write_bytes(b'{"path": null, "edited": "2024-01-01"}\n{"a": 1}')
    (folder / "1-3.recovery").write_bytes(b"[]\n{}")
    assert found(folder) == []


def test_the_lock_of_a_killed_process_is_free(folder: Path, window: Window) -> None:
    file = folder / "7-7.recovery"
    script = (
        "import os, signal, sys; from PySide6.QtCore import QLockFile;"
        "lock = QLockFile(sys.argv[1]); lock.tryLock(0);"
        "os.kill(os.getpid(), signal.SIGKILL)"
    )
    lock = file.with_suffix(".lock")
    subprocess.run([sys.executable, "-c", script, str(lock)], check=False, timeout=60)
    assert lock.exists()
    window.edit(540.0)
    window.recovery.write()
    file.write_bytes(window.recovery.file.read_bytes())
    assert [each.file for each in found(folder)] == [file]


def test_a_folder_that_cannot_be_written_is_said_and_costs_nothing(
    window: Window, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(path: Path, data: bytes) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("app.recovery.write_atomically", full)
    window.edit(540.0)
    with qtbot.waitSignal(window.recovery.failed) as failed:
        window.recovery.write()
    assert "No space left" in failed.args[0]


def test_what_differs_is_named_by_key() -> None:
    before = new_selection()
    after = with_entry(with_entry(before, VOLTAGE, 540.0), "title", "Winch")
    assert differing_keys(before, after) == ("title", "supply.voltage_V")
    assert differing_keys(after, after) == ()


def test_the_lock_names_the_process(window: Window) -> None:
    lock = QLockFile(str(window.recovery.file.with_suffix(".lock")))
    assert lock.getLockInfo()[0] > 0
