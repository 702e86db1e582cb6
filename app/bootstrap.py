"""First use: an environment of the project's own, made with the standard library alone.

The packages that pyproject.toml names go into `.venv` in the project's folder. A marker,
written last, keeps the digests of the packages: while it agrees with the list a start costs
a file read, and an environment without it is half-made and is made anew.
"""

from __future__ import annotations

import contextlib
import hashlib
import os
import subprocess
import sys
import tomllib
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import NoReturn

ROOT = Path(__file__).resolve().parent.parent
ENVIRONMENT = ROOT / ".venv"
_LOCK = ROOT / ".venv.lock"
_MARKER = "switchwright-packages"
OLDEST_PYTHON = (3, 11)
CANNOT_SET_UP = 3

_LIBRARIES = {
    "libGL.so.1": "libgl1",
    "libEGL.so.1": "libegl1",
    "libxkbcommon.so.0": "libxkbcommon0",
    "libdbus-1.so.3": "libdbus-1-3",
    "libfontconfig.so.1": "libfontconfig1",
    "libglib-2.0.so.0": "libglib2.0-0",
}
"""System libraries without which Qt does not load, and the Debian packages that hold them."""


def inside_environment(module: str, tests: bool = False) -> None:
    """Go on in the project's environment, making it first where it is missing or out of date.

    Returns at once when already inside and complete; else this process becomes
    `python -m module` of the environment, with the same words.
    """
    if sys.version_info < OLDEST_PYTHON:
        _stop(f"Switchwright needs Python 3.11 or later; this is {sys.version.split()[0]}.")
    packages = _packages(tests)
    if not _is_complete(packages):
        with _alone():
            if not _is_complete(packages):
                _make(packages)
    if Path(sys.prefix).resolve() != ENVIRONMENT.resolve():
        _go_on(module)


def _packages(tests: bool) -> list[str]:
    with (ROOT / "pyproject.toml").open("rb") as file:
        project = tomllib.load(file)["project"]
    wanted = list(project["dependencies"])
    return wanted + project["optional-dependencies"]["test"] if tests else wanted


def _digests(packages: list[str]) -> set[str]:
    return {hashlib.sha256(package.encode()).hexdigest()[:16] for package in packages}


def _is_complete(packages: list[str]) -> bool:
    """Whether the environment holds all these packages, by its marker."""
    try:
        installed = set((ENVIRONMENT / _MARKER).read_text().split())
    except OSError:
        return False
    return _digests(packages) <= installed and _python().exists()


def _make(packages: list[str]) -> None:
    """Build the environment, or add to one that lacks some packages."""
    if not (ENVIRONMENT / _MARKER).exists() or not _python().exists():
        _say("Setting up Switchwright's own environment (first use, about a minute) …")
        _run([sys.executable, "-m", "venv", "--clear", str(ENVIRONMENT)], _why_no_environment)
    _say("Fetching packages: " + ", ".join(package.split(">")[0] for package in packages) + " …")
    pip = [str(_python()), "-m", "pip", "install", "--quiet"]
    _run([*pip, "--disable-pip-version-check", *packages], _why_no_packages)
    _write_marker(packages)
    _say("Ready.")


def _write_marker(packages: list[str]) -> None:
    marker = ENVIRONMENT / _MARKER
    before = set(marker.read_text().split()) if marker.exists() else set()
    marker.write_text("\n".join(sorted(before | _digests(packages))) + "\n")


def _run(command: list[str], why: Callable[[str], str]) -> None:
    done = subprocess.run(command, capture_output=True, text=True)
    if done.returncode:
        _stop(why(done.stdout + done.stderr))


def _why_no_environment(output: str) -> str:
    if "ensurepip" in output or "python3-venv" in output:
        return "Python's venv module is incomplete. Install it: apt install python3-venv"
    return "The environment could not be made: " + _last_line(output)


def _why_no_packages(output: str) -> str:
    signs = ("NewConnectionError", "Temporary failure", "Network is unreachable", "ConnectTimeout")
    if any(sign in output for sign in (*signs, "Failed to establish", "Name or service not known")):
        return "There is no network, and the packages are needed once. Connect and start again."
    return "The packages could not be installed: " + _last_line(output)


def _last_line(output: str) -> str:
    lines = [line for line in output.splitlines() if line.strip()]
    errors = [line for line in lines if "ERROR" in line]
    return (errors or lines or ["no reason given"])[-1]


@contextlib.contextmanager
def _alone() -> Iterator[None]:
    """Let one first start do the work while others wait for it."""
    try:
        import fcntl
    except ImportError:
        yield
        return
    try:
        lock = _LOCK.open("w")
    except OSError as error:
        _stop(f"The project's folder cannot be written: {error.strerror}: {ROOT}")
    with lock:
        fcntl.flock(lock, fcntl.LOCK_EX)
        yield


def _python() -> Path:
    return ENVIRONMENT / ("Scripts/python.exe" if os.name == "nt" else "bin/python")


def _go_on(module: str) -> NoReturn:
    python = str(_python())
    words = [python, "-m", module, *sys.argv[1:]]
    if os.name == "nt":
        sys.exit(subprocess.call(words))
    sys.stdout.flush()
    os.execv(python, words)


def name_missing_libraries() -> None:
    """On Linux: name the system libraries that Qt would miss, with the line that installs them."""
    if not sys.platform.startswith("linux"):
        return
    import ctypes

    missing = []
    for library, package in _LIBRARIES.items():
        try:
            ctypes.CDLL(library)
        except OSError:
            missing.append(package)
    if missing:
        _stop(
            "Qt needs system libraries that are missing. Install them: sudo apt-get install "
            + " ".join(missing)
        )


def _say(text: str) -> None:
    print(text, file=sys.stderr, flush=True)


def _stop(text: str) -> NoReturn:
    _say(text)
    sys.exit(CANNOT_SET_UP)
