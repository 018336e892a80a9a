"""People: crews with shifts and skills, and how fast they work."""

from __future__ import annotations

from datetime import date
from typing import Annotated, Literal

from pydantic import Field, field_validator

from models.farm.units import ClosedDays, Code, FarmModel, NotNegative, Positive, Span, span_minutes

Skill = Literal["mix", "steam", "inoculate", "open", "pick"]
SKILLS: tuple[Skill, ...] = ("mix", "steam", "inoculate", "open", "pick")
WEEKDAYS = ("mon", "tue", "wed", "thu", "fri", "sat", "sun")
Weekday = Literal["mon", "tue", "wed", "thu", "fri", "sat", "sun"]


class Crew(FarmModel):
    """People with the same shifts and skills."""

    code: Code
    """Short code."""
    people: Annotated[int, Field(ge=1, le=500)]
    """How many people it has."""
    skills: Annotated[tuple[Skill, ...], Field(min_length=1)]
    """What it can do: mix, steam, inoculate, open, pick."""
    cost_per_h: NotNegative = 0.0
    """Cost of one person's hour [currency/h]."""
    shift: Annotated[dict[Weekday, Span], Field(min_length=1)]
    """Working time by weekday, mon to sun, such as 07:30-16:00; days left out are off."""
    closed: ClosedDays = ()
    """Dates on which it does not work."""

    @field_validator("skills")
    @classmethod
    def _each_once(cls, value: tuple[Skill, ...]) -> tuple[Skill, ...]:
        if len(set(value)) != len(value):
            raise ValueError(f"each skill once was expected; found {list(value)}")
        return value

    def shift_on(self, day: date) -> tuple[int, int] | None:
        """Start and end of the shift on a date [minutes after local midnight]; None when off."""
        span = self.shift.get(WEEKDAYS[day.weekday()])  # type: ignore[call-overload]
        return None if span is None or day in self.closed else span_minutes(span)


class Rates(FarmModel):
    """How fast one person works."""

    mix_bags_h: Positive = 30.0
    """Mixing and filling [bags/h]."""
    load_bags_h: Positive = 250.0
    """Loading a steriliser [bags/h]."""
    unload_bags_h: Positive = 230.0
    """Unloading a steriliser [bags/h]."""
    inoculate_bags_h: Positive = 40.0
    """Inoculating [bags/h]."""
    open_bags_h: Positive = 120.0
    """Moving to fruiting and cutting [bags/h]."""
    pick_kg_h: Positive = 12.0
    """Picking [kg/h]."""
    discard_bags_h: Positive = 150.0
    """Taking spent bags away [bags/h]."""
