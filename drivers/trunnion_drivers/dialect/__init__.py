"""Dialects: controllers that are described in a file instead of programmed."""
