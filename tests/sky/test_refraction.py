"""Refraction: rising everywhere, smooth, the same for one and many, gone overhead."""

import pickle

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from trunnion.sky.atmosphere import Air, standard_air
from trunnion.sky.refraction import NoRefraction, TracedRefraction

MODELS = {
    "radio": TracedRefraction.radio(Air(1013.25, 21.3, 0.83), 37.0),
    "radio, high and dry": TracedRefraction.radio(Air(701.3, -3.1, 0.12), 2957.0),
    "optical": TracedRefraction.optical(Air(987.6, -11.7, 0.4), 213.0),
}
CURVES = pytest.mark.parametrize("model", MODELS.values(), ids=MODELS)


@CURVES
def test_apparent_elevation_rises_with_the_true_one_and_is_never_below_it(
    model: TracedRefraction,
) -> None:
    true_deg = np.linspace(-90.0, 90.0, 200_001)
    seen_deg, slope = model.seen_many(true_deg)
    assert (np.diff(seen_deg) >= 0.0).all()
    assert (np.diff(seen_deg[:-10]) > 0.0).all()
    assert (slope > 0.5).all()
    assert (slope <= 1.0).all()
    assert (seen_deg >= true_deg - 1e-12).all()
    assert seen_deg.max() <= 90.0


@CURVES
def test_the_slope_is_that_of_the_curve(model: TracedRefraction) -> None:
    true_deg = np.linspace(model.begin_deg + 1e-3, 89.999, 50_001)
    step_deg = 1e-4
    upper, lower = (model.seen_many(true_deg + each)[0] for each in (step_deg, -step_deg))
    np.testing.assert_allclose(
        model.seen_many(true_deg)[1], (upper - lower) / (2.0 * step_deg), atol=2e-4
    )


@CURVES
@given(elevation_deg=st.floats(-90.0, 90.0))
def test_one_elevation_and_many_agree(model: TracedRefraction, elevation_deg: float) -> None:
    one = model.seen(elevation_deg)
    many = model.seen_many(np.array([elevation_deg, 33.3]))
    assert one == pytest.approx((many[0][0], many[1][0]), abs=1e-12)


@CURVES
def test_the_zenith_stays_where_it_is_and_the_curve_has_no_step_at_the_lowest_ray(
    model: TracedRefraction,
) -> None:
    assert model.seen(90.0)[0] == pytest.approx(90.0, abs=1e-6)
    above, below = (model.seen(model.begin_deg + each)[0] for each in (1e-9, -1e-9))
    assert above - below == pytest.approx(2e-9, abs=1e-9)
    assert model.seen(model.begin_deg)[0] == pytest.approx(0.0, abs=1e-6)


def test_humid_air_bends_radio_waves_more_and_light_hardly() -> None:
    dry, humid = Air(1013.25, 25.0, 0.0), Air(1013.25, 25.0, 1.0)

    def lift_deg(trace: type[TracedRefraction], air: Air, *, is_radio: bool) -> float:
        model = trace.radio(air, 0.0) if is_radio else trace.optical(air, 0.0)
        return model.seen(5.0)[0] - 5.0

    radio = [lift_deg(TracedRefraction, air, is_radio=True) for air in (dry, humid)]
    light = [lift_deg(TracedRefraction, air, is_radio=False) for air in (dry, humid)]
    assert radio[1] / radio[0] > 1.4
    assert light[1] / light[0] == pytest.approx(1.0, abs=0.01)


def test_no_air_does_nothing() -> None:
    assert NoRefraction().seen(-3.7) == (-3.7, 1.0)
    seen_deg, slope = NoRefraction().seen_many(np.array([-3.7, 12.3]))
    np.testing.assert_array_equal(seen_deg, [-3.7, 12.3])
    np.testing.assert_array_equal(slope, [1.0, 1.0])


def test_it_travels_to_another_process() -> None:
    model = MODELS["radio"]
    assert pickle.loads(pickle.dumps(model)) == model


@pytest.mark.parametrize(
    ("height_m", "pressure_hpa", "celsius"),
    [(0.0, 1013.25, 15.0), (1000.0, 898.746, 8.5), (5000.0, 540.20, -17.5)],
)
def test_the_standard_atmosphere(height_m: float, pressure_hpa: float, celsius: float) -> None:
    """ISO 2533 / U.S. Standard Atmosphere 1976, tables by geopotential height (from memory)."""
    air = standard_air(height_m)
    assert air.pressure_hpa == pytest.approx(pressure_hpa, abs=0.05)
    assert air.temperature_c == pytest.approx(celsius, abs=1e-9)
