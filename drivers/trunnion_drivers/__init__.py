"""Drivers: one package a kind of hardware."""
