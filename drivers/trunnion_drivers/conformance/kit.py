# ruff: noqa: D102, S101 - these are tests, whose names say what they ask
"""The test kit that any driver must pass, ours and other people's.

Subclass `DriverConformance` in a test module and give it a fixture `rig`:

    class TestMyDriver(DriverConformance):
        @pytest.fixture
        def rig(self) -> Iterator[Rig]: ...

Nothing is skipped: where the hardware lacks something, the kit asks that the driver says so.
"""

from itertools import product
from math import inf, nan

import pytest

from trunnion_drivers.conformance.rig import Rig
from trunnion_drivers.conformance.watch import (
    come_home,
    error_deg,
    has_come_to_rest,
    is_still,
    is_still_at_first,
    lasted_s,
    move_and_read,
    moved,
    part_way_s,
    replaced,
    rest_until_braked,
    settle,
    still_s,
)
from trunnion_drivers.interface.errors import BadSettings, LinkLost, NoReply, WrongState

NOT_NUMBERS = [nan, inf, -inf]


class DriverConformance:
    """Every promise of the contract, as a test."""

    def test_a_new_driver_is_closed_and_will_not_work(self, rig: Rig) -> None:
        assert not rig.driver.is_open
        for call in (rig.driver.read, rig.driver.halt, lambda: rig.driver.move(rig.home)):
            with pytest.raises(WrongState, match="open"):
                call()

    def test_open_and_close_may_be_repeated(self, rig: Rig) -> None:
        rig.driver.close()
        for _ in range(2):
            rig.driver.open()
            rig.driver.open()
            assert rig.driver.is_open
            rig.driver.read()
            rig.driver.close()
            rig.driver.close()
            assert not rig.driver.is_open

    def test_a_closed_driver_is_like_a_new_one(self, rig: Rig) -> None:
        rig.driver.open()
        rig.driver.close()
        with pytest.raises(WrongState, match="open"):
            rig.driver.read()

    def test_opening_moves_nothing(self, rig: Rig) -> None:
        rig.driver.open()
        assert is_still(rig)

    def test_a_reading_is_of_now(self, rig: Rig) -> None:
        rig.driver.open()
        for _ in range(3):
            before_s = rig.clock.monotonic_s()
            taken_s = rig.driver.read().taken_s
            assert before_s <= taken_s <= rig.clock.monotonic_s()

    def test_every_call_returns_in_time(self, rig: Rig) -> None:
        driver = rig.driver
        for call in (driver.open, driver.read, lambda: driver.move(rig.home), driver.halt):
            assert lasted_s(rig, call) <= rig.longest_call_s

    @pytest.mark.parametrize("joint", [0, 1])
    @pytest.mark.parametrize("by_deg", [4.3, -3.7])
    def test_it_goes_where_it_is_told(self, rig: Rig, joint: int, by_deg: float) -> None:
        come_home(rig)
        goal = moved(rig.home, joint, by_deg)
        settle(rig, goal)
        assert error_deg(rig.driver.read(), goal) <= rig.accuracy_deg

    def test_the_newest_order_wins(self, rig: Rig) -> None:
        come_home(rig)
        rig.driver.move(moved(rig.home, 0, 4.1))
        goal = moved(rig.home, 0, -3.3)
        settle(rig, goal)
        assert error_deg(rig.driver.read(), goal) <= rig.accuracy_deg

    def test_a_halt_brings_it_to_rest_and_may_be_repeated(self, rig: Rig) -> None:
        come_home(rig)
        rig.driver.move(moved(rig.home, 0, 4.7))
        rig.clock.sleep(part_way_s(rig, 4.7))
        rig.driver.halt()
        rig.driver.halt()
        assert has_come_to_rest(rig)
        assert error_deg(rig.driver.read(), moved(rig.home, 0, 4.7)) > rig.accuracy_deg

    def test_a_halt_at_rest_is_harmless(self, rig: Rig) -> None:
        rig.driver.open()
        rig.driver.halt()
        assert is_still(rig)

    def test_what_is_no_number_is_refused_and_moves_nothing(self, rig: Rig) -> None:
        rig.driver.open()
        for place, bad in product(range(4), NOT_NUMBERS):
            with pytest.raises(WrongState, match="finite"):
                rig.driver.move(replaced(rig.home, place, bad))
        assert is_still(rig)

    def test_what_lies_outside_the_travel_is_refused_and_moves_nothing(self, rig: Rig) -> None:
        rig.driver.open()
        for joint, facts in enumerate((rig.facts.first, rig.facts.second)):
            for beyond_deg in (facts.lower_deg - 0.013, facts.upper_deg + 0.013):
                with pytest.raises(WrongState, match="within"):
                    rig.driver.move(replaced(rig.home, joint, beyond_deg))
        assert is_still(rig)

    def test_it_follows_a_rate_where_it_says_so(self, rig: Rig) -> None:
        come_home(rig)
        goal = rig.home._replace(first_rate_deg_s=0.37)
        rig.driver.move(goal)
        rig.clock.sleep(1.1)
        moved_deg = rig.driver.read().first_deg - rig.home.first_deg
        rig.driver.halt()
        expected_deg = 0.37 * 1.1 if rig.driver.capabilities.follows_rate else 0.0
        slack_deg = 2 * rig.accuracy_deg + 0.37 * (rig.lag_s + rig.longest_call_s)
        assert abs(moved_deg - expected_deg) <= slack_deg

    def test_unknown_settings_are_named(self, rig: Rig) -> None:
        kind = type(rig.driver)
        with pytest.raises(BadSettings) as caught:
            kind.from_settings({"zzyzx": 1, "qwrtp": 2}, rig.facts, rig.clock)
        assert {"zzyzx", "qwrtp"} <= {problem.key for problem in caught.value.problems}

    def test_a_lost_link_is_told_and_comes_back(self, rig: Rig) -> None:
        rig.driver.open()
        rig.pull()
        with pytest.raises((LinkLost, NoReply)):
            rig.driver.read()
        with pytest.raises((LinkLost, NoReply)):
            move_and_read(rig, rig.home)
        rig.driver.close()
        rig.plug()
        rig.driver.open()
        assert is_still(rig)

    def test_the_stop_input_is_seen_where_it_says_so(self, rig: Rig) -> None:
        rig.driver.open()
        assert not rig.driver.read().stop_pressed
        assert rig.driver.capabilities.reports_stop_input == (rig.stop_input is not None)
        if rig.stop_input is not None:
            for is_pressed in (True, False):
                rig.stop_input(is_pressed)
                rig.clock.sleep(0.2)
                assert rig.driver.read().stop_pressed is is_pressed

    def test_power_is_cut_where_it_says_so(self, rig: Rig) -> None:
        rig.driver.open()
        assert rig.driver.capabilities.cuts_power == (rig.is_powered is not None)
        if rig.is_powered is None:
            with pytest.raises(WrongState, match="power"):
                rig.driver.cut_power()
        else:
            assert rig.is_powered()
            rig.driver.cut_power()
            rig.clock.sleep(still_s(rig))
            assert not rig.is_powered()
            assert rig.is_braked is None or rig.is_braked()
            assert has_come_to_rest(rig)

    def test_a_brake_holds_what_rests_and_lets_go_first(self, rig: Rig) -> None:
        come_home(rig)
        assert rig.driver.capabilities.has_brake == (rig.is_braked is not None)
        if rig.is_braked is not None:
            assert not rig.is_braked()
            rig.driver.move(moved(rig.home, 0, 4.7))
            rig.clock.sleep(part_way_s(rig, 4.7))
            rig.driver.halt()
            rig.driver.read()
            assert not rig.is_braked()
            rest_until_braked(rig)
            assert rig.is_braked()
            assert is_still(rig)
            rig.driver.move(rig.home)
            assert is_still_at_first(rig)
            settle(rig, rig.home)
            assert not rig.is_braked()
            assert error_deg(rig.driver.read(), rig.home) <= rig.accuracy_deg
