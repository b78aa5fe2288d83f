"""Permission to transmit: what it takes, and how it ends."""

from math import nan

import pytest

from tests.safety.bench_mount import LIMITS
from trunnion.mount.joints import Motion, Reading
from trunnion.safety.transmit import TransmitJudge, TransmitPermit
from trunnion.safety.verdict import Action, Halt, Intervention, Move, Rule, Verdict

# transmit floor 10.7, reading at most 1 s old, tolerance 0.23
MOVING = Verdict(Move(Motion(201.7, 41.3)))
SLOWED = MOVING._replace(
    interventions=(Intervention(Rule.RATE, Action.SLOW, "too fast: slowed down"),)
)
STOWING = MOVING._replace(interventions=(Intervention(Rule.WIND, Action.STOW, "gusts: to stow"),))
HALTED_AND_STOWING = Verdict(
    Halt(),
    interventions=(
        Intervention(Rule.RATE, Action.SLOW, "too fast: slowed down"),
        Intervention(Rule.LINK_DOWN, Action.HALT, "no answer: halted"),
        Intervention(Rule.WIND, Action.STOW, "gusts: to stow"),
    ),
)
LATCHED = Verdict(Halt(), latch="the mount is stuck")


def judged(
    judge: TransmitJudge,
    mono_s: float,
    error_deg: float | None = 0.23,
    elevation_deg: float = 10.7,
    age_s: float = 1.0,
    verdict: Verdict = MOVING,
) -> TransmitPermit:
    reading = Reading(mono_s - age_s, 201.7, elevation_deg)
    return judge.judge(mono_s, error_deg, reading, verdict)


def permitted() -> TransmitJudge:
    judge = TransmitJudge(LIMITS, 0.23)
    for mono_s in (71.0, 71.5, 72.0):
        permit = judged(judge, mono_s)
    assert permit == TransmitPermit(73.0, None)
    return judge


def test_it_takes_a_time_on_target_and_expires() -> None:
    judge = TransmitJudge(LIMITS, 0.23)
    assert judged(judge, 71.0).until_s is None
    assert judged(judge, 71.99).reason == "the beam has been on target for too short a time"
    permit = judged(judge, 72.0)
    assert permit.is_good_at(72.99)
    assert not permit.is_good_at(73.0)
    assert not TransmitPermit(None, "no").is_good_at(0.0)


def test_being_slowed_down_is_no_hazard() -> None:
    assert judged(permitted(), 72.1, verdict=SLOWED).until_s is not None


def test_the_beam_must_not_sink_below_the_floor_before_the_next_look() -> None:
    # a turn is 0.1 s long: from 11.4° it sinks by 0.69° or 0.71°, and 10.7° are allowed
    sinking = [Verdict(Move(Motion(201.7, 11.4, 0.0, rate_deg_s))) for rate_deg_s in (-6.9, -7.1)]
    gently, steeply = (
        judged(permitted(), 72.1, elevation_deg=11.6, verdict=each) for each in sinking
    )
    assert gently.until_s is not None
    assert steeply == TransmitPermit(None, "on the way below the transmit floor of 10.7°")
    lowest = Verdict(Move(Motion(201.7, 10.7)))
    assert judged(permitted(), 72.1, elevation_deg=11.6, verdict=lowest).until_s is not None
    lower = Verdict(Move(Motion(201.7, 10.6)))
    assert judged(permitted(), 72.1, elevation_deg=11.6, verdict=lower).until_s is None
    assert judged(permitted(), 72.1, verdict=Verdict(Halt())).until_s is not None


@pytest.mark.parametrize(
    ("change", "reason"),
    [
        ({"error_deg": 0.24}, "the beam is 0.24° off, 0.23° are allowed"),
        ({"error_deg": nan}, "the beam is nan° off, 0.23° are allowed"),
        ({"error_deg": None}, "no contact is on"),
        ({"elevation_deg": 10.69}, "elevation 10.69°, the transmit floor is 10.7°"),
        ({"elevation_deg": nan}, "elevation nan°, the transmit floor is 10.7°"),
        ({"age_s": 1.01}, "nobody knows where the mount is"),
        ({"age_s": nan}, "nobody knows where the mount is"),
        ({"verdict": STOWING}, "gusts: to stow"),
        ({"verdict": LATCHED}, "the mount is stuck"),
        ({"verdict": HALTED_AND_STOWING}, "no answer: halted"),
    ],
)
def test_it_ends_at_once_and_is_counted_anew(change: dict[str, object], reason: str) -> None:
    judge = permitted()
    assert judged(judge, 72.1, **change) == TransmitPermit(None, reason)  # type: ignore[arg-type]
    assert judged(judge, 72.2).until_s is None
    assert judged(judge, 73.19).until_s is None
    assert judged(judge, 73.2).until_s is not None


def test_without_a_reading_it_is_forbidden() -> None:
    permit = permitted().judge(72.1, 0.1, None, MOVING)
    assert permit == TransmitPermit(None, "nobody knows where the mount is")
