"""Pilot: what to do now, one state machine. Standard library only."""
