"""A load as the balance sees it: kinds of bag with their numbers, modes and heat capacities."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import pi

import numpy as np

from models.farm import Bag, Recipe, Steriliser
from models.thermal.conduction import Modes, bag_modes
from models.thermal.errors import ThermalError
from models.thermal.steaming import BagState
from models.thermal.substrate import bag_heat_capacity, diffusivity


@dataclass(frozen=True, slots=True)
class LoadPart:
    """So many bags of one kind in a load."""

    recipe: Recipe
    bag: Bag
    bags: int

    @property
    def wet_kg(self) -> float:
        """Mass of all its bags [kg]."""
        return self.bags * self.bag.wet_kg

    def modes(self, surface_w_m2_k: float, stack_factor: float = 1.0) -> Modes:
        """Modes of its bags under a surface coefficient [W/m² K]."""
        alpha = diffusivity(self.recipe, self.bag)
        return bag_modes(self.bag, alpha, self.recipe.conductivity_w_m_k, surface_w_m2_k, stack_factor)

    def surface_lag_s(self, surface_w_m2_k: float, stack_factor: float = 1.0) -> float:
        """Heat capacity of a bag over what its surface passes on for each degree [s]."""
        capacity = 1000 * self.bag.wet_kg * bag_heat_capacity(self.recipe)
        return capacity * stack_factor / (bag_area(self.bag) * surface_w_m2_k)


def bag_states(load: Sequence[LoadPart], steriliser: Steriliser) -> list[BagState]:
    """Each kind of bag of a load in the steam of a steriliser, in balance with its surroundings.

    Raises
    ------
    ThermalError
        The load has no bags.
    """
    if not load or any(part.bags <= 0 for part in load):
        raise ThermalError("a load of at least one bag was expected")
    return [_state(part, steriliser.surface_w_m2_k, steriliser.stack_factor) for part in load]


def _state(part: LoadPart, surface_w_m2_k: float, stack_factor: float) -> BagState:
    modes = part.modes(surface_w_m2_k, stack_factor)
    # A body of f³ bags has f² times the surface of one, so each bag has a share 1/f of its own.
    surface_w_k = part.bags * bag_area(part.bag) / stack_factor * surface_w_m2_k
    return BagState(modes, part.wet_kg * bag_heat_capacity(part.recipe), surface_w_k, np.zeros(len(modes.rates)))


def bag_area(bag: Bag) -> float:
    """Surface of a bag [m²].

    Examples
    --------
    >>> from models.growth.examples import BAG
    >>> round(bag_area(BAG), 4)  # 2 π 0.065 (0.065 + 0.310)
    0.1532
    """
    if bag.diameter_mm is not None:
        radius, height = bag.diameter_mm / 2000, bag.height_mm / 1000
        return 2 * pi * radius * (radius + height)
    assert bag.length_mm is not None  # noqa: S101  (held by the farm file)
    assert bag.width_mm is not None  # noqa: S101
    a, b, c = bag.length_mm / 1000, bag.width_mm / 1000, bag.height_mm / 1000
    return 2 * (a * b + b * c + a * c)
