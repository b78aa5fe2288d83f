"""Service: all that touches the outside."""
