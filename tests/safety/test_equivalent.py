"""What is excused from being tested is still there."""

import pytest

from tests.safety.equivalent import EQUIVALENT, IDLE_CHECKS
from tests.safety.mutation import mutants_of
from tests.safety.removal import removals


@pytest.mark.parametrize("name", EQUIVALENT)
def test_an_excused_change_can_still_be_made(name: str) -> None:
    module = name.partition(":")[0]
    assert name in {mutant.name for mutant in mutants_of(module)}


def test_an_idle_check_is_still_there() -> None:
    assert set(IDLE_CHECKS) <= {each.name for each in removals()}
