"""`python3 -m tests`: the whole suite in its own environment; further words go to pytest."""

from __future__ import annotations

import os
import sys


def main() -> int:
    from app.bootstrap import ROOT, inside_environment, name_missing_libraries

    inside_environment("tests", tests=True)
    name_missing_libraries()
    import pytest

    os.chdir(ROOT)
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    return int(pytest.main(sys.argv[1:]))


if __name__ == "__main__":
    status = main()
    sys.stdout.flush()
    sys.stderr.flush()
    # The interpreter would free thousands of tests' Qt objects in an order that Qt does not
    # survive; how the program itself ends is tested in processes of its own.
    os._exit(status)
