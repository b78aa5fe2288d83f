"""Commissioning: step by step from a new link to a mount whose numbers are known."""
