"""Rooms: places for cooling, colonising, cold-held and fruiting bags."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field

from models.farm.units import Code, Count, FarmModel, NotNegative, Percent, Positive, Temperature

RoomKind = Literal["cooling", "colonisation", "cold-hold", "fruiting"]


class Room(FarmModel):
    """A room, or a shelf of one, with places for bags at one temperature."""

    code: Code
    kind: RoomKind
    places: Count
    temp_c: Temperature
    cooling_w: NotNegative | None = Field(default=None, description="heat the room can carry off; none: not limited")
    rh_pct: Percent | None = None
    air_w_m2_k: Positive | None = Field(
        default=None, description="surface coefficient of moving air in a cooling room; none: still air"
    )
    clean_days: Annotated[int, Field(ge=0, le=60)] = 0
