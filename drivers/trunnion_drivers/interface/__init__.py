"""Interface: the contract of a driver."""
