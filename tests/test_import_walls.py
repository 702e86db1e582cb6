"""Computation knows nothing of the window: imports run app → parts_library → engine."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parent.parent
QT = {"PySide6", "pyqtgraph", "shiboken6"}
FORBIDDEN = {"engine": QT | {"app", "parts_library", "pandas"}, "parts_library": QT | {"app"}}


def imported_roots(source: str) -> set[str]:
    """First names of all that a module imports, wherever in it the import stands."""
    found = set()
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Import):
            found |= {alias.name.split(".")[0] for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            found.add(node.module.split(".")[0])
    return found


@pytest.mark.parametrize("package", sorted(FORBIDDEN))
def test_no_module_looks_over_the_wall(package: str) -> None:
    for path in sorted((ROOT / package).rglob("*.py")):
        over = imported_roots(path.read_text(encoding="utf-8")) & FORBIDDEN[package]
        assert not over, f"{path.relative_to(ROOT)} imports {sorted(over)}"


def test_a_breach_would_be_seen() -> None:
    source = "def f():\n    from PySide6.QtCore import QObject\n    import app.theme"
    assert imported_roots(source) == {"PySide6", "app"}


@pytest.mark.parametrize(
    "module", ["app.commands", "app.assess_command", "engine.assessment", "app.bootstrap"]
)
def test_commands_without_a_window_load_no_qt_and_no_heavy_library(module: str) -> None:
    code = f"import sys, {module}; print(*sorted({{n.split('.')[0] for n in sys.modules}}))"
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, check=True, cwd=ROOT
    )
    assert not set(done.stdout.split()) & (QT | {"scipy", "pandas"})


def test_bootstrap_needs_nothing_but_the_standard_library() -> None:
    source = (ROOT / "app" / "bootstrap.py").read_text(encoding="utf-8")
    assert imported_roots(source) <= set(sys.stdlib_module_names)
