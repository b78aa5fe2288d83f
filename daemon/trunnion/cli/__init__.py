"""Command line: one file a group of commands."""
