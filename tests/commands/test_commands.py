"""The commands as a user runs them: in a process of their own, from start to exit status."""

from __future__ import annotations

import csv
import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

from app.selection_file import demo_selection, selection_bytes
from engine.ratings import Thyristor
from engine.selection import Candidate, Selection, with_entry

ROOT = Path(__file__).parent.parent.parent


def run(*words: object, cwd: Path = ROOT) -> subprocess.CompletedProcess[str]:
    environment = {k: v for k, v in os.environ.items() if k not in {"DISPLAY", "WAYLAND_DISPLAY"}}
    environment.pop("QT_QPA_PLATFORM", None)
    environment["PYTHONPATH"] = str(ROOT)
    return subprocess.run(
        [sys.executable, "-m", "app", *map(str, words)],
        capture_output=True,
        text=True,
        cwd=cwd,
        env=environment,
        timeout=120,
    )


def saved(folder: Path, selection: Selection, name: str = "selection.json") -> Path:
    path = folder / name
    path.write_bytes(selection_bytes(selection))
    return path


@pytest.fixture
def demo(tmp_path: Path) -> Path:
    return saved(tmp_path, demo_selection())


def test_demo_writes_a_file_that_assess_reads(tmp_path: Path) -> None:
    path = tmp_path / "demo.json"
    assert run("demo", path).returncode == 0
    done = run("assess", path)
    assert done.stderr == ""
    assert done.stdout.splitlines()[-1].endswith("not assessed")


def test_demo_replaces_only_when_told(tmp_path: Path) -> None:
    path = tmp_path / "demo.json"
    path.write_text("mine")
    refused = run("demo", path)
    assert refused.returncode == 2
    assert len(refused.stderr.splitlines()) == 1
    assert path.read_text() == "mine"
    assert run("demo", path, "--replace").returncode == 0
    assert path.read_bytes() == selection_bytes(demo_selection())


def test_the_last_line_counts_the_four_verdicts(demo: Path) -> None:
    lines = run("assess", demo).stdout.splitlines()
    counts = dict(reversed(part.split(" ", 1)) for part in lines[-1].split(", "))
    assert list(counts) == ["adequate", "tight", "undersized", "not assessed"]
    results = json.loads(run("assess", demo, "--json").stdout)
    verdicts = [check["verdict"] for c in results["candidates"] for check in c["checks"]]
    assert {word: verdicts.count(word) for word in counts} == {w: int(n) for w, n in counts.items()}


def test_json_holds_the_contracts_keys_and_nothing_else_is_printed(demo: Path) -> None:
    done = run("assess", demo, "--json")
    results = json.loads(done.stdout)
    assert {"program", "version", "nominal", "candidates", "wanted", "warnings"} <= set(results)
    assert {"rule_set", "fingerprint", "chosen"} <= set(results)
    positions = results["nominal"]["positions"]
    assert [position["position"] for position in positions] == ["T1", "T2", "T3", "T4", "T5", "T6"]
    assert len(results["fingerprint"]) == 12


def test_one_candidate_can_be_asked_for(demo: Path) -> None:
    name = demo_selection().candidates[1].name
    results = json.loads(run("assess", demo, "--json", "--candidate", name).stdout)
    assert [each["name"] for each in results["candidates"]] == [name]


def test_the_exit_status_is_that_of_the_candidate_that_counts(tmp_path: Path) -> None:
    chosen = with_entry(demo_selection(), "chosen", "")
    verdicts = {
        each["name"]: each["verdict"]
        for each in json.loads(run("assess", saved(tmp_path, chosen), "--json").stdout)[
            "candidates"
        ]
    }
    path = saved(tmp_path, chosen)
    for name, verdict in verdicts.items():
        expected = 1 if verdict == "undersized" else 0
        assert run("assess", path, "--candidate", name).returncode == expected
        assert (
            run("assess", saved(tmp_path, with_entry(chosen, "chosen", name), "c.json")).returncode
            == expected
        )
    assert run("assess", path).returncode == int("undersized" in verdicts.values())


def test_strict_makes_what_is_not_assessed_fail(tmp_path: Path) -> None:
    bare = Candidate(name="bare", switch=Thyristor())
    selection = with_entry(demo_selection(), "candidates", (bare,))
    path = saved(tmp_path, with_entry(selection, "chosen", "bare"))
    assert run("assess", path).returncode == 0
    assert run("assess", path, "--strict").returncode == 1


def test_tables_json_and_report_stand_together(demo: Path, tmp_path: Path) -> None:
    folder, pdf = tmp_path / "tables", tmp_path / "report.pdf"
    done = run("assess", demo, "--json", "--csv", folder, "--pdf", pdf)
    assert json.loads(done.stdout)["program"] == "switchwright"
    assert pdf.read_bytes().startswith(b"%PDF")
    names = {"duty", "positions", "events", "waveforms", "checks", "corners"}
    assert {path.stem for path in folder.iterdir()} == names
    for path in folder.iterdir():
        rows = list(csv.reader(path.open(encoding="utf-8")))
        assert len(rows) > 1
        assert len({len(row) for row in rows}) == 1


