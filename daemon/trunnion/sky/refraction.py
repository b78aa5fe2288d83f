"""How the air lifts a target: from its true elevation to the one it is seen at.

The air thins out exponentially with height. A ray is traced through it once for every quarter of a
degree (the integral of the bending along a ray, with `n r cos(elevation)` constant: Snell's law for
a spherical atmosphere), and between those the correction runs along a cubic. So it is smooth at
every elevation, where the published polynomials each hold over a part of the sky only.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from itertools import pairwise
from typing import Protocol, Self

import numpy as np

from trunnion.sky.atmosphere import CELSIUS_K, Air, optical_refractivity, radio_refractivity
from trunnion.sky.look import FloatArray

EARTH_RADIUS_KM = 6371.0
RADIO_SCALE_HEIGHT_KM = 1.0 / 0.1361
"""Of the reference atmosphere of ITU-R P.834 and P.453."""
DRY_SCALE_HEIGHT_KM_PER_K = 0.0292718
"""R T / g of dry air."""

HIGHEST_DEG = 90.0

_STEP_DEG = 0.25
_PIECES_A_DEG = 4.0
_TOP_SCALE_HEIGHTS = 20.0
_RAY_STEPS = 240
_ITERATIONS = 14


Piece = tuple[float, float, float, float]
Seen = tuple[float, float]
"""Apparent elevation (deg), and how fast it changes when the true one does (deg per deg)."""


class Refraction(Protocol):
    """What the air does to elevations."""

    @property
    def model(self) -> str:
        """The model's name, for the output."""
        ...

    def seen(self, elevation_deg: float) -> Seen:
        """Where a target at this true elevation is seen."""
        ...

    def seen_many(self, elevation_deg: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Apparent elevations and slopes for an array."""
        ...


@dataclass(frozen=True, slots=True)
class NoRefraction:
    """No air."""

    model: str = "none"

    def seen(self, elevation_deg: float) -> Seen:
        """The same elevation."""
        return elevation_deg, 1.0

    def seen_many(self, elevation_deg: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The same elevations."""
        return elevation_deg, np.ones_like(elevation_deg)


@dataclass(frozen=True, slots=True)
class TracedRefraction:
    """A cubic for each quarter of a degree; below the lowest ray the correction stays the same.

    `pieces` holds the coefficients of the apparent elevation (deg) from `begin_deg` on, rising, in
    the share of a quarter that is passed.
    """

    model: str
    begin_deg: float
    pieces: tuple[Piece, ...] = field(repr=False)

    @classmethod
    def radio(cls, air: Air, height_m: float) -> Self:
        """For radio waves, from the refractivity of the station's air."""
        return cls._trace("radio", radio_refractivity(air), RADIO_SCALE_HEIGHT_KM, height_m)

    @classmethod
    def optical(cls, air: Air, height_m: float) -> Self:
        """For visible light, from the station's air."""
        scale_km = DRY_SCALE_HEIGHT_KM_PER_K * (air.temperature_c + CELSIUS_K)
        return cls._trace("optical", optical_refractivity(air), scale_km, height_m)

    @classmethod
    def _trace(cls, model: str, refractivity: float, scale_km: float, height_m: float) -> Self:
        radius_km = EARTH_RADIUS_KM + 1e-3 * height_m
        begin_deg = -float(_bending_deg(np.zeros(1), refractivity, scale_km, radius_km)[0])
        steps = int(np.ceil((HIGHEST_DEG - begin_deg) / _STEP_DEG)) + 2
        true_deg = begin_deg + _STEP_DEG * np.arange(steps)
        lift_deg = np.zeros_like(true_deg)
        for _ in range(_ITERATIONS):  # the bending follows from the apparent elevation
            seen_deg = np.clip(true_deg + lift_deg, 0.0, None)
            lift_deg = _bending_deg(seen_deg, refractivity, scale_km, radius_km)
        return cls(model, begin_deg, tuple(_pieces((true_deg + lift_deg).tolist())))

    def seen(self, elevation_deg: float) -> Seen:
        """Where a target at this true elevation is seen."""
        place = (elevation_deg - self.begin_deg) * _PIECES_A_DEG
        if place <= 0.0:
            return elevation_deg + self.pieces[0][0] - self.begin_deg, 1.0
        index = int(place)
        u = place - index
        a, b, c, d = self.pieces[index]
        seen_deg = a + u * (b + u * (c + u * d))
        slope = (b + u * (2.0 * c + u * 3.0 * d)) * _PIECES_A_DEG
        return seen_deg if seen_deg < HIGHEST_DEG else HIGHEST_DEG, slope  # noqa: FURB136 - fast

    def seen_many(self, elevation_deg: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Apparent elevations and slopes for an array."""
        place = (elevation_deg - self.begin_deg) * _PIECES_A_DEG
        is_below = place <= 0.0
        index = np.where(is_below, 0.0, place).astype(int)
        u = place - index
        a, b, c, d = np.array(self.pieces)[index].T
        seen_deg = a + u * (b + u * (c + u * d))
        slope = (b + u * (2.0 * c + u * 3.0 * d)) * _PIECES_A_DEG
        return (
            np.where(
                is_below, elevation_deg + a - self.begin_deg, np.minimum(seen_deg, HIGHEST_DEG)
            ),
            np.where(is_below, 1.0, slope),
        )


def _pieces(seen_deg: Sequence[float]) -> Iterator[Piece]:
    """Coefficients of the cubics through these nodes, with the slopes of their neighbours."""
    slopes = np.gradient(np.array(seen_deg), edge_order=2).tolist()
    for (begin, end), (begin_slope, end_slope) in zip(
        pairwise(seen_deg), pairwise(slopes), strict=True
    ):
        rise = end - begin
        yield (
            begin,
            begin_slope,
            3.0 * rise - 2.0 * begin_slope - end_slope,
            begin_slope + end_slope - 2.0 * rise,
        )


def _bending_deg(
    seen_deg: FloatArray, refractivity: float, scale_km: float, radius_km: float
) -> FloatArray:
    """Bending of rays from infinity that arrive at these apparent elevations (0 or more).

    The integral of `-(dn/dh) / n / tan(elevation)` over height; with height as the square of the
    variable, the horizontal ray's pole at the ground goes away. Simpson's rule.
    """
    u = np.linspace(0.0, np.sqrt(_TOP_SCALE_HEIGHTS * scale_km), 2 * _RAY_STEPS + 1)
    height_km = u * u
    thin = 1e-6 * refractivity * np.exp(-height_km / scale_km)
    n0, n = 1.0 + 1e-6 * refractivity, 1.0 + thin
    invariant = n0 * radius_km * np.cos(np.radians(seen_deg))[:, np.newaxis]
    nr = n * (radius_km + height_km)
    sine2_nr2 = (nr - invariant) * (nr + invariant)
    with np.errstate(divide="ignore", invalid="ignore"):
        weight = np.where(sine2_nr2 > 0.0, u / np.sqrt(sine2_nr2), 0.0)
    weight[:, 0] = _at_the_ground(seen_deg, refractivity, scale_km, radius_km)
    integrand = 2.0 * thin / (scale_km * n) * invariant * weight
    step = u[1] - u[0]
    total = integrand[:, 0] + integrand[:, -1]
    total = total + 4.0 * integrand[:, 1::2].sum(axis=1) + 2.0 * integrand[:, 2:-1:2].sum(axis=1)
    return np.asarray(np.degrees(total * step / 3.0))


def _at_the_ground(
    seen_deg: FloatArray, refractivity: float, scale_km: float, radius_km: float
) -> FloatArray:
    """Limit of `u / sqrt((n r)² − invariant²)` at the ground, zero but for the horizontal ray."""
    n0 = 1.0 + 1e-6 * refractivity
    growth = n0 - 1e-6 * refractivity * radius_km / scale_km  # of n r with height
    horizontal = 1.0 / np.sqrt(2.0 * n0 * radius_km * growth)
    return np.where(seen_deg == 0.0, horizontal, 0.0)
