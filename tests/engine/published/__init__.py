"""Worked examples from print: source, inputs, printed answers with their digits."""
