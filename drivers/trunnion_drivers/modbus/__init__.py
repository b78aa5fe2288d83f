"""Modbus: mounts behind a controller with registers, over a serial line or TCP."""