def test_without_a_display_the_demo_is_assessed_and_reported(tmp_path: Path) -> None:
    for name in ("switchwright-demo.pdf", "switchwright-demo-2.pdf"):
        done = run(cwd=tmp_path)
        assert done.returncode == 0
        assert "no display" in done.stderr
        assert (tmp_path / name).read_bytes().startswith(b"%PDF")


@pytest.mark.parametrize("words", [("--version",), ("assess", "--version"), ("demo", "--version")])
def test_every_command_tells_its_version(words: tuple[str, ...]) -> None:
    done = run(*words)
    assert done.returncode == 0
    assert done.stdout.startswith("switchwright ")


@pytest.mark.parametrize("words", [("--help",), ("assess", "--help"), ("demo", "--help")])
def test_every_command_has_help(words: tuple[str, ...]) -> None:
    assert run(*words).stdout.startswith("usage: python3 -m app")


BAD_ENTRIES = [
    ("supply.voltage_V", 0),
    ("supply.voltage_V", -540.0),
    ("supply.voltage_V", "540"),
    ("supply.voltage_V", 1e30),
    ("gating.conduction_deg", 119.0),
    ("gating.conduction_deg", 181.0),
    ("gating.blanking_s", 0.01),
    ("gating.frequency_low_Hz", 60.0),
    ("load.resistance_ohm", [0, 0, 0]),
    ("load.resistance_ohm", [0, 0, 9.0]),
    ("feedback_diodes", False),
    ("version", 2),
    ("rule_set", "no such rules"),
]


@pytest.mark.parametrize(("key", "value"), BAD_ENTRIES)
def test_a_bad_entry_gets_one_line_with_its_key(key: str, value: object, tmp_path: Path) -> None:
    content = json.loads(selection_bytes(demo_selection()))
    block = content
    *path, last = key.split(".")
    for name in path:
        block = block[name]
    block[last] = value
    file = tmp_path / "bad.json"
    file.write_text(json.dumps(content))
    done = run("assess", file, "--pdf", tmp_path / "r.pdf", "--csv", tmp_path / "t")
    assert done.returncode == 2
    assert done.stdout == ""
    lines = done.stderr.splitlines()
    assert len(lines) == 1
    assert lines[0].startswith(key)
    assert os.listdir(tmp_path) == ["bad.json"]


def test_a_load_without_resistance_and_inductance_is_refused(tmp_path: Path) -> None:
    selection = with_entry(demo_selection(), "load.resistance_ohm", 0.0)
    selection = with_entry(selection, "load.inductance_H", 0.0)
    done = run("assess", saved(tmp_path, selection))
    assert done.returncode == 2
    assert done.stderr == "load.resistance_ohm: R and L of a branch must not both be 0\n"


@pytest.mark.parametrize("content", [b"", b"\x00\x01\xff", b'{"format": "switchwright sel'])
def test_a_file_that_is_none_gets_one_line(content: bytes, tmp_path: Path) -> None:
    file = tmp_path / "bad.json"
    file.write_bytes(content)
    done = run("assess", file)
    assert done.returncode == 2
    assert len(done.stderr.splitlines()) == 1


@pytest.mark.parametrize(
    "words",
    [
        ("assess",),
        ("assess", "none.json"),
        ("assess", "--nonsense"),
        ("none.json",),
        ("demo",),
        ("--nonsense",),
    ],
)
def test_wrong_usage_gets_one_line_and_status_2(words: tuple[str, ...], tmp_path: Path) -> None:
    done = run(*words, cwd=tmp_path)
    assert done.returncode == 2
    assert len(done.stderr.splitlines()) == 1
    assert "Traceback" not in done.stderr


def test_an_unknown_candidate_is_named_with_those_there_are(demo: Path) -> None:
    done = run("assess", demo, "--candidate", "nobody")
    assert done.returncode == 2
    assert demo_selection().candidates[0].name in done.stderr


def test_a_place_that_cannot_be_written_gets_one_line(demo: Path, tmp_path: Path) -> None:
    file = tmp_path / "file"
    file.write_text("")
    for words in (("--pdf", file / "r.pdf"), ("--csv", file / "tables")):
        done = run("assess", demo, *words)
        assert done.returncode == 2
        assert len(done.stderr.splitlines()) == 1
        assert "cannot be written" in done.stderr
    done = run("demo", file / "demo.json")
    assert done.returncode == 2


def test_a_reader_that_has_enough_ends_it_quietly(demo: Path) -> None:
    command = f"{sys.executable} -m app assess {demo} --json | head -c 10"
    done = subprocess.run(
        ["bash", "-o", "pipefail", "-c", command], capture_output=True, text=True, cwd=ROOT
    )
    assert done.stderr == ""
