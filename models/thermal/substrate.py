"""Heat capacity and diffusivity of wet substrate."""

from __future__ import annotations

from models.farm import Bag, Recipe
from models.thermal.errors import ThermalError

WATER_CP_KJ_KG_K = 4.19


def heat_capacity(water_pct: float, dry_cp_kj_kg_k: float, water_cp_kj_kg_k: float = WATER_CP_KJ_KG_K) -> float:
    """Heat capacity of wet substrate by the rule of mixtures.

    Parameters
    ----------
    water_pct : float
        Water on a wet basis [%].
    dry_cp_kj_kg_k : float
        Heat capacity of the dry matter [kJ/kg K].
    water_cp_kj_kg_k : float
        Heat capacity of water [kJ/kg K].

    Returns
    -------
    float
        Heat capacity of the wet substrate [kJ/kg K].

    Notes
    -----
    c = w c_water + (1 - w) c_dry. Above fibre saturation moisture adds by the plain rule of mixtures (Simpson and
    TenWolde, Wood Handbook FPL-GTR-113, 1999, chapter 3).

    Examples
    --------
    >>> round(heat_capacity(60, 1.2632), 2)
    3.02
    """
    share = water_pct / 100
    return share * water_cp_kj_kg_k + (1 - share) * dry_cp_kj_kg_k


def bag_heat_capacity(recipe: Recipe) -> float:
    """Heat capacity of a recipe as it goes into the bag [kJ/kg K]."""
    return heat_capacity(recipe.water_pct, recipe.dry_heat_capacity)


def diffusivity(recipe: Recipe, bag: Bag) -> float:
    """Thermal diffusivity of the filled bag [m²/s].

    Notes
    -----
    alpha = k / (rho c), with the density that the bag's own mass and volume give, so that the heat of the conduction
    model is the heat of the bag.

    Raises
    ------
    ThermalError
        The bag has no volume.
    """
    if bag.volume_m3 <= 0:
        raise ThermalError(f"bag {bag.code}: a volume above zero was expected")
    density = bag.wet_kg / bag.volume_m3
    return recipe.conductivity_w_m_k / (density * bag_heat_capacity(recipe) * 1000)
