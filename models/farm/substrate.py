"""What is steamed: recipes, bags and steam programmes."""

from __future__ import annotations

from math import pi
from typing import Annotated, Literal

from pydantic import Field, model_validator

from models.farm.units import Code, FarmModel, NotNegative, Positive


class Ingredient(FarmModel):
    """A dry ingredient of a mix, as it is bought."""

    name: Annotated[str, Field(min_length=1, max_length=40)]
    """Name, as it stands on sheets."""
    dry_pct: Annotated[float, Field(gt=0, le=100, allow_inf_nan=False)]
    """Share of the dry mass of the mix [%]; all shares add up to 100."""
    dry_cp_kj_kg_k: Annotated[float, Field(gt=0, le=5, allow_inf_nan=False)] = 1.45
    """Heat capacity of its dry matter [kJ/kg K]."""
    water_pct: Annotated[float, Field(ge=0, lt=100, allow_inf_nan=False)] = 10.0
    """Water in it as it is bought [% of its mass]."""
    cost_per_kg: NotNegative = 0.0
    """Cost as it is bought [currency/kg]."""


class Recipe(FarmModel):
    """A substrate mix as it goes into the bag."""

    code: Code
    """Short code; strains name it."""
    water_pct: Annotated[float, Field(gt=0, lt=100, allow_inf_nan=False)]
    """Water in the mix as it goes into the bag [% of wet mass]."""
    dry_cp_kj_kg_k: Annotated[float, Field(gt=0, le=5, allow_inf_nan=False)] = 1.45
    """Heat capacity of the dry matter [kJ/kg K]; with ingredients theirs counts."""
    density_kg_m3: Annotated[float, Field(ge=50, le=2000, allow_inf_nan=False)] = 560.0
    """Density of the mix as packed [kg/m³]."""
    conductivity_w_m_k: Annotated[float, Field(gt=0, le=5, allow_inf_nan=False)] = 0.45
    """Thermal conductivity of the mix as packed [W/m K]."""
    cost_per_kg: NotNegative = 0.0
    """Cost of the mix [currency/kg wet]; with ingredients theirs counts."""
    ingredient: tuple[Ingredient, ...] = ()
    """Dry ingredients with their shares of the dry mass; left out: the mix is told by its heat capacity and cost."""

    @model_validator(mode="after")
    def _ingredients_make_the_mix(self) -> Recipe:
        if not self.ingredient:
            return self
        total = sum(one.dry_pct for one in self.ingredient)
        if abs(total - 100) > 0.01:
            raise ValueError(f"shares dry_pct of the ingredients that add up to 100 were expected; found {total:g}")
        for key in ("dry_cp_kj_kg_k", "cost_per_kg"):
            if getattr(self, key) != type(self).model_fields[key].default:
                raise ValueError(f"{key} of each ingredient, and none of the whole mix, was expected; found both")
        wettest = 100 * (1 - 1 / self.bought_kg_per_dry_kg)
        if wettest > self.water_pct:
            raise ValueError(
                f"ingredients drier than the mix (water_pct {self.water_pct:g}) were expected;"
                f" found {wettest:.1f} % of water in them"
            )
        return self

    @property
    def bought_kg_per_dry_kg(self) -> float:
        """Mass of the ingredients as bought that holds one kilogram of dry matter [kg/kg]."""
        return sum(one.dry_pct / 100 / (1 - one.water_pct / 100) for one in self.ingredient) if self.ingredient else 1.0

    @property
    def dry_heat_capacity(self) -> float:
        """Heat capacity of the dry matter, from its ingredients where they are told [kJ/kg K]."""
        if not self.ingredient:
            return self.dry_cp_kj_kg_k
        return sum(one.dry_pct / 100 * one.dry_cp_kj_kg_k for one in self.ingredient)

    @property
    def price_per_kg(self) -> float:
        """Cost of the wet mix, from its ingredients where they are told; water costs nothing [currency/kg]."""
        if not self.ingredient:
            return self.cost_per_kg
        by_dry = sum(one.dry_pct / 100 / (1 - one.water_pct / 100) * one.cost_per_kg for one in self.ingredient)
        return (1 - self.water_pct / 100) * by_dry


class Bag(FarmModel):
    """A filled bag: its wet mass and its shape (full lengths)."""

    code: Code
    """Short code; strains name it."""
    wet_kg: Annotated[float, Field(gt=0, le=100, allow_inf_nan=False)]
    """Wet mass of a filled bag [kg]."""
    shape: Literal["cylinder", "brick"]
    """cylinder (diameter_mm, height_mm) or brick (length_mm, width_mm, height_mm)."""
    diameter_mm: Positive | None = None
    """Diameter of a cylinder [mm]; cylinders only."""
    height_mm: Positive
    """Full height [mm]."""
    length_mm: Positive | None = None
    """Full length of a brick [mm]; bricks only."""
    width_mm: Positive | None = None
    """Full width of a brick [mm]; bricks only."""
    cost: NotNegative = 0.0
    """Cost of an empty bag with filter and closure [currency]."""

    @model_validator(mode="after")
    def _sides_of_shape(self) -> Bag:
        if self.shape == "cylinder":
            if self.diameter_mm is None:
                raise ValueError("diameter_mm for a cylinder was expected; found none")
            if self.length_mm is not None or self.width_mm is not None:
                raise ValueError("only diameter_mm and height_mm for a cylinder were expected; found sides of a brick")
        else:
            if self.length_mm is None or self.width_mm is None:
                missing = "length_mm" if self.length_mm is None else "width_mm"
                raise ValueError(f"length_mm, width_mm and height_mm for a brick were expected; found no {missing}")
            if self.diameter_mm is not None:
                raise ValueError("only length_mm, width_mm and height_mm for a brick were expected; found diameter_mm")
        return self

    @property
    def volume_m3(self) -> float:
        """Volume of the filled bag [m³]."""
        if self.diameter_mm is not None:
            return pi / 4 * self.diameter_mm**2 * self.height_mm * 1e-9
        if self.length_mm is None or self.width_mm is None:
            raise ValueError(f"bag {self.code} has neither a diameter nor two sides")
        return self.length_mm * self.width_mm * self.height_mm * 1e-9


class Programme(FarmModel):
    """A steam programme: how hot the coldest core must get, and for how long."""

    code: Code
    """Short code; strains name it."""
    target_core_c: Annotated[float, Field(ge=40, le=140, allow_inf_nan=False)]
    """Temperature the coldest core must reach [°C]."""
    hold_h: Annotated[float, Field(ge=0, le=96, allow_inf_nan=False)]
    """How long it is held from the moment the coldest core is there [h]."""
