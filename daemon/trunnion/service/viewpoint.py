"""From where, and through what, a station sees: its viewpoint, from the station file."""

from collections.abc import Callable, Mapping

from trunnion.files.station import StationFile
from trunnion.files.station_sky import EarthData, RefractionModel, SkySection
from trunnion.sky.atmosphere import Air, standard_air
from trunnion.sky.earth import EarthOrientation
from trunnion.sky.refraction import NoRefraction, Refraction, TracedRefraction
from trunnion.sky.site import Site
from trunnion.sky.viewpoint import Viewpoint


def viewpoint_of(station: StationFile) -> Viewpoint:
    """Return the station's viewpoint; raises SkyError for an Earth orientation file that is bad."""
    site = station.site
    return Viewpoint(
        Site(site.latitude_deg, site.longitude_deg, site.height_m),
        _earth(station.sky),
        _refraction(station.sky, site.height_m),
        is_apparent=True,
    )


def _earth(sky: SkySection) -> EarthOrientation:
    match sky.earth_orientation:
        case EarthData.PACKAGED:
            return EarthOrientation.packaged()
        case EarthData.NONE:
            return EarthOrientation.none()
        case path:
            return EarthOrientation.from_finals(path)


def _refraction(sky: SkySection, height_m: float) -> Refraction:
    return _REFRACTIONS[sky.refraction](_air(sky, height_m), height_m)


_REFRACTIONS: Mapping[RefractionModel, Callable[[Air, float], Refraction]] = {
    RefractionModel.RADIO: TracedRefraction.radio,
    RefractionModel.OPTICAL: TracedRefraction.optical,
    RefractionModel.NONE: lambda _, __: NoRefraction(),
}


def _air(sky: SkySection, height_m: float) -> Air:
    """Return the air that the station file tells of, and the standard atmosphere's for the rest."""
    standard, percent = standard_air(height_m), sky.relative_humidity_percent
    return Air(
        standard.pressure_hpa if sky.pressure_hpa is None else sky.pressure_hpa,
        standard.temperature_c if sky.temperature_c is None else sky.temperature_c,
        standard.humidity if percent is None else percent / 100,
    )
