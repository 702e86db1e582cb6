"""`python3 -m tests.benchmarks [WORD …]`: every measurement, or those of modules with a word."""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator


def main() -> int:
    from app.bootstrap import ROOT, inside_environment, name_missing_libraries

    inside_environment("tests.benchmarks", tests=True)
    name_missing_libraries()
    os.chdir(ROOT)
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    words = sys.argv[1:]
    print(_line("what", "measured", "reference", "ratio", "goal", ""))
    missed = 0
    for row in _rows(words):
        mark = {True: "met", False: "MISSED", None: ""}[row.met]
        missed += row.met is False
        print(_line(row.what, row.measured, row.reference, row.ratio, row.goal, mark), flush=True)
    return 1 if missed else 0


def _rows(words: list[str]) -> Iterator:  # type: ignore[type-arg]
    import importlib
    import pkgutil

    import tests.benchmarks

    for module in pkgutil.iter_modules(tests.benchmarks.__path__):
        if module.name == "__main__" or (words and not any(word in module.name for word in words)):
            continue
        for row in importlib.import_module(f"tests.benchmarks.{module.name}").ROWS:
            yield row()


def _line(what: str, measured: str, reference: str, ratio: str, goal: str, mark: str) -> str:
    return f"{what:<66}  {measured:>10}  {reference:>18}  {ratio:>9}  {goal:>16}  {mark}".rstrip()


if __name__ == "__main__":
    sys.exit(main())
