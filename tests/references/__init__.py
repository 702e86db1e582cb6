"""Independent ways to the same bridge, slow and plain, for tests and benchmarks only."""
