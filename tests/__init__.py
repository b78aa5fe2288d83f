"""Tests: they mirror the rooms; published/ holds the checks against outside sources."""
