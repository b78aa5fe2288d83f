"""Changes to the gate that no test can notice, each with its reason."""

EQUIVALENT: dict[str, str] = {}
