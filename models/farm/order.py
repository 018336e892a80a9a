"""Orders and opening stock: the rows of ``orders.csv`` and ``stock.csv``."""

from __future__ import annotations

from datetime import date, timedelta
from typing import Annotated, Literal

from pydantic import Field, model_validator

from models.calendar import Week
from models.farm.crew import WEEKDAYS, Weekday
from models.farm.units import FarmModel, NotNegative, Positive

StockStage = Literal["cooled", "colonising", "ready", "cold-held", "fruiting"]


class Order(FarmModel):
    """A standing or dated order: so many kilograms on one weekday of each week from first to last."""

    customer: Annotated[str, Field(min_length=1, max_length=60)]
    """Who gets it."""
    strain: str
    """Code of the strain."""
    weekday: Weekday
    """Day of delivery: mon to sun, or the whole name."""
    kg: Positive
    """How much, each week [kg]."""
    price_per_kg: NotNegative
    """Price [currency/kg]."""
    first_week: Week | None = None
    """First ISO week; blank: from the start."""
    last_week: Week | None = None
    """Last ISO week; blank: without end."""
    priority: Annotated[int, Field(ge=1, le=9)] = 1
    """1 is the first to be filled; a shortage costs shortage_per_kg over this."""
    accepts: tuple[str, ...] = ()
    """Codes of strains that the customer takes instead, with spaces between them."""
    part: bool = True
    """Whether a part of it is taken: yes, or no for all or nothing on each day."""

    @model_validator(mode="after")
    def _first_before_last(self) -> Order:
        if self.first_week and self.last_week and self.last_week < self.first_week:
            raise ValueError(
                f"last_week not before first_week was expected; found {self.first_week} to {self.last_week}"
            )
        return self

    @model_validator(mode="after")
    def _accepts_others(self) -> Order:
        if self.strain in self.accepts or len(set(self.accepts)) < len(self.accepts):
            raise ValueError(f"other strains than {self.strain}, each once, were expected; found {list(self.accepts)}")
        return self

    def day_in(self, week: Week) -> date | None:
        """Delivery date in an ISO week; None when the order does not run in that week."""
        if (self.first_week and week < self.first_week) or (self.last_week and week > self.last_week):
            return None
        return week.monday + timedelta(days=WEEKDAYS.index(self.weekday))


class StockLot(FarmModel):
    """Bags of one lot that stand in the rooms on the first day of the plan."""

    lot: Annotated[str, Field(pattern=r"^[A-Za-z0-9-]{1,20}$")]
    """Lot code."""
    strain: str
    """Code of the strain."""
    stage: StockStage
    """cooled, colonising, ready, cold-held or fruiting."""
    bags: Annotated[int, Field(ge=1, le=1_000_000)]
    """Bags that stand there [bags]."""
    since: date
    """Day they were cooled, inoculated, ready, put into the cold, or opened."""
    room: str | None = None
    """Code of the room; blank: the first that suits."""
    flushes_picked: Annotated[int, Field(ge=0, le=8)] | None = None
    """Flushes that are over; fruiting lots only; blank: counted from the dates."""
