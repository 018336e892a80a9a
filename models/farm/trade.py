"""Limits of work, the price of power and the market."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, model_validator

from models.farm.units import Clock, FarmModel, NotNegative, Positive, Temperature


class Limits(FarmModel):
    """How long things may wait and how many people fit at the bench."""

    mix_to_steam_h: Positive = 6.0
    """Most time from the start of mixing until steam is on [h]; later the mix sours."""
    steam_again_within_h: Positive = 8.0
    """Longest break in a steam run after which the load is steamed again [h]; longer, and it is discarded."""
    cooled_to_inoculate_h: Positive = 48.0
    """Most time from cool to inoculated [h]."""
    inoculate_below_c: Temperature = 28.0
    """Core temperature below which a bag may be inoculated [°C]."""
    inoculation_benches: Annotated[int, Field(ge=1, le=200)] | None = None
    """People who can inoculate at once; left out: as many as are on shift."""


class TariffPeriod(FarmModel):
    """A price per kWh between two local clock times; it may wrap midnight."""

    start: Clock = Field(alias="from")
    """Clock time it starts."""
    to: Clock
    """Clock time it ends; it may wrap midnight."""
    price: NotNegative
    """Price then [currency/kWh]."""

    @model_validator(mode="after")
    def _has_length(self) -> TariffPeriod:
        if self.start == self.to:
            raise ValueError(f"two different clock times were expected; found {self.start} to {self.to}")
        return self


class Tariff(FarmModel):
    """Price of electricity by local time of day [currency/kWh]."""

    default: NotNegative = 0.30
    """Price of electricity outside of all periods [currency/kWh]."""
    periods: tuple[TariffPeriod, ...] = ()
    """Periods with another price; the first that fits counts."""


class Market(FarmModel):
    """What is lost when an order is short, and where surplus can go."""

    shortage_per_kg: NotNegative = 20.0
    """What a kilogram short of an order costs beyond its price [currency/kg], over the priority of the order."""
    spot_price_share: NotNegative = 0.5
    """Price of surplus on the spot market, over the strain's mean order price [0-1]."""
    spot_kg_week: NotNegative = 0.0
    """Most that the spot market takes in a week [kg]."""
    spot_more_price_share: NotNegative = 0.25
    """Price of what goes beyond that, over the strain's mean order price [0-1]; not above spot_price_share."""
    spot_more_kg_week: NotNegative = 0.0
    """Most that the spot market takes in a week at that price [kg]."""
    substitute_price_share: NotNegative = 0.9
    """Price of a strain that a customer takes instead, over the price of the order [0-1]."""
    spoilage_per_kg: NotNegative = 0.0
    """Cost of getting rid of a kilogram nobody takes [currency/kg]."""

    @model_validator(mode="after")
    def _falling_price(self) -> Market:
        if self.spot_more_kg_week > 0 and self.spot_more_price_share > self.spot_price_share:
            raise ValueError(
                f"spot_more_price_share of at most spot_price_share ({self.spot_price_share:g}) was expected;"
                f" found {self.spot_more_price_share:g}"
            )
        return self

    @property
    def spot_steps(self) -> tuple[tuple[float, float], ...]:
        """Share of the mean order price [-] and most kilograms a week [kg] of each step of the spot market."""
        return ((self.spot_price_share, self.spot_kg_week), (self.spot_more_price_share, self.spot_more_kg_week))
