"""The steriliser: vessel, generator and what it may be loaded with."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, field_validator

from models.farm.units import ClosedDays, Code, Count, FarmModel, NotNegative, Positive


class Steriliser(FarmModel):
    """One kind of steriliser, of which the farm has ``count``."""

    code: Code
    """Short code."""
    count: Annotated[int, Field(ge=1, le=200)] = 1
    """How many sterilisers of this kind the farm has."""
    places: Count
    """Bags in a full load [bags]."""
    volume_l: Positive | None = None
    """Inner volume [l]; left out: whether the bags fit is not checked."""
    element_kw: Annotated[float, Field(gt=0, le=1000, allow_inf_nan=False)]
    """Power of the heating elements of one [kW]."""
    generator_water_kg: Positive = 40.0
    """Water in the steam generator [kg]."""
    generator_metal_kg: NotNegative = 0.0
    """Metal of the steam generator [kg]."""
    metal_kg: NotNegative = 0.0
    """Metal of the vessel and its racks [kg]."""
    metal_cp_kj_kg_k: Positive = 0.49
    """Heat capacity of that metal [kJ/kg K]; the default is steel."""
    loss_w_per_k: NotNegative = 0.0
    """Heat lost by the vessel for each degree above ambient [W/K]."""
    generator_loss_w_per_k: NotNegative = 0.0
    """Heat lost by the generator for each degree above ambient [W/K]."""
    gauge_kpa: Annotated[float, Field(ge=0, le=300, allow_inf_nan=False)] = 0.0
    """Pressure held above the air's [kPa]."""
    air_fraction: Annotated[float, Field(ge=0, le=0.9, allow_inf_nan=False)] = 0.0
    """Share of air left in the steam [0-0.9]; lowers its temperature."""
    condensate_return: bool = False
    """Whether condensate flows back to the generator."""
    surface_w_m2_k: Positive = 200.0
    """Heat transfer from steam to a bag's surface [W/m² K]."""
    stack_factor: Annotated[float, Field(ge=1, le=8, allow_inf_nan=False)] = 1.0
    """How many times as long as a bag the solid stacks are, where bags touch [-]; 1: steam between all bags."""
    loads: tuple[Annotated[float, Field(gt=0, le=1, allow_inf_nan=False)], ...] = (0.5, 0.75, 1.0)
    """Load steps the planner may choose from [share of places], rising."""
    unload_below_c: Annotated[float, Field(gt=0, le=130, allow_inf_nan=False)] = 60.0
    """Mean temperature of the warmest bag at which the load is taken out [°C]."""
    vent_min: Annotated[float, Field(ge=0, le=1440, allow_inf_nan=False)] = 30.0
    """Time to let the steam off after the hold [min]."""
    closed: ClosedDays = ()
    """Dates on which it may not be loaded, run or unloaded."""

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
