"""The policy in words: table and page say what the table of the gate says."""

from tests.safety.write_page import PAGE
from trunnion.safety.page import CAUTION, COLUMNS, operators_page, rows
from trunnion.safety.policy import POLICY
from trunnion.safety.verdict import Action, Rule


def test_the_table_has_a_row_a_rule_worst_first() -> None:
    table = list(rows())
    assert {row[0] for row in table} == {rule.value for rule in Rule}
    assert {len(row) for row in table} == {len(COLUMNS)}
    actions = [POLICY[Rule(row[0])].action for row in table]
    assert actions == sorted(actions, reverse=True)


def test_a_row_says_what_when_and_until_when() -> None:
    table = {row[0]: row for row in rows()}
    assert table["stalled"] == ("stalled", "stop for good", "3", "0", "by an operator")
    assert table["wind"] == ("wind", "go to stow", "0", "300", "by itself")


def test_the_page_tells_of_every_rule_under_what_it_does() -> None:
    page = operators_page()
    assert CAUTION in page
    headings = [line for line in page.splitlines() if line.startswith("## ")]
    assert len(headings) == len(Action)
    for rule, row in POLICY.items():
        assert f"**{rule.value}.** {row.meaning}" in page
        assert row.remedy in page
    assert "The program acts once it has lasted 3 s, until somebody has looked" in page
    assert "until the wind has been lower for a while and 300 s of calm" in page


def test_the_page_that_is_kept_is_the_one_that_the_table_makes() -> None:
    """Write it anew: `python -m tests.safety.write_page`."""
    assert PAGE.read_text(encoding="utf-8") == operators_page()
