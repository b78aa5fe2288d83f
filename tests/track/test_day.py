"""All contacts of a plan together."""

import pickle

import pytest

from tests.track.skies import START_S, Lost, Overflight
from tests.track.stations import BEAM, CLEARANCE, STOW, mount
from trunnion.mount.joints import Joints
from trunnion.mount.mount import Mount
from trunnion.mount.sphere import separation_deg
from trunnion.sky.look import Target
from trunnion.track.day import plan_day
from trunnion.track.programme import FindingKind, Programme
from trunnion.track.transit import transit, transit_time_s
from trunnion.track.wanted import Wanted


def wanted(
    target: Target, begin_s: float = 60.0, end_s: float = 740.0, priority: int = 1, name: str = "c"
) -> Wanted:
    return Wanted(name, target, START_S + begin_s, START_S + end_s, priority)


def plan(*contacts: Wanted, machine: Mount | None = None, start: Joints = STOW) -> Programme:
    return plan_day(contacts, machine or mount(), CLEARANCE, BEAM, start, START_S)


def kinds(programme: Programme, index: int = 0) -> list[FindingKind]:
    return [finding.kind for finding in programme.forecasts[index].findings]


@pytest.mark.parametrize("heading_deg", [17.3, 93.1, 178.8, 271.9, 341.7])
@pytest.mark.parametrize("highest_deg", [22.2, 48.1, 71.3])
def test_a_pass_that_fits_is_followed_exactly_and_without_a_break(
    heading_deg: float, highest_deg: float
) -> None:
    target = Overflight(highest_deg, heading_deg)
    programme = plan(wanted(target))
    (assignment,) = programme.assignments
    (forecast,) = programme.forecasts
    assert forecast.findings == ()
    assert forecast.is_served
    assert forecast.worst_error_deg < 1e-3
    assert forecast.highest_elevation_deg == pytest.approx(highest_deg, abs=0.01)
    assert forecast.culmination_s == pytest.approx(target.culmination_s, abs=1.0)
    before = None
    for step in range(int(assignment.end_s - assignment.begin_s)):
        utc_s = assignment.begin_s + step
        motion = assignment.path.at(utc_s)
        look = target.look(utc_s)
        boresight = mount().hinges.boresight(motion.joints)
        assert separation_deg(look.azimuth_deg, look.elevation_deg, *boresight) < 1e-3
        assert before is None or abs(motion.first_deg - before.first_deg) < 10.0
        before = motion


def test_the_nearest_of_the_turns_is_taken() -> None:
    target = Overflight(33.3, heading_deg=91.3)
    begins = [
        plan(wanted(target), start=Joints(first_deg, 45.0)).forecasts[0].first_joint_begin_deg
        for first_deg in (-250.0, 250.0)
    ]
    assert begins[1] is not None
    assert begins[0] is not None
    assert begins[1] - begins[0] == pytest.approx(360.0)


def test_what_fits_no_turn_is_said_before_and_still_served() -> None:
    # rises east of north, sets west of south: through the stop at 90°
    target = Overflight(33.3, heading_deg=181.3)
    programme = plan(wanted(target), machine=mount(first=(-269.0, 89.0)), start=Joints(80.0, 45.0))
    (forecast,) = programme.forecasts
    assert FindingKind.UNWINDS in kinds(programme) or forecast.is_served
    assert programme.assignments


def test_overlapping_contacts_go_by_priority() -> None:
    little = wanted(Overflight(44.4, 31.0), name="little")
    much = wanted(Overflight(39.9, 151.0), 300.0, 500.0, priority=5, name="much")
    programme = plan(little, much)
    served = [each.contact for each in programme.assignments]
    assert served == ["little", "much", "little"]
    before, between, after = programme.assignments
    assert before.end_s <= between.begin_s
    assert between.end_s <= after.begin_s
    assert FindingKind.GIVES_WAY in kinds(programme, 0)
    assert FindingKind.GIVES_WAY not in kinds(programme, 1)


def test_a_target_that_never_rises_is_said() -> None:
    programme = plan(wanted(Overflight(3.1)))
    assert kinds(programme) == [FindingKind.NEVER_VISIBLE]
    assert not programme.forecasts[0].is_served
    assert programme.assignments == ()


def test_a_contact_in_the_past_is_said() -> None:
    assert kinds(plan(wanted(Overflight(44.4), -900.0, -200.0))) == [FindingKind.PAST]


def test_a_decayed_target_is_said() -> None:
    lost = Lost(Overflight(44.4), START_S + 333.0)
    programme = plan(wanted(lost), wanted(Overflight(30.3), 100.0, 700.0))
    assert kinds(programme, 0) == [FindingKind.NO_POSITION]
    assert programme.forecasts[1].is_served


def test_a_contact_half_over_begins_now() -> None:
    programme = plan(wanted(Overflight(44.4), -200.0, 640.0))
    assert programme.forecasts[0].begin_s is not None
    assert programme.forecasts[0].begin_s >= START_S


def test_programmes_travel_between_processes() -> None:
    programme = plan(wanted(Overflight(44.4)))
    there = pickle.loads(pickle.dumps(programme))
    utc_s = programme.assignments[0].begin_s + 37.7
    assert there.assignments[0].path.at(utc_s) == programme.assignments[0].path.at(utc_s)
    assert there.forecasts == programme.forecasts


def test_a_less_wanted_contact_ends_early_enough_for_the_next_one() -> None:
    low = wanted(Overflight(48.1, 17.3), 60.0, 400.0, priority=1, name="low")
    high = wanted(Overflight(48.1, 193.1), 400.0, 740.0, priority=2, name="high")
    programme = plan(low, high)
    first, second = programme.assignments
    assert (first.contact, second.contact) == ("low", "high")
    assert second.begin_s == START_S + 400.0
    assert FindingKind.LATE not in kinds(programme, 1)
    assert FindingKind.GIVES_WAY in kinds(programme, 0)
    way = transit(
        first.path.at(first.end_s).joints,
        second.path.at(second.begin_s).joints,
        mount(),
        CLEARANCE,
    )
    slew_s = transit_time_s(first.path.at(first.end_s).joints, way, mount())
    assert first.end_s + slew_s == pytest.approx(second.begin_s, abs=0.05)


def test_among_equals_the_next_one_begins_when_the_mount_has_got_there() -> None:
    early = wanted(Overflight(48.1, 17.3), 60.0, 400.0, name="early")
    late = wanted(Overflight(48.1, 193.1), 400.0, 740.0, name="late")
    programme = plan(early, late)
    first, second = programme.assignments
    assert first.end_s == START_S + 400.0
    assert second.begin_s > START_S + 401.0
    assert FindingKind.LATE in kinds(programme, 1)
    begins, place = second.path.at(second.begin_s).joints, first.path.at(first.end_s).joints
    slew_s = transit_time_s(place, transit(place, begins, mount(), CLEARANCE), mount())
    assert first.end_s + slew_s == pytest.approx(second.begin_s, abs=0.05)
