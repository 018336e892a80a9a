"""Rooms: places for cooling, colonising, cold-held and fruiting bags."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field

from models.farm.units import Code, Count, FarmModel, NotNegative, Percent, Positive, Temperature

RoomKind = Literal["cooling", "colonisation", "cold-hold", "fruiting"]


class Room(FarmModel):
    """A room, or a shelf of one, with places for bags at one temperature."""

    code: Code
    """Short code."""
    kind: RoomKind
    """cooling, colonisation, cold-hold or fruiting."""
    places: Count
    """Bags it holds [bags]."""
    temp_c: Temperature
    """Temperature it is kept at [°C]."""
    cooling_w: NotNegative | None = None
    """Heat it can carry off [W]; left out: not limited."""
    rh_pct: Percent | None = None
    """Relative humidity [%]; printed on sheets."""
    air_w_m2_k: Positive | None = None
    """Heat transfer to moving air in a cooling room [W/m² K]; left out: still air."""
    clean_days: Annotated[int, Field(ge=0, le=60)] = 0
    """Days a fruiting place is cleaned for after a bag has left [d]."""
