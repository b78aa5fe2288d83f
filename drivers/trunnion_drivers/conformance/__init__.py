"""Conformance: the test kit that any driver must pass. Needs pytest."""

import pytest

pytest.register_assert_rewrite("trunnion_drivers.conformance.kit")
