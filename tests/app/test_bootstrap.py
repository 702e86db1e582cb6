"""First use: a clear sentence for whatever stands in the way, and nothing done twice."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

from app import bootstrap


@pytest.fixture
def environment(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    place = tmp_path / ".venv"
    monkeypatch.setattr(bootstrap, "ENVIRONMENT", place)
    monkeypatch.setattr(bootstrap, "_LOCK", tmp_path / ".venv.lock")
    return place


def _made(environment: Path) -> None:
    python = bootstrap._python()
    python.parent.mkdir(parents=True)
    python.symlink_to(sys.executable)


def test_an_environment_counts_as_complete_only_with_its_marker(environment: Path) -> None:
    _made(environment)
    assert not bootstrap._is_complete(["a>=1"])
    bootstrap._write_marker(["a>=1", "b>=2"])
    assert bootstrap._is_complete(["a>=1"])
    assert bootstrap._is_complete(["b>=2", "a>=1"])
    assert not bootstrap._is_complete(["a>=2"])


def test_an_environment_whose_python_is_gone_is_made_anew(environment: Path) -> None:
    _made(environment)
    bootstrap._write_marker(["a>=1"])
    bootstrap._python().unlink()
    assert not bootstrap._is_complete(["a>=1"])


@pytest.mark.parametrize(
    ("output", "sentence"),
    [
        ("WARNING: Retrying … NewConnectionError('…')", "no network"),
        ("Temporary failure in name resolution", "no network"),
        ("x\nERROR: No matching distribution found for a>=9\n", "No matching distribution"),
        ("", "no reason given"),
    ],
)
def test_a_failed_fetch_is_told_in_one_sentence(output: str, sentence: str) -> None:
    told = bootstrap._why_no_packages(output)
    assert sentence in told
    assert "\n" not in told


def test_a_missing_venv_module_names_the_line_that_installs_it() -> None:
    told = bootstrap._why_no_environment("ensurepip is not available")
    assert "apt install python3-venv" in told


def test_a_missing_system_library_names_the_line_that_installs_it(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(bootstrap, "_LIBRARIES", {"libnothing.so.9": "libnothing9"})
    monkeypatch.setattr(sys, "platform", "linux")
    with pytest.raises(SystemExit) as stopped:
        bootstrap.name_missing_libraries()
    assert stopped.value.code == bootstrap.CANNOT_SET_UP
    assert capsys.readouterr().err.rstrip().endswith("apt-get install libnothing9")


def test_without_a_network_it_ends_with_one_sentence_and_no_half_made_environment(
    environment: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    def run(command: list[str], **_: object) -> subprocess.CompletedProcess[str]:
        if "venv" in command:
            _made(environment)
            return subprocess.CompletedProcess(command, 0, "", "")
        return subprocess.CompletedProcess(command, 1, "", "Network is unreachable")

    monkeypatch.setattr(subprocess, "run", run)
    with pytest.raises(SystemExit):
        bootstrap._make(["a>=1"])
    assert "There is no network" in capsys.readouterr().err
    assert not bootstrap._is_complete(["a>=1"])
