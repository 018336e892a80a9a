"""What a bag yields, in how many flushes, when, and how long the mushrooms keep."""

from __future__ import annotations

from models.farm import Bag, Recipe, Strain


def kg_per_bag(strain: Strain, recipe: Recipe, bag: Bag) -> float:
    """Fresh mushrooms from one bag over all its flushes.

    Parameters
    ----------
    strain : Strain
        Gives the biological efficiency: fresh mushrooms over dry substrate.
    recipe : Recipe
        Gives the water in the mix.
    bag : Bag
        Gives the wet mass.

    Returns
    -------
    float
        Yield [kg/bag].

    Notes
    -----
    ``wet_kg × (1 - water) × BE``.

    Examples
    --------
    >>> from models.growth.examples import BAG, GREY_OYSTER, OAK
    >>> round(kg_per_bag(GREY_OYSTER, OAK, BAG), 4)  # 2.3 × 0.38 × 0.85
    0.7429
    """
    return bag.wet_kg * (1 - recipe.water_pct / 100) * strain.be_pct / 100


def flush_kg(strain: Strain, recipe: Recipe, bag: Bag) -> tuple[float, ...]:
    """Fresh mushrooms from one bag in each flush [kg/bag, by flush]; they add up to `kg_per_bag`.

    Examples
    --------
    >>> from models.growth.examples import BAG, GREY_OYSTER, OAK
    >>> [round(kg, 4) for kg in flush_kg(GREY_OYSTER, OAK, BAG)]
    [0.4086, 0.2229, 0.1114]
    """
    whole = kg_per_bag(strain, recipe, bag)
    return tuple(whole * share for share in strain.flush_share)


def flush_days(strain: Strain) -> tuple[int, ...]:
    """Days from opening until each flush is ripe [d, by flush].

    Notes
    -----
    Flush k is ripe ``pin_days + (k - 1) × rest_days`` days after opening.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> flush_days(GREY_OYSTER)
    (7, 19, 31)
    """
    return tuple(strain.pin_days + k * strain.rest_days for k in range(len(strain.flush_share)))


def place_days(strain: Strain, flushes: int, clean_days: int = 0) -> int:
    """Days for which a bag takes up a fruiting place when so many flushes are kept.

    Parameters
    ----------
    strain : Strain
        The strain.
    flushes : int
        Flushes kept, from 1.
    clean_days : int
        Days the place is cleaned for afterwards [d].

    Returns
    -------
    int
        From the opening day to the day before the last kept flush, and the cleaning [d].

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> place_days(GREY_OYSTER, flushes=2, clean_days=1)
    20
    """
    if not 1 <= flushes <= len(strain.flush_share):
        raise ValueError(f"1 to {len(strain.flush_share)} flushes were expected for {strain.code}; found {flushes}")
    return flush_days(strain)[flushes - 1] + clean_days
