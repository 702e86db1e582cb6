"""Why no window can open, in one sentence instead of an abort."""

from __future__ import annotations

import sys

import pytest

from app import display
from app.display import display_problem

pytestmark = pytest.mark.skipif(not sys.platform.startswith("linux"), reason="only X11 is probed")


@pytest.mark.parametrize("platform", ["offscreen", "minimal", "vnc:port=1"])
def test_a_platform_without_display_needs_none(platform: str) -> None:
    assert display_problem({"QT_QPA_PLATFORM": platform}) is None


def test_a_missing_display_is_said() -> None:
    assert "no display" in (display_problem({}) or "")
    assert "no display" in (display_problem({"QT_QPA_PLATFORM": "xcb"}) or "")


def test_wayland_is_left_to_qt() -> None:
    assert display_problem({"WAYLAND_DISPLAY": "wayland-0"}) is None


def test_missing_libraries_are_named_with_their_packages(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(display, "XCB_LIBRARIES", {"libnowhere.so.9": "libnowhere9"})
    problem = display_problem({"DISPLAY": ":99"})
    assert problem is not None
    assert problem.endswith("apt install libnowhere9")


def test_a_display_that_does_not_answer_is_said(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(display, "XCB_LIBRARIES", {})
    assert display_problem({"DISPLAY": ":987"}) == "The display :987 does not answer."
