"""Strains: what grows, how fast, how much and for how long it keeps."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, field_validator, model_validator

from models.farm.units import Code, FarmModel, NotNegative, Positive, Temperature

Days = Annotated[int, Field(ge=0, le=400)]


class Strain(FarmModel):
    """A strain with the recipe, bag and steam programme it is grown on."""

    code: Annotated[str, Field(pattern=r"^[A-Za-z0-9]{1,6}$")]
    """Code of 1-6 letters or digits; part of every lot code."""
    name: str = ""
    """Name in words."""
    preset: str = ""
    """Name of the preset whose values stand where this table has none, such as grey-oyster."""
    recipe: Code
    """Code of the recipe it grows on."""
    bag: Code
    """Code of the bag it grows in."""
    programme: Code
    """Code of the steam programme its bags get."""
    spawn_rate_pct: Annotated[float, Field(gt=0, le=50, allow_inf_nan=False)]
    """Spawn used [% of wet substrate]."""
    spawn_cost_per_kg: NotNegative = 0.0
    """Price of spawn [currency/kg]."""
    t_min_c: Temperature
    """Temperature at and below which mycelium does not grow [°C]."""
    t_opt_c: Temperature
    """Temperature of fastest growth [°C]; above the middle of t_min_c and t_max_c."""
    t_max_c: Temperature
    """Temperature at and above which mycelium does not grow [°C]."""
    colonise_days: Annotated[float, Field(gt=0, le=400, allow_inf_nan=False)]
    """Days to run through the bag at colonise_at_c and colonise_at_spawn_pct [d]."""
    colonise_at_c: Temperature
    """Room temperature at which colonise_days holds [°C]."""
    colonise_at_spawn_pct: Annotated[float, Field(gt=0, le=50, allow_inf_nan=False)]
    """Spawn rate at which colonise_days holds [% of wet substrate]."""
    self_heating_k: Annotated[float, Field(ge=0, le=20, allow_inf_nan=False)] = 0.0
    """Measured warmth of the core above its room, mean over colonisation [K]."""
    mature_days: Days = 0
    """Days after colonisation before a bag may be opened [d], such as browning."""
    ready_wait_days: Days = 3
    """Most days a ready bag may wait in its room [d]."""
    cold_hold_days: Days = 0
    """Most days a ready bag may be held in the cold [d]."""
    pin_days: Annotated[int, Field(ge=1, le=200)]
    """Days from opening to the first flush [d]."""
    rest_days: Annotated[int, Field(ge=1, le=200)] = 12
    """Days from one flush to the next [d]."""
    fruit_at_c: Temperature | None = None
    """Fruiting room temperature at which pin_days and rest_days hold [°C]; left out: they hold at any."""
    fruit_q10: Annotated[float, Field(ge=1, le=6, allow_inf_nan=False)] = 1.0
    """How many times faster pins and rests go 10 °C warmer [-]; needs fruit_at_c."""
    flush_share: Annotated[tuple[Positive, ...], Field(min_length=1, max_length=8)]
    """Share of the yield in each flush; adds up to 1."""
    be_pct: Annotated[float, Field(gt=0, le=400, allow_inf_nan=False)]
    """Biological efficiency: fresh mushrooms over dry substrate [%]."""
    loss_pct: Annotated[float, Field(ge=0, lt=100, allow_inf_nan=False)] = 0.0
    """Bags expected to be lost in colonisation [%]."""
    flush_loss_pct: Annotated[float, Field(ge=0, lt=100, allow_inf_nan=False)] = 0.0
    """Bags expected to be lost between one flush and the next [%]."""
    fruiting_temp_c: tuple[Temperature, Temperature]
    """Lowest and highest temperature of its fruiting room [°C]."""
    shelf_life_days: Annotated[int, Field(ge=0, le=90)]
    """Days picked mushrooms can be sold for [d]."""
    shelf_life_at_c: Temperature | None = None
    """Store temperature at which shelf_life_days holds [°C]; left out: it holds in the farm's own store."""
    heat_w_per_kg: NotNegative = 0.25
    """Heat of a colonising bag at its peak [W/kg wet]."""
    yield_cv: NotNegative = 0.20
    """Coefficient of variation of a bag's yield, for the forecast [-]."""
    days_cv: NotNegative = 0.10
    """Coefficient of variation of growing times, for the forecast [-]."""

    @field_validator("flush_share")
    @classmethod
    def _shares_sum_to_one(cls, value: tuple[float, ...]) -> tuple[float, ...]:
        if abs(sum(value) - 1.0) > 1e-6:
            raise ValueError(f"shares that sum to 1 were expected; found {list(value)}, which sum to {sum(value):g}")
        return value

    @field_validator("fruiting_temp_c")
    @classmethod
    def _low_high(cls, value: tuple[float, float]) -> tuple[float, float]:
        if value[0] > value[1]:
            raise ValueError(f"[lowest, highest] was expected; found {list(value)}")
        return value

    @model_validator(mode="after")
    def _cardinal_temperatures(self) -> Strain:
        low, best, high = self.t_min_c, self.t_opt_c, self.t_max_c
        if not low < best < high:
            raise ValueError(f"t_min_c < t_opt_c < t_max_c was expected; found {low:g}, {best:g}, {high:g}")
        middle = (low + high) / 2
        if best <= middle:
            raise ValueError(
                f"t_opt_c above the middle of t_min_c and t_max_c ({middle:g}), where the growth curve has no pole,"
                f" was expected; found {best:g}"
            )
        if not low < self.colonise_at_c < high:
            raise ValueError(
                f"colonise_at_c between t_min_c ({low:g}) and t_max_c ({high:g}) was expected;"
                f" found {self.colonise_at_c:g}"
            )
        if self.colonise_at_c + self.self_heating_k >= high:
            raise ValueError(
                f"colonise_at_c and self_heating_k together below t_max_c ({high:g}) were expected;"
                f" found {self.colonise_at_c:g} and {self.self_heating_k:g}"
            )
        return self

    @model_validator(mode="after")
    def _fruiting_response(self) -> Strain:
        low, high = self.fruiting_temp_c
        if self.fruit_at_c is None and self.fruit_q10 != 1.0:
            raise ValueError(
                f"fruit_at_c, the temperature at which pin_days and rest_days hold, was expected beside fruit_q10;"
                f" found fruit_q10 {self.fruit_q10:g} alone"
            )
        if self.fruit_at_c is not None and not low <= self.fruit_at_c <= high:
            raise ValueError(
                f"fruit_at_c within fruiting_temp_c ({low:g} to {high:g}) was expected; found {self.fruit_at_c:g}"
            )
        return self

    def grows_in(self, room_temp_c: float) -> bool:
        """Whether it grows in a room [°C]: air above ``t_min_c``; core, ``self_heating_k`` warmer, below ``t_max_c``.

        Examples
        --------
        >>> from models.growth.examples import GREY_OYSTER
        >>> GREY_OYSTER.grows_in(22.0), GREY_OYSTER.grows_in(36.0)
        (True, False)
        """
        return self.t_min_c < room_temp_c and room_temp_c + self.self_heating_k < self.t_max_c
