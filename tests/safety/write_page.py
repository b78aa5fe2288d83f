"""Write the operator's page anew from the policy: `python -m tests.safety.write_page`."""

from pathlib import Path

from trunnion.safety.page import operators_page

PAGE = Path(__file__).parents[2] / "systemd" / "OPERATORS.md"

if __name__ == "__main__":
    PAGE.write_text(operators_page(), encoding="utf-8")
