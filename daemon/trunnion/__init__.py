"""Trunnion: keeps a ground station's antenna on every contact of its pass plan."""
