"""Limits of work, the price of power and the market."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, model_validator

from models.farm.units import Clock, FarmModel, NotNegative, Positive, Temperature


class Limits(FarmModel):
    """How long things may wait and how many people fit at the bench."""

    mix_to_steam_h: Positive = 6.0
    cooled_to_inoculate_h: Positive = 48.0
    inoculate_below_c: Temperature = 28.0
    inoculation_benches: Annotated[int, Field(ge=1, le=200)] | None = Field(
        default=None, description="people who can inoculate at once; none: as many as are on shift"
    )


class TariffPeriod(FarmModel):
    """A price per kWh between two local clock times; it may wrap midnight."""

    start: Clock = Field(alias="from")
    to: Clock
    price: NotNegative

    @model_validator(mode="after")
    def _has_length(self) -> TariffPeriod:
        if self.start == self.to:
            raise ValueError(f"two different clock times were expected; found {self.start} to {self.to}")
        return self


class Tariff(FarmModel):
    """Price of electricity by local time of day [currency/kWh]."""

    default: NotNegative = 0.30
    periods: tuple[TariffPeriod, ...] = ()


class Market(FarmModel):
    """What is lost when an order is short, and where surplus can go."""

    shortage_per_kg: NotNegative = 20.0
    spot_price_share: NotNegative = 0.5
    spot_kg_week: NotNegative = 0.0
    spoilage_per_kg: NotNegative = Field(default=0.0, description="cost of getting rid of a kilogram nobody takes")
