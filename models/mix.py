"""What goes into the mixer: kilograms of each ingredient, and the water to add for a moisture."""

from __future__ import annotations

from dataclasses import dataclass

from models.farm import Recipe


@dataclass(frozen=True, slots=True)
class Mix:
    """Masses of a batch [kg].

    Attributes
    ----------
    wet_kg, dry_kg, water_kg : float
        The wet mix, its dry matter and all the water in it.
    ingredients : tuple of (str, float)
        Each ingredient as it is bought, with the water it brings.
    add_water_kg : float
        Water to add from the tap.
    cost : float
        Of the ingredients [currency].
    """

    wet_kg: float
    dry_kg: float
    water_kg: float
    ingredients: tuple[tuple[str, float], ...]
    add_water_kg: float
    cost: float


def mix_for(recipe: Recipe, wet_kg: float, water_pct: float | None = None) -> Mix:
    """Work out a batch.

    Parameters
    ----------
    recipe : Recipe
        The mix; one without ingredients is taken for one ingredient without water.
    wet_kg : float
        Mass of the wet mix [kg].
    water_pct : float, optional
        Water on a wet basis in place of the recipe's [%].

    Raises
    ------
    ValueError
        The mass is not above zero, the moisture not between 0 and 100 %, or the ingredients alone are wetter.

    Notes
    -----
    Dry matter is wet mass times (1 - w). Each ingredient brings its share of the dry matter with its own water; what
    is missing to the whole is added.

    Examples
    --------
    100 kg at 60 % are 40 kg dry; sawdust at 20 % for them weighs 50 kg, so 50 kg of water are added:

    >>> from models.farm import Recipe
    >>> oak = Recipe(code="oak", water_pct=60, ingredient=({"name": "sawdust", "dry_pct": 100, "water_pct": 20},))
    >>> found = mix_for(oak, 100)
    >>> found.ingredients, found.add_water_kg
    ((('sawdust', 50.0),), 50.0)
    """
    if not wet_kg > 0:
        raise ValueError(f"a mass above 0 kg was expected; found {wet_kg:g}")
    water = recipe.water_pct if water_pct is None else water_pct
    if not 0 < water < 100:
        raise ValueError(f"a moisture between 0 and 100 % was expected; found {water:g}")
    dry = wet_kg * (1 - water / 100)
    bought = tuple((one.name, dry * one.dry_pct / 100 / (1 - one.water_pct / 100)) for one in recipe.ingredient)
    masses = bought or (("dry matter", dry),)
    add = wet_kg - sum(mass for _, mass in masses)
    if add < -1e-9 * wet_kg:
        own = 100 * (1 - dry / sum(mass for _, mass in masses))
        raise ValueError(f"a moisture above that of the ingredients alone, {own:.1f} %, was expected; found {water:g}")
    cost = sum(mass * one.cost_per_kg for (_, mass), one in zip(bought, recipe.ingredient, strict=True))
    return Mix(wet_kg, dry, wet_kg - dry, masses, max(0.0, add), cost if bought else wet_kg * recipe.cost_per_kg)
