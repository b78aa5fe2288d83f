"""Refraction and refractivity against published tables and formulas.

Sources: ERFA `refco`, whose notes tabulate a ray trace of the optical refraction; Bennett 1982 and
Saemundsson 1986 by way of Meeus, "Astronomical Algorithms", chapter 16; ITU-R P.834-9 for radio
waves, and P.453 for their refractivity. The latter two were read in libraries that cite them.
"""

from math import exp, radians, tan

import erfa
import numpy as np
import pytest

from trunnion.sky.atmosphere import CELSIUS_K, Air, radio_refractivity, vapour_pressure_hpa
from trunnion.sky.refraction import TracedRefraction

RADIO_WAVELENGTH_UM = 1e5
REFERENCE_N = 315.0
REFERENCE_SCALE_PER_KM = 0.1361


def air_of(refractivity: float) -> Air:
    """Moist air of 15 °C and 1013.25 hPa with this radio refractivity (it grows with humidity)."""
    dry, moist = (radio_refractivity(Air(1013.25, 15.0, each)) for each in (0.0, 1.0))
    return Air(1013.25, 15.0, (refractivity - dry) / (moist - dry))


def lift_deg(refraction: TracedRefraction, elevation_deg: float) -> float:
    return refraction.seen(elevation_deg)[0] - elevation_deg


def lift_at_apparent_deg(refraction: TracedRefraction, apparent_deg: float) -> float:
    true_deg = apparent_deg
    for _ in range(60):
        true_deg = apparent_deg - lift_deg(refraction, true_deg)
    return apparent_deg - true_deg


@pytest.mark.parametrize(
    ("celsius", "humidity", "refractivity"),
    [
        (15.0, 0.5, 311.370),
        (15.0, 0.6, 319.070),
        (15.0, 0.0, 272.872),
        (20.0, 0.5, 319.227),
        (30.0, 0.9, 415.264),
        (-10.0, 0.7, 309.660),
    ],
)
def test_refractivity_of_p_453(celsius: float, humidity: float, refractivity: float) -> None:
    """Values of the formula, recomputed with the itur library to all digits, at 1013.25 hPa."""
    assert radio_refractivity(Air(1013.25, celsius, humidity)) == pytest.approx(
        refractivity, abs=0.01
    )


def test_vapour_pressure_of_p_453() -> None:
    assert vapour_pressure_hpa(Air(1013.25, 15.0, 1.0)) == pytest.approx(17.1216, abs=1e-3)
    assert vapour_pressure_hpa(Air(1013.25, 15.0, 0.5)) == pytest.approx(8.5608, abs=1e-3)


@pytest.mark.parametrize(
    ("true_deg", "sea_level_deg", "kilometre_deg"),
    [
        (0.01, 0.58086, 0.51440),
        (1.0, 0.42742, 0.37639),
        (2.0, 0.32741, 0.28738),
        (3.0, 0.26070, 0.22839),
        (5.0, 0.18078, 0.15808),
        (10.0, 0.09833, 0.08587),
        (20.0, 0.04904, 0.04281),
        (30.0, 0.03109, 0.02714),
        (45.0, 0.01800, 0.01571),
        (90.0, 0.0, 0.0),
    ],
)
def test_an_independent_trace_through_the_radio_reference_atmosphere(
    true_deg: float, sea_level_deg: float, kilometre_deg: float
) -> None:
    """The atmosphere of P.834, 315 millionths at sea level, traced by stepping a ray (own work)."""
    at_sea_level = TracedRefraction.radio(air_of(REFERENCE_N), 0.0)
    above = TracedRefraction.radio(air_of(REFERENCE_N * exp(-REFERENCE_SCALE_PER_KM)), 1000.0)
    assert lift_deg(at_sea_level, true_deg) == pytest.approx(sea_level_deg, abs=1e-4)
    assert lift_deg(above, true_deg) == pytest.approx(kilometre_deg, abs=1e-4)


@pytest.mark.parametrize("true_deg", [0.5, 1.0, 2.0, 4.0, 7.0, 10.0])
def test_the_polynomial_of_p_834_within_its_range(true_deg: float) -> None:
    """It is a fit, good to 0.011° up to 10°, and wrong by a quarter at 20°: hence a trace."""
    published_deg = 1.0 / (1.728 + 0.5411 * true_deg + 0.03723 * true_deg**2)
    ours = TracedRefraction.radio(air_of(REFERENCE_N), 0.0)
    assert lift_deg(ours, true_deg) == pytest.approx(published_deg, abs=0.011)


@pytest.mark.parametrize("apparent_deg", [15.0, 20.0, 30.0, 45.0, 60.0, 80.0])
def test_erfas_radio_refraction(apparent_deg: float) -> None:
    a, b = erfa.refco(1013.25, 15.0, 0.5, RADIO_WAVELENGTH_UM)
    tangent = tan(radians(90.0 - apparent_deg))
    erfas_deg = np.degrees(a * tangent + b * tangent**3)
    ours = TracedRefraction.radio(Air(1013.25, 15.0, 0.5), 0.0)
    assert lift_at_apparent_deg(ours, apparent_deg) == pytest.approx(erfas_deg, abs=2e-4)


@pytest.mark.parametrize(
    ("zenith_distance_deg", "arcsec"),
    [(45.0, 58.16), (60.0, 100.51), (70.0, 158.63), (76.0, 229.45), (80.0, 319.13)],
)
def test_the_ray_trace_in_erfas_notes(zenith_distance_deg: float, arcsec: float) -> None:
    """Notes to `refco`: 1005 hPa, 280.15 K, 80 %, 0.574 µm, sea level."""
    ours = TracedRefraction.optical(Air(1005.0, 280.15 - CELSIUS_K, 0.8), 0.0)
    lift = lift_at_apparent_deg(ours, 90.0 - zenith_distance_deg)
    assert 3600.0 * lift == pytest.approx(arcsec, abs=0.2)


@pytest.mark.parametrize(
    ("apparent_deg", "lift"),
    [
        (1.0, 0.40549),
        (2.0, 0.30360),
        (3.0, 0.23907),
        (5.0, 0.16472),
        (10.0, 0.08986),
        (20.0, 0.04506),
    ],
)
def test_bennetts_optical_refraction(apparent_deg: float, lift: float) -> None:
    """1010 hPa and 10 °C; our atmosphere has no layers of falling temperature: 0.014° at 1°."""
    ours = TracedRefraction.optical(Air(1010.0, 10.0, 0.5), 0.0)
    assert lift_at_apparent_deg(ours, apparent_deg) == pytest.approx(lift, abs=0.014)
