"""The test suite; `python3 -m tests` runs it."""
