"""Takes the selection back out of a report, which carries it as an attached file."""

from __future__ import annotations

import re
import zlib
from collections.abc import Iterator

from engine.selection import FORMAT

_STREAM = re.compile(rb"stream\r?\n(.*?)\r?\nendstream", re.DOTALL)
_LARGEST = 20_000_000


def is_report(data: bytes) -> bool:
    """Whether a file's content is a PDF."""
    return data.startswith(b"%PDF")


def attached_selection(data: bytes) -> bytes | None:
    """The content of the attached selection file, `None` where a PDF carries none."""
    mark = f'"{FORMAT}"'.encode()
    for content in _streams(data):
        if content.lstrip().startswith(b"{") and mark in content[:400]:
            return content
    return None


def _streams(data: bytes) -> Iterator[bytes]:
    """Every stream of a PDF, unpacked where it is packed with deflate (ISO 32000-1, 7.4.4)."""
    for match in _STREAM.finditer(data):
        packed = match[1]
        try:
            yield zlib.decompressobj().decompress(packed, _LARGEST)
        except zlib.error:
            yield packed
