"""Sky events that spoil a contact: the Sun near the boresight, the Earth's shadow."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from trunnion.sky.errors import SkyError
from trunnion.sky.look import FloatArray, Looks, Target
from trunnion.sky.roots import changes
from trunnion.sky.site import WGS84_RADIUS_KM
from trunnion.sky.sun import Sun
from trunnion.sky.viewpoint import Viewpoint
from trunnion.sky.whereabouts import directions, earth_fixed_many_km

GRID_S = 30.0


@dataclass(frozen=True, slots=True)
class Span:
    """A stretch of time, UTC as POSIX seconds; cut where the window begins or ends."""

    begin_s: float
    end_s: float


def sun_near(
    target: Target, viewpoint: Viewpoint, from_s: float, until_s: float, within_deg: float
) -> tuple[Span, ...]:
    """When the Sun's centre, above the horizon, is within an angle of the target, as both are seen.

    Raises NoPosition, and SkyError for an empty window.
    """
    sun = Sun(viewpoint)

    def cosine(utc_s: FloatArray) -> tuple[FloatArray, FloatArray, Looks]:
        ours, suns = target.looks(utc_s), sun.looks(utc_s)
        a, b = directions(ours), directions(suns)
        change = np.einsum("in,in->n", _slopes(ours), b) + np.einsum("in,in->n", a, _slopes(suns))
        return np.einsum("in,in->n", a, b), change, suns

    def is_near(utc_s: FloatArray) -> NDArray[np.bool_]:
        values, _, suns = cosine(utc_s)
        near: NDArray[np.bool_] = (values >= np.cos(np.radians(within_deg))) & (
            suns.elevation_deg > -1.0
        )
        return near

    def is_nearing(utc_s: FloatArray) -> NDArray[np.bool_]:
        nearing: NDArray[np.bool_] = cosine(utc_s)[1] > 0.0
        return nearing

    grid_s = _grid(from_s, until_s)
    nearing = is_nearing(grid_s)
    before = np.flatnonzero(nearing[:-1] & ~nearing[1:])
    closest_s = changes(is_nearing, grid_s[before], grid_s[before + 1])
    return spans(is_near, np.union1d(grid_s, closest_s))


def sun_separation_deg(target: Target, viewpoint: Viewpoint, utc_s: FloatArray) -> FloatArray:
    """Angle between the target and the Sun's centre as seen, shape (n,)."""
    a, b = directions(target.looks(utc_s)), directions(Sun(viewpoint).looks(utc_s))
    chord = np.linalg.norm(a - b, axis=0)
    return np.asarray(np.degrees(2.0 * np.arcsin(np.minimum(0.5 * chord, 1.0))))


def in_shadow(
    geometric: Target, viewpoint: Viewpoint, from_s: float, until_s: float
) -> tuple[Span, ...]:
    """When a spacecraft sees no more than half of the Sun past the Earth.

    `geometric` is the target from `viewpoint.geometric()`, with a range. The Earth is a sphere of
    its equatorial radius; its air is left out, which makes the shadow a few seconds late. Raises
    NoPosition, and SkyError for a target without a range.
    """
    plain = viewpoint.geometric()

    def is_dark(utc_s: FloatArray) -> NDArray[np.bool_]:
        craft_km = earth_fixed_many_km(geometric.looks(utc_s), plain.site)
        sun_km = earth_fixed_many_km(Sun(plain).looks(utc_s), plain.site)
        to_sun, distance_km = sun_km - craft_km, np.linalg.norm(craft_km, axis=0)
        cosine = -np.einsum("in,in->n", craft_km, to_sun) / (
            distance_km * np.linalg.norm(to_sun, axis=0)
        )
        disc = np.arcsin(np.minimum(WGS84_RADIUS_KM / distance_km, 1.0))
        dark: NDArray[np.bool_] = np.arccos(np.clip(cosine, -1.0, 1.0)) < disc
        return dark

    return spans(is_dark, _grid(from_s, until_s))


def spans(
    condition: Callable[[FloatArray], NDArray[np.bool_]], nodes_s: FloatArray
) -> tuple[Span, ...]:
    """When a condition holds that changes once at most between the nodes (in order of time)."""
    holds = condition(nodes_s)
    turns = np.flatnonzero(holds[1:] != holds[:-1])
    turns_s = changes(condition, nodes_s[turns], nodes_s[turns + 1])
    begins = [nodes_s[0]] * bool(holds[0]) + list(turns_s[~holds[turns]])
    ends = list(turns_s[holds[turns]]) + [nodes_s[-1]] * bool(holds[-1])
    return tuple(Span(float(a), float(b)) for a, b in zip(begins, ends, strict=True))


def _grid(from_s: float, until_s: float) -> FloatArray:
    if not until_s > from_s:
        raise SkyError(f"expected a window that ends after it begins, got {until_s - from_s:g} s")
    return np.linspace(from_s, until_s, max(3, int((until_s - from_s) / GRID_S) + 2))


def _slopes(looks: Looks) -> FloatArray:
    """Change of the unit vectors a second, shape (3, n)."""
    azimuth, elevation = np.radians(looks.azimuth_deg), np.radians(looks.elevation_deg)
    turn, climb = np.radians(looks.azimuth_rate_deg_s), np.radians(looks.elevation_rate_deg_s)
    level, up = np.cos(elevation), np.sin(elevation)
    east, north = np.sin(azimuth), np.cos(azimuth)
    return np.stack(
        (
            level * north * turn - up * east * climb,
            -level * east * turn - up * north * climb,
            level * climb,
        )
    )
