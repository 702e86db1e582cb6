"""Whether a window can open here. Qt itself would end the program without a word of why."""

from __future__ import annotations

import ctypes
import os
import sys
from collections.abc import Mapping

XCB_LIBRARIES = {
    "libxcb.so.1": "libxcb1",
    "libxcb-cursor.so.0": "libxcb-cursor0",
    "libxkbcommon-x11.so.0": "libxkbcommon-x11-0",
    "libxcb-icccm.so.4": "libxcb-icccm4",
    "libxcb-keysyms.so.1": "libxcb-keysyms1",
    "libxcb-shape.so.0": "libxcb-shape0",
}
"""What Qt loads for X11, and the Debian package of each."""


def display_problem(environment: Mapping[str, str] = os.environ) -> str | None:
    """One sentence that says why no window can open, `None` when one can."""
    platform = environment.get("QT_QPA_PLATFORM", "")
    if not sys.platform.startswith("linux") or platform.split(":")[0] not in ("", "xcb"):
        return None
    if not platform and environment.get("WAYLAND_DISPLAY"):
        return None
    if not environment.get("DISPLAY"):
        return "There is no display here (DISPLAY and WAYLAND_DISPLAY are not set)."
    return _missing_libraries() or _refused_connection(environment["DISPLAY"])


def _missing_libraries() -> str | None:
    packages = [package for name, package in XCB_LIBRARIES.items() if not _loads(name)]
    if not packages:
        return None
    return f"The window needs system libraries that are missing: apt install {' '.join(packages)}"


def _loads(library: str) -> bool:
    try:
        ctypes.CDLL(library)
    except OSError:
        return False
    return True


def _refused_connection(display: str) -> str | None:
    xcb = ctypes.CDLL("libxcb.so.1")
    xcb.xcb_connect.restype = ctypes.c_void_p
    xcb.xcb_connect.argtypes = [ctypes.c_char_p, ctypes.c_void_p]
    xcb.xcb_connection_has_error.argtypes = [ctypes.c_void_p]
    xcb.xcb_disconnect.argtypes = [ctypes.c_void_p]
    connection = xcb.xcb_connect(display.encode(), None)
    refused = xcb.xcb_connection_has_error(connection)
    xcb.xcb_disconnect(connection)
    return f"The display {display} does not answer." if refused else None
