"""The steriliser: vessel, generator and what it may be loaded with."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, field_validator

from models.farm.units import ClosedDays, Code, Count, FarmModel, NotNegative, Positive


class Steriliser(FarmModel):
    """One kind of steriliser, of which the farm has ``count``."""

    code: Code
    count: Annotated[int, Field(ge=1, le=200)] = 1
    places: Count
    element_kw: Annotated[float, Field(gt=0, le=1000, allow_inf_nan=False)]
    generator_water_kg: Positive = 40.0
    generator_metal_kg: NotNegative = 0.0
    metal_kg: NotNegative = 0.0
    metal_cp_kj_kg_k: Positive = 0.49
    loss_w_per_k: NotNegative = 0.0
    generator_loss_w_per_k: NotNegative = 0.0
    gauge_kpa: Annotated[float, Field(ge=0, le=300, allow_inf_nan=False)] = 0.0
    air_fraction: Annotated[float, Field(ge=0, le=0.9, allow_inf_nan=False)] = 0.0
    condensate_return: bool = False
    surface_w_m2_k: Positive = 200.0
    loads: tuple[Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)], ...] = (0.5, 0.75, 1.0)
    unload_below_c: Annotated[float, Field(gt=0, le=130, allow_inf_nan=False)] = 60.0
    vent_min: Annotated[float, Field(ge=0, le=1440, allow_inf_nan=False)] = 30.0
    closed: ClosedDays = ()

    @field_validator("loads")
    @classmethod
    def _rising(cls, value: tuple[float, ...]) -> tuple[float, ...]:
        if not value:
            raise ValueError("at least one load step, such as [0.5, 1.0], was expected; found none")
        if list(value) != sorted(set(value)):
            raise ValueError(f"load steps in rising order, each once, were expected; found {list(value)}")
        return value

    def bags_at(self, load: float) -> int:
        """Bags in a load of this share of the places [bags]."""
        return max(1, round(load * self.places))
