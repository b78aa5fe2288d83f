"""Torture: whole stations in virtual time under seeded faults, judged by somebody else."""
