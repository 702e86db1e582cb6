"""Writing a file so that the one on disk is always the old or the new one, whole."""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
from pathlib import Path


def write_atomically(path: str | Path, data: bytes) -> None:
    """Replace a file's content in one step.

    The data goes to a temporary file in the same folder, is forced to the disk, and takes
    the file's name; only then is the old content given up. A link is followed, the file's
    mode kept, and no temporary file left behind.

    Raises
    ------
    OSError
        Nothing was changed.
    """
    target = Path(os.path.realpath(path))
    handle, temporary = tempfile.mkstemp(prefix=f".{target.name[:40]}.", dir=target.parent)
    try:
        try:
            _write_all(handle, data)
            os.fchmod(handle, _mode_for(target))
            os.fsync(handle)
        finally:
            os.close(handle)
        os.replace(temporary, target)
    except BaseException:
        with contextlib.suppress(OSError):
            os.unlink(temporary)
        raise
    _force_folder(target.parent)


def _write_all(handle: int, data: bytes) -> None:
    view = memoryview(data)
    while view:
        view = view[os.write(handle, view) :]


def _mode_for(target: Path) -> int:
    """The mode of the file that is replaced, else what a new file would get."""
    try:
        return stat.S_IMODE(target.stat().st_mode)
    except FileNotFoundError:
        mask = os.umask(0)
        os.umask(mask)
        return 0o666 & ~mask


def _force_folder(folder: Path) -> None:
    """Make the new name durable, where folders can be forced to the disk."""
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)
