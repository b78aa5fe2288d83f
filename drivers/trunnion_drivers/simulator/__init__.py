"""Simulator: a mount with inertia and limits."""
