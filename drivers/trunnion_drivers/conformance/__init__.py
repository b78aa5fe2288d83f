"""Conformance: the test kit that any driver must pass."""
