"""The pilot's slews with the Sun in the way."""

from math import inf

from tests.pilot.flight import CLEARANCE, FACTS, MOUNT
from trunnion.mount.joints import Joints, Motion, Reading
from trunnion.mount.sphere import separation_deg
from trunnion.pilot.decision import Situation
from trunnion.pilot.phase import Phase, Wish
from trunnion.pilot.pilot import Pilot
from trunnion.pilot.sunlit import LEEWAY_DEG, Sunlit

RADIUS_DEG = 4.3
SUN = (13.1, 66.3)
KEPT = FACTS._replace(sun_keep_out_deg=RADIUS_DEG)


def test_the_facts_have_the_circle_by_day_alone() -> None:
    sunlit = Sunlit(KEPT)
    assert sunlit.facts(None) is KEPT
    (circle,) = sunlit.facts(SUN).clearance.circles
    assert (circle.azimuth_deg, circle.elevation_deg) == SUN
    assert circle.radius_deg == RADIUS_DEG + LEEWAY_DEG
    assert sunlit.facts(None) is sunlit.facts(SUN)
    assert sunlit.facts((13.1, -1.01)) is KEPT
    assert sunlit.facts((13.1, -1.0)).clearance.circles
    assert Sunlit(FACTS).facts(SUN) is FACTS


def nearest_deg(facts_sun: tuple[float, float] | None) -> tuple[float, Phase]:
    """How near to the Sun a stow leads from below it, and how it ends."""
    pilot, ordered, mono_s = Pilot(KEPT), Motion(20.7, 41.7), 71.3
    nearest = inf
    for _ in range(1200):
        mono_s += 0.1
        reading = Reading(mono_s, *ordered.joints)
        decision = pilot.decide(
            Situation(1_796_083_217.3, mono_s, reading, ordered, (), Wish.STOW, sun=facts_sun)
        )
        assert decision.demand is not None
        ordered = decision.demand
        nearest = min(nearest, separation_deg(*ordered.joints, *SUN))
    return nearest, decision.phase


def test_the_way_to_stow_leads_round_the_sun() -> None:
    assert MOUNT.stow == Joints(12.7, 88.3)
    assert CLEARANCE.is_clear(20.7, 41.7)
    near_deg, phase = nearest_deg(SUN)
    assert (near_deg > RADIUS_DEG, phase) == (True, Phase.STOWED)
    assert nearest_deg(None)[0] < 1.0  # and would lead through it
