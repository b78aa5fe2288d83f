"""Safety: what may never happen. Standard library only."""
