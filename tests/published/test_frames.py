"""The frames of ephemerides against astropy, and the frame bias against its published angles."""

from collections.abc import Iterator
from math import dist

import numpy as np
import pytest
from astropy import units as u
from astropy.coordinates import GCRS, ITRS, CartesianDifferential, CartesianRepresentation
from astropy.time import Time
from astropy.utils import iers
from astropy_iers_data import IERS_A_FILE

from tests.published.reference_sky import EARTH
from tests.sky.stations import EPOCH_S, NORTH, satellite
from trunnion.sky.elements import Propagator
from trunnion.sky.ephemeris import Ephemeris, EphemerisCraft, Segment
from trunnion.sky.frames import Frame, fixed_to_earth
from trunnion.sky.instants import julian_date, parse_utc
from trunnion.sky.interpolation import Curve, Interpolation, Method
from trunnion.sky.passes import find_passes
from trunnion.sky.refraction import NoRefraction
from trunnion.sky.viewpoint import Viewpoint

POSITION_KM = (-4453.783, 5012.203, 1765.071)
VELOCITY_KM_S = (-2.137, -4.011, 6.053)
STILL = (0.0, 0.0, 0.0)
TOLERANCE_KM, TOLERANCE_KM_S = 5e-4, 1e-6
ARCSEC = np.radians(1.0 / 3600.0)


@pytest.fixture(autouse=True)
def same_earth_orientation() -> Iterator[None]:
    with iers.conf.set_temp("auto_download", False):  # noqa: SIM117 - one thing each
        with iers.earth_orientation_table.set(iers.IERS_A.open(IERS_A_FILE)):
            yield


@pytest.mark.parametrize("instant", ["2004-04-06T07:51:28.386Z", "2026-12-01T19:03:11.7Z"])
def test_from_the_celestial_frame_astropy_finds_the_same_place(instant: str) -> None:
    utc_s = parse_utc(instant)
    time = Time(utc_s, format="unix")
    state = CartesianRepresentation(
        POSITION_KM * u.km, differentials=CartesianDifferential(VELOCITY_KM_S * u.km / u.s)
    )
    theirs = GCRS(state, obstime=time).transform_to(ITRS(obstime=time)).cartesian
    ours_km, ours_km_s = fixed_to_earth(Frame.ICRF, (POSITION_KM, VELOCITY_KM_S), utc_s, EARTH)
    assert dist(ours_km, theirs.xyz.to_value(u.km)) < TOLERANCE_KM
    velocity_km_s = theirs.differentials["s"].d_xyz.to_value(u.km / u.s)
    assert dist(ours_km_s, velocity_km_s) < TOLERANCE_KM_S


def test_the_mean_equator_of_2000_is_off_the_celestial_frame_by_the_published_bias() -> None:
    """IERS Conventions (2010), 5.5.4: R1(−η) R2(ξ) R3(α), −6.819, −16.617 and −14.6 mas."""
    utc_s = parse_utc("2026-12-01T19:03:11.7Z")
    xi, eta, alpha = (1e-3 * each * ARCSEC for each in (-16.617, -6.819, -14.6))
    for x, y, z in np.eye(3).tolist():
        mean = (x + alpha * y - xi * z, y - alpha * x - eta * z, z + xi * x + eta * y)
        ours, _ = fixed_to_earth(Frame.EME2000, (mean, STILL), utc_s, EARTH)
        theirs, _ = fixed_to_earth(Frame.ICRF, ((x, y, z), STILL), utc_s, EARTH)
        unbiased, _ = fixed_to_earth(Frame.ICRF, (mean, STILL), utc_s, EARTH)
        assert dist(ours, theirs) < 2e-5 * ARCSEC
        assert dist(unbiased, theirs) > 0.01 * ARCSEC


def craft_of(frame: Frame) -> EphemerisCraft:
    """An ephemeris of a satellite of the example, nodes 30 s apart, in a frame of its own."""
    elements = satellite("QUILLON-1").element_set
    propagator = Propagator(elements)
    times = EPOCH_S + 30.0 * np.arange(60)
    states = [propagator.at(*julian_date(float(each))) for each in times]
    if frame is Frame.ITRF:
        states = [
            fixed_to_earth(Frame.TEME, state, float(each), EARTH)
            for state, each in zip(states, times, strict=True)
        ]
    positions, velocities = (np.array(each) for each in zip(*states, strict=True))
    curve = Curve.through(
        times - times[0], positions, velocities, Interpolation(Method.LAGRANGE, 9)
    )
    tai_s = times + 37.0
    one = Segment(frame, tai_s[0], tai_s[-1], tai_s[0], curve)
    view = Viewpoint(NORTH, EARTH, NoRefraction(), is_apparent=True)
    return EphemerisCraft(Ephemeris("copy", "none", (one,)), view)


@pytest.mark.parametrize("frame", [Frame.TEME, Frame.ITRF])
def test_an_ephemeris_of_a_satellite_looks_like_the_satellite(frame: Frame) -> None:
    craft, original = craft_of(frame), satellite("QUILLON-1", is_apparent=True)
    for seconds in (0.0, 47.3, 911.1, 1770.0):
        ours, theirs = craft.look(EPOCH_S + seconds), original.look(EPOCH_S + seconds)
        assert ours[:2] == pytest.approx(theirs[:2], abs=1e-6)
        assert ours[2] == pytest.approx(theirs[2], abs=1e-5)
        assert ours[3:] == pytest.approx(theirs[3:], abs=1e-4)
    looks = craft.looks(EPOCH_S + np.array([47.3, 911.1]))
    assert looks.azimuth_deg[1] == craft.look(EPOCH_S + 911.1).azimuth_deg


def test_passes_of_an_ephemeris_are_those_of_the_satellite_within_its_span() -> None:
    craft, original = craft_of(Frame.TEME), satellite("QUILLON-1", is_apparent=True)
    window = EPOCH_S - 86_400.0, EPOCH_S + 86_400.0
    expected = find_passes(original, EPOCH_S + 0.001, EPOCH_S + 1769.999, -20.0)
    found = find_passes(craft, *window, -20.0)
    assert len(found) == len(expected) > 0
    for ours, theirs in zip(found, expected, strict=True):
        assert ours.highest_elevation_deg == pytest.approx(theirs.highest_elevation_deg, abs=1e-5)
        assert ours.rise_s is not None
        assert ours.set_s is not None
