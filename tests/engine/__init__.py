"""Tests of the engine, one file for each of its modules."""
