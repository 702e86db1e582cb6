"""The program's name and version as results and reports state them."""

from __future__ import annotations

PROGRAM = "switchwright"
VERSION = "0.1.0"
