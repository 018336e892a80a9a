"""The site: where the farm stands and what it may draw."""

from __future__ import annotations

from typing import Annotated
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

from pydantic import Field, field_validator

from models.farm.units import FarmModel, NotNegative, Positive, Temperature


class Site(FarmModel):
    """Place, time zone, money, water, weather and electrical supply."""

    name: Annotated[str, Field(min_length=1, max_length=80)]
    """Name of the farm, as it stands on sheets."""
    timezone: str
    """IANA time zone of all clock times, such as Europe/Dublin."""
    currency: Annotated[str, Field(pattern=r"^[A-Z]{3}$")] = "EUR"
    """ISO 4217 code of all prices."""
    altitude_m: Annotated[float, Field(ge=-400, le=5000, allow_inf_nan=False)] = 0.0
    """Height above the sea [m]; lowers the boiling point."""
    supply_kw: Positive | None = None
    """Limit on everything that draws at once [kW]; left out: no limit."""
    base_load_kw: NotNegative = 0.0
    """What fans, lights and cold room draw all the time [kW]."""
    feed_water_c: Annotated[float, Field(ge=0, le=95, allow_inf_nan=False)] = 12.0
    """Temperature of the water the generators are filled with [°C]."""
    ambient_c: Temperature | tuple[Temperature, ...] = 15.0
    """Temperature round the sterilisers [°C]: one value, or twelve, one a month."""

    cold_store_c: Temperature | None = None
    """Temperature of the store that picked mushrooms wait in [°C]; left out: as each strain's shelf_life_at_c."""

    @field_validator("timezone")
    @classmethod
    def _known_zone(cls, value: str) -> str:
        try:
            ZoneInfo(value)
        except (ZoneInfoNotFoundError, ValueError, OSError) as error:
            raise ValueError(f"an IANA time zone such as Europe/Dublin was expected; found {value!r}") from error
        return value

    @field_validator("ambient_c")
    @classmethod
    def _one_or_twelve(cls, value: float | tuple[float, ...]) -> float | tuple[float, ...]:
        if isinstance(value, tuple) and len(value) != 12:
            raise ValueError(f"one value or twelve (one a month) were expected; found {len(value)}")
        return value

    def ambient_in(self, month: int) -> float:
        """Ambient temperature [°C] of a calendar month (1-12)."""
        return self.ambient_c[month - 1] if isinstance(self.ambient_c, tuple) else self.ambient_c
