"""Wind as JSON: an object with `speed_m_s`, and perhaps `gust_m_s` and `direction_deg`. Pure."""

import json

from pydantic import BaseModel, ConfigDict, ValidationError

from trunnion_drivers.interface.errors import Garbled
from trunnion_drivers.interface.wind import WindReading

_LONGEST = 10_000


class _Told(BaseModel):
    model_config = ConfigDict(extra="ignore", strict=True, allow_inf_nan=False)

    speed_m_s: float
    gust_m_s: float | None = None
    direction_deg: float | None = None


def wind_from_json(text: bytes, taken_s: float) -> WindReading:
    """Read it as true at that second; other keys are ignored. Raises Garbled."""
    if len(text) > _LONGEST:
        raise Garbled(f"expected at most {_LONGEST} bytes of JSON, got {len(text)}")
    try:
        told = _Told.model_validate(json.loads(text))
    except (ValueError, RecursionError, ValidationError) as error:
        raise Garbled(f"expected an object with speed_m_s, got {text[:80]!r}") from error
    return WindReading(taken_s, told.speed_m_s, told.gust_m_s, told.direction_deg)
