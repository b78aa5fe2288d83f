"""The air at the station: the standard atmosphere, and how strongly air refracts."""

from math import exp
from typing import NamedTuple

CELSIUS_K = 273.15


class Air(NamedTuple):
    """Pressure (hPa), temperature (°C) and relative humidity (0 to 1) at the station."""

    pressure_hpa: float
    temperature_c: float
    humidity: float


def standard_air(height_m: float) -> Air:
    """The standard atmosphere of ISO 2533 up to 11 km, with half the humidity it could hold."""
    height_m = min(max(height_m, -2000.0), 11_000.0)
    warmth = 1.0 - 0.0065 * height_m / 288.15
    return Air(1013.25 * warmth**5.25588, 288.15 * warmth - CELSIUS_K, 0.5)


def vapour_pressure_hpa(air: Air) -> float:
    """Water vapour pressure over water, by ITU-R P.453, section 1."""
    t, p = air.temperature_c, air.pressure_hpa
    enhancement = 1.0 + 1e-4 * (7.2 + p * (0.0320 + 5.9e-6 * t * t))
    saturated = enhancement * 6.1121 * exp((18.678 - t / 234.5) * t / (t + 257.14))
    return air.humidity * saturated


def radio_refractivity(air: Air) -> float:
    """Radio refractivity N, (n − 1) in millionths, by ITU-R P.453, section 1."""
    e = vapour_pressure_hpa(air)
    kelvin = air.temperature_c + CELSIUS_K
    return 77.6 * (air.pressure_hpa - e) / kelvin + 72.0 * e / kelvin + 3.75e5 * e / kelvin**2


def optical_refractivity(air: Air) -> float:
    """Refractivity for visible light (0.57 µm): 292.6 at 0 °C and 1013.25 hPa, less for vapour.

    Dry part after Edlén 1966; vapour lowers it by 11.27 e/T (Barrell and Sears 1939).
    """
    kelvin = air.temperature_c + CELSIUS_K
    dry = 292.6 * (air.pressure_hpa / 1013.25) * (CELSIUS_K / kelvin)
    return dry - 11.27 * vapour_pressure_hpa(air) / kelvin
