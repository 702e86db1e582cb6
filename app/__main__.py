"""`python3 -m app`: the window, or one of the commands."""

from __future__ import annotations

import sys


def main() -> int:
    from app.bootstrap import inside_environment

    inside_environment("app")
    from app.commands import run

    return run(sys.argv[1:])


if __name__ == "__main__":
    try:
        sys.exit(main())
    except KeyboardInterrupt:
        sys.exit(130)
