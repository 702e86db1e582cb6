"""Saving never leaves half a file, whatever fails on the way."""

from __future__ import annotations

import errno
import os
import signal
import stat
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest

from app.safe_write import write_atomically

OLD, NEW = b"old" * 1000, b"new" * 3000
CALLS = ("open", "write", "fchmod", "fsync", "close", "replace")


def test_the_new_content_takes_the_place_of_the_old(tmp_path: Path) -> None:
    path = tmp_path / "a.json"
    write_atomically(path, OLD)
    write_atomically(path, NEW)
    assert path.read_bytes() == NEW
    assert os.listdir(tmp_path) == ["a.json"]


def test_mode_and_link_are_kept(tmp_path: Path) -> None:
    path, link = tmp_path / "a.json", tmp_path / "link.json"
    path.write_bytes(OLD)
    path.chmod(0o640)
    link.symlink_to(path)
    write_atomically(link, NEW)
    assert link.is_symlink()
    assert path.read_bytes() == NEW
    assert stat.S_IMODE(path.stat().st_mode) == 0o640


def test_a_short_write_is_continued(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    whole = os.write
    monkeypatch.setattr(os, "write", lambda handle, data: whole(handle, data[:7]))
    write_atomically(tmp_path / "a.json", NEW)
    assert (tmp_path / "a.json").read_bytes() == NEW


def _failing(real: Callable, at: int, code: int, count: list[int]) -> Callable:
    def call(*arguments: object, **names: object) -> object:
        count[0] += 1
        if count[0] == at:
            raise OSError(code, os.strerror(code))
        return real(*arguments, **names)

    return call


@pytest.mark.parametrize("code", [errno.ENOSPC, errno.EIO, errno.EACCES])
def test_every_failing_call_leaves_the_old_or_the_new_file_whole(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, code: int
) -> None:
    path = tmp_path / "a.json"
    for at in range(1, 40):
        path.write_bytes(OLD)
        count = [0]
        with monkeypatch.context() as patch:
            for name in CALLS:
                patch.setattr(os, name, _failing(getattr(os, name), at, code, count))
            try:
                write_atomically(path, NEW)
            except OSError as error:
                assert error.errno == code
        assert path.read_bytes() in (OLD, NEW)
        assert os.listdir(tmp_path) == ["a.json"]
        if count[0] < at:
            return
    raise AssertionError("more system calls than expected")


_WRITER = """
import sys
from app.safe_write import write_atomically
for number in range(10**9):
    write_atomically(sys.argv[1], str(number % 10).encode() * 60000)
"""


def _killed_in_the_act(path: Path, wait_s: float) -> None:
    writer = subprocess.Popen([sys.executable, "-c", _WRITER, str(path)])
    deadline = time.monotonic() + 20.0
    while not path.exists() and time.monotonic() < deadline:
        time.sleep(0.005)
    time.sleep(wait_s)
    writer.send_signal(signal.SIGKILL)
    writer.wait()
    data = path.read_bytes()
    assert len(data) == 60000
    assert len(set(data)) == 1


def test_a_kill_while_saving_leaves_a_whole_file(tmp_path: Path) -> None:
    for number in range(6):
        _killed_in_the_act(tmp_path / f"{number}.json", 0.003 * number)


@pytest.mark.long
def test_a_thousand_kills_while_saving_leave_whole_files(tmp_path: Path) -> None:
    for number in range(1000):
        _killed_in_the_act(tmp_path / "a.json", 0.0007 * (number % 50))
