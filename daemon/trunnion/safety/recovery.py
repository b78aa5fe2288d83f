"""A mount found outside its limits: it moves only back inside, slowly, and only with leave."""

from dataclasses import replace
from math import isfinite

from trunnion.mount.joints import Motion
from trunnion.mount.motion import approach
from trunnion.mount.mount import JointLimits, Mount
from trunnion.safety.hazard import Hazard
from trunnion.safety.limits import SafetyLimits
from trunnion.safety.orders import Examined, Mounted
from trunnion.safety.places import depth_deg
from trunnion.safety.verdict import Rule

GENTLY = 0.2
"""Share of a joint's acceleration on the way back: who starts late has little to make up."""


def examine_return(
    demand: Motion,
    now: Mounted,
    dt_s: float,
    limits: SafetyLimits,
    outside: Hazard,
    *,
    may_recover: bool,
) -> Examined:
    """Let a slow step inwards leave where there is leave for it, and nothing else."""
    refused = Examined(None, (_refusal(outside),))
    if not may_recover or not isfinite(sum(demand)):
        return refused
    step = approach(now.base, demand, _slow(limits), dt_s)
    after_deg = depth_deg(step.joints, limits)
    seen_deg = depth_deg(now.reading.joints, limits) + limits.encoder_error_deg
    is_inwards = after_deg < min(depth_deg(now.base.joints, limits), seen_deg)
    is_inwards = is_inwards or step.joints == now.base.joints
    return Examined(step) if is_inwards else refused


def _refusal(outside: Hazard) -> Hazard:
    if outside.rule is Rule.SUN:
        return Hazard(Rule.SUN, f"no way nearer to the Sun: {outside.finding}")
    return Hazard(Rule.OUTSIDE, f"the mount is outside its limits: {outside.finding}")


def _slow(limits: SafetyLimits) -> Mount:
    mount, rate_deg_s = limits.mount, limits.recovery_rate_deg_s
    return replace(
        mount,
        first=_slow_joint(mount.first, rate_deg_s),
        second=_slow_joint(mount.second, rate_deg_s),
    )


def _slow_joint(joint: JointLimits, rate_deg_s: float) -> JointLimits:
    return replace(
        joint,
        rate_deg_s=min(rate_deg_s, joint.rate_deg_s),
        acceleration_deg_s2=GENTLY * joint.acceleration_deg_s2,
    )
