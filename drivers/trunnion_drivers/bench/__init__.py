"""Bench: a simulated mount behind a real port, to drive before steel is connected."""
