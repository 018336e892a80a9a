"""How the spread of the harvest is made up, for the forecast."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, model_validator

from models.farm.units import FarmModel

LOSS_CORRELATION = 0.05
"""How alike the bags of a lot are in being lost, where nothing else is said [-]; assumed."""


class Spread(FarmModel):
    """What varies together: the whole farm, the bags of a lot, or each bag by itself."""

    farm_share: Annotated[float, Field(ge=0, le=1, allow_inf_nan=False)] = 0.15
    """Share of a bag's yield variance that all bags of the farm have in common [0-1]; assumed."""
    lot_share: Annotated[float, Field(ge=0, le=1, allow_inf_nan=False)] = 0.35
    """Share of it that the bags of a lot have in common [0-1]; assumed. The rest is each bag's own."""
    loss_correlation: Annotated[float, Field(ge=0, le=0.99, allow_inf_nan=False)] = LOSS_CORRELATION
    """How alike the bags of a lot are in being lost [0-1]; 0: each by itself; assumed."""

    @model_validator(mode="after")
    def _at_most_all(self) -> Spread:
        if self.farm_share + self.lot_share > 1 + 1e-9:
            raise ValueError(
                "farm_share and lot_share of at most 1 together were expected;"
                f" found {self.farm_share:g} and {self.lot_share:g}"
            )
        return self
