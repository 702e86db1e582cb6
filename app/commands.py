"""The commands that need no window: `assess` and `demo`; without either the window opens."""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Sequence
from pathlib import Path
from typing import NoReturn

from app.safe_write import write_atomically
from engine.errors import InvalidSelection, SwitchwrightError
from engine.version import PROGRAM, VERSION

UNDERSIZED = 1
BAD_INPUT = 2
INTERRUPTED = 130


class Refusal(Exception):
    """A word of the command line, or a place to write to, that cannot be used."""


class _Parser(argparse.ArgumentParser):
    """Faults in one line each, without the usage text."""

    def error(self, message: str) -> NoReturn:
        raise Refusal(f"{message}; see {self.prog} --help")


def run(words: Sequence[str]) -> int:
    """Carry out a command line; returns the exit status."""
    try:
        return _carried_out(words)
    except Refusal as error:
        return _refused([str(error)])
    except InvalidSelection as error:
        return _refused([str(fault) for fault in error.faults])
    except SwitchwrightError as error:
        return _refused([str(error)])
    except BrokenPipeError:
        # Whoever read has read enough; keep Python from complaining when it flushes.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0
    except KeyboardInterrupt:
        return INTERRUPTED


def _refused(lines: Sequence[str]) -> int:
    for line in lines:
        print(" ".join(line.split()), file=sys.stderr)
    return BAD_INPUT


def _carried_out(words: Sequence[str]) -> int:
    commands = {"assess": _assess, "demo": _demo}
    if words and words[0] in commands:
        return commands[words[0]](words[1:])
    return _window(words)


def _parser(command: str, description: str) -> _Parser:
    parser = _Parser(
        prog=f"python3 -m app {command}".strip(), description=description, allow_abbrev=False
    )
    parser.add_argument("--version", action="version", version=f"{PROGRAM} {VERSION}")
    return parser


def _window(words: Sequence[str]) -> int:
    parser = _parser("", "Opens the window on FILE, else on the last selection or the demo.")
    parser.epilog = (
        "Commands without a window: 'assess FILE' and 'demo PATH'; each has its own --help. "
        "A file named like a command is opened as './demo'."
    )
    parser.add_argument(
        "file",
        nargs="?",
        type=Path,
        metavar="FILE",
        help="a selection file, or a report that carries one",
    )
    file = parser.parse_args(words).file
    from app.bootstrap import name_missing_libraries
    from app.display import display_problem

    name_missing_libraries()
    if file is not None:
        from app.selection_file import read_selection

        read_selection(file)
    problem = display_problem()
    if problem is not None:
        return _without_display(problem, file)
    from app.start import run_window

    return run_window(file)


def _without_display(problem: str, file: Path | None) -> int:
    """Say that there is no display; for the demo, assess it and write its report all the same."""
    print(problem, file=sys.stderr)
    if file is not None:
        raise Refusal("without a display use: python3 -m app assess FILE")
    from app.assess_command import assess_demo

    return assess_demo(_unused(Path("switchwright-demo.pdf")))


def _unused(path: Path) -> Path:
    """This path, else the first of -2, -3 … that does not exist."""
    number = 1
    candidate = path
    while candidate.exists():
        number += 1
        candidate = path.with_stem(f"{path.stem}-{number}")
    return candidate


def _assess(words: Sequence[str]) -> int:
    parser = _parser(
        "assess",
        "Assesses the candidates of a selection file over all corners of its duty. Exit status: "
        "0; 1 when the candidate asked for (else the chosen one, else any) is undersized; "
        "2 for bad input.",
    )
    parser.add_argument(
        "file", type=Path, metavar="FILE", help="a selection file, or a report that carries one"
    )
    parser.add_argument("--json", action="store_true", help="print the results as JSON only")
    parser.add_argument("--pdf", type=Path, metavar="PATH", help="write the report")
    parser.add_argument("--csv", type=Path, metavar="FOLDER", help="write the tables")
    parser.add_argument("--candidate", metavar="NAME", help="assess this candidate only")
    parser.add_argument("--strict", action="store_true", help="'not assessed' exits with 1 too")
    options = parser.parse_args(words)
    from app.assess_command import AssessOptions, assess_file

    return assess_file(
        AssessOptions(
            options.file,
            options.json,
            options.pdf,
            options.csv,
            options.candidate,
            options.strict,
        )
    )


def _demo(words: Sequence[str]) -> int:
    parser = _parser("demo", "Writes the demo selection, whose data are invented, as a file.")
    parser.add_argument("path", type=Path, metavar="PATH")
    parser.add_argument("--replace", action="store_true", help="replace an existing file")
    options = parser.parse_args(words)
    if options.path.exists() and not options.replace:
        raise Refusal(f"{options.path} exists; --replace allows to replace it")
    from app.selection_file import demo_selection, selection_bytes

    write_or_refuse(options.path, selection_bytes(demo_selection()))
    print(f"Wrote {options.path}")
    return 0


def write_or_refuse(path: Path, data: bytes) -> None:
    """Write a file whole, or say in one line why it cannot be written."""
    try:
        write_atomically(path, data)
    except OSError as error:
        raise Refusal(f"{path} cannot be written: {error.strerror or error}") from None
