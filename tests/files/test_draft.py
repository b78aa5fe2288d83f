from pathlib import Path

from hypothesis import given
from hypothesis import strategies as st

from trunnion.files.draft import draft_plan
from trunnion.files.plan import read_plan
from trunnion.files.yaml_text import parse_yaml

DAY = 1_796_083_200.0


def contacts_of(text: str) -> list[tuple[str, float, float]]:
    plan = read_plan(parse_yaml(text, "plan.yaml"), Path())
    return [(contact.target, contact.from_s, contact.until_s) for contact in plan.contacts]


def test_a_span_becomes_a_contact_of_whole_seconds_inside_it() -> None:
    text = draft_plan("QUILLON-1", [(DAY + 17.3, DAY + 611.9)])
    assert contacts_of(text) == [("QUILLON-1", DAY + 18, DAY + 611)]


def test_a_span_without_a_whole_second_is_left_out_and_no_pass_is_an_empty_plan() -> None:
    assert contacts_of(draft_plan("sun", [(DAY + 17.3, DAY + 17.9)])) == []


def test_a_target_that_never_sets_becomes_contacts_one_after_the_other() -> None:
    contacts = contacts_of(draft_plan("90455", [(DAY, DAY + 16 * 86400)]))
    assert [target for target, _, _ in contacts] == ["90455"] * 3
    assert contacts[0][2] == contacts[1][1]
    assert contacts[-1][2] == DAY + 16 * 86400


@given(st.text(st.characters(exclude_categories=("C", "Z")), min_size=1, max_size=40))
def test_a_draft_of_any_target_name_reads_back(name: str) -> None:
    if not name.casefold().startswith("fixed:"):
        assert contacts_of(draft_plan(name, [(DAY, DAY + 60)])) == [(name, DAY, DAY + 60)]
